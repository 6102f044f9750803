/** Sweeps out of text, for tests: the sweep or the problems, whichever is expected. */
import type { Notice, Problem } from '../../src/outcome.ts';
import { readSweep } from '../../src/sweep/read-sweep.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';

export type Request = { readonly file?: string; readonly port?: number };

function read(text: string, { file = 'line.s1p', port = 1 }: Request) {
  return readSweep(new TextEncoder().encode(text), { file, port });
}

/** The sweep and its notices; throws with the problems when there is none. */
export function sweepAndNotices(
  text: string,
  request: Request = {},
): { readonly sweep: Sweep; readonly notices: readonly Notice[] } {
  const outcome = read(text, request);
  if (!outcome.ok) throw new Error(outcome.problems.map((p) => `${p.code}: ${p.what}`).join('; '));
  return { sweep: outcome.value, notices: outcome.notices };
}

export function sweepOf(text: string, request: Request = {}): Sweep {
  return sweepAndNotices(text, request).sweep;
}

/** The problems; throws when the text reads. */
export function problemsOf(text: string, request: Request = {}): readonly Problem[] {
  const outcome = read(text, request);
  if (outcome.ok) throw new Error('the text was read');
  return outcome.problems;
}

/** Reflection of every point as pairs, rounded off at 1e-12. */
export function pairsOf(sweep: Sweep): number[][] {
  return Array.from(sweep.gamma.re, (re, i) => [rounded(re), rounded(sweep.gamma.im[i]!)]);
}

function rounded(value: number): number {
  return Math.round(value * 1e12) / 1e12 + 0;
}
