/** Analysis: everything one run concluded; plain data, so that it crosses a worker whole. */
import type { Finding } from '../assess/finding.ts';
import type { Line } from '../line/line.ts';
import type { DistanceTrace } from '../locate/distance-trace.ts';
import type { Severity } from '../locate/echo.ts';
import type { ImpedanceProfile } from '../locate/impedance-profile.ts';
import type { Reach } from '../locate/reach.ts';
import type { Solution } from '../locate/solution.ts';
import type { Notice } from '../outcome.ts';
import type { Sweep } from '../sweep/sweep.ts';

export type Analysis = {
  readonly sweep: Sweep;
  /** The line as used: description with overrides applied. */
  readonly line: Line;
  /** False when only a cable type was given. */
  readonly lineDescribed: boolean;
  readonly reach: Reach;
  /** Corrected trace over the line with the chosen window, for a first look. */
  readonly trace: DistanceTrace;
  /** Null when reach says 'no', or when the request left it out. */
  readonly impedance: ImpedanceProfile | null;
  readonly solution: Solution;
  /** Severity of each echo, same order as `solution.echoes`. */
  readonly severities: readonly Severity[];
  /** Place of each echo in words, same order. */
  readonly places: readonly string[];
  readonly findings: readonly Finding[];
  readonly notices: readonly Notice[];
};
