/** The row under the plot: what is at the cursor, and how the picture is to be read. */
import type { Analysis } from '../../app/analysis.ts';
import { cellWidth, spreadRuns } from '../../plot/cells.ts';
import { SEVERITY_GLYPHS } from '../../plot/line-strip.ts';
import { lengthText } from '../../plot/quantity-text.ts';
import { type Run, run, runsText } from '../../plot/run.ts';
import { stripSections } from '../../report/line-sections.ts';
import { spanOf } from '../derived.ts';
import { foundIn } from '../found.ts';
import type { Layout } from '../layout.ts';
import type { Picture } from '../pictures/picture.ts';
import type { State } from '../state.ts';

/** Something found counts as under the cursor within this many cells. */
const NEAR_CELLS = 0.75;

/** Place and value at the cursor with what lies there at the left, the legend at the right. */
export function readoutRow(
  state: State,
  analysis: Analysis,
  picture: Picture,
  layout: Layout,
): readonly Run[] {
  const left = [
    run(' ╷ ', 'cursor'),
    run(lengthText(state.cursorM, state.units), 'strong'),
    ...(picture.atCursor === '' ? [] : [run(`  ${picture.atCursor}`, 'strong')]),
    run('  '),
    ...placeRuns(state, analysis, layout),
  ];
  const room = layout.columns - cellWidth(runsText(left)) - 3;
  return spreadRuns(left, [...legendRuns(picture, room), run(' ')], layout.columns);
}

/** What was found there, else a ghost, else the section. */
function placeRuns(state: State, analysis: Analysis, layout: Layout): readonly Run[] {
  const [from, to] = spanOf(state, analysis);
  const nearM = (NEAR_CELLS * (to - from)) / layout.plotWidth;
  const isNear = ({ distanceM }: { readonly distanceM: number }) =>
    Math.abs(distanceM - state.cursorM) <= nearM;
  const found = foundIn(analysis, state.units).find(isNear);
  if (found) return [run(`${SEVERITY_GLYPHS[found.severity]} ${found.short}`, found.severity)];
  const ghost = analysis.solution.ghosts.find(isNear);
  if (ghost) {
    const between = ghost.betweenM.map((m) => lengthText(m, state.units, 1)).join(' and ');
    return [run(`g a bounce between ${between}`)];
  }
  if (state.cursorM < 0) return [run('before the port')];
  const section = stripSections(analysis.line, analysis.solution.lengthM, state.units).findIndex(
    ({ fromM, toM }) => state.cursorM >= fromM && state.cursorM <= toM,
  );
  return [run(analysis.line.sections[section]?.label ?? 'beyond the end')];
}

/** As many pieces of the legend as fit. */
function legendRuns(picture: Picture, room: number): readonly Run[] {
  const runs: Run[] = [];
  let used = 0;
  for (const piece of picture.legend) {
    const cells = cellWidth(runsText(piece)) + (runs.length > 0 ? 3 : 0);
    if (used + cells > room) break;
    if (runs.length > 0) runs.push(run(' · ', 'dim'));
    runs.push(...piece.map(({ text, role }) => run(text, role === 'plain' ? 'dim' : role)));
    used += cells;
  }
  return runs;
}
