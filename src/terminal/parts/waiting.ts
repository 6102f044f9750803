/** What stands in place of the plot while there is no answer. */
import type { Problem } from '../../outcome.ts';
import { cutText, fitRuns } from '../../plot/cells.ts';
import { type Run, run } from '../../plot/run.ts';
import { type Layout, lowerHeight } from '../layout.ts';
import { lookChart } from '../pictures/trace-picture.ts';
import type { Solve, State } from '../state.ts';
import { plotRows, progressRuns, type Words, wordsInPlaceOfPlot } from './plot.ts';

const BAR_WIDTH = 46;

/** Progress, problems, or how to open something: as many rows as the plot, its axis and the readout. */
export function waitingRows(state: State, layout: Layout): readonly (readonly Run[])[] {
  switch (state.solve.phase) {
    case 'running':
      return runningRows(state, state.solve, layout);
    case 'failed':
      return wordsAlone(failureWords(state.solve.problems), layout);
    case 'idle':
      return wordsAlone(
        ['Nothing is open. Start with a sweep: feedsonde SWEEP --line FILE', 'feedsonde --help says more.'],
        layout,
      );
    case 'ready':
      return wordsAlone([], layout);
  }
}

/** The problems alone, over all that lies between strip and footer. */
export function failedRows(problems: readonly Problem[], layout: Layout): readonly (readonly Run[])[] {
  const height = layout.plotRows + 2 + lowerHeight(layout);
  return wordsInPlaceOfPlot(failureWords(problems), layout, height);
}

function failureWords(problems: readonly Problem[]): readonly Words[] {
  return [
    'r reads the sweep again once it is mended, c takes another cable, q quits.',
    '',
    ...problems.flatMap(problemTexts),
  ];
}

/** The first look with the progress under it; without one the progress alone. */
function runningRows(
  state: State,
  solve: Extract<Solve, { phase: 'running' }>,
  layout: Layout,
): readonly (readonly Run[])[] {
  const bar = progressRuns(solve.fraction, BAR_WIDTH);
  if (!solve.look) return wordsAlone([solve.stage, bar], layout);
  const room = layout.columns - BAR_WIDTH - 4;
  const row = [run(' '), ...bar, run('  '), run(cutText(solve.stage, room))];
  return [...plotRows(lookChart(state, solve.look), layout), fitRuns(row, layout.columns)];
}

function wordsAlone(paragraphs: readonly Words[], layout: Layout): readonly (readonly Run[])[] {
  return [...wordsInPlaceOfPlot(paragraphs, layout), fitRuns([], layout.columns)];
}

/** Where, what and what was found there; then how to mend it. */
function problemTexts({ file, line, what, found, mend }: Problem): readonly Words[] {
  const place = file === undefined ? '' : `${file}${line === undefined ? '' : `, line ${line}`}: `;
  const seen = found === undefined ? '' : ` (found: ${found})`;
  return [{ text: `× ${place}${what}${seen}`, role: 'fault' }, mend];
}
