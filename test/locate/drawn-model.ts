/** Sweeps of lines with discontinuities by the program's own cascade, and the solver's first picture of such lines. */
import type { Cable } from '../../src/line/cable.ts';
import { createCascade, type Stage } from '../../src/line/cascade.ts';
import { SPEED_OF_LIGHT } from '../../src/line/constants.ts';
import { type LumpedKind, strengthOf } from '../../src/line/discontinuity.ts';
import type { EndModel } from '../../src/line/end.ts';
import type { Line } from '../../src/line/line.ts';
import { coaxMedium, portMedium } from '../../src/line/medium.ts';
import { createFitContext, type FitContext } from '../../src/locate/fit-context.ts';
import { createLineModel, type LineModel } from '../../src/locate/line-model.ts';
import { planTracer, type SearchSettings } from '../../src/locate/residual-floor.ts';
import type { ComplexArray } from '../../src/numerics/complex.ts';
import { createRandom } from '../../src/numerics/random.ts';
import { createWindow, type WindowSpec } from '../../src/numerics/window.ts';
import { lineOf } from './drawn-line.ts';

/** Something put into a run: a kind and its size in Ω, Ω, H or F, at a distance from the port. */
export type PutIn = { readonly kind: LumpedKind; readonly value: number; readonly atM: number };

export type DrawnRun = {
  readonly sections: readonly { readonly cable: Cable; readonly lengthM: number }[];
  readonly put?: readonly PutIn[];
  readonly end: EndModel;
  /** Relative changes of the loss. */
  readonly conductor?: number;
  readonly dielectric?: number;
};

/** Γ of a run behind a 50 Ω port. What stands at a joint stands before it. */
export function reflectionOf(run: DrawnRun, frequencyHz: Float64Array): ComplexArray {
  const { conductor = 0, dielectric = 0 } = run;
  const stages: Stage[] = [];
  let before = portMedium(50, frequencyHz.length);
  let startM = 0;
  for (const [i, { cable, lengthM }] of run.sections.entries()) {
    const medium = coaxMedium(cable, frequencyHz, { temperatureC: 20 });
    const endM = startM + lengthM;
    stages.push({ type: 'step', before, after: medium, ratio: 1 });
    let atM = startM;
    const inside = (run.put ?? [])
      .filter((p) => (i === 0 ? p.atM >= startM : p.atM > startM) && p.atM <= endM)
      .sort((a, b) => a.atM - b.atM);
    for (const { kind, value, atM: putM } of inside) {
      stages.push({ type: 'line', medium, lengthM: putM - atM, conductor, dielectric });
      stages.push({ ...strengthOf(kind, value, cable.z0Ohm), medium });
      atM = putM;
    }
    stages.push({ type: 'line', medium, lengthM: endM - atM, conductor, dielectric });
    before = medium;
    startM = endM;
  }
  const { re, im } = createCascade(frequencyHz).gamma(stages, run.end);
  return { re: re.slice(), im: im.slice() };
}

/** A copy with white complex noise, `noiseDb` its RMS per point. */
export function withNoise(gamma: ComplexArray, noiseDb: number, seed: number): ComplexArray {
  const random = createRandom(seed);
  const deviation = 10 ** (noiseDb / 20) / Math.SQRT2;
  const noisy = (value: number): number => value + deviation * random.normal();
  return { re: gamma.re.map(noisy), im: gamma.im.map(noisy) };
}

/** Variance per real component of such noise. */
export function varianceOf(noiseDb: number): number {
  return 10 ** (noiseDb / 10) / 2;
}

/** A fit to a sweep whose points all count. */
export function contextOn(frequencyHz: Float64Array, gamma: ComplexArray): FitContext {
  return createFitContext(frequencyHz, gamma, new Float64Array(frequencyHz.length).fill(1));
}

/** The model of a run as described, nothing found in it yet; its end is known. */
export function modelOf(run: DrawnRun, frequencyHz: Float64Array, { lossSigma = 0.03 } = {}): LineModel {
  const line: Line = lineOf(run.sections);
  const lengths = run.sections.map(({ lengthM }) => lengthM);
  const model = createLineModel(line, frequencyHz, 50, lengths, { lossSigma });
  model.end = run.end;
  return model;
}

/** Taper of every search here. */
export const SEARCH_WINDOW: WindowSpec = { kind: 'kaiser', beta: 5 };

/** The search's taper and what it resolves in a cable. */
export function searchOn(frequencyHz: Float64Array, cable: Cable) {
  const window = createWindow(SEARCH_WINDOW, frequencyHz.length);
  const bandHz = frequencyHz.at(-1)! - frequencyHz[0]!;
  return {
    window: SEARCH_WINDOW,
    taper: Float64Array.from(window.values),
    resolutionM: (window.width6DbBins * SPEED_OF_LIGHT * cable.velocityFactor) / (2 * bandHz),
  };
}

/** How a search of a model goes about it. */
export function settingsOf(model: LineModel, cable: Cable): SearchSettings {
  const search = searchOn(model.frequencyHz, cable);
  return { tracer: planTracer(model, search), resolutionM: search.resolutionM };
}

/** A kind of discontinuity with a size that returns about 26 dB at the top of a band that ends at 2.7 GHz. */
export const EACH_KIND: readonly { readonly kind: LumpedKind; readonly value: number }[] = [
  { kind: 'series-resistance', value: 5 },
  { kind: 'shunt-leakage', value: 500 },
  { kind: 'series-inductance', value: 0.3e-9 },
  { kind: 'shunt-capacitance', value: 0.12e-12 },
];
