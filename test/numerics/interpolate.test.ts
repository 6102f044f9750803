import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createMonotoneCubic, interpolateLinear } from '../../src/numerics/interpolate.ts';

describe('interpolateLinear', () => {
  it('lies on the line between neighbours and holds the end values', () => {
    const x = [0, 1, 3];
    const y = [10, 20, 0];
    expect([-5, 0, 0.25, 1, 2, 3, 9].map((at) => interpolateLinear(x, y, at))).toEqual([
      10, 10, 12.5, 20, 10, 0, 0,
    ]);
    expect(interpolateLinear([2], [7], 5)).toBe(7);
  });

  it('refuses a table that does not fit', () => {
    expect(() => interpolateLinear([], [], 0)).toThrow(RangeError);
    expect(() => interpolateLinear([1, 2], [1], 0)).toThrow(RangeError);
  });
});

describe('createMonotoneCubic', () => {
  it('passes through its points and is exact on a straight line', () => {
    const curve = createMonotoneCubic([0, 1, 4, 5], [1, 3, 9, 11]);
    expect([0, 0.5, 1, 2.75, 4, 5].map(curve)).toEqual(
      [1, 2, 3, 6.5, 9, 11].map((v) => expect.closeTo(v, 12)),
    );
  });

  it('follows a smooth curve to third order', () => {
    const x = Array.from({ length: 41 }, (_, i) => i / 20);
    const curve = createMonotoneCubic(x, x.map(Math.exp));
    // Slopes from the harmonic mean are second-order accurate: h³ = 1.25e-4 times a derivative of up to e².
    for (let at = 0.01; at < 2; at += 0.01) expect(Math.abs(curve(at) - Math.exp(at))).toBeLessThan(5e-5);
  });

  it('never leaves the range of an interval, so that it can not overshoot', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -5, max: 5, noNaN: true }), { minLength: 2, maxLength: 12 }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (y, share) => {
          const x = y.map((_, i) => i + 0.3 * Math.sin(i));
          const curve = createMonotoneCubic(x, y);
          for (let i = 0; i + 1 < y.length; i++) {
            const value = curve(x[i]! + share * (x[i + 1]! - x[i]!));
            expect(value).toBeGreaterThanOrEqual(Math.min(y[i]!, y[i + 1]!) - 1e-9);
            expect(value).toBeLessThanOrEqual(Math.max(y[i]!, y[i + 1]!) + 1e-9);
          }
        },
      ),
      { seed: 8, numRuns: 200 },
    );
  });

  it('holds the end values and refuses tables that do not rise', () => {
    const curve = createMonotoneCubic([0, 1], [2, 4]);
    expect([-1, 0.5, 2].map(curve)).toEqual([2, 3, 4]);
    expect(() => createMonotoneCubic([0], [1])).toThrow(RangeError);
    expect(() => createMonotoneCubic([0, 0], [1, 2])).toThrow(RangeError);
    expect(() => createMonotoneCubic([0, Number.NaN], [1, 2])).toThrow(RangeError);
  });
});
