/**
 * What the program knows of a rectangular waveguide, and what its dominant mode (TE10) does in air.
 *
 * Nothing travels at or below the cut-off: the functions here refuse such frequencies, and `usable-band.ts` says which
 * points of a sweep to leave out before.
 */
import type { Notice } from '../outcome.ts';
import type { FigureSource } from './cable.ts';
import { DB_PER_NEPER, SPEED_OF_LIGHT } from './constants.ts';
import { conductorTemperatureFactor } from './loss.ts';

/** The numbers that the physics needs of a guide. */
export type Guide = {
  readonly id: string;
  readonly name: string;
  /** Inner width (the broad wall), mm. */
  readonly aMm: number;
  /** 1σ-like tolerance of the width between pieces of the type, mm. */
  readonly aToleranceMm: number;
  /** Inner height, mm; null for an inline guide, which gives its loss instead. */
  readonly bMm: number | null;
  /** Conductivity of the walls, S/m; null where the loss is given instead. */
  readonly conductivitySPerM: number | null;
  /** Loss taken as constant over the band, dB per 100 m at 20 °C; null where it follows from the walls. */
  readonly lossDbPer100m: number | null;
  /** Recommended band, MHz; null for an inline guide. */
  readonly bandMHz: readonly [number, number] | null;
};

/** The figures of a table entry, each of which carries its source. */
export const GUIDE_FIGURES = [
  'aMm',
  'aToleranceMm',
  'bMm',
  'conductivitySPerM',
  'lossDbPer100m',
  'bandMHz',
] as const;

export type GuideFigure = (typeof GUIDE_FIGURES)[number];

/** A guide of the table: what the physics needs, and what people ask of it. */
export type GuideEntry = Guide & {
  /** Other names under which it is found. */
  readonly aliases: readonly string[];
  /** Family, as its file names it. */
  readonly family: string;
  /** File that the entry was read from. */
  readonly file: string;
  /** What to know before trusting the figures. */
  readonly note: string | null;
  /** Source of each figure that is not null. */
  readonly sources: Readonly<Partial<Record<GuideFigure, FigureSource>>>;
};

/**
 * Tolerance of a guide's width where a file gives none, as a part of it: about what drawn tube is held to.
 *
 * @source EIA RS-261-B (0.004 in of 1.372 in for WR-137); from memory.
 */
export const USUAL_WIDTH_TOLERANCE = 0.003;

/** Wave impedance of free space, Ω. @source CODATA 2018. */
const FREE_SPACE_OHM = 376.730_313_668;
/** Permeability of free space, H/m. @source CODATA 2018. */
const PERMEABILITY = 1.256_637_062_12e-6;

/** The size of a guide, without its walls. */
export type GuideSize = Pick<Guide, 'aMm' | 'bMm'>;

/**
 * Cut-off frequency of TE10, Hz: c/2a.
 *
 * @source Pozar, Microwave Engineering, 4th ed., section 3.3.
 */
export function guideCutoffHz(guide: Pick<Guide, 'aMm'>): number {
  return SPEED_OF_LIGHT / (2 * guide.aMm * 1e-3);
}

/**
 * Cut-off frequency of the next mode, Hz: c/a (TE20), or c/2b (TE01) where the guide is higher than half its width.
 * Above it a guide carries two modes at once, and one β no longer describes it.
 *
 * @source Pozar, 4th ed., section 3.3.
 */
export function guideNextModeHz(guide: GuideSize): number {
  const twice = 2 * guideCutoffHz(guide);
  return guide.bMm === null ? twice : Math.min(twice, SPEED_OF_LIGHT / (2 * guide.bMm * 1e-3));
}

/**
 * Phase constant β = (2π/c)·√(f² − fc²), rad/m.
 *
 * @throws RangeError At or below the cut-off.
 * @source Pozar, 4th ed., section 3.3.
 */
export function guidePhaseRadPerM(guide: Pick<Guide, 'aMm'>, frequencyHz: number): number {
  const cutoffHz = cutoffBelow(guide, frequencyHz);
  // (f − fc)(f + fc) keeps its digits close to the cut-off, where f² − fc² would lose them.
  return (2 * Math.PI * Math.sqrt((frequencyHz - cutoffHz) * (frequencyHz + cutoffHz))) / SPEED_OF_LIGHT;
}

/**
 * Wavelength along the guide λg = 2π/β, m.
 *
 * @throws RangeError At or below the cut-off.
 */
export function guideWavelengthM(guide: Pick<Guide, 'aMm'>, frequencyHz: number): number {
  return (2 * Math.PI) / guidePhaseRadPerM(guide, frequencyHz);
}

/**
 * Group delay 1/vg = 1/(c·√(1 − (fc/f)²)), one way, s/m: falls from infinity at the cut-off.
 *
 * @throws RangeError At or below the cut-off.
 * @source Pozar, 4th ed., section 3.3 (vp·vg = c²).
 */
export function guideGroupDelaySPerM(guide: Pick<Guide, 'aMm'>, frequencyHz: number): number {
  const part = cutoffBelow(guide, frequencyHz) / frequencyHz;
  return 1 / (SPEED_OF_LIGHT * Math.sqrt((1 - part) * (1 + part)));
}

/**
 * Attenuation by the walls, one way, dB per 100 m:
 * α = Rs·(2bπ² + a³k²)/(a³·b·β·k·η), Rs = √(πfμ/σ), grown with the metal's temperature as a coax conductor's loss;
 * or the guide's own constant figure, grown in the same way.
 *
 * Smooth walls without flanges: a run on a tower loses some per cent more, as its sweep will tell.
 *
 * @throws RangeError At or below the cut-off.
 * @source Pozar, 4th ed., section 3.3, eq. 3.96.
 */
export function guideLossDbPer100m(guide: Guide, frequencyHz: number, temperatureC: number): number {
  const beta = guidePhaseRadPerM(guide, frequencyHz);
  const warmth = conductorTemperatureFactor(temperatureC);
  if (guide.lossDbPer100m !== null) return guide.lossDbPer100m * warmth;
  if (guide.bMm === null || guide.conductivitySPerM === null)
    throw new TypeError(`guide ${guide.id} has neither walls nor a loss`);
  const a = guide.aMm * 1e-3;
  const b = guide.bMm * 1e-3;
  const k = (2 * Math.PI * frequencyHz) / SPEED_OF_LIGHT;
  const surfaceOhm = Math.sqrt((Math.PI * frequencyHz * PERMEABILITY) / guide.conductivitySPerM);
  const npPerM =
    (surfaceOhm * (2 * b * Math.PI ** 2 + a ** 3 * k * k)) / (a ** 3 * b * beta * k * FREE_SPACE_OHM);
  return npPerM * 100 * DB_PER_NEPER * warmth;
}

/** What a sweep can do on a guide, before any window. */
export type GuideReach = {
  /** Distance between two echoes that the band just tells apart, π/(β2 − β1), m; a window widens it. */
  readonly resolutionM: number;
  /** Distance up to which echoes do not fold, (N − 1)/(2·B·τg) with the slowest group delay τg of the band, m. */
  readonly unambiguousM: number;
};

/**
 * Reach of an even sweep on one guide.
 *
 * @param sweep Start above the cut-off and below stop; two points or more.
 * @throws RangeError At or below the cut-off, with an empty band, or with one point.
 * @source Sampling theorem, with β in the place of ω/v.
 */
export function guideReach(
  guide: Pick<Guide, 'aMm'>,
  sweep: { readonly startHz: number; readonly stopHz: number; readonly points: number },
): GuideReach {
  const { startHz, stopHz, points } = sweep;
  if (!(stopHz > startHz && points >= 2))
    throw new RangeError(`no reach of ${points} points from ${startHz} to ${stopHz} Hz`);
  return {
    resolutionM: Math.PI / (guidePhaseRadPerM(guide, stopHz) - guidePhaseRadPerM(guide, startHz)),
    unambiguousM: (points - 1) / (2 * (stopHz - startHz) * guideGroupDelaySPerM(guide, startHz)),
  };
}

/**
 * Change of β with the guide's width, ∂β/∂ln a = (2π/c)²·fc²/β, rad/m.
 *
 * A tube that is off its width by a ten-thousandth is nearly all delay to a sweep, but what is left turns the phase at
 * which an echo comes back by the more the farther it has gone (of WR-137, 10 m out, by about a sixth of a radian):
 * enough to take a resistance for a reactance. Tubes of one lot share it, so a fit can find it.
 *
 * @throws RangeError At or below the cut-off.
 * @source The derivative of β, Pozar, 4th ed., section 3.3.
 */
export function guidePhasePerWidth(guide: Pick<Guide, 'aMm'>, frequencyHz: number): number {
  const beta = guidePhaseRadPerM(guide, frequencyHz);
  const cutoffWave = Math.PI / (guide.aMm * 1e-3);
  return (cutoffWave * cutoffWave) / beta;
}

/**
 * Relative tolerance of the mean group velocity over a band that the tolerance of the width brings: what a velocity
 * factor's tolerance is to a cable.
 *
 * @param startHz Above the cut-off. @param stopHz Above start.
 */
export function guideVelocitySpread(
  guide: Pick<Guide, 'aMm' | 'aToleranceMm'>,
  startHz: number,
  stopHz: number,
): number {
  // β2 − β1 over a fixed band is the mean delay.
  const delay = guidePhaseRadPerM(guide, stopHz) - guidePhaseRadPerM(guide, startHz);
  const change = guidePhasePerWidth(guide, startHz) - guidePhasePerWidth(guide, stopHz);
  return ((change / delay) * guide.aToleranceMm) / guide.aMm;
}

/**
 * Says so when a sweep leaves a guide's recommended band.
 *
 * @param startHz Lowest frequency used. @param stopHz Highest frequency used.
 * @returns Null within the band, and for a guide that names none.
 */
export function outsideGuideBand(guide: Guide, startHz: number, stopHz: number): Notice | null {
  const nextHz = guideNextModeHz(guide);
  if (stopHz > nextHz)
    return {
      code: 'guide-modes',
      what:
        `above ${megahertz(nextHz)} MHz ${guide.name} carries a second mode, which a sweep mixes with the first: ` +
        'distances from there are doubtful',
    };
  if (guide.bandMHz === null) return null;
  const [lowMHz, highMHz] = guide.bandMHz;
  const below = startHz < lowMHz * 1e6;
  const above = stopHz > highMHz * 1e6;
  if (!below && !above) return null;
  const where = below && above ? 'outside it' : below ? 'below it' : 'above it';
  return {
    code: 'guide-band',
    what:
      `${guide.name} is meant for ${lowMHz}–${highMHz} MHz; ${where} ` +
      (below ? 'its delay and loss rise steeply towards the cut-off' : 'its next mode comes near'),
  };
}

/** The cut-off, once a frequency is known to lie above it. */
function cutoffBelow(guide: Pick<Guide, 'aMm'>, frequencyHz: number): number {
  const cutoffHz = guideCutoffHz(guide);
  if (!(frequencyHz > cutoffHz))
    throw new RangeError(`a guide ${guide.aMm} mm wide carries nothing at ${frequencyHz} Hz`);
  return cutoffHz;
}

function megahertz(frequencyHz: number): number {
  return Math.round(frequencyHz / 1e6);
}
