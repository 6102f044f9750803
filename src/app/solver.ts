/** How a front door asks for an analysis without knowing where it runs. */
import type { Line } from '../line/line.ts';
import type { Outcome } from '../outcome.ts';
import type { Analysis } from './analysis.ts';

/** Everything one analysis needs, as plain data that crosses a worker whole. */
export type AnalyseRequest = {
  /** File name as given; '-' for standard input. */
  readonly sweepFile: string;
  readonly sweepBytes: Uint8Array;
  readonly line: Line;
  /** False when only a cable type was given. */
  readonly lineDescribed: boolean;
  /** Window by name, for example `kaiser:6`. */
  readonly windowSpec: string;
  /** Port of an n-port file, counted from 1; null for the first. */
  readonly port: number | null;
  /** How far the reference plane lies from the instrument, m, toward the line. */
  readonly offsetM: number;
  /** True leaves the impedance profile out, which costs as much again as a sound line's solve. */
  readonly skipImpedance?: boolean;
  /** Sweeps of the three standards that correct the sweep first; null for a corrected sweep. */
  readonly standards: null | {
    readonly open: Uint8Array;
    readonly short: Uint8Array;
    readonly load: Uint8Array;
  };
};

/** How far a solve has come. */
export type SolveProgress = {
  /** What is being done, in words: "reading the sweep", "looking for echoes". */
  readonly stage: string;
  /** 0 at the start, 1 at the end. */
  readonly fraction: number;
};

/** Runs analyses, one at a time. */
export interface Solver {
  /** Starts one. `cancel` ends it early: its result then settles as a failure or never matters to the caller. */
  solve(
    request: AnalyseRequest,
    onProgress: (progress: SolveProgress) => void,
  ): { readonly result: Promise<Outcome<Analysis>>; cancel(): void };
  /** Frees what it holds; nothing is solved after that. */
  close(): void;
}
