/** No verb: the workspace on a terminal, the located echoes as text anywhere else. */
import type { Analysis } from '../app/analysis.ts';
import { bundledPath } from '../app/bundled.ts';
import { readBytes } from '../app/files.ts';
import type { ColourSet } from '../app/settings.ts';
import type { AnalyseRequest, Solver } from '../app/solver.ts';
import { type TraceView, traceWindow } from '../app/trace-view.ts';
import type { Cable } from '../line/cable.ts';
import type { DistanceTrace } from '../locate/distance-trace.ts';
import type { Notice, Outcome } from '../outcome.ts';
import type { GlyphSet } from '../plot/glyph-sets.ts';
import type { Units } from '../plot/quantity-text.ts';
import { CAUTIONS, type Cautions } from '../report/cautions.ts';
import type { ExitStatus, Io } from './io.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { type Prepared, prepareRequest } from './request.ts';

/** Sample that is shown when no sweep is named. */
const DEMO_SWEEP = 'samples/north-1-later.s1p';

/** What the workspace is given, apart from the process it runs in. */
export type WorkspaceInput = {
  readonly stdin: NodeJS.ReadStream;
  readonly stdout: NodeJS.WriteStream;
  readonly env: Readonly<Record<string, string | undefined>>;
  readonly initial: AnalyseRequest;
  /** What was decided without being asked while the request was put together. */
  readonly notices: readonly Notice[];
  readonly units: Units;
  readonly colours: ColourSet | null;
  readonly glyphs: GlyphSet;
  readonly solver: Solver;
  readonly files: { readSweep(file: string): Promise<Outcome<Uint8Array>> };
  readonly traceWindow: (analysis: Analysis, view: TraceView) => DistanceTrace;
  readonly cables: readonly Cable[];
  readonly cautions: Cautions;
};

/** Opens the workspace and comes back when it is left. */
export type OpenWorkspace = (input: WorkspaceInput) => Promise<void>;

/**
 * Runs it. Either way the status is 0 when the sweep could be analysed: a workspace judges nothing.
 *
 * @param loadWorkspace Loads the terminal floor; called only where standard input and output are a terminal.
 */
export async function runWorkspace(
  invocation: Invocation,
  io: Io,
  loadWorkspace: () => Promise<OpenWorkspace>,
): Promise<ExitStatus> {
  const interactive = io.stdout.isTTY === true && io.stdin.isTTY === true;
  const loading = interactive ? loadWorkspace() : null;
  const prepared = await prepareRequest(invocation, invocation.inputs[0] ?? bundledPath(DEMO_SWEEP), io);
  if (!prepared.ok) return printProblems(io, prepared.problems);
  if (!loading) return printEchoes(prepared.value, prepared.notices, io);
  const { request, settings, cables } = prepared.value;
  const solver = await createSolver();
  try {
    const open = await loading;
    await open({
      stdin: io.stdin,
      stdout: io.stdout,
      env: settings.colour ? io.env : { ...io.env, NO_COLOR: '1' },
      initial: request,
      notices: prepared.notices,
      units: settings.units,
      colours: settings.colours,
      glyphs: settings.plot,
      solver,
      files: { readSweep: (file) => readBytes(file) },
      traceWindow,
      cables: cables.entries,
      cautions: CAUTIONS,
    });
  } finally {
    solver.close();
  }
  return 0;
}

async function printEchoes(
  { request, settings }: Prepared,
  notices: readonly Notice[],
  io: Io,
): Promise<ExitStatus> {
  const [{ analyse }, { printAnalysis }] = await Promise.all([
    import('../app/analyse.ts'),
    import('./locate.ts'),
  ]);
  const outcome = analyse(request);
  if (!outcome.ok) return printProblems(io, outcome.problems);
  await printAnalysis(outcome.value, settings, [...notices, ...outcome.notices], io);
  return 0;
}

/** The built program solves on a worker thread; Node 20 cannot start one from TypeScript. */
async function createSolver(): Promise<Solver> {
  if (import.meta.url.endsWith('.ts')) {
    const { createInProcessSolver } = await import('../app/in-process-solver.ts');
    return createInProcessSolver();
  }
  const { createWorkerSolver } = await import('../app/worker-solver.ts');
  return createWorkerSolver(new URL('./solve-worker.js', import.meta.url));
}
