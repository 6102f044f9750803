import { describe, expect, it } from 'vitest';
import { fitDoubt } from '../../src/assess/fit-doubt.ts';

describe('fitDoubt', () => {
  it('fitDoubt says so where the line explains little of a sweep that reflects much', () => {
    const doubt = fitDoubt({ explained: 0.0406, residualDb: -9.4 });
    expect(doubt?.code).toBe('line-unexplained');
    expect(doubt?.what).toContain('explains only 4 % of what comes back (−9 dB are left)');
    expect(fitDoubt({ explained: -0.02, residualDb: -3 })?.what).toContain('only 0 %');
  });

  it('fitDoubt has none where the line explains the sweep, or where only ripple is left to explain', () => {
    expect(fitDoubt({ explained: 0.9853, residualDb: -27.6 })).toBeNull();
    expect(fitDoubt({ explained: 0.5, residualDb: -38 })).toBeNull();
  });
});
