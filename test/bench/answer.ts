/** What any way of reading a sweep concluded, in the terms that are scored: the program's and the plain recipe's. */

export type AnsweredFinding = {
  readonly severity: 'fault' | 'watch';
  readonly kind: string;
  readonly distanceM: number;
  /** Null where the way gives none. */
  readonly sigmaM: number | null;
  /** Joint that it is said to sit at, counted from 1; null inside a section. */
  readonly joint: number | null;
  /** Null where the way gives none. */
  readonly confidence: number | null;
};

export type AnsweredStretch = { readonly kind: string; readonly fromM: number; readonly toM: number };

export type Answer = {
  readonly findings: readonly AnsweredFinding[];
  readonly stretches: readonly AnsweredStretch[];
  readonly lengthM: number | null;
  readonly lengthSigmaM: number | null;
  readonly end: string;
  /** One-way loss of the cable at each point of the sweep, dB; null where the way gives none. */
  readonly loss: { readonly lossDb: Float64Array; readonly sigmaDb: Float64Array | null } | null;
  readonly solveMs: number;
  /** Why there is no answer; null when there is one. */
  readonly failed: string | null;
};

/** The answer of a way that could not do it. */
export function failedAnswer(why: string, solveMs: number): Answer {
  return {
    findings: [],
    stretches: [],
    lengthM: null,
    lengthSigmaM: null,
    end: 'unknown',
    loss: null,
    solveMs,
    failed: why,
  };
}
