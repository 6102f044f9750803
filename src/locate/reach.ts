/** What a sweep can do on a line: resolution, unambiguous distance, weakest visible echo at the far end. */
import {
  distanceOfDelay,
  groupDelaySPerM,
  type MediumRun,
  pathTo,
  runLengthM,
  slowestGroupDelaySPerM,
} from '../line/medium-run.ts';
import { quantile } from '../numerics/statistics.ts';
import { createWindow, type WindowSpec } from '../numerics/window.ts';

import type { Sweep } from '../sweep/sweep.ts';
import { planApparentTrace } from './distance-trace.ts';
import { medianStepHz, traceWeights } from './grid-weights.ts';
import { reachesZero } from './low-pass-spectrum.ts';

export type Reach = {
  /** 6 dB width of one echo with the window in use, m; mean over the run. */
  readonly resolutionM: number;
  /** Distance at which echoes fold back, m; an uneven sweep counts with its middle step. */
  readonly unambiguousM: number;
  /**
   * Return loss of the weakest echo at the far end, in itself (the line's loss taken off), that stands clear of the
   * sweep's noise floor, dB.
   */
  readonly weakestReturnLossDb: number;
  /** Where the impedance profile comes from. */
  readonly impedanceProfile: 'measured' | 'modelled' | 'no';
};

export type ReachOptions = {
  readonly sweep: Sweep;
  /** The line at the sweep's frequencies. */
  readonly run: MediumRun;
  readonly window: WindowSpec;
};

/**
 * What a sweep can do on a line.
 *
 * Resolution is c·vf/(2·B) times the window's 6 dB width, with the mean velocity of the run; the unambiguous distance
 * is where the accumulated delay, there and back, reaches 1/Δf. An uneven sweep folds softly; its middle step is taken
 * for Δf.
 *
 * @throws RangeError When the sweep has fewer than two different frequencies.
 * @source Sampling theorem; F. J. Harris, Proc. IEEE 66(1), 1978 (window widths).
 */
export function reachOf({ sweep, run, window }: ReachOptions): Reach {
  const { frequencyHz } = sweep;
  const bandHz = frequencyHz[frequencyHz.length - 1]! - frequencyHz[0]!;
  const delays = groupDelaySPerM(run, frequencyHz);
  const slowest = slowestGroupDelaySPerM(run, frequencyHz);
  const unambiguousM = distanceOfDelay(run, slowest, 1 / medianStepHz(frequencyHz));
  const resolutionM =
    createWindow(window, frequencyHz.length).width6DbBins / (2 * bandHz * meanDelay(run, delays));
  return {
    resolutionM,
    unambiguousM,
    weakestReturnLossDb: weakestAtEndDb(sweep, run, window, { resolutionM, unambiguousM }),
    impedanceProfile: profileOrigin(frequencyHz, run, resolutionM),
  };
}

function meanDelay(run: MediumRun, delays: Float64Array): number {
  const lengthM = runLengthM(run);
  if (lengthM === 0) return delays[0]!;
  let sum = 0;
  for (let i = 0; i < delays.length; i++) sum += delays[i]! * (run.startM[i + 1]! - run.startM[i]!);
  return sum / lengthM;
}

type Distances = Pick<Reach, 'resolutionM' | 'unambiguousM'>;

function profileOrigin(
  frequencyHz: Float64Array,
  run: MediumRun,
  resolutionM: number,
): Reach['impedanceProfile'] {
  if (resolutionM > runLengthM(run)) return 'no';
  return reachesZero(frequencyHz, run) ? 'measured' : 'modelled';
}

/**
 * An echo counts as visible this far above the RMS noise of the trace.
 *
 * @source D. C. Rife, R. R. Boorstyn, IEEE Trans. IT-20(5), 1974: peak searches fail below about 12 to 15 dB.
 */
const VISIBLE_ABOVE_NOISE_DB = 12;

/** A sweep without any noise is a formula; the figure stops here. */
const LARGEST_RETURN_LOSS_DB = 200;

function weakestAtEndDb(sweep: Sweep, run: MediumRun, window: WindowSpec, distances: Distances): number {
  const noise = noisePerPoint(sweep, run, distances);
  const weights = traceWeights(sweep.frequencyHz, window);
  const { attenuation } = pathTo(run, runLengthM(run));
  let noisePower = 0;
  let throughput = 0;
  for (let k = 0; k < weights.length; k++) {
    const through = Math.exp(-4 * attenuation[k]!);
    noisePower += weights[k]! * weights[k]! * through;
    throughput += weights[k]! * through;
  }
  const traceNoise = (noise * Math.sqrt(noisePower)) / throughput;
  const returnLossDb = -20 * Math.log10(traceNoise) - VISIBLE_ABOVE_NOISE_DB;
  return Math.min(returnLossDb, LARGEST_RETURN_LOSS_DB);
}

/** Low side lobes, so that echoes don't pass for noise. */
const NOISE_WINDOW: WindowSpec = { kind: 'blackman-harris' };
const NOISE_CELLS = 1024;
/** A quiet stretch must be this many resolutions long to be trusted. */
const LEAST_QUIET_RESOLUTIONS = 12;
/** Share of cells that count as quiet where the line fills the whole reach. */
const QUIETEST_SHARE = 0.1;

/**
 * RMS noise of one point of a sweep, from the trace where no echo can be: between the end of the line and the distance
 * at which the trace repeats. The median keeps late ghosts out. Where the line fills the reach, the quietest tenth of
 * the whole trace is taken, which can read too high but not too low.
 *
 * @returns Linear, complex RMS.
 */
export function noisePerPoint(sweep: Sweep, run: MediumRun, distances: Distances): number {
  const { resolutionM, unambiguousM } = distances;
  const fromM = 1.03 * runLengthM(run) + 4 * resolutionM;
  const toM = unambiguousM - 4 * resolutionM;
  const hasQuiet = toM - fromM > LEAST_QUIET_RESOLUTIONS * resolutionM;
  const plan = planApparentTrace({
    frequencyHz: sweep.frequencyHz,
    run,
    window: NOISE_WINDOW,
    fromM: hasQuiet ? fromM : 0,
    toM: hasQuiet ? toM : unambiguousM,
    points: NOISE_CELLS,
  });
  const { re, im } = plan.trace(sweep.gamma).value;
  const power = re.map((value, j) => value * value + im[j]! * im[j]!);
  // Power of complex noise is exponential: share p lies below −ln(1 − p) means.
  const share = hasQuiet ? 0.5 : QUIETEST_SHARE;
  const meanPower = quantile(power, share) / -Math.log(1 - share);
  const weights = traceWeights(sweep.frequencyHz, NOISE_WINDOW);
  const gain = weights.reduce((sum, weight) => sum + weight * weight, 0);
  return Math.sqrt(meanPower / gain);
}
