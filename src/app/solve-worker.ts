/** Runs analyses on a worker thread. */
import { analyse } from './analyse.ts';
import { serveJobs } from './serve-jobs.ts';

serveJobs(analyse);
