/** A solver on a worker thread. */
import type { Analysis } from './analysis.ts';
import { createJobThread } from './job-thread.ts';
import type { AnalyseRequest, Solver } from './solver.ts';

/**
 * Creates the solver.
 *
 * @param worker URL of the built `solve-worker.js`.
 */
export function createWorkerSolver(worker: URL): Solver {
  const { run, close } = createJobThread<AnalyseRequest, Analysis>(worker, 'the analysis');
  return { solve: run, close };
}
