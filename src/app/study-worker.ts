/** Does studies on a worker thread. */
import { serveJobs } from './serve-jobs.ts';
import { doStudy } from './study.ts';

serveJobs(doStudy);
