/** A sweep as every reader gives it. */
import type { ComplexArray } from '../numerics/complex.ts';

/** What the instrument saved: complex reflection against frequency at the reference plane. */
export type Sweep = {
  /** Strictly rising, Hz; length n ≥ 2. May be uneven. */
  readonly frequencyHz: Float64Array;
  /** Reflection coefficient, length n, relative to `portOhm`. */
  readonly gamma: ComplexArray;
  readonly portOhm: number;
  /** Which port of an n-port file this is, counted from 1. */
  readonly port: number;
  /** How many ports the file holds. */
  readonly ports: number;
  /** File name as given, cleaned; '-' for standard input. */
  readonly file: string;
  /** Forward transmission of a two-port file, when there is one: from this port to the other. */
  readonly transmission?: ComplexArray;
  /** Comment lines of the file, cleaned of control characters, at most the first 200. */
  readonly comments: readonly string[];
};
