import { describe, expect, it } from 'vitest';
import { cellOf, cellScale, linearScale, paddedDomain } from '../../src/plot/scale.ts';

describe('linearScale', () => {
  it('linearScale puts the start on dot 0 and the stop on the last dot', () => {
    const scale = linearScale([-80, 0], 33);
    expect(scale.toDot(-80)).toBe(0);
    expect(scale.toDot(0)).toBe(32);
    expect(scale.toDot(-40)).toBe(16);
  });

  it('linearScale gives back the value of a dot', () => {
    const scale = linearScale([2, 52], 101);
    for (const dot of [0, 1, 50, 99.5, 100]) expect(scale.toDot(scale.toValue(dot))).toBeCloseTo(dot, 10);
  });

  it('linearScale refuses a domain that does not rise and fewer than two dots', () => {
    expect(() => linearScale([1, 1], 10)).toThrow(RangeError);
    expect(() => linearScale([0, Number.NaN], 10)).toThrow(RangeError);
    expect(() => linearScale([0, 1], 1)).toThrow(RangeError);
  });
});

describe('cellOf', () => {
  it('cellOf holds two dots per cell and lets values outside fall outside', () => {
    const scale = cellScale([0, 19], 10); // 20 dots, one per unit
    expect([0, 1, 2, 3, 18, 19].map((v) => cellOf(scale, v))).toEqual([0, 0, 1, 1, 9, 9]);
    expect(cellOf(scale, -2)).toBe(-1);
    expect(cellOf(scale, 20)).toBe(10);
  });
});

describe('paddedDomain', () => {
  it('paddedDomain holds the finite values and ends at round numbers', () => {
    const [low, high] = paddedDomain([48.2, Number.NaN, 76.9], { fallback: [0, 1] });
    expect(low).toBe(45);
    expect(high).toBe(80);
  });

  it('paddedDomain of nothing finite is the fallback', () => {
    expect(paddedDomain([Number.NaN], { fallback: [25, 75] })).toEqual([25, 75]);
  });

  it('paddedDomain keeps a smallest span, so that a flat line stays a line', () => {
    const [low, high] = paddedDomain([50, 50.1], { fallback: [0, 1], smallestSpan: 20 });
    expect(high - low).toBeGreaterThanOrEqual(20);
  });

  it('paddedDomain of one value still rises', () => {
    for (const value of [0, -3, 50]) {
      const [low, high] = paddedDomain([value], { fallback: [0, 1] });
      expect(low).toBeLessThan(high);
      expect(low).toBeLessThanOrEqual(value);
      expect(high).toBeGreaterThanOrEqual(value);
    }
  });
});
