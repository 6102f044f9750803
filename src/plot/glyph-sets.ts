/** Other characters for terminals whose font lacks some: block elements in place of braille, or ASCII for everything. */
import { cellWidth, fitRuns } from './cells.ts';
import { type Run, run, runsText } from './run.ts';

/** The sets there are, finest first. */
export const GLYPH_SETS = ['braille', 'blocks', 'ascii'] as const;

export type GlyphSet = (typeof GLYPH_SETS)[number];

const BRAILLE = /[\u2801-\u28ff]/g;
const NOT_ASCII = /[^ -~]/u;

/** Dots of the upper left, upper right, lower left and lower right quarter, as bits in braille order. */
const QUARTERS = [0x01 | 0x02, 0x08 | 0x10, 0x04 | 0x40, 0x20 | 0x80] as const;

/** Characters by the quarters that are filled. @source Unicode Standard, Block Elements U+2580–259F. */
const BLOCKS = [...' ▘▝▀▖▌▞▛▗▚▐▜▄▙▟█'];

/** Eight dots as the quarters of a cell. */
export function blockGlyph(bits: number): string {
  const filled = QUARTERS.reduce((sum, quarter, i) => sum + ((bits & quarter) === 0 ? 0 : 1 << i), 0);
  return BLOCKS[filled]!;
}

/** Bits of the dots of each row of a cell, left column and right column. */
const LEFT_BITS = [0x01, 0x02, 0x04, 0x40] as const;
const RIGHT_BITS = [0x08, 0x10, 0x20, 0x80] as const;

/** From so many rows on, dots one above the other read as an upright. */
const UPRIGHT_ROWS = 3;

/** Eight dots as the ASCII character that runs most like them. */
export function asciiGlyph(bits: number): string {
  const left = rowsLit(bits, LEFT_BITS);
  const right = rowsLit(bits, RIGHT_BITS);
  const all = [...left, ...right];
  if (all.length === 0) return ' ';
  const top = Math.min(...all);
  const bottom = Math.max(...all);
  if (bottom - top + 1 >= UPRIGHT_ROWS) {
    if (left.length === 0 || right.length === 0) return '|';
    const lean = middle(right) - middle(left);
    if (Math.abs(lean) < 1) return left.length + right.length >= 7 ? '#' : '|';
    return lean > 0 ? '\\' : '/';
  }
  if (top === 3) return all.length > 1 ? '_' : '.';
  if (bottom === 0) return "'";
  if (all.length === 1) return top >= 2 ? '.' : "'";
  return bottom >= 2 && top >= 2 ? '_' : '-';
}

function rowsLit(bits: number, column: readonly number[]): number[] {
  return column.flatMap((bit, row) => ((bits & bit) === 0 ? [] : [row]));
}

function middle(rows: readonly number[]): number {
  return rows.reduce((sum, row) => sum + row, 0) / rows.length;
}

/** What stands for a character in ASCII; a longer one takes its room from the blanks behind it. */
const IN_ASCII: Readonly<Record<string, string>> = {
  '×': 'x',
  '▲': '^',
  '●': 'o',
  '○': 'o',
  '╷': '|',
  '│': '|',
  '┤': '|',
  '├': '|',
  '╞': '|',
  '╪': '+',
  '╡': '|',
  '═': '=',
  '─': '-',
  '━': '=',
  '┄': '~',
  '▒': '%',
  '▏': '|',
  '·': '.',
  '…': '~',
  '›': '>',
  '‹': '<',
  '−': '-',
  '–': '-',
  '’': "'",
  '→': '>',
  '←': '<',
  '↑': '^',
  '↓': 'v',
  Ω: 'ohm',
  '±': '+-',
  '°': 'deg ',
  β: 'beta',
  Γ: 'G',
  Δ: 'd',
  σ: 's',
  µ: 'u',
  '²': '2',
  '₂': '2',
  '≤': '<=',
  '≥': '>=',
  '≈': '~',
};

/**
 * A row in another set of characters, as wide as it was.
 *
 * @returns The same runs where nothing has to change.
 */
export function inGlyphSet(runs: readonly Run[], set: GlyphSet): readonly Run[] {
  if (set === 'braille') return runs;
  if (set === 'blocks')
    return runs.map((r) =>
      run(
        r.text.replace(BRAILLE, (dots) => blockGlyph(dots.charCodeAt(0) - 0x2800)),
        r.role,
      ),
    );
  return runs.some((r) => NOT_ASCII.test(r.text)) ? asciiRuns(runs) : runs;
}

function asciiRuns(runs: readonly Run[]): readonly Run[] {
  let owed = 0;
  const spelled = runs.map((r) => {
    let text = '';
    for (const character of r.text) {
      if (owed > 0 && character === ' ' && text.endsWith(' ')) {
        owed--;
        continue;
      }
      const put = asciiOf(character);
      owed += put.length - cellWidth(character);
      text += put;
    }
    return run(text, r.role);
  });
  // What found no blanks to take pushes the end of the row out.
  return owed === 0 ? spelled : fitRuns(spelled, cellWidth(runsText(runs))).map(plainDots);
}

/** The sign that a row was cut, in ASCII too. */
function plainDots(r: Run): Run {
  return run(r.text.replaceAll('…', IN_ASCII['…']!), r.role);
}

/** A wide character becomes as many question marks as it had cells; an accent that joins the one before, none. */
function asciiOf(character: string): string {
  if (character >= ' ' && character <= '~') return character;
  const code = character.codePointAt(0) ?? 0;
  if (code > 0x2800 && code <= 0x28ff) return asciiGlyph(code - 0x2800);
  const known = IN_ASCII[character];
  if (known !== undefined) return known;
  const bare = character.normalize('NFD').charAt(0);
  if (bare >= ' ' && bare <= '~') return bare;
  return '?'.repeat(cellWidth(character));
}
