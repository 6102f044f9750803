/** The worker's side of jobs: requests in, progress and outcomes out, all of it plain data. */
import { parentPort } from 'node:worker_threads';
import type { Outcome } from '../outcome.ts';
import type { SolveProgress } from './solver.ts';

export type JobRequest<Request> = { readonly id: number; readonly request: Request };

export type JobAnswer<Value> =
  | { readonly id: number; readonly type: 'progress'; readonly progress: SolveProgress }
  | { readonly id: number; readonly type: 'done'; readonly outcome: Outcome<Value> }
  /** A bug: the words of what was thrown. */
  | { readonly id: number; readonly type: 'threw'; readonly what: string };

/** Progress is told at most this often, ms. */
const PROGRESS_EVERY_MS = 100;

/** Does every job that comes, one after another. */
export function serveJobs<Request, Value>(
  doJob: (request: Request, onProgress: (progress: SolveProgress) => void) => Outcome<Value>,
): void {
  parentPort?.on('message', ({ id, request }: JobRequest<Request>) => {
    let lastToldMs = Number.NEGATIVE_INFINITY;
    const tell = (answer: JobAnswer<Value>): void => parentPort?.postMessage(answer);
    try {
      const outcome = doJob(request, (progress) => {
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
}
