/**
 * A solver on a worker thread, so that the interface stays alive while the line is solved.
 *
 * One worker, started at the first request and kept; cancelling a running solve ends the thread and the next request
 * starts another, because a solve cannot be talked out of what it is doing.
 */
import { Worker } from 'node:worker_threads';
import { fail, type Outcome } from '../outcome.ts';
import type { Analysis } from './analysis.ts';
import type { WorkerAnswer, WorkerRequest } from './solve-worker.ts';
import type { AnalyseRequest, SolveProgress, Solver } from './solver.ts';

type Running = {
  readonly id: number;
  readonly onProgress: (progress: SolveProgress) => void;
  readonly settle: (outcome: Outcome<Analysis>) => void;
  readonly reject: (error: Error) => void;
};

/**
 * Creates the solver.
 *
 * @param worker URL of the built `solve-worker.js`.
 */
export function createWorkerSolver(worker: URL): Solver {
  let thread: Worker | null = null;
  let running: Running | null = null;
  let lastId = 0;
  let closed = false;

  function stopThread(): void {
    const old = thread;
    thread = null;
    // What a dying thread still has to say is of no interest; its 'error' must not go unheard, though.
    old?.removeAllListeners();
    old?.on('error', () => {});
    void old?.terminate();
  }

  function startThread(): Worker {
    const started = new Worker(worker);
    started.on('message', (answer: WorkerAnswer) => {
      if (!running || answer.id !== running.id) return;
      if (answer.type === 'progress') {
        running.onProgress(answer.progress);
        return;
      }
      const done = running;
      running = null;
      if (answer.type === 'done') done.settle(answer.outcome);
      else done.reject(new Error(answer.what));
    });
    const died = (error: Error): void => {
      if (thread === started) thread = null;
      const lost = running;
      running = null;
      lost?.reject(error);
    };
    started.on('error', died);
    started.on('exit', (code) => died(new Error(`the worker ended with status ${code}`)));
    return started;
  }

  function cancelRunning(): void {
    const old = running;
    running = null;
    if (!old) return;
    stopThread();
    old.settle(fail({ code: 'cancelled', what: 'the analysis was cancelled', mend: 'start it again' }));
  }

  return {
    solve(request: AnalyseRequest, onProgress: (progress: SolveProgress) => void) {
      if (closed) throw new Error('the solver is closed');
      cancelRunning();
      const id = ++lastId;
      const result = new Promise<Outcome<Analysis>>((settle, reject) => {
        running = { id, onProgress, settle, reject };
      });
      thread ??= startThread();
      thread.postMessage({ id, request } satisfies WorkerRequest);
      return {
        result,
        cancel() {
          if (running?.id === id) cancelRunning();
        },
      };
    },
    close() {
      closed = true;
      cancelRunning();
      stopThread();
    },
  };
}
