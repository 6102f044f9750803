/** Ohms measured along lines that the program's cascade and, apart from it, the scenes' chain have made. */
import { describe, expect, it } from 'vitest';
import type { Cable } from '../../src/line/cable.ts';
import type { Line } from '../../src/line/line.ts';
import { type ImpedanceProfile, measuredProfile } from '../../src/locate/impedance-profile.ts';
import { createRandom } from '../../src/numerics/random.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';
import { coaxMedium as scenesMedium } from '../scenes/coax-medium.ts';
import { chainToPort, type Element, reflectionAtPort } from '../scenes/ladder.ts';
import { type EndModel as ScenesEnd, terminate } from '../scenes/termination.ts';
import { evenHz, FOAM, lineOf, MATCHED, OPEN, SHORT, SOLID, sweepThrough } from './drawn-line.ts';

/** Within this, Ω, a 75 Ω section in a 50 Ω run has to read. */
const WITHIN_OHM = 1.5;

const WIDE = evenHz(2e6, 2.7e9, 1350);

/** Mean, least and most of a stretch, a few centimetres of rise at its ends left out. */
function ohmsOf({ distanceM, impedanceOhm }: ImpedanceProfile, fromM: number, toM: number) {
  const inside = impedanceOhm.filter((_, j) => distanceM[j]! > fromM && distanceM[j]! < toM);
  return {
    mean: inside.reduce((sum, ohm) => sum + ohm, 0) / inside.length,
    least: inside.reduce((least, ohm) => Math.min(least, ohm), Number.POSITIVE_INFINITY),
    most: inside.reduce((most, ohm) => Math.max(most, ohm), 0),
  };
}

/** A run described as one cable, with 75 Ω from 18 m to 21 m of it in truth. */
function withSection(of: Cable, lengthM: number) {
  const stretches = [
    { cable: of, lengthM: 0.4 * lengthM },
    { cable: { ...of, z0Ohm: 75 }, lengthM: 0.07 * lengthM },
    { cable: of, lengthM: 0.53 * lengthM },
  ];
  return { stretches, line: lineOf([{ cable: of, lengthM }]), fromM: 0.4 * lengthM, toM: 0.47 * lengthM };
}

function expectSection(profile: ImpedanceProfile, fromM: number, toM: number, endM: number): void {
  const margin = 0.15 * (toM - fromM);
  const section = ohmsOf(profile, fromM + margin, toM - margin);
  expect(section.least).toBeGreaterThan(75 - WITHIN_OHM);
  expect(section.most).toBeLessThan(75 + WITHIN_OHM);
  for (const [a, b] of [
    [0.02 * fromM, fromM - margin],
    [toM + margin, endM - 0.5],
  ] as const) {
    const around = ohmsOf(profile, a, b);
    expect(Math.abs(around.mean - 50)).toBeLessThan(WITHIN_OHM);
  }
}

describe('measuredProfile', () => {
  it.each([
    ['low loss, matched', FOAM, 45, MATCHED],
    ['low loss, open', FOAM, 45, OPEN],
    ['low loss, shorted', FOAM, 45, SHORT],
    ['lossy, matched', SOLID, 32, MATCHED],
    ['lossy, open', SOLID, 32, OPEN],
    ['lossy, shorted', SOLID, 32, SHORT],
  ])('reads 75 Ω for a 75 Ω section in a 50 Ω run: %s', (_, of, lengthM, end) => {
    const { stretches, line, fromM, toM } = withSection(of, lengthM);
    for (const noise of [0, 1e-3]) {
      const sweep = sweepThrough(stretches, end, WIDE, { noise });
      expectSection(measuredProfile({ sweep, line, lengthM }), fromM, toM, lengthM);
    }
  });

  it.each([
    ['from a fraction of a step', evenHz(3e5, 3e9, 1601), 45],
    ['from the second step', evenHz(4e6, 2e9, 999), 20],
    ['from the fourth step', evenHz(8e6, 2e9, 997), 10],
    ['with a point at 0 Hz', evenHz(0, 2e9, 1001), 30],
    ['logarithmic', Float64Array.from({ length: 1200 }, (_, k) => 1e6 * 1.00577 ** k), 12],
    ['segments', Float64Array.from([...evenHz(1e6, 3e8, 300), ...evenHz(3.02e8, 2e9, 850)]), 30],
    ['a repeated point', Float64Array.from([...evenHz(2e6, 1e9, 500), ...evenHz(1e9, 2e9, 501)]), 30],
  ])('reads it whatever the frequencies: %s', (_, frequencyHz, lengthM) => {
    const { stretches, line, fromM, toM } = withSection(FOAM, lengthM);
    // The cascade is not used at 0 Hz: an open line returns all there.
    const above = frequencyHz.map((f) => Math.max(f, 1));
    const sweep = { ...sweepThrough(stretches, OPEN, above, { noise: 1e-4 }), frequencyHz };
    expectSection(measuredProfile({ sweep, line, lengthM }), fromM, toM, lengthM);
  });

  it.each([
    ['open', { kind: 'open', fringeF: 0.05e-12 }],
    ['short', { kind: 'short', inductanceH: 0.1e-9 }],
    ['load', { kind: 'load', resistanceOhm: 53, inductanceH: 0.3e-9, capacitanceF: 0.1e-12 }],
    [
      'antenna',
      { kind: 'antenna', form: 'grounded', resonances: [{ centreHz: 1.9e9, quality: 6, resistanceOhm: 47 }] },
    ],
  ] satisfies [string, ScenesEnd][])(
    'reads it on a line of unlike sections made by an independent chain: %s',
    (_, end) => {
      const jumper = { z0Ohm: 50, velocityFactor: 0.81, k1: 0.32694, k2: 0.001237 };
      const parts = [
        { figures: jumper, lengthM: 2 },
        { figures: FOAM, lengthM: 18 },
        { figures: { ...FOAM, z0Ohm: 75 }, lengthM: 3 },
        { figures: FOAM, lengthM: 22 },
        { figures: jumper, lengthM: 2 },
      ];
      const chain = chainToPort(
        parts.map(({ figures, lengthM }) => ({
          type: 'slab',
          medium: scenesMedium(figures, 20, WIDE),
          lengthM,
          impedanceScale: 1,
        })),
        terminate(end, WIDE),
        WIDE,
      );
      const gamma = reflectionAtPort(chain, 50);
      const random = createRandom(5);
      for (const values of [gamma.re, gamma.im])
        values.forEach((value, k) => {
          values[k] = value + 5e-4 * random.normal();
        });
      const line: Line = lineOf([
        { cable: { ...FOAM, ...jumper }, lengthM: 2 },
        { cable: FOAM, lengthM: 43 },
        { cable: { ...FOAM, ...jumper }, lengthM: 2 },
      ]);
      const sweep: Sweep = {
        frequencyHz: WIDE,
        gamma,
        portOhm: 50,
        port: 1,
        ports: 1,
        file: '',
        comments: [],
      };
      const profile = measuredProfile({ sweep, line, lengthM: 47 });
      expectSection(profile, 20, 23, 45);
      expect(profile.origin).toBe('measured');
    },
  );

  it('reads several sections one behind the other, bounces between them taken off', () => {
    const values = [50, 75, 60, 35, 50];
    const stretches = values.map((z0Ohm) => ({ cable: { ...FOAM, z0Ohm }, lengthM: 6 }));
    const sweep = sweepThrough(stretches, OPEN, evenHz(2e6, 2.7e9, 1350), { noise: 3e-4 });
    const profile = measuredProfile({ sweep, line: lineOf([{ cable: FOAM, lengthM: 30 }]), lengthM: 30 });
    values.forEach((ohm, i) => {
      const { mean } = ohmsOf(profile, 6 * i + 0.5, 6 * i + 5.5);
      expect(Math.abs(mean - ohm)).toBeLessThan(WITHIN_OHM);
    });
  });

  it.each([
    // A resistance in series stays in the reading, one across the line too: R + 50, and 50 beside R.
    ['9 Ω in series', { type: 'series', resistanceOhm: 9, inductanceH: 0 }, 59],
    ['30 Ω in series', { type: 'series', resistanceOhm: 30, inductanceH: 0 }, 80],
    ['200 Ω across the line', { type: 'shunt', conductanceS: 1 / 200, capacitanceF: 0 }, 40],
    ['0.6 pF across the line', { type: 'shunt', conductanceS: 0, capacitanceF: 0.6e-12 }, 50],
    ['1.5 nH in series', { type: 'series', resistanceOhm: 0, inductanceH: 1.5e-9 }, 50],
  ] satisfies [string, Element, number][])(
    'does not take the bounces of a fault for impedances: %s',
    (_, fault, wanted) => {
      for (const end of [
        { kind: 'open', fringeF: 0 },
        { kind: 'short', inductanceH: 0 },
      ] satisfies ScenesEnd[]) {
        const medium = scenesMedium(FOAM, 20, WIDE);
        const slab = (lengthM: number): Element => ({ type: 'slab', medium, lengthM, impedanceScale: 1 });
        const chain = chainToPort([slab(20), fault, slab(25)], terminate(end, WIDE), WIDE);
        const gamma = reflectionAtPort(chain, 50);
        const sweep: Sweep = {
          frequencyHz: WIDE,
          gamma,
          portOhm: 50,
          port: 1,
          ports: 1,
          file: '',
          comments: [],
        };
        const profile = measuredProfile({ sweep, line: lineOf([{ cable: FOAM, lengthM: 45 }]), lengthM: 45 });
        expect(Math.abs(ohmsOf(profile, 1, 19.5).mean - 50)).toBeLessThan(WITHIN_OHM);
        expect(Math.abs(ohmsOf(profile, 20.5, 44).mean - wanted)).toBeLessThan(WITHIN_OHM);
      }
    },
  );

  it.each([2e6, 20e6, 40e6])('reads a line of a few resolutions from %d Hz on', (startHz) => {
    const stretches = [0.8, 0.6, 0.6].map((lengthM, i) => ({
      cable: { ...FOAM, z0Ohm: i === 1 ? 75 : 50 },
      lengthM,
    }));
    const sweep = sweepThrough(stretches, OPEN, evenHz(startHz, startHz + 998e6, 500), { noise: 1e-3 });
    const profile = measuredProfile({ sweep, line: lineOf([{ cable: FOAM, lengthM: 2 }]), lengthM: 2 });
    expect(Math.abs(ohmsOf(profile, 0.05, 0.6).mean - 50)).toBeLessThan(WITHIN_OHM);
    expect(Math.abs(ohmsOf(profile, 1, 1.2).mean - 75)).toBeLessThan(WITHIN_OHM);
  });

  it('reads the run’s own impedance from a port of another', () => {
    const line = lineOf([{ cable: { ...FOAM, z0Ohm: 75 }, lengthM: 20 }]);
    const sweep = sweepThrough([{ cable: { ...FOAM, z0Ohm: 75 }, lengthM: 20 }], OPEN, WIDE, { noise: 3e-4 });
    const { mean } = ohmsOf(measuredProfile({ sweep, line, lengthM: 20 }), 1, 19);
    expect(mean).toBeCloseTo(75, 0);
  });

  it('rises at the end of an open line, falls at that of a shorted one, and stays in bounds', () => {
    for (const [end, wanted] of [
      [OPEN, 'high'],
      [SHORT, 'low'],
    ] as const) {
      const sweep = sweepThrough([{ cable: FOAM, lengthM: 30 }], end, WIDE);
      const profile = measuredProfile({ sweep, line: lineOf([{ cable: FOAM, lengthM: 30 }]), lengthM: 30 });
      const last = profile.impedanceOhm.at(-1)!;
      expect(profile.distanceM[0]).toBeCloseTo(0, 1);
      expect(profile.distanceM.at(-1)).toBeGreaterThan(30);
      expect(wanted === 'high' ? last > 500 : last < 5).toBe(true);
      expect(profile.impedanceOhm.every((ohm) => ohm >= 0.99 && ohm <= 2501)).toBe(true);
    }
  });

  it('puts distances on the scale that the solver found', () => {
    const { stretches, line } = withSection(FOAM, 40);
    const sweep = sweepThrough(stretches, MATCHED, WIDE);
    // The line is 2 % longer than the described velocity makes it.
    const profile = measuredProfile({ sweep, line, lengthM: 40.8, distanceScale: 1.02 });
    const half = profile.impedanceOhm.findIndex((ohm) => ohm > 61.2);
    expect(profile.distanceM[half]).toBeCloseTo(1.02 * 16, 1);
  });

  it('takes the length of a section that the description leaves open from what was found', () => {
    const { stretches, fromM, toM } = withSection(FOAM, 40);
    const sweep = sweepThrough(stretches, OPEN, WIDE, { noise: 3e-4 });
    const profile = measuredProfile({ sweep, line: lineOf([{ cable: FOAM, lengthM: null }]), lengthM: 40 });
    expectSection(profile, fromM, toM, 40);
  });

  it('grows softer instead of noisy with distance where the line is lossy', () => {
    const line = lineOf([{ cable: SOLID, lengthM: 40 }]);
    const sweep = sweepThrough([{ cable: SOLID, lengthM: 40 }], MATCHED, evenHz(2e6, 3e9, 1500), {
      noise: 1e-3,
    });
    const { least, most } = ohmsOf(measuredProfile({ sweep, line, lengthM: 40 }), 0.5, 39);
    expect([least > 48.5, most < 51.5]).toEqual([true, true]);
  });

  it('leaves the top of the band out on a line of so many wavelengths that nobody could see them', () => {
    const line = lineOf([{ cable: FOAM, lengthM: 400 }]);
    const sweep = sweepThrough([{ cable: FOAM, lengthM: 400 }], OPEN, evenHz(2e5, 2.7e9, 13500));
    const begin = performance.now();
    const profile = measuredProfile({ sweep, line, lengthM: 400 });
    expect(profile.distanceM.length).toBeLessThan(4100);
    expect(ohmsOf(profile, 5, 380).mean).toBeCloseTo(50, 0);
    // Some 150 ms on this machine when it is free.
    expect(performance.now() - begin).toBeLessThan(3000);
  });
});
