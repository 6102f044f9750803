/** Runs analyses on a worker thread: requests in, progress and outcomes out, all of it plain data. */
import { parentPort } from 'node:worker_threads';
import type { Outcome } from '../outcome.ts';
import { analyse } from './analyse.ts';
import type { Analysis } from './analysis.ts';
import type { AnalyseRequest, SolveProgress } from './solver.ts';

export type WorkerRequest = { readonly id: number; readonly request: AnalyseRequest };

export type WorkerAnswer =
  | { readonly id: number; readonly type: 'progress'; readonly progress: SolveProgress }
  | { readonly id: number; readonly type: 'done'; readonly outcome: Outcome<Analysis> }
  /** A bug: the words of what was thrown. */
  | { readonly id: number; readonly type: 'threw'; readonly what: string };

/** Progress is told at most this often, ms. */
const PROGRESS_EVERY_MS = 100;

parentPort?.on('message', ({ id, request }: WorkerRequest) => {
  let lastToldMs = Number.NEGATIVE_INFINITY;
  const tell = (answer: WorkerAnswer): void => parentPort?.postMessage(answer);
  try {
    const outcome = analyse(request, (progress) => {
      const nowMs = performance.now();
      if (nowMs - lastToldMs < PROGRESS_EVERY_MS) return;
      lastToldMs = nowMs;
      tell({ id, type: 'progress', progress });
    });
    tell({ id, type: 'done', outcome });
  } catch (error) {
    tell({
      id,
      type: 'threw',
      what: error instanceof Error ? (error.stack ?? error.message) : String(error),
    });
  }
});
