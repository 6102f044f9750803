/** A piece of an analysis' trace drawn anew: another window, another zoom, loss undone or not. */
import { describedLengthM } from '../line/line.ts';
import { sectionMedium } from '../line/medium.ts';
import { type MediumRun, runOfMedia } from '../line/medium-run.ts';
import {
  type DistanceTrace,
  planApparentTrace,
  planCorrectedTrace,
  type TracePlan,
} from '../locate/distance-trace.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { parseWindow } from '../numerics/window.ts';
import type { Analysis } from './analysis.ts';

export type TraceView = {
  readonly fromM: number;
  readonly toM: number;
  /** Evenly spaced from `fromM` to `toM`, both included; at least 2. */
  readonly points: number;
  readonly windowSpec: string;
  /** True: loss and dispersion of the described sections undone. */
  readonly corrected: boolean;
};

/** Plans kept of one analysis: the views that a user goes back and forth between. */
const MOST_PLANS = 8;

type Ready = {
  readonly frequencyHz: Float64Array;
  readonly gamma: ComplexArray;
  readonly run: MediumRun;
  readonly plans: Map<string, TracePlan>;
};

const ready = new WeakMap<Analysis, Ready>();

/**
 * The trace of an analysis over a piece of the line, in the analysis' own scaled distances.
 *
 * Plans are kept with the analysis they belong to, so that going back to a view costs one transform.
 *
 * @throws RangeError When there are fewer than 2 points, `toM` is not beyond `fromM`, or the window is unknown.
 */
export function traceWindow(analysis: Analysis, view: TraceView): DistanceTrace {
  let of = ready.get(analysis);
  if (!of) {
    of = prepare(analysis);
    ready.set(analysis, of);
  }
  const key = JSON.stringify([view.fromM, view.toM, view.points, view.windowSpec, view.corrected]);
  let plan = of.plans.get(key);
  if (!plan) plan = planOf(of, view);
  // A plan that is used moves to the end; the one longest unused stands first and goes.
  of.plans.delete(key);
  of.plans.set(key, plan);
  for (const oldest of of.plans.keys()) {
    if (of.plans.size <= MOST_PLANS) break;
    of.plans.delete(oldest);
  }
  return plan.trace(of.gamma);
}

function planOf(of: Ready, view: TraceView): TracePlan {
  const window = parseWindow(view.windowSpec);
  if (!window.ok) throw new RangeError(`not a window: ${view.windowSpec}`);
  const plan = view.corrected ? planCorrectedTrace : planApparentTrace;
  return plan({
    frequencyHz: of.frequencyHz,
    run: of.run,
    window: window.value,
    fromM: view.fromM,
    toM: view.toM,
    points: view.points,
  });
}

/** The line's media per scaled metre, at the frequencies above 0 (the medium is not known at 0). */
function prepare(analysis: Analysis): Ready {
  const { sweep, line, solution } = analysis;
  const first = sweep.frequencyHz[0] === 0 ? 1 : 0;
  const frequencyHz = sweep.frequencyHz.subarray(first);
  const media = line.sections.map((section) => {
    const medium = sectionMedium(section, frequencyHz, {
      temperatureC: line.temperatureC,
      z0Ohm: sweep.portOhm,
    });
    const perScaledM = (values: Float64Array): Float64Array => values.map((v) => v / solution.distanceScale);
    return { ...medium, gamma: { re: perScaledM(medium.gamma.re), im: perScaledM(medium.gamma.im) } };
  });
  return {
    frequencyHz,
    gamma: { re: sweep.gamma.re.subarray(first), im: sweep.gamma.im.subarray(first) },
    run: runOfMedia(media, sectionLengthsM(analysis)),
    plans: new Map(),
  };
}

/** Described lengths; the last one, where it is unknown, reaches to the end that was found. */
function sectionLengthsM({ line, solution }: Analysis): number[] {
  if (describedLengthM(line) !== null) return line.sections.map((section) => section.lengthM ?? 0);
  let before = 0;
  return line.sections.map((section) => {
    const lengthM = section.lengthM ?? Math.max(0, solution.lengthM - before);
    before += lengthM;
    return lengthM;
  });
}
