/**
 * Jobs on a worker thread, so that the interface stays alive while they run.
 *
 * One thread, started at the first job and kept; cancelling a running job ends the thread and the next job starts
 * another, because a computation cannot be talked out of what it is doing.
 */
import { Worker } from 'node:worker_threads';
import { fail, type Outcome } from '../outcome.ts';
import type { JobAnswer, JobRequest } from './serve-jobs.ts';
import type { SolveProgress } from './solver.ts';

/** A job that was started. */
export type Job<Value> = { readonly result: Promise<Outcome<Value>>; cancel(): void };

export type JobThread<Request, Value> = {
  /** Starts a job; one that still runs is cancelled. */
  run(request: Request, onProgress: (progress: SolveProgress) => void): Job<Value>;
  /** Frees the thread; nothing runs after that. */
  close(): void;
};

type Running<Value> = {
  readonly id: number;
  readonly onProgress: (progress: SolveProgress) => void;
  readonly settle: (outcome: Outcome<Value>) => void;
  readonly reject: (error: Error) => void;
};

/**
 * Creates the thread.
 *
 * @param worker URL of a built worker that serves such jobs.
 * @param whatIs What a job is, for problems: "the analysis".
 */
export function createJobThread<Request, Value>(worker: URL, whatIs: string): JobThread<Request, Value> {
  let thread: Worker | null = null;
  let running: Running<Value> | null = null;
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
    started.on('message', (answer: JobAnswer<Value>) => {
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
    old.settle(cancelled(whatIs));
  }

  return {
    run(request, onProgress) {
      if (closed) throw new Error('the thread is closed');
      cancelRunning();
      const id = ++lastId;
      const result = new Promise<Outcome<Value>>((settle, reject) => {
        running = { id, onProgress, settle, reject };
      });
      thread ??= startThread();
      thread.postMessage({ id, request } satisfies JobRequest<Request>);
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

/** What a job that was cancelled settles as. */
export function cancelled(whatIs: string): Outcome<never> {
  return fail({ code: 'cancelled', what: `${whatIs} was cancelled`, mend: 'start it again' });
}
