/**
 * Cells that a text takes on a terminal. Stands before `string-width`, whose first look at anything but plain ASCII
 * has the table of all emoji compiled (20 ms of a start of 150 ms); nearly all that is drawn here needs no such table.
 */
import stringWidth from 'string-width';

/**
 * Texts of characters that take one cell each and never join with a neighbour: ASCII, Latin, Greek, dashes and other
 * punctuation, arrows, mathematical signs, box drawing, geometric shapes, braille. A test compares each with the library.
 */
const ONE_CELL_EACH =
  /^[ -~\u00a0-\u00ac\u00ae-\u02ff\u0391-\u03a1\u03a3-\u03ff\u2010-\u2027\u2030-\u205e\u2190-\u2319\u2500-\u25fc\u2800-\u28ff]*$/;

/** Colours and weights, as written between the characters of a row. */
const STYLES = /\u001b\[[\d;]*m/g;

/**
 * Width of a text; wide characters count two cells, combining ones none, escape sequences none.
 *
 * @param options Of the library, for its other users; with any, the library answers.
 */
export function textWidth(text: string, options?: Parameters<typeof stringWidth>[1]): number {
  if (options === undefined) {
    const plain = text.includes('\u001b') ? text.replace(STYLES, '') : text;
    if (ONE_CELL_EACH.test(plain)) return plain.length;
  }
  return stringWidth(text, options);
}

// biome-ignore lint/style/noDefaultExport: the build hands this to the UI library in place of the library's default
export default textWidth;
