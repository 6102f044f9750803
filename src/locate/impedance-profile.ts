/** Ohms against distance. */

/** Ohms against distance, with where it comes from. */
export type ImpedanceProfile = {
  readonly distanceM: Float64Array;
  readonly impedanceOhm: Float64Array;
  readonly origin: 'measured' | 'modelled';
};
