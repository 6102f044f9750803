/** Text measured and cut in terminal cells, not in characters. */
import { mergeRuns, type Run, run } from './run.ts';
import { textWidth } from './text-width.ts';

const PLAIN_ASCII = /^[\x20-\x7e]*$/;
const CONTROL = /[\u0000-\u001f\u007f-\u009f\u200e\u200f\u202a-\u202e\u2066-\u2069]/g;

/** Cells that a text takes on a terminal; wide characters count two, combining ones none. */
export function cellWidth(text: string): number {
  return textWidth(text);
}

/** The text without control and direction characters, so that nothing read from a file can move the cursor. */
export function harmless(text: string): string {
  return text.replace(CONTROL, '');
}

/** At most `width` cells of a text; what is cut shows as a closing "…". */
export function cutText(text: string, width: number): string {
  const clean = harmless(text);
  if (width <= 0) return '';
  if (cellWidth(clean) <= width) return clean;
  return `${headOf(clean, width - 1)}…`;
}

/** A text cut and filled with blanks to exactly `width` cells. */
export function fitText(text: string, width: number, align: 'left' | 'right' | 'centre' = 'left'): string {
  const cut = cutText(text, width);
  const room = Math.max(0, width - cellWidth(cut));
  if (align === 'right') return ' '.repeat(room) + cut;
  if (align === 'left') return cut + ' '.repeat(room);
  const before = Math.floor(room / 2);
  return ' '.repeat(before) + cut + ' '.repeat(room - before);
}

/** A row of runs cut and filled to exactly `width` cells. */
export function fitRuns(runs: readonly Run[], width: number): readonly Run[] {
  const fitted: Run[] = [];
  let room = width;
  for (const [index, next] of runs.entries()) {
    const text = harmless(next.text);
    const cells = cellWidth(text);
    const rest = runs.slice(index + 1).some((r) => r.text.length > 0);
    if (cells > room || (cells === room && rest && cells > 0)) {
      // What follows is lost: the last cell says so.
      const cut = cells > room ? cutText(text, room) : cutText(`${text}…`, room);
      fitted.push(run(cut, next.role));
      room -= cellWidth(cut);
      break;
    }
    fitted.push(run(text, next.role));
    room -= cells;
  }
  if (room > 0) fitted.push(run(' '.repeat(room)));
  return mergeRuns(fitted);
}

/** Two rows of runs on one line of exactly `width` cells: one at the left, one at the right, at least one blank between. */
export function spreadRuns(left: readonly Run[], right: readonly Run[], width: number): readonly Run[] {
  const rightCells = right.reduce((sum, r) => sum + cellWidth(r.text), 0);
  const leftRoom = width - rightCells - 1;
  if (leftRoom < 8) return fitRuns(left, width);
  return fitRuns([...fitRuns(left, leftRoom), run(' '), ...right], width);
}

/**
 * A paragraph broken into lines of at most `width` cells, at blanks where there are any; a figure, its unit and its
 * uncertainty stay together ("48.3 m ±0.5").
 *
 * @returns At least one line; a word longer than the line is broken.
 */
export function wrapText(text: string, width: number): readonly string[] {
  if (width < 1) throw new RangeError(`cannot wrap to ${width} cells`);
  const lines: string[] = [];
  let line = '';
  for (let word of wordsOf(harmless(text))) {
    if (line !== '' && cellWidth(line) + 1 + cellWidth(word) <= width) {
      line += ` ${word}`;
      continue;
    }
    if (line !== '') lines.push(line);
    while (cellWidth(word) > width) {
      const head = headOf(word, width) || [...word].slice(0, 1).join('');
      lines.push(head);
      word = word.slice(head.length);
    }
    line = word;
  }
  if (line !== '' || lines.length === 0) lines.push(line);
  return lines;
}

/** A blank that no line ends at: before a unit after its figure, and about the sign of an uncertainty. */
const FIRM_BLANK =
  /(?<=\d) (?=(?:m|ft|Ω|dB|%|[kMG]?Hz|[np]H|[np]F|[np]s|mm|°[CF])(?![\p{L}\p{N}]))| (?=±)|(?<=±) /gu;

/** Stands for a firm blank while words are parted; `harmless` leaves no such character in a text. */
const FIRM = '\u0001';

function wordsOf(text: string): readonly string[] {
  const words = text.replace(/\s+/g, ' ').replace(FIRM_BLANK, FIRM).split(' ').filter(Boolean);
  return words.map((word) => word.replaceAll(FIRM, ' '));
}

/** The longest start of a text that fits in `width` cells, never splitting a character from its accents. */
function headOf(text: string, width: number): string {
  if (PLAIN_ASCII.test(text)) return text.slice(0, Math.max(0, width));
  let head = '';
  let used = 0;
  for (const { segment } of new Intl.Segmenter().segment(text)) {
    const cells = cellWidth(segment);
    if (used + cells > width) break;
    head += segment;
    used += cells;
  }
  return head;
}
