import { describe, expect, it } from 'vitest';
import { fitLeastSquares } from '../../src/numerics/least-squares.ts';
import { createRandom } from '../../src/numerics/random.ts';

const X = [0, 1, 2, 3, 4];
const Y = [1.1, 2.9, 5.2, 6.8, 9.1];

/** Residuals of a straight line p0 + p1·x. */
function straight(parameters: Float64Array, out: Float64Array): void {
  X.forEach((x, i) => {
    out[i] = Y[i]! - parameters[0]! - parameters[1]! * x;
  });
}

describe('fitLeastSquares', () => {
  it('fits a straight line with the closed form of its parameters and covariance', () => {
    const start = [0, 0];
    const fit = fitLeastSquares(straight, 5, start, { steps: [1e-6, 1e-6] });
    // Normal equations by hand: Σx = 10, Σx² = 30, n = 5, Σy = 25.1, Σxy = 70.1; determinant 5·30 − 10².
    const slope = (5 * 70.1 - 10 * 25.1) / 50;
    expect(fit.parameters[1]).toBeCloseTo(slope, 8);
    expect(fit.parameters[0]).toBeCloseTo((25.1 - slope * 10) / 5, 8);
    // Differences of a linear function are exact but for rounding: 1e-16/1e-6.
    expect([...fit.covariance!].map((v) => v * 50)).toEqual(
      [30, -10, -10, 5].map((v) => expect.closeTo(v, 6)),
    );
    expect(fit.settled).toBe(true);
    expect(start).toEqual([0, 0]);
  });

  it('reports as its cost the sum of squares at its parameters', () => {
    const fit = fitLeastSquares(straight, 5, [3, 0], { steps: [1e-6, 1e-6] });
    const residuals = new Float64Array(5);
    straight(fit.parameters, residuals);
    expect(fit.cost).toBeCloseTo(
      residuals.reduce((sum, r) => sum + r * r, 0),
      14,
    );
  });

  it('reaches the bottom of Rosenbrock’s bent valley', () => {
    const valley = (p: Float64Array, out: Float64Array): void => {
      out[0] = 10 * (p[1]! - p[0]! * p[0]!);
      out[1] = 1 - p[0]!;
    };
    const fit = fitLeastSquares(valley, 2, [-1.2, 1], {
      steps: [1e-7, 1e-7],
      maxIterations: 200,
      tolerance: 1e-16,
    });
    // Where the cost is flat to 1e-16 the parameters are within its root times the valley's length.
    expect(fit.parameters[0]).toBeCloseTo(1, 5);
    expect(fit.parameters[1]).toBeCloseTo(1, 5);
  });

  it('scatters as its covariance says when the noise has variance 1', () => {
    const t = Float64Array.from({ length: 40 }, (_, i) => i / 10);
    const [size, rate, sigma] = [3, 0.7, 0.01];
    let scatter = 0;
    let promised = 0;
    const trials = 200;
    const random = createRandom(5);
    for (let trial = 0; trial < trials; trial++) {
      const seen = t.map((x) => size * Math.exp(-rate * x) + sigma * random.normal());
      const decay = (p: Float64Array, out: Float64Array): void => {
        for (let i = 0; i < t.length; i++) out[i] = (seen[i]! - p[0]! * Math.exp(-p[1]! * t[i]!)) / sigma;
      };
      const fit = fitLeastSquares(decay, t.length, [1, 1], { steps: [1e-6, 1e-6] });
      scatter += (fit.parameters[1]! - rate) ** 2 / trials;
      promised += fit.covariance![3]! / trials;
    }
    // The variance of 200 draws is known to √(2/200) = 10 %; three of that.
    expect(scatter / promised).toBeGreaterThan(0.7);
    expect(scatter / promised).toBeLessThan(1.3);
  });

  it('takes a prior as one more row: the weighted mean of what is expected and what is seen', () => {
    const row = (p: Float64Array, out: Float64Array): void => {
      out[0] = (5 - p[0]!) / 0.5;
      out[1] = (p[0]! - 3) / 2;
    };
    const fit = fitLeastSquares(row, 2, [0], { steps: [1e-6] });
    // Precisions 4 and 1/4.
    expect(fit.parameters[0]).toBeCloseTo((5 * 4 + 3 * 0.25) / 4.25, 8);
    expect(fit.covariance![0]).toBeCloseTo(1 / 4.25, 8);
  });

  it('says that parameters which do the same are not determined, and still fits', () => {
    const sum = (p: Float64Array, out: Float64Array): void => {
      out[0] = 1 - p[0]! - p[1]!;
      out[1] = 2 * (1 - p[0]! - p[1]!);
    };
    const fit = fitLeastSquares(sum, 2, [0, 0], { steps: [1e-6, 1e-6] });
    expect(fit.covariance).toBeNull();
    expect(fit.parameters[0]! + fit.parameters[1]!).toBeCloseTo(1, 6);
  });

  it('steps back from where the residuals are not numbers', () => {
    // The first full step from 0.1 leads to log of a negative number.
    const logarithm = (p: Float64Array, out: Float64Array): void => {
      out[0] = Math.log(p[0]!);
      out[1] = 0.01 * (p[0]! - 1);
    };
    const fit = fitLeastSquares(logarithm, 2, [8], { steps: [1e-7], maxIterations: 60 });
    expect(fit.parameters[0]).toBeCloseTo(1, 4);
  });

  it('stays at a start that is best already', () => {
    const fit = fitLeastSquares((p, out) => out.set([p[0]! - 2]), 1, [2], { steps: [1e-6] });
    expect(fit).toMatchObject({ parameters: Float64Array.of(2), cost: 0, settled: true });
  });

  it('says so when it had to stop before it settled', () => {
    const bent = (p: Float64Array, out: Float64Array): void => {
      out[0] = 10 * (p[1]! - p[0]! * p[0]!);
      out[1] = 1 - p[0]!;
    };
    const options = { steps: [1e-7, 1e-7], maxIterations: 2, tolerance: 1e-12 };
    expect(fitLeastSquares(bent, 2, [-1.2, 1], options).settled).toBe(false);
  });

  it('has nothing to fit without parameters', () => {
    const fit = fitLeastSquares((_, out) => out.set([3, 4]), 2, [], { steps: [] });
    expect(fit.cost).toBe(25);
    expect(fit.settled).toBe(true);
    expect(fit.parameters).toHaveLength(0);
  });

  it('refuses fewer residuals than parameters, and a step too few', () => {
    expect(() => fitLeastSquares(straight, 1, [0, 0], { steps: [1, 1] })).toThrow(RangeError);
    expect(() => fitLeastSquares(straight, 5, [0, 0], { steps: [1] })).toThrow(
      '5 residuals and 1 steps do not fit 2 parameters',
    );
  });
});
