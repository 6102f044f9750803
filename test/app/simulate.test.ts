import { describe, expect, it } from 'vitest';
import { parseFault } from '../../src/app/fault-text.ts';
import { simulate } from '../../src/app/simulate.ts';
import type { SimulateRequest } from '../../src/app/simulate-request.ts';
import type { Cable } from '../../src/line/cable.ts';
import { type EndKind, type Line, NO_LIMITS, PLAIN_JOINT } from '../../src/line/line.ts';
import { complexRms, complexSubtract } from '../../src/numerics/complex.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';

const CABLE: Cable = {
  id: 'test',
  name: 'test cable',
  z0Ohm: 50,
  z0ToleranceOhm: 1,
  velocityFactor: 0.88,
  velocityFactorTolerance: 0.01,
  k1: 0.2,
  k2: 0.0007,
  fittedBandMHz: null,
  highestFrequencyMHz: null,
};
const LOSSLESS: Cable = { ...CABLE, k1: 0, k2: 0 };

function line(end: EndKind, lengthsM: readonly (number | null)[] = [10], cable: Cable = CABLE): Line {
  return {
    name: 'test',
    site: '',
    sections: lengthsM.map((lengthM, i) => ({
      type: 'coax',
      cable,
      lengthM,
      label: `part ${i + 1}`,
      jointAfter: PLAIN_JOINT,
    })),
    end,
    temperatureC: 20,
    temperatureKnown: true,
    limits: NO_LIMITS,
  };
}

function request(fields: Partial<SimulateRequest> = {}): SimulateRequest {
  return {
    line: line('load'),
    faults: [],
    range: { startHz: 10e6, stopHz: 1000e6, points: 100 },
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

function faults(...texts: string[]): SimulateRequest['faults'] {
  return texts.map((text) => {
    const fault = parseFault(text);
    if (!fault.ok) throw new Error(text);
    return fault.value;
  });
}

const magnitude = (sweep: Sweep, i: number): number => Math.hypot(sweep.gamma.re[i]!, sweep.gamma.im[i]!);

describe('simulate', () => {
  it('gives no reflection for an ideal lossless line with a matched load', () => {
    expect(complexRms(sweepOf({ line: line('load', [10], LOSSLESS) }).gamma)).toBe(0);
  });

  it('gives twice the one-way loss as return loss of an open line', () => {
    const sweep = sweepOf({ line: line('open') });
    // A(1 GHz) = 0.2·√1000 + 0.0007·1000 = 7.0246 dB/100 m; 2 × 10 m: 1.40491 dB. The line's own Zc is off 50 Ω by
    // 0.03 Ω here, which moves it by less than 0.005 dB.
    expect(-20 * Math.log10(magnitude(sweep, 99))).toBeCloseTo(1.405, 2);
  });

  it.each([
    // Pozar 4e section 4.3, computed: r/(r + 2·z0) and 1/(1 + 2R/z0).
    ['series-resistance:10ohm@4m', 10 / 110],
    ['series-resistance:10ohm@joint1', 10 / 110],
    ['series-resistance:10ohm@joint3', 10 / 110],
    ['shunt-leakage:100ohm@joint2', 0.2],
    // 1 nH, 1 pF at 1 GHz in 50 Ω.
    ['series-inductance:1nH@5m', 0.062708],
    ['shunt-capacitance:1pF@5m', 0.155177],
  ])('reflects as the closed form says of %s in a matched lossless line', (fault, expected) => {
    const sweep = sweepOf({ line: line('load', [4, 6], LOSSLESS), faults: faults(fault) });
    expect(magnitude(sweep, 99)).toBeCloseTo(expected, 6);
  });

  it('places a fault at its distance: the phase turns by 2βd', () => {
    const near = sweepOf({ line: line('load', [10], LOSSLESS), faults: faults('series-resistance:5ohm@0m') });
    const far = sweepOf({
      line: line('load', [10], LOSSLESS),
      faults: faults('series-resistance:5ohm@3.3m'),
    });
    const i = 37;
    const turned =
      Math.atan2(far.gamma.im[i]!, far.gamma.re[i]!) - Math.atan2(near.gamma.im[i]!, near.gamma.re[i]!);
    const expected = (-4 * Math.PI * far.frequencyHz[i]! * 3.3) / (0.88 * 299_792_458);
    expect(Math.cos(turned - expected)).toBeCloseTo(1, 9);
  });

  it('cuts the line at an open, whatever lies behind', () => {
    const cut = sweepOf({ line: line('load', [10, 5]), faults: faults('open@4m', 'shunt-leakage:1ohm@9m') });
    const short = sweepOf({ line: line('open', [4]) });
    expect(complexRms(complexSubtract(cut.gamma, short.gamma))).toBeLessThan(1e-9);
  });

  it('makes a 75 Ω stretch of quarter-wave length reflect by the steady-state formula', () => {
    const quarterM = (0.88 * 299_792_458) / 1e9 / 4;
    const sweep = sweepOf({
      line: line('load', [10], LOSSLESS),
      faults: faults(`section:75ohm@2m-${2 + quarterM}m`),
    });
    // (75² − 50²)/(75² + 50²) = 0.384615, Pozar 4e section 2.3.
    expect(magnitude(sweep, 99)).toBeCloseTo(0.384615, 5);
  });

  it('slows and loads a wet stretch', () => {
    const dry = sweepOf({ line: line('open') });
    const wet = sweepOf({ line: line('open'), faults: faults('wet:k2x50@2m-6m') });
    // Excess one way 49 × 0.7 dB/100 m × 4 m = 1.372 dB at 1 GHz, twice for there and back.
    const excess = 20 * Math.log10(magnitude(dry, 99) / magnitude(wet, 99));
    expect(excess).toBeGreaterThan(2.6);
    expect(excess).toBeLessThan(2.9);
  });

  it('adds noise of the asked-for level', () => {
    const sweep = sweepOf({
      line: line('load', [10], LOSSLESS),
      noiseDb: -60,
      range: { startHz: 1e6, stopHz: 1e9, points: 4000 },
    });
    // Relative 1σ of an RMS of 4000 complex points is 1/√8000: 0.1 dB; 4σ allowed.
    expect(20 * Math.log10(complexRms(sweep.gamma))).toBeCloseTo(-60, 0);
  });

  it('adds a residue of the asked-for level that is no echo down the line', () => {
    const level =
      20 * Math.log10(complexRms(sweepOf({ line: line('load', [10], LOSSLESS), residueDb: -42 }).gamma));
    // The terms interfere over the band, so the RMS of one draw is off by a few dB.
    expect(level).toBeGreaterThan(-47);
    expect(level).toBeLessThan(-38);
  });

  it('gives the same line as built with and without a fault, so that a difference shows the fault alone', () => {
    const fields = { line: line('load', [2, 8]), asBuilt: 11 };
    const sound = sweepOf(fields);
    const bad = sweepOf({ ...fields, faults: faults('series-resistance:1ohm@joint2') });
    // 1 Ω in 50 Ω: Γ = 0.0099, less the loss of 2 m there and back.
    const difference = complexRms(complexSubtract(bad.gamma, sound.gamma));
    expect(difference).toBeLessThan(0.0099 * 1.02);
    expect(difference).toBeGreaterThan(0.0085);
  });

  it('draws ripple and joints of a sound line: return loss between 20 and 40 dB over the band', () => {
    for (const seed of [1, 2, 3, 4, 5]) {
      const level =
        -20 * Math.log10(complexRms(sweepOf({ line: line('load', [2, 40, 2]), asBuilt: seed }).gamma));
      expect(level).toBeGreaterThan(20);
      expect(level).toBeLessThan(40);
    }
  });

  it('is the same for the same seeds and another for others', () => {
    const fields = { asBuilt: 3, noiseDb: -70, residueDb: -42, seed: 4 };
    const first = sweepOf(fields).gamma;
    expect(sweepOf(fields).gamma).toEqual(first);
    expect(sweepOf({ ...fields, seed: 5 }).gamma).not.toEqual(first);
    expect(sweepOf({ ...fields, asBuilt: 6 }).gamma).not.toEqual(first);
  });

  it('keeps |Γ| of an antenna at 1 or below, and under its edge level in its band', () => {
    const antenna: Line = {
      ...line('antenna', [0.001], LOSSLESS),
      limits: { ...NO_LIMITS, bands: [{ name: 'main', fromHz: 1710e6, toHz: 2170e6, returnLossDb: 14 }] },
    };
    const sweep = sweepOf({ line: antenna, range: { startHz: 10e6, stopHz: 3000e6, points: 300 } });
    sweep.frequencyHz.forEach((f, i) => {
      expect(magnitude(sweep, i)).toBeLessThanOrEqual(1 + 1e-9);
      if (f >= 1710e6 && f <= 2170e6) expect(-20 * Math.log10(magnitude(sweep, i))).toBeGreaterThan(17.9);
    });
    expect(magnitude(sweep, 0)).toBeGreaterThan(0.9);
  });

  it('refuses what it cannot know, all at once', () => {
    const refused = simulate(
      request({
        line: line('unknown', [null]),
        range: { startHz: 0, stopHz: 1e9, points: 10 },
        faults: faults('open@joint5'),
      }),
    );
    expect(!refused.ok && refused.problems.map((p) => p.code)).toEqual([
      'simulate-length',
      'simulate-end',
      'simulate-start',
      'fault-place',
    ]);
  });

  it.each(['open@10.1m', 'section:75ohm@9m-11m', 'series-resistance:1ohm@joint3'])(
    'refuses %s on a line of 10 m with two joints',
    (fault) => {
      const refused = simulate(request({ faults: faults(fault) }));
      expect(!refused.ok && refused.problems.map((p) => p.code)).toEqual(['fault-place']);
    },
  );
});
