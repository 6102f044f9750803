/** Colour for text on a terminal: a role becomes an escape code, or nothing at all. */
import type { Severity } from '../locate/echo.ts';

export type Paint = (role: Severity | 'dim' | 'strong', text: string) => string;

const CODES: Readonly<Record<Severity | 'dim' | 'strong', string>> = {
  fault: '31',
  watch: '33',
  sound: '32',
  dim: '2',
  strong: '1',
};

/** @param colour False gives text as it is: piped, NO_COLOR, or a terminal that cannot. */
export function createPaint(colour: boolean): Paint {
  return colour ? (role, text) => `\u001b[${CODES[role]}m${text}\u001b[0m` : (_, text) => text;
}
