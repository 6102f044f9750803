/** The rectangular guides of the scenes, worked out as two plane waves that bounce between the side walls. */
import { DB_IN_NEPER, type Medium } from './coax-medium.ts';

const SPEED_OF_LIGHT_M_S = 299_792_458;
/** @source CODATA 2018, by μ0·c with μ0 = 1.25663706212e-6 H/m. */
const FREE_SPACE_OHM = 376.730313668;
/** Copper, S/m. @source Pozar, 4th ed., appendix F. */
const COPPER_S_PER_M = 5.813e7;
const MM_PER_INCH = 25.4;

export type GuideName = 'WR-229' | 'WR-187' | 'WR-159' | 'WR-137' | 'WR-112' | 'WR-90' | 'WR-75' | 'WR-62';

/** Inner width and height, and the recommended band. */
export type GuideFigures = {
  readonly aM: number;
  readonly bM: number;
  readonly bandHz: readonly [number, number];
};

/** @source references.md section 4 (EIA RS-261-B, IEC 60153-2): sides in inches, bands in GHz. */
export const GUIDES: Readonly<Record<GuideName, GuideFigures>> = {
  'WR-229': size(2.29, 1.145, 3.3, 4.9),
  'WR-187': size(1.872, 0.872, 3.95, 5.85),
  'WR-159': size(1.59, 0.795, 4.9, 7.05),
  'WR-137': size(1.372, 0.622, 5.85, 8.2),
  'WR-112': size(1.122, 0.497, 7.05, 10),
  'WR-90': size(0.9, 0.4, 8.2, 12.4),
  'WR-75': size(0.75, 0.375, 10, 15),
  'WR-62': size(0.622, 0.311, 12.4, 18),
};

function size(aInch: number, bInch: number, fromGHz: number, toGHz: number): GuideFigures {
  return {
    aM: (aInch * MM_PER_INCH) / 1000,
    bM: (bInch * MM_PER_INCH) / 1000,
    bandHz: [fromGHz * 1e9, toGHz * 1e9],
  };
}

/** A piece of guide as it left the works, in ratios to what its type says. */
export type TubeFigures = { readonly width: number; readonly loss: number };

/**
 * TE10 at the given frequencies: each of its two plane waves hits the side walls at an angle whose sine is λ/2a from the
 * axis, so that β = k·cos θ; the transverse wave impedance is that of free space over cos θ. Walls of copper.
 *
 * @param frequencyHz Each above the cut-off.
 * @source Ramo, Whinnery & Van Duzer, Fields and Waves in Communication Electronics, section 8.8 (both, and the wall
 *   loss α = Rs·(1 + 2(b/a)·sin²θ)/(b·η·cos θ)); from memory.
 */
export function guideMedium(
  guide: GuideFigures,
  tube: TubeFigures,
  temperatureC: number,
  frequencyHz: Float64Array,
): Medium {
  const n = frequencyHz.length;
  const aM = guide.aM * tube.width;
  const medium: Medium = {
    gammaRe: new Float64Array(n),
    gammaIm: new Float64Array(n),
    impedanceRe: new Float64Array(n),
    impedanceIm: new Float64Array(n),
  };
  // μ0 = η/c
  const surfacePerRootHz = Math.sqrt((Math.PI * FREE_SPACE_OHM) / SPEED_OF_LIGHT_M_S / COPPER_S_PER_M);
  for (let k = 0; k < n; k++) {
    const wavelengthM = SPEED_OF_LIGHT_M_S / frequencyHz[k]!;
    const sine = wavelengthM / (2 * aM);
    const cosine = Math.cos(Math.asin(sine));
    const surfaceOhm =
      surfacePerRootHz * Math.sqrt(frequencyHz[k]! * (1 + 0.0039 * (temperatureC - 20))) * tube.loss;
    medium.gammaIm[k] = ((2 * Math.PI) / wavelengthM) * cosine;
    medium.gammaRe[k] =
      (surfaceOhm * (1 + (2 * guide.bM * sine * sine) / aM)) / (guide.bM * FREE_SPACE_OHM * cosine);
    medium.impedanceRe[k] = FREE_SPACE_OHM / cosine;
  }
  return medium;
}

/** The guide as its type says. */
export const AS_TYPED: TubeFigures = { width: 1, loss: 1 };

/** One-way loss of a length of guide, dB. */
export function guideLossDb(medium: Medium, lengthM: number): Float64Array {
  return medium.gammaRe.map((alpha) => DB_IN_NEPER * alpha * lengthM);
}

/** Fourier resolution of a sweep in a guide, π/(β2 − β1), m. @source references.md section 4. */
export function guideResolutionM(medium: Medium): number {
  return Math.PI / (medium.gammaIm.at(-1)! - medium.gammaIm[0]!);
}

/** Longest distance before echoes fold: half a turn of β in the widest step of the sweep, m. */
export function guideUnambiguousM(medium: Medium): number {
  let widest = 0;
  for (let k = 1; k < medium.gammaIm.length; k++)
    widest = Math.max(widest, medium.gammaIm[k]! - medium.gammaIm[k - 1]!);
  return Math.PI / widest;
}
