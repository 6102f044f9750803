/** One discontinuity that the solver resolved. */

export type EchoKind =
  | 'open'
  | 'short'
  | 'termination'
  | 'series-resistance'
  | 'shunt-leakage'
  | 'series-inductance'
  | 'shunt-capacitance'
  | 'impedance-step'
  | 'joint'
  | 'unresolved';

export type StretchKind = 'wet' | 'wrong-cable' | 'sound';

/**
 * Size of an echo in its own quantity; null fields where unknown. `normalised` is r, x, g or b of a discontinuity in a
 * guide at mid-band, relative to the guide's own impedance.
 */
export type EchoValue = {
  readonly quantity: 'resistance' | 'inductance' | 'capacitance' | 'impedance' | 'normalised' | 'return loss';
  readonly value: number;
  readonly sigma: number | null;
  readonly unit: 'ohm' | 'nH' | 'pF' | 'z0' | 'dB';
};

export type Severity = 'fault' | 'watch' | 'sound';

export type Echo = {
  /** Distance from the reference plane, m, after scaling to what is known. */
  readonly distanceM: number;
  readonly distanceSigmaM: number;
  /** RMS level over the band as seen at the reference plane, dB, positive. */
  readonly returnLossDb: number;
  /** The same with line loss and upstream mismatch removed, dB. */
  readonly correctedReturnLossDb: number;
  readonly kind: EchoKind;
  /** Probability that the kind is right, 0..1. */
  readonly confidence: number;
  readonly value: EchoValue | null;
  /** Joint it sits at, counted from 1 (the port); null when it lies inside a section. */
  readonly joint: { readonly index: number; readonly name: string } | null;
  /** Section it lies in, counted from 0. */
  readonly section: number;
};

/** A stretch between two distances that differs from its description in loss or impedance. */
export type Stretch = {
  readonly fromM: number;
  readonly toM: number;
  readonly excessLossDb: number;
  readonly excessLossSigmaDb: number;
  readonly kind: StretchKind;
};
