/** The workspace itself: the line, the picture under it, and what was found. */
import type { ReactElement } from 'react';
import { fitRuns, spreadRuns } from '../../plot/cells.ts';
import { type Run, run } from '../../plot/run.ts';
import { type Layout, layoutOf, lowerHeight } from '../layout.ts';
import { detailRows } from '../parts/details.ts';
import { footerRow } from '../parts/footer.ts';
import { foundHeading, foundRows } from '../parts/found-list.ts';
import { cautionRow, headerRow } from '../parts/header.ts';
import { pickerRows } from '../parts/picker.ts';
import { plotRows, wordsInPlaceOfPlot } from '../parts/plot.ts';
import { readoutRow } from '../parts/readout.ts';
import { Rows } from '../parts/rows.tsx';
import { stripRows } from '../parts/strip.ts';
import { failedRows, waitingRows } from '../parts/waiting.ts';
import { pictureOf } from '../pictures/pictures.ts';
import { analysisOf, type State } from '../state.ts';
import type { Theme } from '../theme.ts';

/** Draws it at the size in the state; exactly one row less than the terminal has. */
export function WorkView({ state, theme }: { readonly state: State; readonly theme: Theme }): ReactElement {
  const layout = layoutOf(state);
  const { columns, cautionRows } = layout;
  const rows = [
    headerRow(state, columns),
    ...(cautionRows === 1 ? [cautionRow(state, columns)] : []),
    ...stripRows(state, layout),
    ...(state.panel === null && state.solve.phase === 'failed'
      ? failedRows(state.solve.problems, layout)
      : [
          ...middleRows(state, layout),
          ...(state.panel?.type === 'pick' ? pickerRows(state, layout) : lowerRows(state, layout)),
        ]),
    footerRow(state, columns),
  ];
  return <Rows rows={rows} theme={theme} />;
}

/** Plot, axis and readout. */
function middleRows(state: State, layout: Layout): readonly (readonly Run[])[] {
  const analysis = analysisOf(state);
  if (!analysis) return waitingRows(state, layout);
  const picture = pictureOf(state, analysis);
  return [
    ...(picture.chart ? plotRows(picture.chart, layout) : wordsInPlaceOfPlot(picture.instead, layout)),
    readoutRow(state, analysis, picture, layout),
  ];
}

/** The list with its heading, and the details under it or beside it. */
function lowerRows(state: State, layout: Layout): readonly (readonly Run[])[] {
  const { columns, sideBySide, listWidth, listRows, detailWidth } = layout;
  const analysis = analysisOf(state);
  if (!analysis) return Array.from({ length: lowerHeight(layout) }, () => fitRuns([], columns));
  const list = foundRows(state, analysis, listWidth, listRows);
  const details = detailRows(state, detailWidth, layout.detailRows);
  const heading = headingRow(foundHeading(listWidth), noticeRuns(state), columns);
  return sideBySide
    ? [heading, ...list.map((row, i) => fitRuns([...row, ...(details[i] ?? [])], columns))]
    : [heading, ...list, ...details];
}

function headingRow(titles: readonly Run[], notices: readonly Run[], columns: number): readonly Run[] {
  return notices.length === 0 ? fitRuns(titles, columns) : spreadRuns(titles, notices, columns);
}

/** How many notices there are, with their key. */
function noticeRuns(state: State): readonly Run[] {
  const count = state.solve.phase === 'ready' ? state.solve.notices.length : 0;
  if (count === 0) return [];
  return [run('n', 'key'), run(` ${count} notice${count === 1 ? '' : 's'} `, 'caution')];
}
