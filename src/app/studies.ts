/** Where studies are done, without whoever asks knowing. */
import type { Job } from './job-thread.ts';
import type { SolveProgress } from './solver.ts';
import type { StudyRequest, StudyResult } from './study.ts';

/** Does studies, one at a time: a new one takes the place of one that runs. */
export interface Studies {
  study(request: StudyRequest, onProgress: (progress: SolveProgress) => void): Job<StudyResult>;
  /** Frees what it holds; nothing is studied after that. */
  close(): void;
}
