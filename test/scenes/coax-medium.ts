/** The causal coax of the scenes, worked out in polar form and apart from the program's own physics. */

const SPEED_OF_LIGHT_M_S = 299_792_458;
/** 20/ln 10, decibels in a neper. */
export const DB_IN_NEPER = 8.685_889_638;
/** The permittivity of the described velocity factor is that at this frequency (design section 4). */
const REFERENCE_HZ = 1e9;

/** Figures of a cable: what a table says, or what a true piece of it has. */
export type CableFigures = {
  readonly z0Ohm: number;
  readonly velocityFactor: number;
  /** dB per 100 m per √MHz at 20 °C. */
  readonly k1: number;
  /** dB per 100 m per MHz. */
  readonly k2: number;
};

/** Propagation constant γ (1/m) and characteristic impedance (Ω) at each frequency. */
export type Medium = {
  readonly gammaRe: Float64Array;
  readonly gammaIm: Float64Array;
  readonly impedanceRe: Float64Array;
  readonly impedanceIm: Float64Array;
};

/**
 * Works out a cable at the given frequencies (all above zero).
 *
 * Conductor: R(1 + j) in series with jωL0. Dielectric: constant loss tangent, C0·(jω/ω0)^(−m).
 *
 * @source Formulas of design section 4; Wigington & Nahman, Proc. IRE 45(2), 1957 (skin effect); Djordjević et
 * al., IEEE Trans. EMC 43(4), 2001 (causal dielectric).
 */
export function coaxMedium(cable: CableFigures, temperatureC: number, frequencyHz: Float64Array): Medium {
  const n = frequencyHz.length;
  const medium: Medium = {
    gammaRe: new Float64Array(n),
    gammaIm: new Float64Array(n),
    impedanceRe: new Float64Array(n),
    impedanceIm: new Float64Array(n),
  };
  const velocity = cable.velocityFactor * SPEED_OF_LIGHT_M_S;
  const inductancePerM = cable.z0Ohm / velocity;
  const capacitancePerM = 1 / (cable.z0Ohm * velocity);
  const copper = Math.sqrt(1 + 0.0039 * (temperatureC - 20));
  for (let k = 0; k < n; k++) {
    const omega = 2 * Math.PI * frequencyHz[k]!;
    const megahertz = frequencyHz[k]! / 1e6;
    const conductorNp = (cable.k1 * Math.sqrt(megahertz) * copper) / (100 * DB_IN_NEPER);
    const dielectricNp = (cable.k2 * megahertz) / (100 * DB_IN_NEPER);
    const skinOhm = 2 * cable.z0Ohm * conductorNp;
    const lossAngle = Math.atan((2 * velocity * dielectricNp) / omega);
    const exponent = (2 / Math.PI) * lossAngle;

    const seriesSize = Math.hypot(skinOhm, omega * inductancePerM + skinOhm);
    const seriesAngle = Math.atan2(omega * inductancePerM + skinOhm, skinOhm);
    const shuntSize = omega * capacitancePerM * (omega / (2 * Math.PI * REFERENCE_HZ)) ** -exponent;
    const shuntAngle = (Math.PI / 2) * (1 - exponent);

    const gammaSize = Math.sqrt(seriesSize * shuntSize);
    const gammaAngle = (seriesAngle + shuntAngle) / 2;
    const impedanceSize = Math.sqrt(seriesSize / shuntSize);
    const impedanceAngle = (seriesAngle - shuntAngle) / 2;
    medium.gammaRe[k] = gammaSize * Math.cos(gammaAngle);
    medium.gammaIm[k] = gammaSize * Math.sin(gammaAngle);
    medium.impedanceRe[k] = impedanceSize * Math.cos(impedanceAngle);
    medium.impedanceIm[k] = impedanceSize * Math.sin(impedanceAngle);
  }
  return medium;
}

/** A lossless medium, for the short air and plastic inside a connector, and for ideal test lines. */
export function losslessMedium(z0Ohm: number, velocityFactor: number, frequencyHz: Float64Array): Medium {
  return coaxMedium({ z0Ohm, velocityFactor, k1: 0, k2: 0 }, 20, frequencyHz);
}

/** One-way loss of a described cable in dB, by k1·√f + k2·f at 20 °C. */
export function tableLossDb(cable: CableFigures, lengthM: number, frequencyHz: number): number {
  const megahertz = frequencyHz / 1e6;
  return ((cable.k1 * Math.sqrt(megahertz) + cable.k2 * megahertz) * lengthM) / 100;
}

/** Fourier resolution c·vf/(2·B) of a sweep in a cable, m. @source references.md section 6. */
export function fourierResolutionM(cable: CableFigures, frequencyHz: Float64Array): number {
  const spanHz = frequencyHz[frequencyHz.length - 1]! - frequencyHz[0]!;
  return (SPEED_OF_LIGHT_M_S * cable.velocityFactor) / (2 * spanHz);
}

/** Longest distance before echoes fold, c·vf/(2·Δf) with the widest step of the sweep, m. */
export function unambiguousM(cable: CableFigures, frequencyHz: Float64Array): number {
  let widestHz = 0;
  for (let k = 1; k < frequencyHz.length; k++)
    widestHz = Math.max(widestHz, frequencyHz[k]! - frequencyHz[k - 1]!);
  return (SPEED_OF_LIGHT_M_S * cable.velocityFactor) / (2 * widestHz);
}
