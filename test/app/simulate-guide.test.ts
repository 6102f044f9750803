/** Simulation of waveguide runs, and what is refused of them. */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { parseFault } from '../../src/app/fault-text.ts';
import { simulate } from '../../src/app/simulate.ts';
import type { SimulateRequest } from '../../src/app/simulate-request.ts';
import { createCableTable } from '../../src/line/cable-table.ts';
import { guideLossDbPer100m, guidePhaseRadPerM } from '../../src/line/guide.ts';
import type { Line } from '../../src/line/line.ts';
import { readCables } from '../../src/line/read-cables.ts';
import { readLine } from '../../src/line/read-line.ts';
import { complexRms, complexSubtract } from '../../src/numerics/complex.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';

const FILES = ['rectangular-guide.json', 'solid-polyethylene-50.json', 'solid-polyethylene-75.json'].map(
  (name) => {
    const read = readCables(readFileSync(new URL(`../../cables/${name}`, import.meta.url), 'utf8'), name);
    if (!read.ok) throw new Error(JSON.stringify(read.problems));
    return read.value;
  },
);
const CABLES = createCableTable(...FILES);
const GUIDE = CABLES.findGuide('WR-137')!;

function line(sections: readonly string[], fields = '"end": "short", "temperatureC": 20'): Line {
  const read = readLine(`{ "sections": [${sections.join(', ')}], ${fields} }`, 'a.line.json', CABLES);
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  return read.value;
}

const tube = (lengthM: number): string => `{ "guide": "WR-137", "lengthM": ${lengthM} }`;
const inline = (lengthM: number, lossDbPer100m: number): string =>
  `{ "guide": { "id": "own", "aMm": 34.8488, "lossDbPer100m": ${lossDbPer100m} }, "lengthM": ${lengthM} }`;

function request(fields: Partial<SimulateRequest> = {}): SimulateRequest {
  return {
    line: line([tube(10)]),
    faults: [],
    range: { startHz: 5.9e9, stopHz: 7.9e9, points: 101 },
    portOhm: 50,
    asBuilt: null,
    noiseDb: null,
    residueDb: null,
    seed: 1,
    ...fields,
  };
}

function sweepOf(fields: Partial<SimulateRequest>): Sweep {
  const sweep = simulate(request(fields));
  if (!sweep.ok) throw new Error(JSON.stringify(sweep.problems));
  return sweep.value;
}

const codesOf = (fields: Partial<SimulateRequest>): string[] => {
  const sweep = simulate(request(fields));
  return sweep.ok ? [] : sweep.problems.map((problem) => problem.code);
};

function faults(...texts: string[]): SimulateRequest['faults'] {
  return texts.map((text) => {
    const fault = parseFault(text);
    if (!fault.ok) throw new Error(text);
    return fault.value;
  });
}

const magnitude = (sweep: Sweep, i: number): number => Math.hypot(sweep.gamma.re[i]!, sweep.gamma.im[i]!);

describe('simulate of a guide', () => {
  it('gives −e^(−2γℓ) of a shorted tube, loss and dispersion of TE10 in it, whatever the port is called', () => {
    for (const portOhm of [50, 75]) {
      const { frequencyHz, gamma } = sweepOf({ portOhm });
      frequencyHz.forEach((f, i) => {
        const size = 10 ** ((-2 * guideLossDbPer100m(GUIDE, f, 20) * 10) / 100 / 20);
        const angle = Math.PI - 2 * 10 * guidePhaseRadPerM(GUIDE, f);
        expect(gamma.re[i]).toBeCloseTo(size * Math.cos(angle), 8);
        expect(gamma.im[i]).toBeCloseTo(size * Math.sin(angle), 8);
      });
    }
  });

  it('takes an inline loss as constant over the band', () => {
    const sweep = sweepOf({ line: line([inline(10, 6)]) });
    // 2 × 10 m × 6 dB/100 m = 1.2 dB
    for (const i of [0, 50, 100]) expect(-20 * Math.log10(magnitude(sweep, i))).toBeCloseTo(1.2, 7);
  });

  it.each([
    // Pozar 4e Table 4.2, normalised: z/(2 + z), y/(2 + y), x/√(4 + x²).
    ['series-resistance:r0.2@4m', 0.2 / 2.2],
    ['shunt-leakage:g0.2@joint2', 0.2 / 2.2],
    ['series-inductance:x0.2@joint2', 0.2 / Math.sqrt(4.04)],
    ['shunt-capacitance:b0.2@joint1', 0.2 / Math.sqrt(4.04)],
  ])('reflects as the closed form says of %s in the middle of the band', (fault, expected) => {
    const lossless = line([inline(4, 0), inline(6, 0)], '"end": "load"');
    expect(magnitude(sweepOf({ line: lossless, faults: faults(fault) }), 50)).toBeCloseTo(expected, 8);
  });

  it('takes x in proportion to frequency and r as the same over the band', () => {
    const lossless = line([inline(10, 0)], '"end": "load"');
    const reactive = sweepOf({ line: lossless, faults: faults('series-inductance:x0.2@4m') });
    const x = (0.2 * 5.9) / 6.9;
    expect(magnitude(reactive, 0)).toBeCloseTo(x / Math.sqrt(4 + x * x), 8);
    const resistive = sweepOf({ line: lossless, faults: faults('series-resistance:r0.2@4m') });
    expect(magnitude(resistive, 0)).toBeCloseTo(magnitude(resistive, 100), 8);
  });

  it('takes a transition from coax to guide and back, and one between sizes, as matched', () => {
    const coax =
      '{ "cable": { "id": "ideal", "z0": 75, "velocityFactor": 0.8, "k1": 0, "k2": 0 }, "lengthM": 1 }';
    const narrow = '{ "guide": { "id": "narrow", "aMm": 28, "lossDbPer100m": 0 }, "lengthM": 2 }';
    const mixed = line([coax, inline(4, 0), narrow, coax], '"end": "load"');
    expect(complexRms(sweepOf({ line: mixed, portOhm: 75 }).gamma)).toBeLessThan(1e-9);
    // Two cables of different impedance still step.
    const stepped = line([coax, coax.replace('75', '50')], '"end": "load"');
    expect(complexRms(sweepOf({ line: stepped, portOhm: 75 }).gamma)).toBeGreaterThan(0.1);
  });

  it('cuts a guide at a short, whatever lies behind', () => {
    const cut = sweepOf({
      line: line([tube(4), tube(6)]),
      faults: faults('short@4m', 'series-inductance:x1@joint3'),
    });
    expect(complexRms(complexSubtract(cut.gamma, sweepOf({ line: line([tube(4)]) }).gamma))).toBeLessThan(
      1e-9,
    );
  });

  it('takes a size without a unit in a cable too', () => {
    const ideal =
      '{ "cable": { "id": "ideal", "z0": 75, "velocityFactor": 0.8, "k1": 0, "k2": 0 }, "lengthM": 5 }';
    const fields = { line: line([ideal], '"end": "load"'), portOhm: 75 };
    const bare = sweepOf({ ...fields, faults: faults('series-resistance:r0.2@2m') });
    const inOhms = sweepOf({ ...fields, faults: faults('series-resistance:15ohm@2m') });
    expect(complexRms(complexSubtract(bare.gamma, inOhms.gamma))).toBeLessThan(1e-9);
  });

  it('draws flanges and ripple of a sound run as built: return loss of 25 to 45 dB over the band', () => {
    const run = line([1.5, 4, 4, 4, 1.2].map(tube), '"end": "load"');
    for (const asBuilt of [1, 2, 3, 4, 5]) {
      const level = -20 * Math.log10(complexRms(sweepOf({ line: run, asBuilt }).gamma));
      expect(level).toBeGreaterThan(25);
      expect(level).toBeLessThan(45);
    }
  });
});

describe('simulate refuses of a guide', () => {
  it('a sweep that starts at or below the cut-off, and says where it may start', () => {
    const refused = simulate(request({ range: { startHz: 2e6, stopHz: 2.7e9, points: 1350 } }));
    expect(refused).toMatchObject({
      ok: false,
      problems: [
        { code: 'simulate-cutoff', mend: 'start above it, for example --sweep 5850MHz-8200MHz:801' },
      ],
    });
    // c/2a of 34.8488 mm: 4301.3 MHz, 1.25 and 1.9 times that.
    const inlined = simulate(
      request({ line: line([inline(3, 1)]), range: { startHz: 4.3e9, stopHz: 6e9, points: 9 } }),
    );
    expect(!inlined.ok && inlined.problems[0]?.mend).toMatch(/--sweep 5376\.7MHz-8172\.5MHz:801/u);
  });

  it('an open end, an open on the way, ohms, and stretches of cable kinds', () => {
    expect(codesOf({ line: line([tube(3)], '"end": "open"') })).toEqual(['simulate-end']);
    const coax = '{ "cable": "rg-213", "lengthM": 5 }';
    const mixed = line([coax, tube(4), coax], '"end": "open"');
    const within = [
      'open@7m',
      'series-resistance:9ohm@7m',
      'shunt-capacitance:1pF@joint3',
      'section:75ohm@3m-6m',
      'wet:k2x3@8m-10m',
    ];
    for (const fault of within)
      expect([fault, codesOf({ line: mixed, faults: faults(fault) })]).toEqual([fault, ['fault-guide']]);
    const outside = [
      'open@3m',
      'series-resistance:9ohm@joint2',
      'section:75ohm@1m-5m',
      'wet:k2x3@9m-10m',
      'short@7m',
    ];
    for (const fault of outside)
      expect([fault, codesOf({ line: mixed, faults: faults(fault) })]).toEqual([fault, []]);
  });
});
