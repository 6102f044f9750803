import { describe, expect, it } from 'vitest';
import { ohmsAt, ohmsInView, whyNoOhms } from '../../src/report/ohms-curve.ts';
import { makeAnalysis } from '../app/made-analysis.ts';

const profile = {
  distanceM: Float64Array.of(0, 8, 8, 20, 21),
  impedanceOhm: Float64Array.of(50, 50, 60, 60, 9000),
  origin: 'measured',
} as const;

describe('ohmsAt', () => {
  it('goes straight between the samples and knows nothing outside them', () => {
    expect(ohmsAt(profile, 4)).toBe(50);
    expect(ohmsAt(profile, 14)).toBe(60);
    expect(ohmsAt(profile, 20.5)).toBeCloseTo(4530, 9);
    expect(ohmsAt(profile, -1)).toBeNaN();
    expect(ohmsAt(profile, 22)).toBeNaN();
  });
});

describe('ohmsInView', () => {
  it('makes room for what lies before the end, not for the end', () => {
    const [low, high] = ohmsInView(makeAnalysis(), profile, [-1, 22]);
    expect(low).toBeLessThan(50);
    expect(high).toBeGreaterThan(60);
    expect(high).toBeLessThan(80);
  });
});

describe('whyNoOhms', () => {
  it('names the start of the sweep that is too high', () => {
    const { reach, sweep, ...rest } = makeAnalysis();
    const question = { ...rest, sweep, reach: { ...reach, impedanceProfile: 'no' as const } };
    expect(whyNoOhms(question).join(' ')).toContain('It starts at 5 MHz');
  });
});
