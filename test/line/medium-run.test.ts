import { describe, expect, it } from 'vitest';
import { guideGroupDelaySPerM } from '../../src/line/guide.ts';
import { coaxMedium, guideMedium } from '../../src/line/medium.ts';
import {
  groupDelaySPerM,
  losslessRun,
  runOfMedia,
  slowestGroupDelaySPerM,
} from '../../src/line/medium-run.ts';
import { shippedTable } from './shipped-cables.ts';

const TABLE = shippedTable();
const guide = TABLE.findGuide('WR-137')!;
const cable = TABLE.find('foam-7-8')!;
const at20 = { temperatureC: 20, z0Ohm: 50 };
const band = Float64Array.from({ length: 401 }, (_, k) => 5.9e9 + k * 5e6);

describe('slowestGroupDelaySPerM', () => {
  it('is the delay at the lower edge of the band in a guide', () => {
    const run = runOfMedia([guideMedium(guide, band, at20)], [10]);
    // The first step is 5 MHz wide: its mean is the delay in its middle, the closed form of 5.9025 GHz.
    expect(slowestGroupDelaySPerM(run, band)[0]! / guideGroupDelaySPerM(guide, 5.9025e9)).toBeCloseTo(1, 6);
    // Over the band the mean is 18 % less: the fold of a sweep comes that much nearer than the mean says.
    const mean = groupDelaySPerM(run, band)[0]!;
    expect(mean).toBeCloseTo(
      (guideMedium(guide, band, at20).gamma.im[400]! - guideMedium(guide, band, at20).gamma.im[0]!) /
        (4e9 * Math.PI),
      15,
    );
    expect(slowestGroupDelaySPerM(run, band)[0]! / mean).toBeGreaterThan(1.1);
  });

  it('is hardly more than the mean in a cable, and the same without dispersion', () => {
    const run = runOfMedia([coaxMedium(cable, band, at20)], [10]);
    expect(slowestGroupDelaySPerM(run, band)[0]! / groupDelaySPerM(run, band)[0]!).toBeCloseTo(1, 4);
    const lossless = losslessRun(band, [
      { lengthM: 1, velocityMPerS: 2e8 },
      { lengthM: 1, velocityMPerS: 1e8 },
    ]);
    expect(Array.from(slowestGroupDelaySPerM(lossless, band))).toEqual([
      expect.closeTo(5e-9, 14),
      expect.closeTo(1e-8, 14),
    ]);
  });
});
