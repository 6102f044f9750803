import { describe, expect, it } from 'vitest';
import { createCascade, type Stage } from '../../src/line/cascade.ts';
import { strengthOfNormalised } from '../../src/line/discontinuity.ts';
import { portMedium, guideMedium as programMedium } from '../../src/line/medium.ts';
import { seededDraws } from './draws.ts';
import { LUMPED_KINDS } from './fault.ts';
import {
  AS_TYPED,
  GUIDES,
  type GuideName,
  guideMedium,
  guideResolutionM,
  guideUnambiguousM,
} from './guide-medium.ts';
import {
  drawFlange,
  drawGuideEnd,
  flangeElements,
  type GuideScale,
  levelsDb,
  lumpElement,
  reflectionOfElements,
  terminationOf,
} from './guide-parts.ts';
import { chainToPort, type Element, reflectionAgainst } from './ladder.ts';

function scaleOf(name: GuideName, points = 201, temperatureC = 20): GuideScale {
  const [low, high] = GUIDES[name].bandHz;
  const frequencyHz = Float64Array.from(
    { length: points },
    (_, k) => low + ((high - low) * k) / (points - 1),
  );
  return { frequencyHz, medium: guideMedium(GUIDES[name], AS_TYPED, temperatureC, frequencyHz) };
}

describe('guideMedium of the scenes', () => {
  it('gives the printed phase constants: 158.238 rad/m of WR-90 at 10 GHz', () => {
    // @source references.md section 4: β, and λg 77.247 mm (WR-187, 5 GHz) and 25.804 mm (WR-62, 15 GHz).
    const beta = (name: GuideName, hz: number) =>
      guideMedium(GUIDES[name], AS_TYPED, 20, Float64Array.of(hz)).gammaIm[0]!;
    expect(beta('WR-90', 10e9)).toBeCloseTo(158.238, 3);
    expect((2 * Math.PI) / beta('WR-187', 5e9)).toBeCloseTo(0.077247, 6);
    expect((2 * Math.PI) / beta('WR-62', 15e9)).toBeCloseTo(0.025804, 6);
  });

  it('tells apart and folds as β does: 26.8 mm and 20.4 m for 801 points over the band of WR-90', () => {
    const { medium } = scaleOf('WR-90', 801);
    // @source references.md section 4: λg 60.886 and 28.485 mm at the edges, 5.55510 ns/m at the lower one.
    expect(guideResolutionM(medium)).toBeCloseTo(1 / (2 / 0.028485 - 2 / 0.060886), 5);
    // The mean of the first step is 0.1 % less steep than its start.
    expect(guideUnambiguousM(medium)).toBeCloseTo(800 / (2 * 4.2e9 * 5.5551e-9), 1);
  });
});

describe('chains of guide', () => {
  it.each(LUMPED_KINDS)('agree with the program’s cascade on a shorted run with %s in it', (kind) => {
    const scale = scaleOf('WR-137', 301, 5);
    const { frequencyHz } = scale;
    const middleHz = frequencyHz[150]!;
    const [a, b] = [GUIDES['WR-137'].aM * 1000, GUIDES['WR-137'].bM * 1000];
    const type = {
      id: 'g',
      name: 'g',
      aMm: a,
      aToleranceMm: 0.1,
      bMm: b,
      conductivitySPerM: 5.813e7,
      lossDbPer100m: null,
      bandMHz: null,
    };
    const medium = programMedium(type, frequencyHz, { temperatureC: 5, z0Ohm: 50 });
    const stages: Stage[] = [
      { type: 'step', before: portMedium(50, frequencyHz.length), after: medium, ratio: 1 },
      { type: 'line', medium, lengthM: 4, conductor: 0, dielectric: 0 },
      { ...strengthOfNormalised(kind, 0.3, middleHz), medium },
      { type: 'line', medium, lengthM: 11, conductor: 0, dielectric: 0 },
    ];
    const theirs = createCascade(frequencyHz).gamma(stages, { type: 'short', parameters: [0] });
    const slab = (lengthM: number): Element => ({
      type: 'slab',
      medium: scale.medium,
      lengthM,
      impedanceScale: 1,
    });
    const lump = lumpElement({ kind, size: 0.3, law: 'frequency' }, scale);
    const end = terminationOf(drawGuideEnd('short', seededDraws('end'), scale), scale);
    const port = { re: scale.medium.impedanceRe, im: new Float64Array(frequencyHz.length) };
    const ours = reflectionAgainst(chainToPort([slab(4), lump, slab(11)], end, frequencyHz), port);
    // Two ways of the same formulas; some thousand radians there and back keep nine digits.
    for (let k = 0; k < frequencyHz.length; k++)
      expect(Math.hypot(ours.re[k]! - theirs.re[k]!, ours.im[k]! - theirs.im[k]!)).toBeLessThan(1e-7);
  });

  it('reflect of a lump what the closed forms say: r/(2 + r), −g/(2 + g), and x, b at mid-band', () => {
    const scale = scaleOf('WR-75');
    const gammaOf = (kind: (typeof LUMPED_KINDS)[number]) =>
      reflectionOfElements([lumpElement({ kind, size: 0.4, law: 'phase' }, scale)], scale);
    expect(gammaOf('series-resistance').re[7]).toBeCloseTo(0.4 / 2.4, 12);
    expect(gammaOf('shunt-leakage').re[7]).toBeCloseTo(-0.4 / 2.4, 12);
    // j0.4/(2 + j0.4), and its negative.
    for (const [kind, sign] of [
      ['series-inductance', 1],
      ['shunt-capacitance', -1],
    ] as const) {
      expect(gammaOf(kind).im[100]).toBeCloseTo((sign * 0.8) / 4.16, 12);
      expect(gammaOf(kind).re[100]).toBeCloseTo((sign * 0.16) / 4.16, 12);
    }
  });
});

describe('drawFlange', () => {
  it('meets its worst return loss over the band', () => {
    const scale = scaleOf('WR-112');
    for (const wanted of [30, 38, 46]) {
      const flange = drawFlange(seededDraws('flange', wanted), wanted, scale);
      expect(levelsDb(reflectionOfElements(flangeElements(flange, scale), scale)).worst).toBeCloseTo(
        wanted,
        2,
      );
    }
  });
});

describe('drawGuideEnd', () => {
  it('gives passive ends: a full short, a mouth that radiates, a quiet load, a feed with a band', () => {
    const scale = scaleOf('WR-137');
    for (let seed = 0; seed < 40; seed++) {
      const level = (kind: Parameters<typeof drawGuideEnd>[0]) =>
        levelsDb(drawGuideEnd(kind, seededDraws(kind, seed), scale));
      expect(level('short').rms).toBeCloseTo(0, 12);
      expect(level('open').rms).toBeGreaterThan(7);
      expect(level('open').rms).toBeLessThan(18);
      expect(level('load').rms).toBeGreaterThan(21.5);
      expect(level('load').worst).toBeLessThan(38.5);
      expect(level('antenna').worst).toBeGreaterThan(0);
    }
  });
});
