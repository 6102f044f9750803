/** What the workspace is handed from outside: streams, the first question, and everyone who can answer. */
import type { Analysis } from '../app/analysis.ts';
import type { ColourSet } from '../app/settings.ts';
import type { AnalyseRequest, Solver } from '../app/solver.ts';
import type { Cable } from '../line/cable.ts';
import type { DistanceTrace } from '../locate/distance-trace.ts';
import type { Notice, Outcome } from '../outcome.ts';
import type { GlyphSet } from '../plot/glyph-sets.ts';
import type { Units } from '../plot/quantity-text.ts';

/** Which piece of the trace is wanted, and how. */
export type TraceView = {
  readonly fromM: number;
  readonly toM: number;
  /** Evenly spaced from `fromM` to `toM`, both included; at least 2. */
  readonly points: number;
  readonly windowSpec: string;
  /** True: loss and dispersion of the described sections undone. */
  readonly corrected: boolean;
};

/** Which piece of the trace is wanted before the line is solved. */
export type LookView = Pick<TraceView, 'fromM' | 'toM' | 'points'>;

/** Draws a piece of an analysis' trace anew. */
export type TraceWindow = (analysis: Analysis, view: TraceView) => DistanceTrace;

/** What people must be told before they connect anything. */
export type Cautions = {
  /** The gist in one line. */
  readonly short: string;
  /** The whole text, a paragraph each. */
  readonly paragraphs: readonly string[];
};

/** How files are reached. */
export interface FileAccess {
  /** The bytes of a sweep file, read anew. */
  readSweep(file: string): Promise<Outcome<Uint8Array>>;
}

/** The parts of the running process that the workspace needs: signals, and stopping itself for the shell. */
export type Host = Pick<NodeJS.Process, 'on' | 'off' | 'kill' | 'pid'>;

export type WorkspaceConfig = {
  readonly stdin: NodeJS.ReadStream;
  readonly stdout: NodeJS.WriteStream;
  readonly env: Readonly<Record<string, string | undefined>>;
  readonly host: Host;
  /** What to open; null shows how to open something. */
  readonly initial: AnalyseRequest | null;
  /** What was decided without being asked while the first question was put together. */
  readonly notices?: readonly Notice[];
  readonly units: Units;
  /** Set of colours; null leaves it to the terminal. */
  readonly colours: ColourSet | null;
  readonly glyphs: GlyphSet;
  readonly solver: Solver;
  readonly files: FileAccess;
  readonly traceWindow: TraceWindow;
  /** Cables that can be chosen in place of the described one. */
  readonly cables: readonly Cable[];
  readonly cautions: Cautions;
};
