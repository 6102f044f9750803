/** Studies in the very process that asks: for tests, and where a worker cannot be started. */
import { cancelled } from './job-thread.ts';
import type { Studies } from './studies.ts';
import { doStudy } from './study.ts';

/** Creates it; a study is done in the next turn of the event loop, and cannot be cancelled once it has begun. */
export function createInProcessStudies(): Studies {
  return {
    study(request, onProgress) {
      let dropped = false;
      const result = Promise.resolve().then(() =>
        dropped ? cancelled('the study') : doStudy(request, onProgress),
      );
      return {
        result,
        cancel() {
          dropped = true;
        },
      };
    },
    close() {},
  };
}
