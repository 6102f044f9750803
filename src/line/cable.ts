/** What the program knows of a coax cable. */

/** How far a figure can be trusted, and where it was read. */
export type FigureSource = {
  readonly source: string;
  readonly status: 'confirmed' | 'from memory' | 'computed' | 'common practice';
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
