/** One free number of a model: what every part of a translation is made of. */

/** One free number of the model. */
export type Parameter = {
  readonly name: string;
  readonly get: () => number;
  readonly set: (value: number) => void;
  /** Standard deviation of an independent prior around `mean`; null for none (or for the joint boundary prior). */
  readonly sigma: number | null;
  readonly mean: number;
  /** True where the prior grows faster than a Gaussian: what is sound has limits, and beyond them it is a fault. */
  readonly stiff?: boolean;
  /** Largest change in one step of the search. */
  readonly stepLimit: number;
  readonly minimum: number;
  readonly maximum: number;
  /** Index of the boundary when the parameter is one, for the joint prior. */
  readonly boundary: number | null;
  /** Lump that the parameter belongs to. */
  readonly lump: number | null;
};
