import { describe, expect, it } from 'vitest';
import {
  factorSymmetric,
  invertSymmetric,
  solveFactored,
  solveLeastSquares,
  solveSymmetric,
} from '../../src/numerics/linear-solve.ts';
import { createRandom } from '../../src/numerics/random.ts';

describe('solveLeastSquares', () => {
  it('fits a straight line with the closed form of slope, intercept and their covariance', () => {
    const x = [0, 1, 2, 3, 4];
    const y = [1.1, 2.9, 5.2, 6.8, 9.1];
    const a = Float64Array.from(x.flatMap((value) => [1, value]));
    const fit = solveLeastSquares(a, 5, 2, Float64Array.from(y));
    // Normal equations by hand: Σx = 10, Σx² = 30, n = 5, Σy = 25.1, Σxy = 70.1.
    const determinant = 5 * 30 - 10 * 10;
    const slope = (5 * 70.1 - 10 * 25.1) / determinant;
    const intercept = (25.1 - slope * 10) / 5;
    expect(fit.solution[0]).toBeCloseTo(intercept, 12);
    expect(fit.solution[1]).toBeCloseTo(slope, 12);
    expect([...fit.covariance].map((v) => v * determinant)).toEqual(
      [30, -10, -10, 5].map((v) => expect.closeTo(v, 9)),
    );
    const residuals = y.map((value, i) => value - intercept - slope * x[i]!);
    expect(fit.noiseVariance).toBeCloseTo(residuals.reduce((s, r) => s + r * r, 0) / 3, 12);
    expect(fit.rank).toBe(2);
  });

  it('gives the shortest solution when two columns are the same', () => {
    const fit = solveLeastSquares(Float64Array.of(1, 1, 2, 2, 3, 3), 3, 2, Float64Array.of(2, 4, 6));
    expect(fit.rank).toBe(1);
    expect([...fit.solution]).toEqual([expect.closeTo(1, 12), expect.closeTo(1, 12)]);
  });

  it('solves a square system exactly and says how stiff it is', () => {
    const fit = solveLeastSquares(Float64Array.of(100, 0, 0, 1), 2, 2, Float64Array.of(100, 3));
    expect([...fit.solution]).toEqual([expect.closeTo(1, 12), expect.closeTo(3, 12)]);
    expect(fit.condition).toBeCloseTo(100, 9);
    expect(fit.noiseVariance).toBeCloseTo(0, 12);
  });

  it('gives zeros for a matrix of zeros', () => {
    const fit = solveLeastSquares(new Float64Array(6), 3, 2, Float64Array.of(1, 2, 3));
    expect([fit.rank, fit.solution[0], fit.condition]).toEqual([0, 0, Number.POSITIVE_INFINITY]);
  });

  it('refuses shapes that do not fit', () => {
    expect(() => solveLeastSquares(new Float64Array(2), 1, 2, new Float64Array(1))).toThrow(RangeError);
    expect(() => solveLeastSquares(new Float64Array(5), 3, 2, new Float64Array(3))).toThrow(RangeError);
  });
});

/** AᵀA + I of a seeded random matrix: symmetric positive definite. */
function definite(n: number, seed: number): Float64Array {
  const random = createRandom(seed);
  const a = Float64Array.from({ length: n * n }, () => random.normal());
  const matrix = new Float64Array(n * n);
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) {
      let sum = i === j ? 1 : 0;
      for (let k = 0; k < n; k++) sum += a[k * n + i]! * a[k * n + j]!;
      matrix[i * n + j] = sum;
    }
  return matrix;
}

describe('solveSymmetric', () => {
  it.each([1, 2, 7, 80])('gives back what the matrix was multiplied with, n = %i', (n) => {
    const matrix = definite(n, n);
    const x = Float64Array.from({ length: n }, (_, i) => Math.cos(i));
    const b = new Float64Array(n);
    for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) b[i] = b[i]! + matrix[i * n + j]! * x[j]!;
    const solution = solveSymmetric(matrix, b);
    // Condition up to about 300 of these matrices times rounding.
    solution?.forEach((value, i) => {
      expect(value).toBeCloseTo(x[i]!, 9);
    });
    expect(solution).not.toBeNull();
  });

  it('reads the lower triangle only and changes nothing it was given', () => {
    const matrix = Float64Array.of(4, 99, 1, 3);
    const b = Float64Array.of(1, 2);
    expect([...(solveSymmetric(matrix, b) ?? [])]).toEqual([
      expect.closeTo(1 / 11, 14),
      expect.closeTo(7 / 11, 14),
    ]);
    expect([...matrix, ...b]).toEqual([4, 99, 1, 3, 1, 2]);
  });

  it('gives null when the matrix is not positive definite', () => {
    expect(solveSymmetric(Float64Array.of(1, 2, 2, 1), Float64Array.of(1, 1))).toBeNull();
    expect(solveSymmetric(Float64Array.of(1, 1, 1, 1), Float64Array.of(1, 1))).toBeNull();
    expect(solveSymmetric(Float64Array.of(Number.NaN), Float64Array.of(1))).toBeNull();
  });

  it('refuses a matrix that is too small', () => {
    expect(() => solveSymmetric(new Float64Array(3), new Float64Array(2))).toThrow(RangeError);
  });
});

describe('factorSymmetric and solveFactored', () => {
  it('factor in place and solve in place', () => {
    const matrix = Float64Array.of(4, 2, 2, 5);
    expect(factorSymmetric(matrix, 2, matrix)).toBe(true);
    expect([matrix[0], matrix[2], matrix[3]]).toEqual([2, 1, 2]);
    const b = Float64Array.of(6, 7);
    solveFactored(matrix, 2, b);
    expect([...b]).toEqual([expect.closeTo(1, 14), expect.closeTo(1, 14)]);
  });
});

describe('invertSymmetric', () => {
  it('gives the identity when multiplied back', () => {
    const n = 12;
    const matrix = definite(n, 5);
    const inverse = invertSymmetric(matrix, n);
    expect(inverse).not.toBeNull();
    for (let i = 0; i < n; i++)
      for (let j = 0; j < n; j++) {
        let sum = 0;
        for (let k = 0; k < n; k++) sum += matrix[i * n + k]! * inverse![k * n + j]!;
        expect(sum).toBeCloseTo(i === j ? 1 : 0, 10);
      }
    expect(invertSymmetric(Float64Array.of(0), 1)).toBeNull();
  });
});
