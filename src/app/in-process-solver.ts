/** A solver in the very process that asks: for tests, and where a worker cannot be started. */
import { fail } from '../outcome.ts';
import { analyse } from './analyse.ts';
import type { Solver } from './solver.ts';

/** Creates one; it solves in the next turn of the event loop, and cannot be cancelled once it has begun. */
export function createInProcessSolver(): Solver {
  return {
    solve(request, onProgress) {
      let cancelled = false;
      const result = Promise.resolve().then(() =>
        cancelled
          ? fail({ code: 'cancelled', what: 'the analysis was cancelled', mend: 'start it again' })
          : analyse(request, onProgress),
      );
      return {
        result,
        cancel() {
          cancelled = true;
        },
      };
    },
    close() {},
  };
}
