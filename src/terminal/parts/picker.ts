/** A list to pick from, in the lower part of the screen, so that the plot shows what a choice does. */
import { cellWidth, fitRuns, fitText, spreadRuns } from '../../plot/cells.ts';
import { type Run, run } from '../../plot/run.ts';
import type { Layout } from '../layout.ts';
import { type Pick, picksOf } from '../picks.ts';
import type { Choice, State } from '../state.ts';
import { firstShown } from './found-list.ts';

const TITLES: Readonly<Record<Choice, string>> = {
  window: 'window of the trace',
  cable: 'cable of the longest section',
};

const GAP = '   ';

/** Heading and picks: as many rows as the list with its heading and details. */
export function pickerRows(state: State, layout: Layout): readonly (readonly Run[])[] {
  if (state.panel?.type !== 'pick') return [];
  const { columns, listRows, detailRows, sideBySide } = layout;
  const rows = sideBySide ? listRows : listRows + detailRows;
  const picks = picksOf(state);
  const { filter, row, what } = state.panel;
  const first = firstShown(picks.length, row, rows);
  const widths = widthsOf(picks);
  const shown = picks
    .slice(first, first + rows)
    .map((pick, i) => pickRow(pick, first + i === row, widths, columns));
  const none = [fitRuns([run(`   nothing here matches "${filter}"; Backspace takes letters back`)], columns)];
  const typed =
    filter === ''
      ? [run('type to narrow the list', 'dim')]
      : [run('typed: ', 'dim'), run(`${filter}▏`, 'key')];
  const place = picks.length === 0 ? '' : `${row + 1} of ${picks.length} `;
  const lines = picks.length === 0 ? none : shown;
  return [
    spreadRuns([run(`   ${TITLES[what]}`, 'strong'), run(GAP), ...typed], [run(place, 'dim')], columns),
    ...Array.from({ length: rows }, (_, i) => lines[i] ?? fitRuns([], columns)),
  ];
}

function pickRow(pick: Pick, chosen: boolean, widths: readonly number[], columns: number): readonly Run[] {
  const cells = [pick.name, ...pick.figures].map((text, i) => fitText(text, widths[i] ?? 0)).join(GAP);
  return chosen
    ? fitRuns([run(fitText(` › ${cells}`, columns), 'chosen')], columns)
    : fitRuns([run(`   ${cells}`)], columns);
}

/** Width of each column: its widest text. */
function widthsOf(picks: readonly Pick[]): readonly number[] {
  const widths: number[] = [];
  for (const pick of picks) {
    for (const [i, text] of [pick.name, ...pick.figures].entries())
      widths[i] = Math.max(widths[i] ?? 0, cellWidth(text));
  }
  return widths;
}
