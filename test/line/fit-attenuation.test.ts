import { describe, expect, it } from 'vitest';
import { fitAttenuation, worstResidual } from '../../src/line/fit-attenuation.ts';

const lawPoints = (k1: number, k2: number, frequenciesMHz: readonly number[]) =>
  frequenciesMHz.map((frequencyMHz) => ({
    frequencyMHz,
    dbPer100m: k1 * Math.sqrt(frequencyMHz) + k2 * frequencyMHz,
  }));

describe('fitAttenuation', () => {
  it('fitAttenuation gives back the law that made the points', () => {
    const fit = fitAttenuation(lawPoints(0.6, 0.0067, [10, 50, 100, 432, 1000]));
    // Exact points: only rounding of the normal equations is left.
    expect(fit.k1).toBeCloseTo(0.6, 10);
    expect(fit.k2).toBeCloseTo(0.0067, 12);
    expect(Math.abs(fit.worstResidual)).toBeLessThan(1e-12);
  });

  it('fitAttenuation weighs every point by its relative error', () => {
    // Closed form for k2 held at 0: k1 = Σ(√f/A) / Σ(f/A²). Loss falling with √f drives k2 below 0.
    const fit = fitAttenuation([
      { frequencyMHz: 1, dbPer100m: 1 },
      { frequencyMHz: 4, dbPer100m: 1 },
    ]);
    expect(fit.k2).toBe(0);
    expect(fit.k1).toBeCloseTo((1 + 2) / (1 + 4), 12);
    expect(fit.worstResidual).toBeCloseTo(0.6 - 1, 12);
  });

  it('fitAttenuation holds k1 at 0 where loss grows faster than frequency', () => {
    const fit = fitAttenuation([
      { frequencyMHz: 10, dbPer100m: 1 },
      { frequencyMHz: 100, dbPer100m: 30 },
    ]);
    expect(fit.k1).toBe(0);
    // k2 = Σ(f/A) / Σ(f²/A²)
    expect(fit.k2).toBeCloseTo((10 + 100 / 30) / (100 + (100 / 30) ** 2), 12);
  });

  it('fitAttenuation takes points in any order and names their band', () => {
    const points = lawPoints(0.2, 0.001, [900, 10, 3000, 100]);
    expect(fitAttenuation(points).bandMHz).toEqual([10, 3000]);
    expect(fitAttenuation([...points].reverse()).k1).toBeCloseTo(fitAttenuation(points).k1, 12);
  });

  it('fitAttenuation of points at one frequency is a pure conductor law through their mean', () => {
    const fit = fitAttenuation([
      { frequencyMHz: 100, dbPer100m: 6 },
      { frequencyMHz: 100, dbPer100m: 6 },
    ]);
    expect(fit.k1).toBeCloseTo(0.6, 12);
    expect(fit.k2).toBe(0);
  });

  it('fitAttenuation refuses no points at all, and figures that are not above 0', () => {
    expect(() => fitAttenuation([])).toThrow(RangeError);
    for (const bad of [0, -1, Number.NaN, Number.POSITIVE_INFINITY]) {
      expect(() => fitAttenuation([{ frequencyMHz: bad, dbPer100m: 1 }])).toThrow(RangeError);
      expect(() => fitAttenuation([{ frequencyMHz: 1, dbPer100m: bad }])).toThrow(RangeError);
    }
  });
});

describe('worstResidual', () => {
  it('worstResidual keeps the sign of the furthest point', () => {
    const points = [
      { frequencyMHz: 1, dbPer100m: 1 },
      { frequencyMHz: 4, dbPer100m: 2.5 },
    ];
    expect(worstResidual(points, 1, 0)).toBeCloseTo(-0.2, 12);
    expect(worstResidual([], 1, 0)).toBe(0);
  });
});
