import { describe, expect, it } from 'vitest';
import { DB_PER_NEPER, SPEED_OF_LIGHT } from '../../src/line/constants.ts';
import {
  type Guide,
  guideCutoffHz,
  guideGroupDelaySPerM,
  guideLossDbPer100m,
  guideNextModeHz,
  guidePhasePerWidth,
  guidePhaseRadPerM,
  guideReach,
  guideVelocitySpread,
  guideWavelengthM,
  outsideGuideBand,
} from '../../src/line/guide.ts';
import { shippedTable } from './shipped-cables.ts';

const TABLE = shippedTable();

function guide(id: string): Guide {
  const found = TABLE.findGuide(id);
  if (!found) throw new Error(`no guide ${id}`);
  return found;
}

/** A guide of these sides and walls. */
const own = (aMm: number, bMm: number, conductivitySPerM: number): Guide => ({
  id: 'own',
  name: 'own',
  aMm,
  aToleranceMm: 0.1,
  bMm,
  conductivitySPerM,
  lossDbPer100m: null,
  bandMHz: null,
});

describe('the table of guides', () => {
  it.each([
    // id, a, b mm, cut-off, next mode GHz, band GHz, vg/c at its edges. @source references.md section 4.
    ['WR-229', 58.166, 29.083, 2.577, 5.154, [3.3, 4.9], [0.6246, 0.8505]],
    ['WR-187', 47.549, 22.149, 3.1525, 6.305, [3.95, 5.85], [0.6025, 0.8424]],
    ['WR-159', 40.386, 20.193, 3.7116, 7.423, [4.9, 7.05], [0.6529, 0.8502]],
    ['WR-137', 34.849, 15.799, 4.3013, 8.603, [5.85, 8.2], [0.6778, 0.8514]],
    ['WR-112', 28.499, 12.624, 5.2597, 10.519, [7.05, 10], [0.6659, 0.8505]],
    ['WR-90', 22.86, 10.16, 6.5571, 13.114, [8.2, 12.4], [0.6005, 0.8487]],
    ['WR-75', 19.05, 9.525, 7.8686, 15.737, [10, 15], [0.6171, 0.8514]],
    ['WR-62', 15.799, 7.899, 9.4878, 18.976, [12.4, 18], [0.6439, 0.8498]],
  ] as const)(
    'the table of guides has %s with its published size, band and cut-off',
    (id, a, b, cutoffGHz, nextGHz, bandGHz, ratios) => {
      const found = guide(id);
      // Exact inch sizes there, printed to a micrometre.
      expect([found.aMm, found.bMm]).toEqual([expect.closeTo(a, 3), expect.closeTo(b, 3)]);
      expect(guideCutoffHz(found) / 1e9).toBeCloseTo(cutoffGHz, 4);
      expect(guideNextModeHz(found) / 1e9).toBeCloseTo(nextGHz, 3);
      expect(found.bandMHz?.map((mhz) => mhz / 1e3)).toEqual(bandGHz);
      bandGHz.forEach((ghz, i) => {
        expect(1 / (SPEED_OF_LIGHT * guideGroupDelaySPerM(found, ghz * 1e9))).toBeCloseTo(ratios[i] ?? 0, 4);
      });
    },
  );
});

describe('guidePhaseRadPerM, guideWavelengthM and guideGroupDelaySPerM', () => {
  it.each([
    // id, GHz, λg mm, ns per metre. @source references.md section 4, worked examples.
    ['WR-90', 10, 39.7071, 4.41801],
    ['WR-90', 8.2, 60.886, 5.5551],
    ['WR-90', 12.4, 28.485, 3.93008],
    ['WR-187', 5, 77.247, 4.29743],
    ['WR-62', 15, 25.804, 4.30659],
  ] as const)('meet the worked figures of %s at %d GHz', (id, ghz, wavelengthMm, nsPerM) => {
    expect(guideWavelengthM(guide(id), ghz * 1e9) * 1e3).toBeCloseTo(wavelengthMm, 3);
    expect(guideGroupDelaySPerM(guide(id), ghz * 1e9) * 1e9).toBeCloseTo(nsPerM, 5);
  });

  it('have the published β of WR-90 at 10 GHz, and vp·vg = c² everywhere', () => {
    expect(guidePhaseRadPerM(guide('WR-90'), 10e9)).toBeCloseTo(158.238, 3);
    for (const ratio of [1.0001, 1.05, 1.4, 1.9, 30]) {
      const f = ratio * guideCutoffHz(guide('WR-137'));
      const phaseVelocity = (2 * Math.PI * f) / guidePhaseRadPerM(guide('WR-137'), f);
      const product = phaseVelocity / guideGroupDelaySPerM(guide('WR-137'), f);
      expect(product / SPEED_OF_LIGHT ** 2).toBeCloseTo(1, 12);
    }
  });

  it('have a group delay that is the slope of β', () => {
    for (const f of [5e9, 6.5e9, 8e9]) {
      const step = 1e4;
      const slope =
        (guidePhaseRadPerM(guide('WR-137'), f + step) - guidePhaseRadPerM(guide('WR-137'), f - step)) /
        (4 * Math.PI * step);
      // β is about 100 rad/m with 16 digits, its difference over 20 kHz 4e-4: nine digits are left of it.
      expect(slope / guideGroupDelaySPerM(guide('WR-137'), f)).toBeCloseTo(1, 7);
    }
  });

  it('refuse the cut-off and what lies below', () => {
    const found = guide('WR-137');
    for (const f of [guideCutoffHz(found), 1e9, 0, Number.NaN]) {
      expect(() => guidePhaseRadPerM(found, f)).toThrow(RangeError);
      expect(() => guideGroupDelaySPerM(found, f)).toThrow(RangeError);
      expect(() => guideLossDbPer100m(found, f, 20)).toThrow(RangeError);
    }
  });
});

describe('guideLossDbPer100m', () => {
  /** Brass and copper, S/m. @source Pozar, 4th ed., appendix F. */
  const BRASS = 2.564e7;
  const COPPER = 5.813e7;

  it.each([
    // dB per 100 ft at the lower and upper edge of the band, brass walls: the theoretical attenuation that tables of
    // rectangular guide print. Their brass is no closer to Pozar's than 1 %, WR-137's lower edge 2.5 %.
    // @source Reference Data for Radio Engineers, 5th ed., table of rectangular waveguides; from memory.
    ['WR-187', [2.07, 1.44], 0.01],
    ['WR-137', [2.87, 2.3], 0.025],
    ['WR-112', [4.12, 3.21], 0.01],
    ['WR-90', [6.45, 4.48], 0.01],
  ] as const)('meets the published attenuation of %s', (id, dbPer100ft, tolerance) => {
    const brass = { ...guide(id), conductivitySPerM: BRASS };
    guide(id).bandMHz?.forEach((mhz, i) => {
      const per100ft = guideLossDbPer100m(brass, mhz * 1e6, 20) * 0.3048;
      expect(Math.abs(per100ft / (dbPer100ft[i] ?? 0) - 1)).toBeLessThan(tolerance);
    });
  });

  it('meets the worked example of a filled K-band guide: 0.050 Np/m at 15 GHz', () => {
    // a = 10.7 mm, b = 4.3 mm, εr = 2.08. With k and β the same, an air guide at f·√εr loses εr^(−1/4) of that: its
    // surface resistance is up by εr^(1/4), its η by εr^(1/2). @source Pozar, 4th ed., example 3.1; printed 0.050.
    const er = 2.08;
    const inAir = guideLossDbPer100m(own(10.7, 4.3, COPPER), 15e9 * Math.sqrt(er), 20);
    expect((inAir / 100 / DB_PER_NEPER) * er ** 0.25).toBeCloseTo(0.05, 3);
  });

  it('agrees with wall currents added up: α = power lost per metre over twice the power that passes', () => {
    // TE10 with E0 = 1 V/m. Passing: P = ab·β/(4ωμ). Lost: Rs/2·∮|Hwall|², with Hx = β/(ωμ)·sin, Hz = π/(ωμa)·cos.
    const [a, b, f] = [0.022_86, 0.010_16, 9.4e9];
    const omegaMu = 2 * Math.PI * f * 1.256_637_062_12e-6;
    const beta = guidePhaseRadPerM({ aMm: a * 1e3 }, f);
    const surfaceOhm = Math.sqrt((Math.PI * f * 1.256_637_062_12e-6) / COPPER);
    const hx = beta / omegaMu;
    const hz = Math.PI / (omegaMu * a);
    const lost = (surfaceOhm / 2) * (2 * b * hz * hz + 2 * (a / 2) * (hx * hx + hz * hz));
    const passing = (a * b * beta) / (4 * omegaMu);
    const wanted = (lost / (2 * passing)) * 100 * DB_PER_NEPER;
    expect(guideLossDbPer100m(own(22.86, 10.16, COPPER), f, 20) / wanted).toBeCloseTo(1, 8);
  });

  it('takes an inline figure as constant over the band, and both as growing with the metal’s temperature', () => {
    const inline = { ...own(34.849, 15.8, COPPER), lossDbPer100m: 7 };
    expect([5.9e9, 8e9].map((f) => guideLossDbPer100m(inline, f, 20))).toEqual([7, 7]);
    // √(1 + 0.0039·40) = 1.0752
    for (const one of [inline, guide('WR-137')])
      expect(guideLossDbPer100m(one, 7e9, 60) / guideLossDbPer100m(one, 7e9, 20)).toBeCloseTo(1.0752, 4);
  });
});

describe('guideReach', () => {
  it('is π/(β2 − β1), and (N − 1)/(2·B·τg) with the slowest group delay', () => {
    const reach = guideReach(guide('WR-90'), { startHz: 8.2e9, stopHz: 12.4e9, points: 801 });
    // λg 60.886 and 28.485 mm: β 103.196 and 220.579 rad/m; 5.5551 ns/m. @source references.md section 4.
    expect(reach.resolutionM).toBeCloseTo(Math.PI / (220.579 - 103.196), 5);
    expect(reach.unambiguousM).toBeCloseTo(800 / (2 * 4.2e9 * 5.5551e-9), 3);
  });

  it('refuses a sweep that is none', () => {
    const found = guide('WR-90');
    for (const sweep of [
      { startHz: 6e9, stopHz: 12e9, points: 801 },
      { startHz: 9e9, stopHz: 9e9, points: 801 },
      { startHz: 9e9, stopHz: 10e9, points: 1 },
    ])
      expect(() => guideReach(found, sweep)).toThrow(RangeError);
  });
});

describe('guidePhasePerWidth', () => {
  it('is the slope of β over the width, (π/a)²/β', () => {
    const { aMm } = guide('WR-137');
    for (const f of [4.5e9, 5.9e9, 7.9e9]) {
      const h = 1e-6;
      const slope =
        (guidePhaseRadPerM({ aMm: aMm * (1 + h) }, f) - guidePhaseRadPerM({ aMm: aMm * (1 - h) }, f)) /
        (2 * h);
      // Second order of a step of 1e-6, and eleven digits left in the difference.
      expect(guidePhasePerWidth({ aMm }, f) / slope).toBeCloseTo(1, 7);
    }
  });

  it('turns an echo 10 m out by about a sixth of a radian, per ten-thousandth, beyond what a delay explains', () => {
    const { aMm } = guide('WR-137');
    const frequencies = Array.from({ length: 201 }, (_, k) => 5.9e9 + k * 1e7);
    const beta = frequencies.map((f) => guidePhaseRadPerM({ aMm }, f));
    const turn = frequencies.map((f) => 2 * 10 * 1e-4 * guidePhasePerWidth({ aMm }, f));
    // The straight line through turn against β: its slope is a distance, its intercept the phase of the kind.
    const mean = (values: readonly number[]): number => values.reduce((sum, v) => sum + v, 0) / values.length;
    const [mb, mt] = [mean(beta), mean(turn)];
    const slope = mean(beta.map((b, k) => (b - mb) * (turn[k]! - mt))) / mean(beta.map((b) => (b - mb) ** 2));
    expect(Math.abs(mt - slope * mb)).toBeGreaterThan(0.1);
    expect(Math.abs(mt - slope * mb)).toBeLessThan(0.4);
  });
});

describe('guideVelocitySpread', () => {
  it('is what a change of the width by its tolerance does to the mean delay', () => {
    const found = { ...guide('WR-137'), aToleranceMm: 0.01 };
    const delayOf = (aMm: number): number =>
      guidePhaseRadPerM({ aMm }, 7.9e9) - guidePhaseRadPerM({ aMm }, 5.9e9);
    const change = delayOf(found.aMm - 0.01) / delayOf(found.aMm) - 1;
    // The second order of 0.03 % of the width.
    expect(guideVelocitySpread(found, 5.9e9, 7.9e9) / change).toBeCloseTo(1, 2);
  });

  it('is a fraction of a per cent in the bands of the table', () => {
    for (const one of TABLE.guides) {
      const [low, high] = one.bandMHz ?? [0, 0];
      const spread = guideVelocitySpread(one, low * 1e6, high * 1e6);
      expect(spread).toBeGreaterThan(0.001);
      expect(spread).toBeLessThan(0.005);
    }
  });
});

describe('outsideGuideBand', () => {
  it('is silent within the band and for a guide that names none', () => {
    expect(outsideGuideBand(guide('WR-137'), 5.85e9, 8.2e9)).toBeNull();
    expect(outsideGuideBand(own(34.849, 15.8, 5.8e7), 4.4e9, 8.5e9)).toBeNull();
  });

  it('says on which side a sweep leaves it', () => {
    expect(outsideGuideBand(guide('WR-137'), 4.6e9, 8e9)?.what).toBe(
      'WR-137 waveguide is meant for 5850–8200 MHz; below it its delay and loss rise steeply towards the cut-off',
    );
    expect(outsideGuideBand(guide('WR-137'), 6e9, 8.4e9)?.what).toMatch(/above it its next mode comes near/u);
    expect(outsideGuideBand(guide('WR-137'), 6e9, 8.7e9)).toMatchObject({
      code: 'guide-modes',
      what: expect.stringMatching(/^above 8603 MHz WR-137 waveguide carries a second mode/u),
    });
  });
});
