import { describe, expect, it } from 'vitest';
import { gridShares, medianStepHz, traceWeights } from '../../src/locate/grid-weights.ts';
import { createWindow } from '../../src/numerics/window.ts';
import { evenHz } from './drawn-line.ts';

describe('gridShares', () => {
  it('gives every point of an even grid the same width, at the middles of n cells', () => {
    const { widthHz, place } = gridShares(evenHz(100, 500, 5));
    expect(Array.from(widthHz)).toEqual([100, 100, 100, 100, 100]);
    for (const [k, at] of place.entries()) expect(at).toBeCloseTo((k + 0.5) / 5, 14);
  });

  it('gives uneven points the cells between the middles to their neighbours', () => {
    expect(Array.from(gridShares(Float64Array.of(0, 1, 3, 4)).widthHz)).toEqual([1, 1.5, 1.5, 1]);
  });

  it('shares the cell of repeated points among them', () => {
    expect(Array.from(gridShares(Float64Array.of(0, 1, 1, 2)).widthHz)).toEqual([1, 0.5, 0.5, 1]);
  });

  it('does not let a point reach far into a gap', () => {
    const { widthHz } = gridShares(Float64Array.of(0, 1, 2, 1002, 1003));
    expect(widthHz[2]).toBe(0.5 + 4);
  });

  it('refuses falling frequencies and a single one', () => {
    expect(() => gridShares(Float64Array.of(2, 1))).toThrow(RangeError);
    expect(() => gridShares(Float64Array.of(1, 1))).toThrow(RangeError);
  });
});

describe('traceWeights', () => {
  it('is the window over its sum on an even grid', () => {
    const weights = traceWeights(evenHz(1e6, 1e9, 101), { kind: 'hann' });
    const { values } = createWindow({ kind: 'hann' }, 101);
    const sum = values.reduce((a, b) => a + b, 0);
    for (const [k, weight] of weights.entries()) expect(weight).toBeCloseTo(values[k]! / sum, 14);
  });

  it('sums to 1 and does not change what a doubled point stands for', () => {
    const grid = Array.from(evenHz(1e6, 1e9, 101));
    const doubled = Float64Array.from([...grid.slice(0, 41), ...grid.slice(40)]);
    const weights = traceWeights(doubled, { kind: 'kaiser', beta: 6 });
    expect(weights.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 12);
    const single = traceWeights(Float64Array.from(grid), { kind: 'kaiser', beta: 6 });
    expect(weights[40]! + weights[41]!).toBeCloseTo(single[40]!, 5);
    expect(weights[10]).toBeCloseTo(single[10]!, 5);
  });
});

describe('medianStepHz', () => {
  it('is the step of an even grid and the middle step of an uneven one, repeats left out', () => {
    expect(medianStepHz(Float64Array.of(1, 2, 3))).toBe(1);
    expect(medianStepHz(Float64Array.of(1, 1, 2, 4, 4, 9))).toBe(2);
  });
});
