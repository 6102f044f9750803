import { describe, expect, it } from 'vitest';
import { strengthOf } from '../../src/line/discontinuity.ts';
import { fitOneLump, fitTwoLumps } from '../../src/locate/fit-lumps.ts';
import { localEcho } from '../../src/locate/local-echo.ts';
import { evenHz, FOAM, MATCHED } from './drawn-line.ts';
import {
  contextOn,
  type DrawnRun,
  EACH_KIND,
  modelOf,
  type PutIn,
  reflectionOf,
  searchOn,
  varianceOf,
  withNoise,
} from './drawn-model.ts';

const WIDE = evenHz(5e6, 2700e6, 540);
const BAND_LIMITED = evenHz(600e6, 2700e6, 540);
const NARROW = evenHz(1700e6, 2200e6, 400);
const RUN: DrawnRun = { sections: [{ cable: FOAM, lengthM: 14 }], end: MATCHED };
const NOISE_DB = -65;
const VARIANCE = varianceOf(NOISE_DB);

/** What a noisy sweep shows around a place. */
function echoOf(put: readonly PutIn[], frequencyHz: Float64Array, atM: number) {
  const gamma = withNoise(reflectionOf({ ...RUN, put }, frequencyHz), NOISE_DB, 11);
  return localEcho(contextOn(frequencyHz, gamma), modelOf(RUN, frequencyHz), atM, {
    lumps: [],
    boundary: null,
  });
}

describe('fitOneLump', () => {
  describe.each([
    ['wide', WIDE],
    ['band-limited', BAND_LIMITED],
    ['narrow', NARROW],
  ])('in a %s sweep', (_, frequencyHz) => {
    const { resolutionM } = searchOn(frequencyHz, FOAM);

    it.each(EACH_KIND)('names $kind, places it and sizes it', ({ kind, value }) => {
      // The plane is where a trace would put it: a little off.
      const echo = echoOf([{ kind, value, atM: 6.2 }], frequencyHz, 6.2 + 0.2 * resolutionM);
      const [best] = fitOneLump(echo, resolutionM, VARIANCE);
      const [lump] = best!.lumps;
      expect(lump!.type).toBe(kind);
      expect(Math.abs(lump!.distanceM - 6.2)).toBeLessThan(0.003);
      // 26 dB over −65 dB in 400 points: half a per cent, and 2 % for what the lump does to what is behind.
      expect(lump!.strength / strengthOf(kind, value, 50).strength).toBeGreaterThan(0.97);
      expect(lump!.strength / strengthOf(kind, value, 50).strength).toBeLessThan(1.03);
    });
  });

  it('ranks at most one fit of each kind, the likeliest first', () => {
    const put = [{ kind: 'series-resistance', value: 5, atM: 6.2 }] as const;
    const fits = fitOneLump(echoOf(put, NARROW, 6.2), 0.3, VARIANCE);
    const kinds = fits.map(({ lumps }) => lumps[0]!.type);
    expect(new Set(kinds).size).toBe(kinds.length);
    const costs = fits.map(({ cost }) => cost);
    expect(costs).toEqual([...costs].sort((a, b) => a - b));
    for (const { lumps } of fits) expect(lumps).toHaveLength(1);
  });

  it('looks no farther than it is told to', () => {
    const put = [{ kind: 'series-resistance', value: 5, atM: 6.2 }] as const;
    for (const { lumps } of fitOneLump(echoOf(put, WIDE, 7.2), 0.1, VARIANCE))
      expect(Math.abs(lumps[0]!.distanceM - 7.2)).toBeLessThan(0.3);
  });
});

describe('fitTwoLumps', () => {
  const { resolutionM } = searchOn(WIDE, FOAM);
  const apartM = [0.12 * resolutionM, 1.1 * resolutionM] as const;

  it.each([
    ['series-resistance', 8, 'shunt-capacitance', 0.3e-12],
    ['shunt-leakage', 300, 'series-inductance', 0.8e-9],
    ['series-inductance', 0.8e-9, 'shunt-capacitance', 0.3e-12],
    ['series-resistance', 8, 'series-resistance', 6],
  ] as const)('tells %s of %s from %s of %s in 6/10 of an echo’s width', (kindA, valueA, kindB, valueB) => {
    const farM = 6.2 + 0.6 * resolutionM;
    const put = [
      { kind: kindA, value: valueA, atM: 6.2 },
      { kind: kindB, value: valueB, atM: farM },
    ];
    const [best] = fitTwoLumps(echoOf(put, WIDE, 6.23), resolutionM, apartM, VARIANCE);
    const found = [...best!.lumps].sort((a, b) => a.distanceM - b.distanceM);
    expect(found.map(({ type }) => type)).toEqual([kindA, kindB]);
    expect(Math.abs(found[0]!.distanceM - 6.2)).toBeLessThan(0.004);
    expect(Math.abs(found[1]!.distanceM - farM)).toBeLessThan(0.004);
    expect(found[0]!.strength / strengthOf(kindA, valueA, 50).strength).toBeGreaterThan(0.9);
    expect(found[0]!.strength / strengthOf(kindA, valueA, 50).strength).toBeLessThan(1.1);
  });

  it('explains no less than one lump alone', () => {
    const put = [
      { kind: 'series-resistance', value: 8, atM: 6.2 },
      { kind: 'shunt-capacitance', value: 0.3e-12, atM: 6.23 },
    ] as const;
    const echo = echoOf(put, WIDE, 6.21);
    const [one] = fitOneLump(echo, resolutionM, VARIANCE);
    const [two] = fitTwoLumps(echo, resolutionM, apartM, VARIANCE);
    expect(two!.cost).toBeLessThan(one!.cost);
  });

  it('ranks its fits, the likeliest first', () => {
    const put = [{ kind: 'series-resistance', value: 8, atM: 6.2 }] as const;
    const costs = fitTwoLumps(echoOf(put, WIDE, 6.2), resolutionM, apartM, VARIANCE).map(({ cost }) => cost);
    expect(costs).toEqual([...costs].sort((a, b) => a - b));
  });
});
