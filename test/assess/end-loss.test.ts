/** The fit of the end's echo against lines whose loss is known in closed form. */
import { describe, expect, it } from 'vitest';
import { checkLoss } from '../../src/assess/loss-check.ts';
import { attenuationDbPer100m } from '../../src/line/loss.ts';
import { coaxMedium } from '../../src/line/medium.ts';
import { complexZeros } from '../../src/numerics/complex.ts';
import { MADE_CABLE } from '../app/made-analysis.ts';
import { makeEcho, makeEnd, makeLine, makeSolution } from './made-line.ts';

const FREQUENCY_HZ = Float64Array.from({ length: 1000 }, (_, i) => 2.7e6 * (i + 1));

type Made = {
  readonly sign?: 1 | -1;
  /** Factors on conductor and dielectric loss. */
  readonly k1?: number;
  readonly k2?: number;
  /** Tracking residue: a size and a round-trip delay, s. */
  readonly tracking?: readonly [number, number];
};

/** Γ of 50 m of matched cable, open or shorted: ±e^{−2γℓ}(1 + T). */
function madeSweep({ sign = -1, k1 = 1, k2 = 1, tracking = [0, 0] }: Made) {
  const cable = { ...MADE_CABLE, k1: MADE_CABLE.k1 * k1, k2: MADE_CABLE.k2 * k2 };
  const { gamma } = coaxMedium(cable, FREQUENCY_HZ, { temperatureC: 20 });
  const out = complexZeros(FREQUENCY_HZ.length);
  FREQUENCY_HZ.forEach((f, i) => {
    const size = sign * Math.exp(-100 * gamma.re[i]!);
    const angle = -100 * gamma.im[i]!;
    const turn = -2 * Math.PI * f * tracking[1];
    const [tRe, tIm] = [1 + tracking[0] * Math.cos(turn), tracking[0] * Math.sin(turn)];
    out.re[i] = size * (Math.cos(angle) * tRe - Math.sin(angle) * tIm);
    out.im[i] = size * (Math.cos(angle) * tIm + Math.sin(angle) * tRe);
  });
  const sweep = {
    frequencyHz: FREQUENCY_HZ,
    gamma: out,
    portOhm: 50,
    port: 1,
    ports: 1,
    file: 'made.s1p',
    comments: [],
  };
  return { sweep, cable };
}

function check(made: Made) {
  const { sweep, cable } = madeSweep(made);
  const end = made.sign === 1 ? 'open' : 'short';
  const solution = makeSolution([makeEnd({ kind: end })], { end });
  const result = checkLoss({ sweep, line: makeLine({ end }), lineDescribed: true, solution });
  const trueDb = (i: number) => attenuationDbPer100m(cable, FREQUENCY_HZ[i]!, 20) / 2;
  return { result, trueDb };
}

describe('checkLoss, of an open or shorted end', () => {
  it.each([1, -1] as const)(
    'finds the loss of a sound cable to 0.01 dB at every frequency (Γ = %d)',
    (sign) => {
      const { result, trueDb } = check({ sign });
      expect(result.method).toBe('end-echo');
      for (const i of [0, 250, 500, 999]) expect(Math.abs(result.lossDb![i]! - trueDb(i))).toBeLessThan(0.01);
      expect(result.pass).toBe(true);
      expect(result.excess).toEqual([]);
    },
  );

  it('finds a sample 4 % lossier than its type', () => {
    const { result, trueDb } = check({ k1: 1.04, k2: 1.04 });
    for (const i of [250, 500, 999]) expect(Math.abs(result.lossDb![i]! - trueDb(i))).toBeLessThan(0.02);
  });

  it('tells the tracking residue of the correction from loss', () => {
    // −40 dB: taken for loss it would be 0.043 dB one way, turning over the band.
    const { result, trueDb } = check({ tracking: [0.01, 0.5e-9] });
    for (const i of [250, 500, 999])
      expect(Math.abs(result.lossDb![i]! - trueDb(i))).toBeLessThan(2 * result.sigmaDb![i]!);
    expect(result.sigmaDb![500]!).toBeGreaterThan(0.004);
    expect(result.sigmaDb![500]!).toBeLessThan(0.03);
  });

  it('finds loss that grows with frequency, calls it what it is, and fails the line', () => {
    const { result, trueDb } = check({ k2: 6 });
    for (const i of [250, 500, 999])
      expect(Math.abs(result.lossDb![i]! - trueDb(i))).toBeLessThan(3 * result.sigmaDb![i]! + 0.01);
    expect(result.excess.map((one) => one.kind)).toEqual(['wet']);
    expect(result.pass).toBe(false);
    expect(result.marginDb).toBeLessThan(0);
  });

  it('counts table, joints and margin into the limit', () => {
    const { result } = check({});
    const [band] = result.bands;
    expect(result.joints).toBe(4);
    // common practice: 0.05 dB·√GHz a joint, 0.5 dB over the calculated loss
    expect(result.jointsDb).toBeCloseTo(4 * 0.05 * Math.sqrt(result.atHz / 1e9), 12);
    expect(band!.limitDb).toBeCloseTo(band!.tableLossDb + result.jointsDb + 0.5, 12);
    expect(result.marginDb).toBeCloseTo(band!.limitDb - band!.lossDb!, 12);
    expect(result.allowedIsDefault).toBe(true);
  });
});

describe('checkLoss, of other ends', () => {
  it('says the most that the loss can be where an antenna sends something back, and decides nothing by it', () => {
    const { sweep, cable } = madeSweep({ sign: 1 });
    // An end that returns −2 dB at every frequency.
    const gamma = { re: sweep.gamma.re.map((v) => v * 0.794), im: sweep.gamma.im.map((v) => v * 0.794) };
    const result = checkLoss({
      sweep: { ...sweep, gamma },
      line: makeLine(),
      lineDescribed: true,
      solution: makeSolution([makeEnd()]),
    });
    expect(result).toMatchObject({ method: 'bound', lossDb: null, sigmaDb: null });
    for (const i of [200, 500, 900]) {
      const trueDb = attenuationDbPer100m(cable, FREQUENCY_HZ[i]!, 20) / 2;
      expect(result.atMostDb![i]!).toBeGreaterThan(trueDb);
      expect(result.atMostDb![i]!).toBeLessThan(trueDb + 1.6);
    }
  });

  it('tells nothing of a line that ends in a good load, or that is cut', () => {
    const { sweep } = madeSweep({});
    const faint = { re: sweep.gamma.re.map((v) => v * 0.01), im: sweep.gamma.im.map((v) => v * 0.01) };
    const loaded = makeSolution([makeEnd()], { end: 'load' });
    const ask = { line: makeLine({ end: 'load' }), lineDescribed: true };
    expect(checkLoss({ ...ask, sweep: { ...sweep, gamma: faint }, solution: loaded })).toMatchObject({
      method: 'none',
      pass: null,
      marginDb: null,
    });
    const cut = makeSolution([makeEcho({ kind: 'open' })], { end: 'open', endsEarly: true });
    expect(checkLoss({ ...ask, sweep, solution: cut }).pass).toBeNull();
  });

  it('reads the transmission of a two-port file, the mismatch at the port taken off', () => {
    const { sweep, cable } = madeSweep({});
    const n = FREQUENCY_HZ.length;
    // |S21|² = (1 − |S11|²)·loss
    const through = FREQUENCY_HZ.map(
      (f) => Math.sqrt(1 - 0.04) * 10 ** (-attenuationDbPer100m(cable, f, 20) / 2 / 20),
    );
    const result = checkLoss({
      sweep: {
        ...sweep,
        gamma: { re: new Float64Array(n).fill(0.2), im: new Float64Array(n) },
        transmission: { re: through, im: new Float64Array(n) },
      },
      line: makeLine({ end: 'load' }),
      lineDescribed: true,
      solution: makeSolution([makeEnd()], { end: 'load' }),
    });
    expect(result.method).toBe('transmission');
    for (const i of [0, 500, 999])
      expect(result.lossDb![i]!).toBeCloseTo(attenuationDbPer100m(cable, FREQUENCY_HZ[i]!, 20) / 2, 10);
    expect(result.pass).toBe(true);
  });
});
