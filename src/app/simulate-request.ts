/** What a simulated sweep is asked for with. */
import type { Line } from '../line/line.ts';
import type { Fault } from './fault-text.ts';

export type SimulateRequest = {
  /** Every length known, end known. */
  readonly line: Line;
  readonly faults: readonly Fault[];
  /** Start above 0. */
  readonly range: { readonly startHz: number; readonly stopHz: number; readonly points: number };
  readonly portOhm: number;
  /** Seed of the line as built; null for the ideal line, exactly its description. */
  readonly asBuilt: number | null;
  /** Complex RMS of the noise per point, dB; null for none. */
  readonly noiseDb: number | null;
  /** RMS of the residual directivity, dB; null for none. */
  readonly residueDb: number | null;
  /** Seed of noise and residue. */
  readonly seed: number;
};
