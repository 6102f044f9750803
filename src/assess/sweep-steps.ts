/** Steps that a sweep is planned with: the one source of what plans and notices advise. */
import type { SweepRange } from '../sweep/number-text.ts';

/** Unambiguous distance that a sweep should have over the length of its line. @source Common practice: 1.2 to 1.5. */
export const UNAMBIGUOUS_ROOM = 1.3;

/** The largest of 1, 2 or 5 times a power of ten that is no larger than this, Hz. */
export function roundStepHz(largestHz: number): number {
  const decade = 10 ** Math.floor(Math.log10(largestHz));
  const factor = [5, 2, 1].find((one) => one * decade <= largestHz * (1 + 1e-9)) ?? 1;
  return factor * decade;
}

/**
 * A sweep of whole multiples of its step, from the first one that is no lower than `lowHz` (and above 0) to the last
 * one that is no higher than `highHz`: what ohms against distance can be measured with when it starts low.
 */
export function harmonicRange(lowHz: number, highHz: number, stepHz: number): SweepRange {
  const first = Math.max(1, Math.ceil(lowHz / stepHz - 1e-9));
  const last = Math.max(first + 1, Math.floor(highHz / stepHz + 1e-9));
  return { startHz: first * stepHz, stopHz: last * stepHz, points: last - first + 1 };
}
