/** Size of reflection against distance. */
import type { ComplexArray } from '../numerics/complex.ts';

/** Size of reflection against distance: one complex value per distance. */
export type DistanceTrace = {
  /** Evenly spaced distances from the reference plane, m. */
  readonly distanceM: Float64Array;
  /** Complex trace; |value| = 1 is a full reflection. */
  readonly value: ComplexArray;
  /** True when loss and dispersion of the described sections are undone. */
  readonly corrected: boolean;
};
