/** Dots of a cell as a braille character. */
import { cellInk, type Raster } from './raster.ts';
import { mergeRuns, type Run, run } from './run.ts';
import { DOTS_ACROSS, DOTS_DOWN } from './scale.ts';

/** Turns the eight dots of a cell, as bits in braille order, into one character one cell wide. */
export type CellGlyph = (bits: number) => string;

/** Bit of the dot at (column, row) of a cell. @source Unicode Standard, Braille Patterns U+2800–28FF: dots 1–8. */
const DOT_BITS = [
  [0x01, 0x02, 0x04, 0x40],
  [0x08, 0x10, 0x20, 0x80],
] as const;

/** Braille for the dots; a blank for none, so that copied text stays clean. */
export function brailleGlyph(bits: number): string {
  return bits === 0 ? ' ' : String.fromCharCode(0x2800 + bits);
}

/**
 * The rows of a raster as runs of text, each exactly `raster.width` cells.
 *
 * @param glyph How eight dots become a character; other sets than braille go in here.
 */
export function rasterRows(raster: Raster, glyph: CellGlyph = brailleGlyph): readonly (readonly Run[])[] {
  return Array.from({ length: raster.height }, (_, row) =>
    mergeRuns(
      Array.from({ length: raster.width }, (_, column) =>
        run(glyph(cellBits(raster, column, row)), cellInk(raster, column, row) ?? 'plain'),
      ),
    ),
  );
}

function cellBits(raster: Raster, column: number, row: number): number {
  const columns = raster.width * DOTS_ACROSS;
  let bits = 0;
  for (let across = 0; across < DOTS_ACROSS; across++) {
    for (let down = 0; down < DOTS_DOWN; down++) {
      const dot = (row * DOTS_DOWN + down) * columns + column * DOTS_ACROSS + across;
      if (raster.dots[dot] === 1) bits |= DOT_BITS[across]![down]!;
    }
  }
  return bits;
}
