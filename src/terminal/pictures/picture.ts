/** What a view draws on the distance axis, before it becomes characters. */
import type { ChartSpec } from '../../plot/chart.ts';
import type { Run } from '../../plot/run.ts';

/** A view's picture with the words that belong to it. */
export type Picture = {
  /** Null when there is nothing to draw. */
  readonly chart: ChartSpec | null;
  /** Said in place of the chart when there is none, a paragraph each. */
  readonly instead: readonly string[];
  /** What the picture reads at the cursor: "−21.1 dB"; '' for nothing. */
  readonly atCursor: string;
  /** How to read the picture, most wanted first; as many as fit are shown. */
  readonly legend: readonly (readonly Run[])[];
};
