/** Plain columns of text. */
import { cellWidth, fitText } from '../plot/cells.ts';

/** Head and rows as lines of aligned columns: the first to the left, the last as it comes, the others to the right. */
export function tableLines(head: readonly string[], rows: readonly (readonly string[])[]): string[] {
  const widths = head.map((title, i) =>
    Math.max(cellWidth(title), ...rows.map((row) => cellWidth(row[i] ?? ''))),
  );
  return [head, ...rows].map((row) =>
    row
      .map((text, i) =>
        i === row.length - 1 ? text : fitText(text, widths[i] ?? 0, i === 0 ? 'left' : 'right'),
      )
      .join('  '),
  );
}
