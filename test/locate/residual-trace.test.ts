import { describe, expect, it } from 'vitest';
import { coaxMedium } from '../../src/line/medium.ts';
import { planResidualTrace, residualTrace } from '../../src/locate/residual-trace.ts';
import { type ComplexArray, complexZeros } from '../../src/numerics/complex.ts';
import { evenHz, MATCHED, SOLID, THIN } from './drawn-line.ts';
import { type DrawnRun, modelOf, searchOn, withNoise } from './drawn-model.ts';

const GRID = evenHz(20e6, 2000e6, 300);
const RUN: DrawnRun = {
  sections: [
    { cable: SOLID, lengthM: 2 },
    { cable: THIN, lengthM: 3 },
  ],
  end: MATCHED,
};
const MODEL = modelOf(RUN, GRID);
const MEDIA = RUN.sections.map(({ cable }) => coaxMedium(cable, GRID, { temperatureC: 20 }));
const { taper, window } = searchOn(GRID, SOLID);
const ALONG = { fromM: 0, stepM: 0.02, points: 250 };

/** 2γ·d summed along the run to a distance. */
function pathTo(distanceM: number): ComplexArray {
  const inFirst = Math.min(distanceM, 2);
  const sum = (part: 're' | 'im') =>
    GRID.map(
      (_, k) => 2 * (MEDIA[0]!.gamma[part][k]! * inFirst + MEDIA[1]!.gamma[part][k]! * (distanceM - inFirst)),
    );
  return { re: sum('re'), im: sum('im') };
}

/** What a lone small real reflector returns. */
function loneEcho(distanceM: number, reflection: number): ComplexArray {
  const path = pathTo(distanceM);
  return {
    re: GRID.map((_, k) => reflection * Math.exp(-path.re[k]!) * Math.cos(path.im[k]!)),
    im: GRID.map((_, k) => -reflection * Math.exp(-path.re[k]!) * Math.sin(path.im[k]!)),
  };
}

describe('residualTrace', () => {
  it('is Σ W·e^{−2A+2jB}·Γ / Σ W·e^{−4A}, term by term', () => {
    const values = loneEcho(3.1, 0.2);
    const trace = residualTrace(MODEL, values, taper, ALONG);
    for (const k of [0, 60, 99, 100, 101, 249]) {
      const path = pathTo(k * ALONG.stepM);
      let [re, im, norm] = [0, 0, 0];
      GRID.forEach((_, i) => {
        const weight = taper[i]! * Math.exp(-path.re[i]!);
        const [c, s] = [Math.cos(path.im[i]!), Math.sin(path.im[i]!)];
        re += weight * (values.re[i]! * c - values.im[i]! * s);
        im += weight * (values.re[i]! * s + values.im[i]! * c);
        norm += weight * Math.exp(-path.re[i]!);
      });
      // The grid is walked with one multiplication a step: 250 roundings.
      expect(trace.value.re[k]).toBeCloseTo(re / norm, 11);
      expect(trace.value.im[k]).toBeCloseTo(im / norm, 11);
      expect(trace.level[k]).toBeCloseTo(Math.hypot(re / norm, im / norm), 11);
    }
  });

  it.each([0.5, 1.99, 3.2, 4.9])('reads a lone reflector at %s m as large as it is, with its sign', (atM) => {
    for (const reflection of [0.1, -0.3]) {
      const { value } = residualTrace(MODEL, loneEcho(atM, reflection), taper, {
        fromM: atM,
        stepM: 0.1,
        points: 1,
      });
      expect(value.re[0]).toBeCloseTo(reflection, 12);
      expect(value.im[0]).toBeCloseTo(0, 12);
    }
  });

  it('is highest where the reflector is', () => {
    const { level } = residualTrace(MODEL, loneEcho(3.2, 0.2), taper, ALONG);
    expect(level.indexOf(Math.max(...level)) * ALONG.stepM).toBeCloseTo(3.2, 12);
  });

  it('undoes the loss of the fitted line, not of the described one', () => {
    const lossier = modelOf(RUN, GRID);
    lossier.conductor = 0.2;
    const one = { fromM: 3.2, stepM: 0.1, points: 1 };
    const described = residualTrace(MODEL, loneEcho(3.2, 0.2), taper, one).level[0]!;
    expect(residualTrace(lossier, loneEcho(3.2, 0.2), taper, one).level[0]).toBeGreaterThan(1.02 * described);
  });

  it('does not look at points of weight 0', () => {
    const values = loneEcho(3.2, 0.2);
    const weight = taper.map((w, i) => (i === 50 ? 0 : w));
    const clean = residualTrace(MODEL, values, weight, ALONG);
    values.re[50] = 1e6;
    expect(residualTrace(MODEL, values, weight, ALONG)).toEqual(clean);
  });

  it('has a density that is the variance of white noise, on the average, at all distances', () => {
    const mean = new Float64Array(ALONG.points);
    const trials = 60;
    for (let seed = 1; seed <= trials; seed++) {
      const noise = withNoise(complexZeros(GRID.length), -40, seed);
      const { density } = residualTrace(MODEL, noise, taper, ALONG);
      for (let k = 0; k < mean.length; k++) mean[k] = mean[k]! + density[k]! / trials / 1e-4;
    }
    // Some 20 independent cells of 60 exponential draws in each half: 3 %; near the port the loss is small and the
    // formula exact, at the end its mean over the band is off by what the band's loss differs, a third.
    const half = (from: number, to: number) =>
      mean.slice(from, to).reduce((sum, v) => sum + v, 0) / (to - from);
    expect(half(0, 100)).toBeGreaterThan(0.85);
    expect(half(0, 100)).toBeLessThan(1.15);
    expect(half(150, 250)).toBeGreaterThan(0.6);
    expect(half(150, 250)).toBeLessThan(1.7);
  });
});

describe('planResidualTrace', () => {
  it('is the direct sum, planned once for any residual', () => {
    const model = modelOf(RUN, GRID);
    model.conductor = 0.1;
    const tracer = planResidualTrace(model, window, taper, ALONG);
    for (const values of [loneEcho(3.2, 0.2), withNoise(loneEcho(1.1, -0.1), -30, 3)]) {
      const planned = tracer(values);
      const direct = residualTrace(model, values, taper, ALONG);
      expect(planned.fromM).toBe(0);
      expect(planned.stepM).toBe(ALONG.stepM);
      direct.level.forEach((level, k) => {
        // Design section 5: −80 dB of a full reflection or better. The density's norm is read between knots: 1 %.
        expect(Math.abs(planned.level[k]! - level)).toBeLessThan(1e-4);
        expect(planned.value.re[k]! - direct.value.re[k]!).toBeCloseTo(0, 4);
      });
      const peak = direct.level.indexOf(Math.max(...direct.level));
      expect(planned.density[peak]! / direct.density[peak]!).toBeCloseTo(1, 1);
    }
  });
});
