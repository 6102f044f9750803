import { describe, expect, it } from 'vitest';
import { NOTHING_FREE } from '../../src/locate/line-model.ts';
import { evaluateCost } from '../../src/locate/linearise.ts';
import { floorAt, localVariance, traceResidual } from '../../src/locate/residual-floor.ts';
import type { ResidualTrace } from '../../src/locate/residual-trace.ts';
import { complexZeros } from '../../src/numerics/complex.ts';
import { createRandom } from '../../src/numerics/random.ts';
import { evenHz, FOAM, MATCHED, SOLID } from './drawn-line.ts';
import {
  contextOn,
  type DrawnRun,
  modelOf,
  reflectionOf,
  settingsOf,
  varianceOf,
  withNoise,
} from './drawn-model.ts';

const GRID = evenHz(10e6, 2700e6, 400);
const RUN: DrawnRun = {
  sections: [
    { cable: SOLID, lengthM: 5 },
    { cable: FOAM, lengthM: 15 },
  ],
  end: MATCHED,
};
const MODEL = modelOf(RUN, GRID);
const SETTINGS = settingsOf(MODEL, FOAM);
const { resolutionM } = SETTINGS;

/** A trace of complex noise, by its RMS at each distance. */
function noisyTrace(rmsAt: (distanceM: number) => number, seed = 1): ResidualTrace {
  const stepM = resolutionM / 4;
  const points = Math.ceil(20 / stepM);
  const random = createRandom(seed);
  const value = complexZeros(points);
  for (let k = 0; k < points; k++) {
    const part = rmsAt(k * stepM) / Math.SQRT2;
    value.re[k] = part * random.normal();
    value.im[k] = part * random.normal();
  }
  const level = value.re.map((re, k) => Math.hypot(re, value.im[k]!));
  return { fromM: 0, stepM, value, level, density: level.map((v) => v * v) };
}

function indexOf(trace: ResidualTrace, distanceM: number): number {
  return Math.round((distanceM - trace.fromM) / trace.stepM);
}

describe('traceResidual', () => {
  it('shows what the model leaves over from the port to past the end', () => {
    const context = contextOn(
      GRID,
      reflectionOf({ ...RUN, put: [{ kind: 'series-resistance', value: 5, atM: 12 }] }, GRID),
    );
    evaluateCost(context, MODEL, NOTHING_FREE, 1);
    const trace = traceResidual(context, SETTINGS);
    expect(trace.fromM).toBe(0);
    expect(trace.fromM + trace.stepM * (trace.level.length - 1)).toBeGreaterThan(20);
    const peak = trace.level.indexOf(Math.max(...trace.level));
    // A quarter of a resolution from one point to the next.
    expect(Math.abs(peak * trace.stepM - 12)).toBeLessThan(resolutionM / 4);
    expect(trace.level[peak]).toBeCloseTo(5 / 105, 2);
  });
});

describe('floorAt', () => {
  it('stands above most of the noise and not above all of it', () => {
    const trace = noisyTrace(() => 0.01);
    const floor = floorAt(trace, MODEL, indexOf(trace, 12), resolutionM);
    const below = trace.level.filter((level) => level < floor).length / trace.level.length;
    expect(below).toBeGreaterThan(0.6);
    expect(below).toBeLessThan(0.99);
  });

  it('scales with the trace', () => {
    const trace = noisyTrace(() => 0.01);
    const twice = { ...trace, level: trace.level.map((v) => 2 * v) };
    expect(floorAt(twice, MODEL, 900, resolutionM)).toBeCloseTo(
      2 * floorAt(trace, MODEL, 900, resolutionM),
      12,
    );
  });

  it('is not lifted by the echo that it is to judge', () => {
    const trace = noisyTrace(() => 0.01);
    const at = indexOf(trace, 12);
    const before = floorAt(trace, MODEL, at, resolutionM);
    for (let k = at - 4; k <= at + 4; k++) trace.level[k] = 0.5;
    expect(floorAt(trace, MODEL, at, resolutionM)).toBe(before);
  });

  it('is not lifted much by a few strong echoes elsewhere', () => {
    const trace = noisyTrace(() => 0.01);
    const at = indexOf(trace, 12);
    const before = floorAt(trace, MODEL, at, resolutionM);
    for (const m of [9, 11, 13.5]) for (let k = -2; k <= 2; k++) trace.level[indexOf(trace, m) + k] = 0.5;
    expect(floorAt(trace, MODEL, at, resolutionM) / before).toBeLessThan(1.3);
  });

  it('lets a rough section speak for itself', () => {
    const trace = noisyTrace((m) => (m < 5 ? 0.05 : 0.005));
    const rough = floorAt(trace, MODEL, indexOf(trace, 2.5), resolutionM);
    const quiet = floorAt(trace, MODEL, indexOf(trace, 15), resolutionM);
    expect(rough).toBeGreaterThan(5 * quiet);
  });

  it('is above 0 at both ends of the trace', () => {
    const trace = noisyTrace(() => 0.01);
    for (const k of [0, trace.level.length - 1])
      expect(floorAt(trace, MODEL, k, resolutionM)).toBeGreaterThan(0.005);
  });
});

describe('localVariance', () => {
  it('is that of white noise per real component', () => {
    const trials = 10;
    let mean = 0;
    for (let seed = 1; seed <= trials; seed++) {
      const context = contextOn(GRID, withNoise(reflectionOf(RUN, GRID), -50, seed));
      evaluateCost(context, MODEL, NOTHING_FREE, 1);
      const trace = traceResidual(context, SETTINGS);
      mean += localVariance(trace, 6, resolutionM, varianceOf(-50)) / varianceOf(-50) / trials;
    }
    // A quantile of some 40 cells, ten times: 8 %; the loss, which differs over the band, another 10 %.
    expect(mean).toBeGreaterThan(0.7);
    expect(mean).toBeLessThan(1.4);
  });

  it('is higher where the line is rough', () => {
    const trace = noisyTrace((m) => (m < 8 ? 0.05 : 0.005));
    const at = (m: number) => localVariance(trace, m, resolutionM, 1e-9);
    expect(at(3)).toBeGreaterThan(20 * at(17));
  });

  it('never falls to nothing beside a residual that is large elsewhere', () => {
    const trace = noisyTrace(() => 1e-9);
    const mean = 1e-3;
    const least = localVariance(trace, 10, resolutionM, mean);
    expect(least).toBeGreaterThan(0);
    expect(least).toBeLessThan(mean);
  });
});
