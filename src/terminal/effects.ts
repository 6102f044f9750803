/** What the workspace asks of the world, as data; `perform.ts` does it. */
import type { Analysis } from '../app/analysis.ts';
import type { AnalyseRequest } from '../app/solver.ts';
import type { LookView, TraceView } from './config.ts';

export type Effect =
  /** Solve; whatever was being solved before is dropped. Answers `progress` and `solved` with the id. */
  | { readonly type: 'solve'; readonly id: number; readonly request: AnalyseRequest }
  /** Answers `looked` with the id, when there is a quick first trace of the described line. */
  | { readonly type: 'look'; readonly id: number; readonly request: AnalyseRequest; readonly view: LookView }
  /** Drop whatever is being solved. */
  | { readonly type: 'stopSolving' }
  /** Answers `sweepRead` with the id. */
  | { readonly type: 'readSweep'; readonly id: number; readonly file: string }
  /** Answers `traced` with the id. Only the latest of several wishes need be answered. */
  | { readonly type: 'trace'; readonly id: number; readonly analysis: Analysis; readonly view: TraceView }
  /** Paint every row anew. */
  | { readonly type: 'redraw' }
  /** Give the terminal back to the shell until the job is continued. */
  | { readonly type: 'suspend' }
  | { readonly type: 'quit' };
