import { describe, expect, it } from 'vitest';
import { sweepQuality } from '../../src/sweep/quality.ts';
import { drawnSweep, evenHz, sweepFrom } from './drawn-sweep.ts';

const WIDE = evenHz(2e6, 2.7e9, 1350);
const OPEN_END = [{ delayS: 300e-9, gamma: 0.8 }];

function codesOf(...of: Parameters<typeof drawnSweep>): string[] {
  return sweepQuality(drawnSweep(...of)).notices.map((n) => n.code);
}

describe('sweepQuality', () => {
  it('gives span, step, evenness, noise and largest reflection of a good sweep, without a notice', () => {
    const quality = sweepQuality(drawnSweep(WIDE, OPEN_END, { noiseDb: -65 }));
    expect(quality).toMatchObject({ spanHz: 2.698e9, stepHz: 2e6, even: true, notices: [] });
    expect(quality.noiseFloorDb).toBeCloseTo(-65, -0.5);
    expect(quality.maxGammaDb).toBeCloseTo(20 * Math.log10(0.8), 1);
  });

  it('says that there are few points', () => {
    expect(codesOf(evenHz(1e6, 1e9, 11), OPEN_END)).toContain('sweep-few-points');
    expect(codesOf(evenHz(1e6, 1e9, 51), OPEN_END)).not.toContain('sweep-few-points');
  });

  it('says that steps are uneven, and how uneven', () => {
    const frequencyHz = Float64Array.from([...evenHz(1e6, 1e8, 100), ...evenHz(1.1e8, 1e9, 90)]);
    const { notices, stepHz, even } = sweepQuality(drawnSweep(frequencyHz, OPEN_END));
    expect([even, Math.round(stepHz)]).toEqual([false, 1e6]);
    expect(notices.map((n) => n.code)).toContain('sweep-uneven');
    expect(notices[0]!.what).toMatch(/smallest step 1 MHz, mean 5\.286 MHz/);
  });

  it('says that points lie almost on the one before', () => {
    const frequencyHz = Float64Array.from([...evenHz(1e6, 1e8, 100), 1e8 + 5, ...evenHz(1.01e8, 2e8, 100)]);
    const { notices } = sweepQuality(drawnSweep(frequencyHz, OPEN_END));
    expect(notices.find((n) => n.code === 'sweep-near-repeats')!.what).toBe(
      'one frequency lies almost on the one before',
    );
  });

  it('says where and by how much the reflection exceeds 1, beyond a calibration’s error', () => {
    const { notices } = sweepQuality(drawnSweep(WIDE, [{ delayS: 300e-9, gamma: 1.1 }]));
    expect(notices[0]).toMatchObject({
      code: 'sweep-active',
      what: expect.stringMatching(/reaches 1\.10 \(\+0\.8 dB\) at .* over 1 at 1350 of 1350 points/),
    });
    // ±0.2 dB is what a field calibration leaves (references.md section 8).
    expect(codesOf(WIDE, [{ delayS: 300e-9, gamma: 1.02 }])).not.toContain('sweep-active');
  });

  it('says that a sweep is all zeros, and that it is all one value', () => {
    expect(codesOf(WIDE, [])).toEqual(['sweep-all-zero']);
    const same = sweepFrom(WIDE, { re: WIDE.map(() => 0.5), im: WIDE.map(() => 0) });
    expect(sweepQuality(same).notices[0]).toMatchObject({
      code: 'sweep-constant',
      what: expect.stringContaining('-6.0 dB'),
    });
  });

  it('says that a sweep is noisy, and that it is nothing but noise', () => {
    expect(codesOf(WIDE, OPEN_END, { noiseDb: -35 })).toEqual(['sweep-noisy']);
    expect(codesOf(WIDE, [], { noiseDb: -35 })).toEqual(['sweep-noise-only']);
  });

  it.each([
    ['two points', Float64Array.of(0, 1)],
    ['tiny steps', Float64Array.of(1, 1 + 1e-12, 2)],
    ['a huge span', Float64Array.of(0, 1, 1e13)],
  ])('never gives NaN: %s', (_, frequencyHz) => {
    const quality = sweepQuality(drawnSweep(frequencyHz, OPEN_END));
    for (const value of [quality.spanHz, quality.stepHz, quality.noiseFloorDb, quality.maxGammaDb])
      expect(Number.isFinite(value)).toBe(true);
  });
});
