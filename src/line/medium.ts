/**
 * A medium: what one stretch of line does to a wave at each frequency of a sweep.
 *
 * Coax, guide and device all come down to this: propagation constant and characteristic impedance,
 * with the derivatives that the solver needs for the loss scales.
 */
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { assertNever } from '../outcome.ts';
import type { Cable } from './cable.ts';
import {
  COPPER_TEMPERATURE_COEFFICIENT,
  DB_PER_NEPER,
  SPEED_OF_LIGHT,
  TABLE_TEMPERATURE_C,
} from './constants.ts';
import { type Guide, guideLossDbPer100m, guidePhaseRadPerM } from './guide.ts';
import type { DeviceSection, Section } from './line.ts';

export type Medium = {
  /** Propagation constant γ = α + jβ, 1/m. */
  readonly gamma: ComplexArray;
  /** Characteristic impedance, Ω. */
  readonly impedance: ComplexArray;
  /** ∂γ for a relative change of the conductor loss, 1/m. */
  readonly gammaPerConductorLoss: ComplexArray;
  /** ∂γ for a relative change of the dielectric loss, 1/m. */
  readonly gammaPerDielectricLoss: ComplexArray;
  /** Impedance that lumped elements are normalised to, Ω. */
  readonly z0Ohm: number;
};

/** Factors on a medium's described loss. */
export type LossScale = { readonly conductor: number; readonly dielectric: number };

export const DESCRIBED_LOSS: LossScale = { conductor: 1, dielectric: 1 };

/** Frequency at which a cable's permittivity is taken, rad/s: 2π·1 GHz (the design's convention). */
const PERMITTIVITY_OMEGA = 2 * Math.PI * 1e9;

/** Velocity factor inside in-line devices, about that of a PTFE-filled body. Common practice. */
const DEVICE_VELOCITY_FACTOR = 0.7;

/**
 * Medium of any section of a line.
 *
 * @param options.z0Ohm What guides and devices are matched to, as `referenceOhm` gives it.
 */
export function sectionMedium(
  section: Section,
  frequencyHz: Float64Array,
  options: { readonly temperatureC: number; readonly loss?: LossScale; readonly z0Ohm: number },
): Medium {
  switch (section.type) {
    case 'coax':
      return coaxMedium(section.cable, frequencyHz, options);
    case 'guide':
      return guideMedium(section.guide, frequencyHz, options);
    case 'device':
      return deviceMedium(section, frequencyHz, options.z0Ohm);
    default:
      return assertNever(section);
  }
}

/**
 * Causal coax: skin effect with its internal inductance, dielectric of constant loss tangent.
 *
 * z0 and velocity factor of the cable leave out the internal inductance and take the permittivity at 1 GHz, so the
 * delay per metre falls slowly with frequency and nothing arrives before the light could.
 *
 * @param frequencyHz Each above 0; the cascade is not used at 0.
 * @throws RangeError When a frequency is not above 0.
 * @source Wigington & Nahman, Proc. IRE 45(2), 1957 (skin effect); Djordjević et al., IEEE Trans. EMC 43(4), 2001
 *   (causal dielectric).
 */
export function coaxMedium(
  cable: Cable,
  frequencyHz: Float64Array,
  options: { readonly temperatureC: number; readonly loss?: LossScale },
): Medium {
  const n = frequencyHz.length;
  const scale = options.loss ?? DESCRIBED_LOSS;
  const velocity = cable.velocityFactor * SPEED_OF_LIGHT;
  const seriesInductance = cable.z0Ohm / velocity;
  const shuntCapacitance = 1 / (cable.z0Ohm * velocity);
  const temperature = Math.sqrt(
    Math.max(0, 1 + COPPER_TEMPERATURE_COEFFICIENT * (options.temperatureC - TABLE_TEMPERATURE_C)),
  );
  const npPerDb = 1 / (100 * DB_PER_NEPER);
  // α_d is proportional to f, so the loss tangent is one number: 2·v·α_d/ω.
  const lossTangentAtOne = (2 * velocity * cable.k2 * 1e-6 * npPerDb) / (2 * Math.PI);
  const lossTangent = lossTangentAtOne * scale.dielectric;
  const exponent = (2 / Math.PI) * Math.atan(lossTangent);
  const exponentPerScale = ((2 / Math.PI) * lossTangentAtOne) / (1 + lossTangent * lossTangent);

  const gamma = complexZeros(n);
  const impedance = complexZeros(n);
  const perConductor = complexZeros(n);
  const perDielectric = complexZeros(n);
  for (let i = 0; i < n; i++) {
    const f = frequencyHz[i]!;
    if (!(f > 0)) throw new RangeError(`a medium needs frequencies above 0, got ${f}`);
    const omega = 2 * Math.PI * f;
    const skin = 2 * cable.z0Ohm * cable.k1 * Math.sqrt(f * 1e-6) * temperature * npPerDb;
    const zRe = skin * scale.conductor;
    const zIm = omega * seriesInductance + skin * scale.conductor;
    const logRatio = Math.log(omega / PERMITTIVITY_OMEGA);
    const yMagnitude = omega * shuntCapacitance * Math.exp(-exponent * logRatio);
    const yAngle = Math.PI / 2 - (exponent * Math.PI) / 2;
    const zMagnitude = Math.hypot(zRe, zIm);
    const zAngle = Math.atan2(zIm, zRe);
    const gammaMagnitude = Math.sqrt(zMagnitude * yMagnitude);
    const gammaAngle = (zAngle + yAngle) / 2;
    const gRe = gammaMagnitude * Math.cos(gammaAngle);
    const gIm = gammaMagnitude * Math.sin(gammaAngle);
    gamma.re[i] = gRe;
    gamma.im[i] = gIm;
    const cMagnitude = Math.sqrt(zMagnitude / yMagnitude);
    impedance.re[i] = cMagnitude * Math.cos((zAngle - yAngle) / 2);
    impedance.im[i] = cMagnitude * Math.sin((zAngle - yAngle) / 2);
    // γ = √(ZY): ∂γ = γ/2 · ∂Z/Z, and for the dielectric γ/2 · ∂Y/Y.
    const ratioRe = (skin * (zRe + zIm)) / (zMagnitude * zMagnitude);
    const ratioIm = (skin * (zRe - zIm)) / (zMagnitude * zMagnitude);
    perConductor.re[i] = 0.5 * (gRe * ratioRe - gIm * ratioIm);
    perConductor.im[i] = 0.5 * (gRe * ratioIm + gIm * ratioRe);
    const yRe = -exponentPerScale * logRatio;
    const yIm = (-exponentPerScale * Math.PI) / 2;
    perDielectric.re[i] = 0.5 * (gRe * yRe - gIm * yIm);
    perDielectric.im[i] = 0.5 * (gRe * yIm + gIm * yRe);
  }
  return {
    gamma,
    impedance,
    gammaPerConductorLoss: perConductor,
    gammaPerDielectricLoss: perDielectric,
    z0Ohm: cable.z0Ohm,
  };
}

/**
 * TE10 of a rectangular guide: γ = α + jβ.
 *
 * Its impedance is that of what it is joined to, at every frequency: a guide's wave impedance is a matter of definition,
 * and a transition from coax to guide (or a taper between sizes) is taken as matched, so there is no step. What is put
 * into the guide is therefore normalised to its own wave impedance: a resistive strength is r or g, the same over the
 * band, a reactive one is x or b in proportion to frequency. (Gaps and dents follow f or β, the two steps differ by
 * less than a third over a guide's band.) All of the loss is the walls', so only `gammaPerConductorLoss` is not 0.
 *
 * @param frequencyHz Each above the cut-off; `usable-band.ts` says which those are.
 * @throws RangeError When a frequency is at or below the cut-off.
 * @source Pozar, Microwave Engineering, 4th ed., section 3.3.
 */
export function guideMedium(
  guide: Guide,
  frequencyHz: Float64Array,
  options: { readonly temperatureC: number; readonly loss?: LossScale; readonly z0Ohm: number },
): Medium {
  const n = frequencyHz.length;
  const scale = options.loss ?? DESCRIBED_LOSS;
  const gamma = complexZeros(n);
  const impedance = complexZeros(n);
  impedance.re.fill(options.z0Ohm);
  const perLoss = complexZeros(n);
  for (let i = 0; i < n; i++) {
    const f = frequencyHz[i]!;
    const alpha = guideLossDbPer100m(guide, f, options.temperatureC) / (100 * DB_PER_NEPER);
    gamma.re[i] = alpha * scale.conductor;
    gamma.im[i] = guidePhaseRadPerM(guide, f);
    perLoss.re[i] = alpha;
  }
  return {
    gamma,
    impedance,
    gammaPerConductorLoss: perLoss,
    gammaPerDielectricLoss: complexZeros(n),
    z0Ohm: options.z0Ohm,
  };
}

/**
 * In-line device: a short section with its loss (taken as constant over its pass band) and an impedance off that of
 * the line by its ordinary return loss, so that both faces reflect. Outside the pass band nothing is claimed: the
 * caller leaves those frequencies out.
 */
export function deviceMedium(section: DeviceSection, frequencyHz: Float64Array, z0Ohm: number): Medium {
  const n = frequencyHz.length;
  const gamma = complexZeros(n);
  const impedance = complexZeros(n);
  const perLoss = complexZeros(n);
  const face = 10 ** (-section.returnLossDb / 20);
  const ohm = (z0Ohm * (1 + face)) / (1 - face);
  const alpha = section.lossDb / DB_PER_NEPER / section.lengthM;
  for (let i = 0; i < n; i++) {
    gamma.re[i] = alpha;
    gamma.im[i] = (2 * Math.PI * frequencyHz[i]!) / (DEVICE_VELOCITY_FACTOR * SPEED_OF_LIGHT);
    impedance.re[i] = ohm;
    perLoss.re[i] = alpha;
  }
  return {
    gamma,
    impedance,
    gammaPerConductorLoss: perLoss,
    gammaPerDielectricLoss: complexZeros(n),
    z0Ohm: ohm,
  };
}

/** What stands before the reference plane: the sweep's real port impedance. */
export function portMedium(portOhm: number, length: number): Medium {
  const impedance = complexZeros(length);
  impedance.re.fill(portOhm);
  const none = complexZeros(length);
  return {
    gamma: none,
    impedance,
    gammaPerConductorLoss: none,
    gammaPerDielectricLoss: none,
    z0Ohm: portOhm,
  };
}
