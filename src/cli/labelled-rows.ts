/** Rows of a label and a text that wraps beside it, as the one-entry pages of the table have them. */

import type { FigureSource } from '../line/cable.ts';
import { fitText, wrapText } from '../plot/cells.ts';

/** Columns of the label. */
const LABEL_COLUMNS = 20;

/** Writes one labelled text; `source` stands behind it in brackets. */
export type LabelledRow = (label: string, text: string, source?: FigureSource) => string[];

/**
 * A writer of labelled rows for a page.
 *
 * @param columns Width of the page.
 */
export function labelledRows(columns: number): LabelledRow {
  return (label, text, source) =>
    wrapText(
      source === undefined ? text : `${text}  (${source.source}; ${source.status})`,
      columns - LABEL_COLUMNS,
    ).map((line, i) => `${fitText(i === 0 ? label : '', LABEL_COLUMNS)}${line}`);
}
