/** How long a trace takes, apparent and corrected, of 1601 points to 2048 distances over a three-section run. */
import type { MediumRun } from '../../src/line/medium-run.ts';
import { planApparentTrace, planCorrectedTrace, type TraceOptions } from '../../src/locate/distance-trace.ts';
import { CABLE_FIGURES, type CableId } from '../scenes/cable-figures.ts';
import { coaxMedium } from '../scenes/coax-medium.ts';
import { seededDraws } from '../scenes/draws.ts';
import { jointDistances } from '../scenes/run.ts';
import { evenGrid } from '../scenes/sweep-plan.ts';
import { medianMs } from './stopwatch.ts';

export type TraceTimes = {
  /** Planning on every call, as scipy's zoom_fft function does, over one section. */
  readonly apparentMs: number;
  /** Planned once, over one section. */
  readonly apparentPlannedMs: number;
  /** Planning on every call, over three sections. */
  readonly correctedMs: number;
  readonly correctedPlannedMs: number;
};

export const SWEEP_POINTS = 1601;
export const TRACE_POINTS = 2048;

type Piece = { readonly cable: CableId; readonly lengthM: number };

const ONE_SECTION: readonly Piece[] = [{ cable: 'foam-7-8', lengthM: 50 }];
const THREE_SECTIONS: readonly Piece[] = [
  { cable: 'foam-half-extraflex', lengthM: 2 },
  { cable: 'foam-7-8', lengthM: 46 },
  { cable: 'foam-half-extraflex', lengthM: 2 },
];

/** Median times. */
export function traceTimes(repeats: number): TraceTimes {
  const draws = seededDraws('trace times');
  const noise = () => Float64Array.from({ length: SWEEP_POINTS }, () => draws.normal());
  const gamma = { re: noise(), im: noise() };
  const one = traceOptions(ONE_SECTION);
  const three = traceOptions(THREE_SECTIONS);
  const apparent = planApparentTrace(one);
  const corrected = planCorrectedTrace(three);
  return {
    apparentMs: medianMs(repeats, () => planApparentTrace(one).trace(gamma)),
    apparentPlannedMs: medianMs(repeats, () => apparent.trace(gamma)),
    correctedMs: medianMs(Math.ceil(repeats / 4), () => planCorrectedTrace(three).trace(gamma)),
    correctedPlannedMs: medianMs(Math.ceil(repeats / 4), () => corrected.trace(gamma)),
  };
}

function traceOptions(pieces: readonly Piece[]): TraceOptions {
  const frequencyHz = evenGrid('band-limited', SWEEP_POINTS);
  const media = pieces.map(({ cable }) => coaxMedium(CABLE_FIGURES[cable], 20, frequencyHz));
  const run: MediumRun = {
    startM: Float64Array.from(jointDistances(pieces)),
    alpha: media.map((medium) => medium.gammaRe),
    beta: media.map((medium) => medium.gammaIm),
  };
  return { frequencyHz, run, window: { kind: 'kaiser', beta: 6 }, fromM: 0, toM: 55, points: TRACE_POINTS };
}
