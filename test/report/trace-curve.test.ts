import { describe, expect, it } from 'vitest';
import type { DistanceTrace } from '../../src/locate/distance-trace.ts';
import { highestAt, highestPerDot, traceDepth, traceLevelsDb } from '../../src/report/trace-curve.ts';

const traceOf = (levelsDb: readonly number[]): DistanceTrace => ({
  distanceM: Float64Array.from(levelsDb, (_, i) => i / 10),
  value: {
    re: Float64Array.from(levelsDb, (db) => 10 ** (db / 20)),
    im: new Float64Array(levelsDb.length),
  },
  corrected: true,
});

describe('traceLevelsDb', () => {
  it('gives 20·log10 of the size, and −∞ where there is nothing', () => {
    const levels = traceLevelsDb(traceOf([0, -40, Number.NEGATIVE_INFINITY]));
    expect(levels[0]).toBeCloseTo(0, 9);
    expect(levels[1]).toBeCloseTo(-40, 9);
    expect(levels[2]).toBe(Number.NEGATIVE_INFINITY);
  });
});

describe('traceDepth', () => {
  it('reaches 14 dB below the middle of the trace, to the next ten', () => {
    const trace = traceOf([-60, -60, -60, -10, -60]);
    expect(traceDepth(trace, traceLevelsDb(trace))).toEqual([-80, 0]);
  });

  it('rises above 0 dB only for more than noise on a full reflection', () => {
    const trace = traceOf([-60, -60, 1.5]);
    expect(traceDepth(trace, traceLevelsDb(trace))[1]).toBe(0);
    const louder = traceOf([-60, -60, 6]);
    expect(traceDepth(louder, traceLevelsDb(louder))[1]).toBe(10);
  });
});

describe('highestPerDot and highestAt', () => {
  it('keep a peak of one sample at its height, however coarse the dots', () => {
    const levels = new Array<number>(1001).fill(-70);
    levels[503] = -12;
    const curve = highestPerDot(traceOf(levels), [0, 100], 21);
    expect(curve.x.length).toBe(21);
    expect(Math.max(...curve.y)).toBeCloseTo(-12, 9);
    expect(highestAt(curve, 50.3)).toBeCloseTo(-12, 9);
    expect(highestAt(curve, 30)).toBeCloseTo(-70, 9);
    expect(highestAt(curve, 200)).toBeNaN();
  });
});
