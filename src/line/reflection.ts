/** Reflection quantities of one coefficient: return loss, VSWR, mismatch loss, impedance. */
import { DB_PER_NEPER } from './constants.ts';

/**
 * Return loss of a reflection of magnitude `gamma`, dB; positive for a passive line, Infinity at 0.
 *
 * @source Pozar, Microwave Engineering, 4th ed., section 2.3.
 */
export function returnLossDb(gamma: number): number {
  return gamma === 0 ? Number.POSITIVE_INFINITY : -DB_PER_NEPER * Math.log(gamma);
}

/** Magnitude of the reflection that has this return loss. */
export function gammaOfReturnLoss(returnLoss: number): number {
  return Math.exp(-returnLoss / DB_PER_NEPER);
}

/**
 * Voltage standing wave ratio of a reflection magnitude; Infinity at 1 and above.
 *
 * @source Pozar, 4th ed., section 2.3: S = (1 + |Γ|)/(1 − |Γ|).
 */
export function vswr(gamma: number): number {
  return gamma >= 1 ? Number.POSITIVE_INFINITY : (1 + gamma) / (1 - gamma);
}

/** Reflection magnitude of a VSWR. @throws RangeError below 1. */
export function gammaOfVswr(ratio: number): number {
  if (!(ratio >= 1)) throw new RangeError(`VSWR ${ratio} is below 1`);
  return ratio === Number.POSITIVE_INFINITY ? 1 : (ratio - 1) / (ratio + 1);
}

/**
 * Power that a mismatch keeps from passing, dB: −10·log10(1 − |Γ|²).
 *
 * @source Pozar, 4th ed., section 2.3.
 */
export function mismatchLossDb(gamma: number): number {
  return gamma >= 1 ? Number.POSITIVE_INFINITY : (-DB_PER_NEPER / 2) * Math.log(1 - gamma * gamma);
}

/**
 * Impedance behind a real reflection coefficient in a line of `z0Ohm`: Z = z0(1 + Γ)/(1 − Γ).
 *
 * @source Pozar, 4th ed., section 2.3.
 */
export function impedanceOfGamma(gamma: number, z0Ohm: number): number {
  return (z0Ohm * (1 + gamma)) / (1 - gamma);
}
