/** How the rows and columns of the terminal are shared out. */

/** Smallest terminal that the workspace is drawn on. */
export const SMALLEST = { columns: 80, rows: 24 } as const;

/** Cells left of the plot: a margin, a label of up to four, a blank and the axis. */
export const GUTTER = 7;

/** From this width on, what was found and what it means stand side by side. */
const SIDE_BY_SIDE_COLUMNS = 120;

/** The list's share of the columns beside the details, and the least with which its rows can be read. */
const LIST_SHARE = 0.55;
const LEAST_LIST_COLUMNS = 72;

/** Rows that are always there: header, strip (2), axis, readout, heading of the list, footer. */
const FIXED_ROWS = 7;

/** Where everything goes; all sizes in cells. */
export type Layout = {
  readonly columns: number;
  /** Rows drawn: one fewer than the terminal has, so that nothing ever scrolls. */
  readonly height: number;
  readonly plotWidth: number;
  readonly plotRows: number;
  readonly cautionRows: 0 | 1;
  readonly sideBySide: boolean;
  readonly listWidth: number;
  readonly listRows: number;
  readonly detailWidth: number;
  readonly detailRows: number;
};

/** Rows below the readout: heading, list, and the details where they do not stand beside it. */
export function lowerHeight({ listRows, detailRows, sideBySide }: Layout): number {
  return 1 + listRows + (sideBySide ? 0 : detailRows);
}

/** True when the terminal is too small to draw the workspace. */
export function tooSmall(size: { readonly columns: number; readonly rows: number }): boolean {
  return size.columns < SMALLEST.columns || size.rows < SMALLEST.rows;
}

/** Shares out a terminal of at least the smallest size; of a smaller one, as if it had that size. */
export function layoutOf(size: {
  readonly columns: number;
  readonly rows: number;
  readonly cautionsRead: boolean;
}): Layout {
  const columns = Math.max(size.columns, SMALLEST.columns);
  const height = Math.max(size.rows, SMALLEST.rows) - 1;
  const cautionRows = size.cautionsRead ? 0 : 1;
  const free = height - FIXED_ROWS - cautionRows;
  const sideBySide = columns >= SIDE_BY_SIDE_COLUMNS;
  // At 24 rows the list and its details take 8; of every further row the plot gets about half.
  const extra = height + 1 - SMALLEST.rows;
  const lower = sideBySide ? 8 + Math.floor(extra * 0.3) : 8 + Math.floor(extra * 0.45);
  const listRows = sideBySide ? lower : Math.floor(lower / 2);
  const listWidth = sideBySide ? Math.max(LEAST_LIST_COLUMNS, Math.floor(columns * LIST_SHARE)) : columns;
  return {
    columns,
    height,
    plotWidth: columns - GUTTER - 1,
    plotRows: free - lower,
    cautionRows,
    sideBySide,
    listWidth,
    listRows,
    detailWidth: sideBySide ? columns - listWidth : columns,
    detailRows: sideBySide ? lower : lower - listRows,
  };
}
