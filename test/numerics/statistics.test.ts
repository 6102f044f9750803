import { describe, expect, it } from 'vitest';
import { createRandom } from '../../src/numerics/random.ts';
import {
  localUpperFloor,
  mean,
  median,
  medianAbsoluteDeviation,
  quantile,
  robustSigma,
  robustUpperFloor,
} from '../../src/numerics/statistics.ts';

describe('quantile', () => {
  it('interpolates between order statistics', () => {
    expect(quantile([4, 1, 3, 2], 0)).toBe(1);
    expect(quantile([4, 1, 3, 2], 1)).toBe(4);
    // Definition 7 of Hyndman & Fan 1996: position 0.25·3 = 0.75 between 1 and 2.
    expect(quantile([4, 1, 3, 2], 0.25)).toBeCloseTo(1.75, 14);
    expect(quantile([5], 0.3)).toBe(5);
  });

  it('leaves its input alone and refuses nonsense', () => {
    const values = Float64Array.of(3, 1, 2);
    quantile(values, 0.5);
    expect([...values]).toEqual([3, 1, 2]);
    expect(() => quantile([], 0.5)).toThrow(RangeError);
    expect(() => quantile([1], 1.1)).toThrow(RangeError);
    expect(() => quantile([1], Number.NaN)).toThrow(RangeError);
  });
});

describe('median, mean, medianAbsoluteDeviation', () => {
  it('are the textbook values', () => {
    expect(median([9, 1, 5])).toBe(5);
    expect(median([1, 2, 3, 10])).toBe(2.5);
    expect(mean([1, 2, 6])).toBe(3);
    expect(medianAbsoluteDeviation([1, 1, 2, 2, 4, 6, 9])).toBe(1);
    expect(() => mean([])).toThrow(RangeError);
  });
});

describe('robustSigma', () => {
  it('reads a normal spread through a fifth of outliers', () => {
    const random = createRandom(3);
    const values = Array.from({ length: 4000 }, (_, i) => (i % 5 === 0 ? 1000 : 2 * random.normal()));
    // A fifth of one-sided outliers pushes the deviation of the rest up by about 1.4.
    expect(robustSigma(values)).toBeGreaterThan(1.9);
    expect(robustSigma(values)).toBeLessThan(3.5);
  });
});

/** Sizes of complex noise of RMS 1. */
function rayleigh(n: number, seed: number): Float64Array {
  const random = createRandom(seed);
  return Float64Array.from({ length: n }, () => Math.hypot(random.normal(), random.normal()) / Math.SQRT2);
}

describe('robustUpperFloor', () => {
  it('gives the upper quantile of pure noise', () => {
    // 95 % quantile of a Rayleigh size with RMS 1: √(ln 20) = 1.731; sampling error about 1 %.
    expect(robustUpperFloor(rayleigh(20_000, 1))).toBeCloseTo(Math.sqrt(Math.log(20)), 1);
  });

  it('is not lifted by strong echoes in a tenth of the cells', () => {
    const levels = rayleigh(5000, 2);
    for (let i = 0; i < 500; i++) levels[i * 10] = 1000;
    // The plain quantile would be 1000.
    expect(robustUpperFloor(levels, { share: 0.85 })).toBeLessThan(2);
  });

  it('handles silence and refuses nothing at all', () => {
    expect(robustUpperFloor(new Float64Array(5))).toBe(0);
    expect(() => robustUpperFloor([])).toThrow(RangeError);
  });
});

describe('localUpperFloor', () => {
  it('equals sorting each neighbourhood anew', () => {
    const levels = rayleigh(60, 9);
    const floor = localUpperFloor(levels, { reachCells: 7, guardCells: 2, share: 0.7 });
    for (let cell = 0; cell < 60; cell++) {
      const neighbours = [...levels].filter((_, i) => Math.abs(i - cell) > 2 && Math.abs(i - cell) <= 9);
      expect(floor[cell]).toBeCloseTo(quantile(neighbours, 0.7), 12);
    }
  });

  it('does not rise under a lone echo inside its guard cells', () => {
    const levels = new Float64Array(101).fill(1);
    for (let i = 48; i <= 52; i++) levels[i] = 100;
    const floor = localUpperFloor(levels, { reachCells: 20, guardCells: 4 });
    expect(Math.max(...floor)).toBe(1);
  });

  it('follows a floor that changes along the line', () => {
    const levels = Float64Array.from({ length: 200 }, (_, i) => (i < 100 ? 1 : 10));
    const floor = localUpperFloor(levels, { reachCells: 15, guardCells: 2 });
    expect([floor[20], floor[180]]).toEqual([1, 10]);
  });

  it('finds a floor even where the middle cells see no neighbour', () => {
    const floor = localUpperFloor(Float64Array.of(1, 2, 3, 4, 5), { reachCells: 1, guardCells: 3 });
    expect([...floor].every((value) => value >= 1 && value <= 5)).toBe(true);
  });

  it('refuses settings without neighbours', () => {
    expect(() => localUpperFloor(new Float64Array(5), { reachCells: 0, guardCells: 1 })).toThrow(RangeError);
    expect(() => localUpperFloor(new Float64Array(5), { reachCells: 3, guardCells: 4 })).toThrow(RangeError);
  });
});
