/** The line itself, drawn across the screen: port at the left, end at the right, on the axis of the plot below it. */
import { cellWidth, cutText } from './cells.ts';
import { mergeRuns, type Role, type Run, run } from './run.ts';
import { cellOf, cellScale, type Domain } from './scale.ts';

/** How bad the thing at a mark is; each has its own sign, so that colour is not needed. */
export type MarkSeverity = 'fault' | 'watch' | 'sound';

/** One-cell signs of the severities. */
export const SEVERITY_GLYPHS: Readonly<Record<MarkSeverity, string>> = {
  fault: '×',
  watch: '▲',
  sound: '●',
};

/** A stretch between two joints. */
export type StripSection = {
  readonly fromM: number;
  readonly toM: number;
  /** Ways to write it, longest first; the first that fits is taken. */
  readonly texts: readonly string[];
  /** A device in line is drawn as a box, cable as a double line. */
  readonly look: 'cable' | 'device';
};

/** Something found along the line. */
export type StripMark = {
  readonly distanceM: number;
  readonly severity: MarkSeverity;
  readonly chosen: boolean;
  /** What is written on paper, where there is room for more than a sign: "×1". */
  readonly label?: string;
};

export type LineStripSpec = {
  /** Distances at the left and right edge, the same as the plot's. */
  readonly domainM: Domain;
  readonly sections: readonly StripSection[];
  /** Written to the right of the end: "antenna", "open". */
  readonly endText: string;
  readonly marks: readonly StripMark[];
  readonly cursorM: number | null;
};

/** Two rows, each exactly `width` cells: the line with its joints, and the signs of what was found on it. */
export type LineStrip = { readonly line: readonly Run[]; readonly marks: readonly Run[] };

const SEVERITY_RANK: Readonly<Record<MarkSeverity, number>> = { sound: 0, watch: 1, fault: 2 };

/** Draws the line strip. Cells are those of `cellScale(domainM, width)`, so it stands exactly over the plot. */
export function drawLineStrip(spec: LineStripSpec, width: number): LineStrip {
  return { line: lineRow(spec, width), marks: marksRow(spec, width) };
}

type Cell = { glyph: string; role: Role };

function lineRow(spec: LineStripSpec, width: number): readonly Run[] {
  const scale = cellScale(spec.domainM, width);
  const cells: Cell[] = Array.from({ length: width }, () => ({ glyph: ' ', role: 'line' }));
  const put = (column: number, glyph: string): void => {
    const cell = cells[column];
    if (cell) cell.glyph = glyph;
  };
  for (const section of spec.sections) {
    const first = cellOf(scale, section.fromM);
    const last = cellOf(scale, section.toM);
    for (let column = Math.max(0, first); column <= Math.min(width - 1, last); column++)
      put(column, section.look === 'device' ? '▒' : '═');
  }
  for (const section of spec.sections)
    label(cells, section.texts, cellOf(scale, section.fromM), cellOf(scale, section.toM));
  for (const section of spec.sections.slice(1)) put(cellOf(scale, section.fromM), '╪');
  const start = spec.sections[0];
  const end = spec.sections.at(-1);
  if (start) put(cellOf(scale, start.fromM), '╞');
  if (start && spec.domainM[0] > start.fromM) put(0, '┄');
  if (end && spec.domainM[1] < end.toM) put(width - 1, '┄');
  if (end) {
    const column = cellOf(scale, end.toM);
    put(column, '╡');
    const text = cutText(spec.endText, width - column - 2);
    if (cellWidth(text) >= Math.min(3, cellWidth(spec.endText))) writeText(cells, column + 2, text, 'plain');
  }
  return mergeRuns(cells.map((cell) => run(cell.glyph, cell.role)));
}

/** Writes the longest text that leaves a blank and a piece of line on both sides, in the middle of what is in view. */
function label(cells: Cell[], texts: readonly string[], first: number, last: number): void {
  const from = Math.max(0, first + 1);
  const to = Math.min(cells.length - 1, last - 1);
  const room = to - from + 1;
  for (const text of texts) {
    const cellsNeeded = cellWidth(text);
    const blanks = cellsNeeded + 4 <= room ? 1 : 0;
    if (cellsNeeded === 0 || cellsNeeded + 2 * blanks > room || (blanks === 0 && cellsNeeded > 5)) continue;
    const start = from + Math.floor((room - cellsNeeded - 2 * blanks) / 2);
    writeText(cells, start, `${' '.repeat(blanks)}${text}${' '.repeat(blanks)}`, 'plain');
    return;
  }
}

/** Writes text over cells; a wide character takes the cell after it too. */
function writeText(cells: Cell[], start: number, text: string, role: Role): void {
  let column = start;
  for (const { segment } of new Intl.Segmenter().segment(text)) {
    const taken = cellWidth(segment);
    for (let i = 0; i < taken; i++) {
      const cell = cells[column + i];
      if (cell) {
        cell.glyph = i === 0 ? segment : '';
        cell.role = role;
      }
    }
    column += taken;
  }
}

function marksRow(spec: LineStripSpec, width: number): readonly Run[] {
  const scale = cellScale(spec.domainM, width);
  const best = new Map<number, StripMark>();
  for (const mark of spec.marks) {
    const column = cellOf(scale, mark.distanceM);
    const there = best.get(column);
    if (!there || outranks(mark, there)) best.set(column, mark);
  }
  const cursor = spec.cursorM === null ? null : cellOf(scale, spec.cursorM);
  return mergeRuns(
    Array.from({ length: width }, (_, column): Run => {
      const mark = best.get(column);
      if (mark) return run(SEVERITY_GLYPHS[mark.severity], mark.chosen ? 'chosen' : mark.severity);
      return column === cursor ? run('╷', 'cursor') : run(' ');
    }),
  );
}

function outranks(mark: StripMark, other: StripMark): boolean {
  if (mark.severity !== other.severity) return SEVERITY_RANK[mark.severity] > SEVERITY_RANK[other.severity];
  return mark.chosen && !other.chosen;
}
