/** A scene: a line with known faults, its sweep and description as files, and the truth about it. */

import type { PlanName } from './sweep-plan.ts';
import type { EndKind } from './termination.ts';

export type TrueFault = {
  /** From the reference plane, in the true line, m; a joint's fault stands at the joint. */
  readonly distanceM: number;
  readonly kind:
    | 'series-resistance'
    | 'shunt-leakage'
    | 'series-inductance'
    | 'shunt-capacitance'
    | 'open'
    | 'short';
  /** In ohm, ohm, nH, pF; in a guide relative to its wave impedance at mid-band; null for open and short. */
  readonly value: number | null;
  readonly unit: 'ohm' | 'nH' | 'pF' | 'z0' | null;
  /** Joint it sits at, counted from 1 (the port); null inside a section. */
  readonly joint: number | null;
  /** RMS over the band as seen from the port, dB, positive. */
  readonly apparentReturnLossDb: number;
};

export type TrueStretch = {
  readonly kind: 'wet' | 'wrong-cable';
  readonly fromM: number;
  readonly toM: number;
  /** One way at band centre, over what the described cable would lose, dB. */
  readonly excessLossDb: number;
};

export type SceneTruth = {
  readonly faults: readonly TrueFault[];
  readonly stretches: readonly TrueStretch[];
  readonly end: EndKind;
  readonly lengthM: number;
  /** Joints 1 … n+1, m. */
  readonly jointM: readonly number[];
  /** Worst return loss over the band of each sound joint, dB. */
  readonly jointReturnLossDb: readonly number[];
  /** Where bounces between a fault and what lies behind it look like echoes, m. */
  readonly ghostsM: readonly number[];
  readonly plan: PlanName | 'guide';
  readonly points: number;
  readonly even: boolean;
  readonly spanHz: number;
  /** Fourier resolution c·vf/(2·B) in the longest section, π/(β2 − β1) in a guide, m. */
  readonly resolutionM: number;
  readonly noiseDb: number;
  readonly structuralReturnLossDb: number | null;
  readonly temperatureC: number;
  /** One-way loss of the cable as built at each point, connectors not included, dB; up to where it is cut. */
  readonly cableLossDb: Float64Array;
  /** Points hit by carriers. */
  readonly interfered: readonly number[];
};

export type Scene = {
  readonly suite: string;
  readonly seed: number;
  readonly index: number;
  /** Touchstone text, Hz S RI R 50. */
  readonly sweepText: string;
  /** Line-file text (design section 8). */
  readonly lineText: string;
  /** False when the line file says no more than the cable: the command line's `--cable ID` alone. */
  readonly lineDescribed: boolean;
  readonly truth: SceneTruth;
};
