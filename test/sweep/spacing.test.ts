import { describe, expect, it } from 'vitest';
import { longestEvenStretch, spacingOf } from '../../src/sweep/spacing.ts';

describe('spacingOf', () => {
  it('gives the step of an even grid, rounded frequencies included', () => {
    const exact = Float64Array.from({ length: 1601 }, (_, k) => 3e5 + (k * (3e9 - 3e5)) / 1600);
    expect(spacingOf(exact)).toEqual({ even: true, stepHz: (3e9 - 3e5) / 1600 });
    expect(spacingOf(exact.map(Math.round)).even).toBe(true);
  });

  it('gives the smallest step of an uneven grid', () => {
    expect(spacingOf(Float64Array.of(1, 2, 3, 3.5, 5))).toEqual({ even: false, stepHz: 0.5 });
  });

  it('counts two points as even', () => {
    expect(spacingOf(Float64Array.of(1, 4))).toEqual({ even: true, stepHz: 3 });
  });
});

describe('longestEvenStretch', () => {
  it.each([
    ['the whole of an even grid', [1, 2, 3, 4], { from: 0, to: 4 }],
    ['the longer of two segments', [1, 2, 3, 10, 20, 30, 40], { from: 3, to: 7 }],
    ['a segment in the middle', [1, 5, 6, 7, 8, 20], { from: 1, to: 5 }],
    ['two points where no three are even', [1, 2, 4, 8, 16], { from: 0, to: 2 }],
  ])('finds %s', (_, frequencies, wanted) => {
    expect(longestEvenStretch(Float64Array.from(frequencies))).toEqual(wanted);
  });
});
