/** Text with a label beside it, broken to a width. */
import { cellWidth, cutText, fitText, wrapText } from '../../plot/cells.ts';
import { type Role, type Run, run } from '../../plot/run.ts';

/** A labelled text; without a label it starts at the margin. */
export type Paragraph = { readonly label: string; readonly text: string; readonly role?: Role };

/** The paragraph in rows, further rows indented under the text. Rows are at most `width` cells. */
export function paragraphRows(
  { label, text, role = 'plain' }: Paragraph,
  width: number,
  labelWidth: number,
): readonly (readonly Run[])[] {
  const indent = label === '' ? 0 : labelWidth;
  return wrapText(text, Math.max(8, width - indent)).map((line, i) => [
    run(i === 0 ? fitText(label, indent) : ' '.repeat(indent), 'dim'),
    run(line, role),
  ]);
}

/**
 * Paragraphs in at most `rows` rows: each gets one, and those that come first get more while there is room; what is
 * cut ends in "…".
 */
export function paragraphsWithin(
  paragraphs: readonly Paragraph[],
  width: number,
  labelWidth: number,
  rows: number,
): readonly (readonly Run[])[] {
  const whole = paragraphs.slice(0, rows).map((paragraph) => paragraphRows(paragraph, width, labelWidth));
  let spare = rows - whole.length;
  return whole.flatMap((own) => {
    const given = Math.min(own.length, 1 + spare);
    spare -= given - 1;
    return given === own.length ? own : [...own.slice(0, given - 1), continued(own[given - 1]!, width)];
  });
}

/** A row that says with its last cell that the text goes on. */
function continued(row: readonly Run[], width: number): readonly Run[] {
  const last = row.at(-1)!;
  const before = row.slice(0, -1);
  const room = width - before.reduce((sum, r) => sum + cellWidth(r.text), 0);
  const text = cellWidth(last.text) + 2 <= room ? `${last.text} …` : cutText(`${last.text} …`, room);
  return [...before, run(text, last.role)];
}
