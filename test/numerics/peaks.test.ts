import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { findPeaks, refineTip } from '../../src/numerics/peaks.ts';

/** Prominence by walking out from the peak until higher ground, as the definition says. */
function prominenceByWalking(values: Float64Array, index: number): number {
  const height = values[index]!;
  const lowestOneWay = (step: number) => {
    let lowest = height;
    for (let i = index; i >= 0 && i < values.length && values[i]! <= height; i += step)
      lowest = Math.min(lowest, values[i]!);
    return lowest;
  };
  return height - Math.max(lowestOneWay(-1), lowestOneWay(1));
}

describe('findPeaks', () => {
  it('gives place, height and prominence of each maximum', () => {
    expect(findPeaks(Float64Array.of(0, 1, 0, 3, 2, 5, 1, 4, 0))).toEqual([
      { index: 1, value: 1, prominence: 1 },
      { index: 3, value: 3, prominence: 1 },
      { index: 5, value: 5, prominence: 5 },
      { index: 7, value: 4, prominence: 3 },
    ]);
  });

  it('counts a flat top once, at its middle', () => {
    expect(findPeaks(Float64Array.of(0, 2, 2, 2, 1)).map((peak) => peak.index)).toEqual([2]);
  });

  it('takes neither ends, steps nor a flat line for maxima', () => {
    expect(findPeaks(Float64Array.of(3, 2, 1))).toEqual([]);
    expect(findPeaks(Float64Array.of(0, 1, 1, 2))).toEqual([]);
    expect(findPeaks(new Float64Array(6))).toEqual([]);
    expect(findPeaks(new Float64Array(0))).toEqual([]);
  });

  it('leaves out what stands out less than asked', () => {
    expect(findPeaks(Float64Array.of(0, 1, 0, 3, 0), 2).map((peak) => peak.index)).toEqual([3]);
  });

  it('agrees with the definition on any curve', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 6 }), { maxLength: 40 }), (levels) => {
        const values = Float64Array.from(levels);
        for (const peak of findPeaks(values))
          expect(peak.prominence).toBe(prominenceByWalking(values, peak.index));
      }),
      { seed: 20, numRuns: 300 },
    );
  });
});

describe('refineTip', () => {
  it('finds the tip of a parabola exactly', () => {
    const values = Float64Array.from({ length: 5 }, (_, i) => 7 - 2 * (i - 2.3) ** 2);
    const tip = refineTip(values, 2);
    expect(tip.position).toBeCloseTo(2.3, 12);
    expect(tip.value).toBeCloseTo(7, 12);
  });

  it('gives the sample itself at the ends and on flat ground', () => {
    const values = Float64Array.of(3, 1, 1, 1, 2);
    expect(refineTip(values, 0)).toEqual({ position: 0, value: 3 });
    expect(refineTip(values, 4)).toEqual({ position: 4, value: 2 });
    expect(refineTip(values, 2)).toEqual({ position: 2, value: 1 });
    expect(() => refineTip(values, 5)).toThrow(RangeError);
  });
});
