/** Studies on a worker thread. */
import { createJobThread } from './job-thread.ts';
import type { Studies } from './studies.ts';
import type { StudyRequest, StudyResult } from './study.ts';

/**
 * Creates it; the thread starts with the first study.
 *
 * @param worker URL of the built `study-worker.js`.
 */
export function createWorkerStudies(worker: URL): Studies {
  const { run, close } = createJobThread<StudyRequest, StudyResult>(worker, 'the study');
  return { study: run, close };
}
