/** A sweep as Touchstone 1.1 text that any reader takes. */
import type { ComplexArray } from '../numerics/complex.ts';
import { cleanForDisplay } from './clean-text.ts';

/** Longest comment line written, characters. */
const COMMENT_LENGTH = 500;

/** What plain ASCII says in place of the characters our own comments use. */
const ASCII_FORMS: Readonly<Record<string, string>> = {
  Ω: 'ohm',
  '°': 'deg',
  '−': '-',
  '–': '-',
  '—': '-',
  '±': '+/-',
  '·': '*',
  '×': 'x',
  µ: 'u',
  μ: 'u',
  '…': '...',
  '√': 'sqrt',
  Γ: 'gamma',
};

/**
 * Writes one port: comments, option line, then frequency in Hz with real and imaginary part, each with the shortest
 * text that reads back to the very same number.
 *
 * @param comments One line each, without `!`; cleaned, and put into ASCII as the format asks.
 * @returns Text with LF line ends, the last line closed.
 * @throws RangeError When lengths differ, there are fewer than two points, a value is not finite, frequencies do not
 *   rise from 0 or more, or `portOhm` is not positive: such a file could not be read back.
 * @source Touchstone 1.1 as in references.md section 7 (ASCII, option line, one line per frequency).
 */
export function writeTouchstone(
  sweep: { readonly frequencyHz: Float64Array; readonly gamma: ComplexArray; readonly portOhm: number },
  comments: readonly string[],
): string {
  requireWritable(sweep);
  const { frequencyHz, gamma, portOhm } = sweep;
  const rows = comments.map((comment) => `! ${toAscii(cleanForDisplay(comment, COMMENT_LENGTH))}`.trimEnd());
  rows.push(`# Hz S RI R ${portOhm}`);
  frequencyHz.forEach((frequency, i) => {
    rows.push(`${frequency} ${gamma.re[i]!} ${gamma.im[i]!}`);
  });
  return `${rows.join('\n')}\n`;
}

function toAscii(text: string): string {
  return text.replace(/[^\x20-\x7e]/gu, (character) => ASCII_FORMS[character] ?? '?');
}

function requireWritable(sweep: Parameters<typeof writeTouchstone>[0]): void {
  const { frequencyHz, gamma, portOhm } = sweep;
  const n = frequencyHz.length;
  if (n < 2 || gamma.re.length !== n || gamma.im.length !== n) {
    throw new RangeError(
      `a sweep needs equal lengths from 2 up, not ${n}, ${gamma.re.length}, ${gamma.im.length}`,
    );
  }
  if (!(portOhm > 0 && Number.isFinite(portOhm)))
    throw new RangeError(`portOhm must be positive, not ${portOhm}`);
  for (let i = 0; i < n; i++) {
    const frequency = frequencyHz[i]!;
    if (!(Number.isFinite(frequency) && frequency >= 0 && (i === 0 || frequency > frequencyHz[i - 1]!))) {
      throw new RangeError(`frequencies must rise from 0 or more; point ${i} is ${frequency}`);
    }
    if (!(Number.isFinite(gamma.re[i]!) && Number.isFinite(gamma.im[i]!))) {
      throw new RangeError(`point ${i} is not finite: ${gamma.re[i]}, ${gamma.im[i]}`);
    }
  }
}
