/**
 * Reads numbers out of a long text by hand: a sweep of 100 000 points is read in a fraction of a second, which a
 * regular expression per token would not do.
 */

/** A reader of blank-separated numbers inside a stretch of text. */
export type NumberScanner = {
  /** Looks at `text[start, end)` from now on. */
  seek(start: number, end: number): void;
  /**
   * The next number, scaled by 10^`exponent` without a rounding error of its own; NaN when the next token is no
   * finite number. `undefined` when nothing is left.
   */
  next(exponent?: number): number | undefined;
  /** Text of the token that `next` just looked at. */
  token(): string;
  /** How many tokens are left, without reading them. */
  countLeft(): number;
};

/** Powers of ten that a double holds exactly. */
const EXACT_POWERS = Float64Array.from({ length: 23 }, (_, power) => Number(`1e${power}`));

/** Largest whole number up to which every whole number is exact. */
const EXACT_INTEGER = 2 ** 53;

/**
 * A scanner over one text.
 *
 * A number is digits with an optional sign, point and exponent (`E` or `e`); nothing else: no comma, no
 * hexadecimal, no `D` exponent, no `inf`, no `nan`.
 *
 * @source references.md section 7 (numbers); exact fast path: Clinger, "How to read floating point numbers
 * accurately", PLDI 1990: whole numbers below 2^53 times or over 10^22 round once.
 */
export function createNumberScanner(text: string): NumberScanner {
  let position = 0;
  let limit = 0;
  let tokenStart = 0;
  let tokenEnd = 0;

  return {
    seek(start, end) {
      position = start;
      limit = end;
    },
    next(exponent = 0) {
      position = skipBlanks(text, position, limit);
      if (position >= limit) return undefined;
      tokenStart = position;
      tokenEnd = skipToken(text, position, limit);
      position = tokenEnd;
      return readNumber(text, tokenStart, tokenEnd, exponent);
    },
    token() {
      return text.slice(tokenStart, Math.min(tokenEnd, tokenStart + 200));
    },
    countLeft() {
      let count = 0;
      for (let at = skipBlanks(text, position, limit); at < limit; at = skipBlanks(text, at, limit)) {
        at = skipToken(text, at, limit);
        count++;
      }
      return count;
    },
  };
}

/**
 * Value of a whole piece of text as a number times 10^`exponent`; NaN when it is anything but one finite number.
 */
export function readNumber(text: string, start = 0, end = text.length, exponent = 0): number {
  let at = start;
  let mantissa = 0;
  let digits = 0;
  let shift = exponent;
  const first = text.charCodeAt(at);
  const negative = first === MINUS;
  if (negative || first === PLUS) at++;
  for (; at < end; at++) {
    const digit = text.charCodeAt(at) - ZERO;
    if (digit < 0 || digit > 9) break;
    mantissa = mantissa * 10 + digit;
    digits++;
  }
  if (at < end && text.charCodeAt(at) === POINT) {
    for (at++; at < end; at++) {
      const digit = text.charCodeAt(at) - ZERO;
      if (digit < 0 || digit > 9) break;
      mantissa = mantissa * 10 + digit;
      digits++;
      shift--;
    }
  }
  if (digits === 0) return Number.NaN;
  const mantissaEnd = at;
  let written = 0;
  if (at < end) {
    if ((text.charCodeAt(at) | LOWER_CASE) !== LETTER_E) return Number.NaN;
    at++;
    const sign = text.charCodeAt(at);
    const negativePower = sign === MINUS;
    if (at < end && (negativePower || sign === PLUS)) at++;
    if (at >= end) return Number.NaN;
    for (; at < end; at++) {
      const digit = text.charCodeAt(at) - ZERO;
      if (digit < 0 || digit > 9) return Number.NaN;
      written = Math.min(written * 10 + digit, 100_000);
    }
    if (negativePower) written = -written;
  }
  shift += written;
  let magnitude: number;
  if (mantissa < EXACT_INTEGER && shift >= -22 && shift <= 22) {
    magnitude = shift < 0 ? mantissa / EXACT_POWERS[-shift]! : mantissa * EXACT_POWERS[shift]!;
  } else {
    const unsigned = negative || first === PLUS ? start + 1 : start;
    magnitude = Number(`${text.slice(unsigned, mantissaEnd)}e${written + exponent}`);
  }
  if (!Number.isFinite(magnitude)) return Number.NaN;
  return negative ? -magnitude : magnitude;
}

const ZERO = 48;
const PLUS = 43;
const MINUS = 45;
const POINT = 46;
const LETTER_E = 101;
/** Bit that turns a capital ASCII letter into a small one. */
const LOWER_CASE = 32;

function skipBlanks(text: string, from: number, limit: number): number {
  let at = from;
  while (at < limit && isBlank(text.charCodeAt(at))) at++;
  return at;
}

function skipToken(text: string, from: number, limit: number): number {
  let at = from;
  while (at < limit && !isBlank(text.charCodeAt(at))) at++;
  return at;
}

/** Blank, tab, form feed, no-break space: what tools and editors put between numbers. */
function isBlank(code: number): boolean {
  return code === 32 || code === 9 || code === 12 || code === 10 || code === 0xa0;
}
