/** What the solver concluded about a line. */
import type { ComplexArray } from '../numerics/complex.ts';
import type { Notice } from '../outcome.ts';
import type { Echo, Stretch } from './echo.ts';

/** A re-reflection that stands out in the trace; explained by the model, never a finding. */
export type Ghost = {
  readonly distanceM: number;
  /** Apparent level in the trace, dB, positive. */
  readonly returnLossDb: number;
  /** Distances of the echoes it bounces between, m. */
  readonly betweenM: readonly number[];
};

/** How the loss of the run differs from its description, as the end showed it. */
export type FittedLoss = {
  /** Relative change of the loss that grows with the root of frequency, and of that which grows with frequency. */
  readonly conductor: number;
  readonly dielectric: number;
  /** Covariance of the two: conductor, both, dielectric. Priors counted; the instrument's residue is in it. */
  readonly covariance: readonly [number, number, number];
};

export type Solution = {
  /** In order of distance; described joints and the end included. */
  readonly echoes: readonly Echo[];
  readonly ghosts: readonly Ghost[];
  readonly stretches: readonly Stretch[];
  /** Distance to the end, m, scaled to what is known. */
  readonly lengthM: number;
  readonly lengthSigmaM: number;
  /** Physical distance = model distance × this. */
  readonly distanceScale: number;
  /** Round-trip group delay to the end at band centre, ns. */
  readonly delayNs: number;
  readonly end: 'open' | 'short' | 'load' | 'antenna' | 'unknown';
  /** True when the line stops well before its description does: cut, or undone. */
  readonly endsEarly: boolean;
  readonly scaledTo: 'description' | 'velocity-factor';
  /** Fitted loss over described loss. */
  readonly lossFactor: number;
  readonly loss: FittedLoss;
  /** Impedance of each section over its description, ln. */
  readonly impedanceRatios: readonly number[];
  /** Γ of the solved cascade at the sweep's frequencies. */
  readonly modelGamma: ComplexArray;
  readonly residualDb: number;
  /** Share of the sweep's energy that the model explains, 0..1. */
  readonly explained: number;
  readonly elements: number;
  readonly notices: readonly Notice[];
};
