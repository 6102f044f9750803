/** What stands in place of the plot while there is no answer. */
import type { Problem } from '../../outcome.ts';
import { type Run, run } from '../../plot/run.ts';
import type { Layout } from '../layout.ts';
import type { State } from '../state.ts';
import { progressRuns, wordsInPlaceOfPlot } from './plot.ts';

const BAR_WIDTH = 46;

/** Progress, problems, or how to open something: as many rows as the plot and its axis. */
export function waitingRows(state: State, layout: Layout): readonly (readonly Run[])[] {
  switch (state.solve.phase) {
    case 'running':
      return wordsInPlaceOfPlot([state.solve.stage, progressRuns(state.solve.fraction, BAR_WIDTH)], layout);
    case 'failed':
      return wordsInPlaceOfPlot(
        [
          ...state.solve.problems.flatMap(problemTexts),
          '',
          'r reads the sweep again once it is mended, c takes another cable, q quits.',
        ],
        layout,
      );
    case 'idle':
      return wordsInPlaceOfPlot(
        ['Nothing is open. Start with a sweep: feedsonde SWEEP --line FILE', 'feedsonde --help says more.'],
        layout,
      );
    case 'ready':
      return wordsInPlaceOfPlot([], layout);
  }
}

/** Where, what and what was found there; then how to mend it. */
function problemTexts({ file, line, what, found, mend }: Problem): readonly (string | readonly Run[])[] {
  const place = file === undefined ? '' : `${file}${line === undefined ? '' : `, line ${line}`}: `;
  const seen = found === undefined ? '' : ` (found: ${found})`;
  return [[run(`× ${place}${what}${seen}`, 'fault')], `  ${mend}`];
}
