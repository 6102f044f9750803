/** What has changed on a line between two sweeps. */
import type { PureType } from '../locate/probe.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import type { Notice } from '../outcome.ts';

/** Kinds of change at a place: a discontinuity that has come or gone, or an end that is another. */
export type ChangeKind = PureType | 'open' | 'short' | 'termination' | 'unresolved';

export type Change = {
  /** From the reference plane, m, scaled as the earlier sweep's distances are. */
  readonly distanceM: number;
  readonly distanceSigmaM: number;
  /** Apparent RMS size of the complex change over the common band, dB, negative. */
  readonly levelDb: number;
  readonly kind: ChangeKind;
  /** True where what the earlier sweep showed is no longer there: mended. */
  readonly gone: boolean;
  readonly joint: { readonly index: number; readonly name: string } | null;
  readonly place: string;
};

/** Worst return loss of a band before and after, dB; null where a sweep does not cover the band. */
export type BandChange = {
  readonly name: string;
  readonly fromHz: number;
  readonly toHz: number;
  readonly beforeDb: number | null;
  readonly afterDb: number | null;
};

export type Comparison = {
  readonly verdict: 'changed' | 'unchanged';
  readonly changes: readonly Change[];
  /** Growth of the line's delay, parts per million; positive where the later sweep's line is longer. */
  readonly stretchPpm: number;
  readonly stretchSigmaPpm: number;
  /** Growth of one-way loss at the middle of the common band, dB. */
  readonly lossChangeDb: number;
  readonly lossChangeSigmaDb: number;
  readonly bands: readonly BandChange[];
  readonly end: {
    readonly before: string;
    readonly after: string;
    readonly lengthBeforeM: number;
    readonly lengthAfterM: number;
  };
  /** What both sweeps cover. */
  readonly common: { readonly startHz: number; readonly stopHz: number; readonly points: number };
  /**
   * Γ of the later sweep less that of the earlier one, turned into what the later day would have shown of it, at the
   * common frequencies; 0 where a carrier has hit one of the two. Distances in it are the earlier sweep's.
   */
  readonly difference: { readonly frequencyHz: Float64Array; readonly gamma: ComplexArray };
  readonly notices: readonly Notice[];
};
