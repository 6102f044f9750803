import { describe, expect, it } from 'vitest';
import { DB_PER_NEPER, SPEED_OF_LIGHT } from '../../src/line/constants.ts';
import { guideCutoffHz, guideLossDbPer100m, guidePhaseRadPerM } from '../../src/line/guide.ts';
import type { DeviceSection } from '../../src/line/line.ts';
import { PLAIN_JOINT } from '../../src/line/line.ts';
import { attenuationDbPer100m } from '../../src/line/loss.ts';
import { coaxMedium, deviceMedium, guideMedium, portMedium, sectionMedium } from '../../src/line/medium.ts';
import { createFft } from '../../src/numerics/fft.ts';
import { shippedTable } from './shipped-cables.ts';

const figures = (z0Ohm: number, velocityFactor: number, k1: number, k2: number) => ({
  id: 'drawn',
  name: 'drawn cable',
  z0ToleranceOhm: 1,
  velocityFactorTolerance: 0.01,
  fittedBandMHz: null,
  highestFrequencyMHz: null,
  z0Ohm,
  velocityFactor,
  k1,
  k2,
});
const at20 = { temperatureC: 20 };
const BAND = Float64Array.of(10e6, 100e6, 450e6, 1e9, 2.4e9);

/** Phase delay per metre, s. */
const delaysOf = (cable: ReturnType<typeof figures>, frequencyHz: Float64Array) =>
  coaxMedium(cable, frequencyHz, at20).gamma.im.map((beta, k) => beta / (2 * Math.PI * frequencyHz[k]!));

describe('coaxMedium', () => {
  it('loses what k1 and k2 say, every cable of the table from 100 MHz up', () => {
    for (const cable of shippedTable().entries) {
      const { gamma } = coaxMedium(cable, BAND.subarray(1), at20);
      BAND.subarray(1).forEach((f, k) => {
        const wanted = attenuationDbPer100m(cable, f, 20);
        // The internal inductance raises Zc and so lowers conductor loss by half of R/ωL: under 1 % here.
        expect(Math.abs((gamma.re[k]! * 100 * DB_PER_NEPER) / wanted - 1)).toBeLessThan(0.01);
      });
    }
  });

  it.each([
    // VF, C pF/m, L nH/m, delay ns/m. @source references.md section 2.
    [0.659, 101.23, 253.08, 5.0617],
    [0.695, 95.99, 239.97, 4.7995],
    [0.88, 75.81, 189.53, 3.7905],
  ])('has the published L, C and delay without loss, velocity factor %d', (velocityFactor, pF, nH, ns) => {
    const { gamma, impedance } = coaxMedium(figures(50, velocityFactor, 0, 0), BAND, at20);
    BAND.forEach((f, k) => {
      const omega = 2 * Math.PI * f;
      expect([gamma.re[k]! < 1e-12, impedance.re[k]]).toEqual([true, expect.closeTo(50, 10)]);
      expect((gamma.im[k]! / omega) * 1e9).toBeCloseTo(ns, 4);
      expect((gamma.im[k]! / omega / impedance.re[k]!) * 1e12).toBeCloseTo(pF, 2);
      expect((gamma.im[k]! / omega) * impedance.re[k]! * 1e9).toBeCloseTo(nH, 2);
    });
  });

  it('has the conductor loss of the textbook from Rs and radii', () => {
    // 7.00 dB/100 m at 1 GHz by k1 alone: α = 7/(100·8.686) Np/m, and R = 2·z0·α goes in as R(1 + j).
    const k1 = 7 / Math.sqrt(1000);
    const f = Float64Array.of(1e9);
    const { gamma, impedance } = coaxMedium(figures(50, 1, k1, 0), f, at20);
    const alpha = 7 / (100 * DB_PER_NEPER);
    const omega = 2 * Math.PI * 1e9;
    const resistance = 2 * 50 * alpha;
    // γ·Zc is the series impedance per metre.
    expect(gamma.re[0]! * impedance.re[0]! - gamma.im[0]! * impedance.im[0]!).toBeCloseTo(resistance, 9);
    expect(gamma.re[0]! * impedance.im[0]! + gamma.im[0]! * impedance.re[0]!).toBeCloseTo(
      (omega * 50) / SPEED_OF_LIGHT + resistance,
      6,
    );
  });

  it.each([
    // er, tanδ, dB/100 m at 1 GHz. @source references.md section 2, dielectric loss.
    [2.26, 2e-4, 2.7367],
    [2.07, 3e-4, 3.9287],
    [2.1, 4e-4, 5.2761],
    [1.29, 1e-4, 1.0338],
  ])('has the loss tangent that dielectric loss comes from: er %d, tanδ %d', (er, tangent, db) => {
    const cable = figures(50, 1 / Math.sqrt(er), 0, db / 1000);
    const { gamma, impedance } = coaxMedium(cable, Float64Array.of(1e9), at20);
    expect(gamma.re[0]! * 100 * DB_PER_NEPER).toBeCloseTo(db, 4);
    // γ/Zc = Y: its conductance over its susceptance is tanδ.
    const [gRe, gIm] = [gamma.re[0]!, gamma.im[0]!];
    const [zRe, zIm] = [impedance.re[0]!, impedance.im[0]!];
    expect((gRe * zRe + gIm * zIm) / (gIm * zRe - gRe * zIm)).toBeCloseTo(tangent, 7);
  });

  it('keeps one loss tangent over the band, so dielectric loss grows as f', () => {
    const { gamma } = coaxMedium(figures(50, 0.66, 0, 0.01), Float64Array.of(1e8, 1e9), at20);
    // Permittivity falls slightly with frequency: (0.1)^(m/2) below, m = 2·tanδ/π.
    expect(gamma.re[1]! / gamma.re[0]!).toBeCloseTo(10, 1);
  });

  it('is slower at low frequency: a thin solid cable 0.6 % at 100 MHz against the top of its band', () => {
    // @source Design section 4; RG-174 of references.md table 3.2.
    const [low, high] = delaysOf(figures(50, 0.66, 2.43836, 0.033442), Float64Array.of(100e6, 1e9));
    expect(low! / high! - 1).toBeGreaterThan(0.004);
    expect(low! / high! - 1).toBeLessThan(0.01);
  });

  it('has a delay that falls and a loss that rises with frequency, and a capacitive impedance', () => {
    const frequencyHz = Float64Array.from({ length: 60 }, (_, k) => 1e5 * 1.2 ** k);
    const cable = figures(50, 0.66, 0.6, 0.0067);
    const { gamma, impedance } = coaxMedium(cable, frequencyHz, at20);
    const delays = delaysOf(cable, frequencyHz);
    for (let k = 1; k < frequencyHz.length; k++) {
      expect(delays[k]).toBeLessThan(delays[k - 1]!);
      expect(gamma.re[k]).toBeGreaterThan(gamma.re[k - 1]!);
    }
    expect(impedance.im[0]).toBeLessThan(0);
  });

  it('is causal: nothing of an impulse through a line comes before the light could', () => {
    // Raised-cosine band of 8 GHz, 20 m of a lossy cable.
    const size = 8192;
    const stepHz = 2e6;
    const frequencyHz = Float64Array.from({ length: size / 2 - 1 }, (_, k) => (k + 1) * stepHz);
    const lengthM = 20;
    const { gamma } = coaxMedium(figures(50, 0.8, 1.2, 0.008), frequencyHz, at20);
    const spectrum = new Float64Array(2 * size);
    spectrum[0] = 1;
    frequencyHz.forEach((f, k) => {
      const taper = Math.cos(((Math.PI / 2) * f) / (stepHz * (size / 2))) ** 2;
      const through = taper * Math.exp(-gamma.re[k]! * lengthM);
      const angle = -gamma.im[k]! * lengthM;
      const i = k + 1;
      spectrum[2 * i] = through * Math.cos(angle);
      spectrum[2 * i + 1] = through * Math.sin(angle);
      spectrum[2 * (size - i)] = through * Math.cos(angle);
      spectrum[2 * (size - i) + 1] = -through * Math.sin(angle);
    });
    const impulse = new Float64Array(2 * size);
    createFft(size).inverse(spectrum, impulse);
    const at = Float64Array.from({ length: size }, (_, n) => impulse[2 * n]!);
    const highest = at.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
    // Front: the delay at the highest frequency, less the width of the taper's pulse (two samples) each side.
    const top = frequencyHz.length - 1;
    const frontS = (gamma.im[top]! * lengthM) / (2 * Math.PI * frequencyHz[top]!);
    const front = Math.floor(frontS * stepHz * size) - 6;
    for (let n = 0; n < front; n++) expect(Math.abs(at[n]!) / highest).toBeLessThan(2e-3);
    expect(at.indexOf(highest)).toBeGreaterThan(front);
  });

  it.each([
    // @source references.md section 2, conductor loss against temperature (0.00393/K there, 0.0039 here).
    [-40, 0.8742],
    [0, 0.9599],
    [60, 1.0757],
  ])('loses with the temperature of its conductor: %d °C', (temperatureC, factor) => {
    const copper = figures(50, 0.88, 0.2, 0);
    const loss = (temperature: number) =>
      coaxMedium(copper, Float64Array.of(1e9), { temperatureC: temperature }).gamma.re[0]!;
    expect(loss(temperatureC) / loss(20)).toBeCloseTo(factor, 2);
  });

  it('gives derivatives by both losses that agree with finite differences', () => {
    const cable = figures(50, 0.8, 0.6, 0.006);
    const of = (conductor: number, dielectric: number) =>
      coaxMedium(cable, BAND, { ...at20, loss: { conductor, dielectric } });
    const { gammaPerConductorLoss: c, gammaPerDielectricLoss: d } = of(1, 1);
    const h = 1e-5;
    const [cLow, cHigh] = [of(1 - h, 1).gamma, of(1 + h, 1).gamma];
    const [dLow, dHigh] = [of(1, 1 - h).gamma, of(1, 1 + h).gamma];
    BAND.forEach((_, k) => {
      expect((cHigh.re[k]! - cLow.re[k]!) / (2 * h) / c.re[k]!).toBeCloseTo(1, 6);
      expect((cHigh.im[k]! - cLow.im[k]!) / (2 * h) / c.im[k]!).toBeCloseTo(1, 5);
      expect((dHigh.re[k]! - dLow.re[k]!) / (2 * h) / d.re[k]!).toBeCloseTo(1, 6);
      expect(Math.abs((dHigh.im[k]! - dLow.im[k]!) / (2 * h) - d.im[k]!)).toBeLessThan(1e-5);
    });
  });

  it('refuses 0 Hz and below', () => {
    for (const f of [0, -1, Number.NaN])
      expect(() => coaxMedium(figures(50, 0.8, 0.1, 0), Float64Array.of(f), at20)).toThrow(RangeError);
  });
});

describe('deviceMedium', () => {
  const device: DeviceSection = {
    type: 'device',
    device: 'arrestor',
    lengthM: 0.2,
    lossDb: 0.3,
    returnLossDb: 26,
    passbandHz: [0, 3e9],
    label: 'arrestor',
    jointAfter: PLAIN_JOINT,
  };

  it('loses its loss over its length at every frequency and reflects its return loss at each face', () => {
    const { gamma, impedance } = deviceMedium(device, BAND, 50);
    BAND.forEach((_, k) => {
      expect(gamma.re[k]! * 0.2 * DB_PER_NEPER).toBeCloseTo(0.3, 12);
      const face = (impedance.re[k]! - 50) / (impedance.re[k]! + 50);
      expect(-20 * Math.log10(face)).toBeCloseTo(26, 9);
    });
  });

  it('is what sectionMedium makes of a device, and a cable what it makes of a coax section', () => {
    const options = { temperatureC: 20, z0Ohm: 50 };
    expect(sectionMedium(device, BAND, options).gamma).toEqual(deviceMedium(device, BAND, 50).gamma);
    const cable = figures(50, 0.8, 0.6, 0.006);
    const coax = { type: 'coax', cable, lengthM: 1, label: '', jointAfter: PLAIN_JOINT } as const;
    expect(sectionMedium(coax, BAND, options).gamma).toEqual(coaxMedium(cable, BAND, at20).gamma);
  });
});

describe('guideMedium', () => {
  const guide = shippedTable().findGuide('WR-137')!;
  const band = Float64Array.of(5.85e9, 6.5e9, 7.4e9, 8.2e9);
  const options = { temperatureC: 35, z0Ohm: 50 };

  it('travels with β and loses what its walls take, at the temperature they have', () => {
    const { gamma } = guideMedium(guide, band, options);
    band.forEach((f, k) => {
      expect(gamma.im[k]).toBe(guidePhaseRadPerM(guide, f));
      expect(gamma.re[k]! * 100 * DB_PER_NEPER).toBeCloseTo(guideLossDbPer100m(guide, f, 35), 12);
    });
  });

  it('has the impedance of what it is joined to, so that no transition steps', () => {
    const { impedance, z0Ohm } = guideMedium(guide, band, { ...options, z0Ohm: 75 });
    expect([Array.from(impedance.re), Array.from(impedance.im), z0Ohm]).toEqual([
      [75, 75, 75, 75],
      [0, 0, 0, 0],
      75,
    ]);
  });

  it('has a loss that is all of its conductor, with the derivative of a factor on it', () => {
    const as = guideMedium(guide, band, options);
    const twice = guideMedium(guide, band, { ...options, loss: { conductor: 2, dielectric: 3 } });
    band.forEach((_, k) => {
      expect(twice.gamma.re[k]! - as.gamma.re[k]!).toBeCloseTo(as.gammaPerConductorLoss.re[k]!, 14);
      expect(twice.gamma.im[k]).toBe(as.gamma.im[k]);
    });
    for (const none of [
      as.gammaPerConductorLoss.im,
      as.gammaPerDielectricLoss.re,
      as.gammaPerDielectricLoss.im,
    ])
      expect(none.every((v) => v === 0)).toBe(true);
  });

  it('is what sectionMedium makes of a guide section, and refuses the cut-off', () => {
    const section = { type: 'guide', guide, lengthM: 4, label: '', jointAfter: PLAIN_JOINT } as const;
    expect(sectionMedium(section, band, options)).toEqual(guideMedium(guide, band, options));
    const atCutoff = Float64Array.of(guideCutoffHz(guide), 6e9);
    expect(() => guideMedium(guide, atCutoff, options)).toThrow(RangeError);
  });
});

describe('portMedium', () => {
  it('is the port’s resistance and no length of line', () => {
    const { gamma, impedance, z0Ohm } = portMedium(75, 3);
    expect([Array.from(impedance.re), Array.from(impedance.im), z0Ohm]).toEqual([
      [75, 75, 75],
      [0, 0, 0],
      75,
    ]);
    expect(gamma.re.every((v) => v === 0) && gamma.im.every((v) => v === 0)).toBe(true);
  });
});
