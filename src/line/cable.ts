/** What the program knows of a coax cable. */

/**
 * How a figure came to be known: read in a text, recalled from a text, worked out from others, a habit of
 * the trade, or given by the user's own file without a word on where it comes from.
 */
export const FIGURE_STATUSES = [
  'confirmed',
  'from memory',
  'computed',
  'common practice',
  'as given',
] as const;

export type FigureStatus = (typeof FIGURE_STATUSES)[number];

/** How far a figure can be trusted, and where it was read; the keys are explained in cables/SOURCES.md. */
export type FigureSource = {
  readonly source: string;
  readonly status: FigureStatus;
};

/** One published attenuation point at 20 °C. */
export type AttenuationPoint = { readonly frequencyMHz: number; readonly dbPer100m: number };

/** The numbers that the physics needs of a cable. */
export type Cable = {
  readonly id: string;
  readonly name: string;
  readonly z0Ohm: number;
  /** 1σ-like tolerance of z0 between samples of the type, Ω. */
  readonly z0ToleranceOhm: number;
  readonly velocityFactor: number;
  /** Tolerance of the velocity factor between samples of the type. */
  readonly velocityFactorTolerance: number;
  /** Conductor loss, dB per 100 m per √MHz at 20 °C. */
  readonly k1: number;
  /** Dielectric loss, dB per 100 m per MHz. */
  readonly k2: number;
  /** Band over which k1 and k2 were fitted, MHz; null for an inline cable. */
  readonly fittedBandMHz: readonly [number, number] | null;
  /** Highest frequency of use, MHz; null where unknown. */
  readonly highestFrequencyMHz: number | null;
};

/** The figures of a table entry, each of which carries its source. */
export const CABLE_FIGURES = [
  'z0Ohm',
  'z0ToleranceOhm',
  'velocityFactor',
  'velocityFactorTolerance',
  'k1',
  'k2',
  'fittedBandMHz',
  'worstResidual',
  'outerDiameterMm',
  'bendRadiusOnceMm',
  'bendRadiusRepeatedMm',
  'highestFrequencyMHz',
] as const;

export type CableFigure = (typeof CABLE_FIGURES)[number];

/** A cable of the table: what the physics needs, and what people ask of it. */
export type CableEntry = Cable & {
  /** Other names under which it is found. */
  readonly aliases: readonly string[];
  /** Construction family, as its file names it. */
  readonly family: string;
  /** File that the entry was read from. */
  readonly file: string;
  /** Published points, each with its own source, rising in frequency; empty where only k1 and k2 are given. */
  readonly attenuation: readonly (AttenuationPoint & FigureSource)[];
  /** Fit ÷ point − 1 at its worst point within the fitted band; null without points. */
  readonly worstResidual: number | null;
  readonly outerDiameterMm: number | null;
  /** Smallest radius for bending once, mm. */
  readonly bendRadiusOnceMm: number | null;
  /** Smallest radius for bending again and again, mm. */
  readonly bendRadiusRepeatedMm: number | null;
  /** What to know before trusting the figures. */
  readonly note: string | null;
  /** Source of each figure that is not null. */
  readonly sources: Readonly<Partial<Record<CableFigure, FigureSource>>>;
};

/**
 * Tolerance of z0 where a file gives none, as a part of z0: ±2 Ω of 50 Ω and ±3 Ω of 75 Ω.
 * @source What the braided types of cables/ have; common practice.
 */
export const USUAL_Z0_TOLERANCE = 0.04;

/** Tolerance of the velocity factor of a well described cable, as a part of it. @source common practice. */
export const USUAL_VELOCITY_FACTOR_TOLERANCE = 0.01;
