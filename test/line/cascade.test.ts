import { describe, expect, it } from 'vitest';
import type { Cable } from '../../src/line/cable.ts';
import { type Cascade, createCascade, type Slot, type Stage } from '../../src/line/cascade.ts';
import { DB_PER_NEPER, SPEED_OF_LIGHT } from '../../src/line/constants.ts';
import { strengthOf } from '../../src/line/discontinuity.ts';
import type { EndModel } from '../../src/line/end.ts';
import { coaxMedium, type Medium, portMedium } from '../../src/line/medium.ts';
import { complexCopy, complexZeros } from '../../src/numerics/complex.ts';

const grid = (fromHz: number, toHz: number, points: number): Float64Array =>
  Float64Array.from({ length: points }, (_, i) => fromHz + ((toHz - fromHz) * i) / (points - 1));

function cable(fields: Partial<Cable> = {}): Cable {
  return {
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
    ...fields,
  };
}

const lossless = (fields: Partial<Cable> = {}): Cable => cable({ k1: 0, k2: 0, ...fields });
const medium = (of: Cable, frequencyHz: Float64Array): Medium =>
  coaxMedium(of, frequencyHz, { temperatureC: 20 });
const stretch = (of: Medium, lengthM: number): Stage => ({
  type: 'line',
  medium: of,
  lengthM,
  conductor: 0,
  dielectric: 0,
});
const step = (before: Medium, after: Medium): Stage => ({ type: 'step', before, after, ratio: 1 });
const lumped = (kind: Parameters<typeof strengthOf>[0], value: number, of: Medium): Stage => ({
  ...strengthOf(kind, value, of.z0Ohm),
  medium: of,
});
const matched: EndModel = { type: 'load', parameters: [1, 0] };
const full: EndModel = { type: 'open', parameters: [0] };
const magnitude = (cascade: ReturnType<Cascade['gamma']>, i = 0): number =>
  Math.hypot(cascade.re[i]!, cascade.im[i]!);

describe('createCascade', () => {
  it('gamma of a quarter-wave section matches the textbook transformer', () => {
    // 50 → 100 Ω through 70.7107 Ω: Γ at f/f0 = 0.5, 0.75, 0.8, 0.9, 1. Pozar 4e section 5.4, computed.
    const expected = [0.24254, 0.13408, 0.10861, 0.05522, 0];
    const f0 = 1e9;
    const f = Float64Array.from([0.5, 0.75, 0.8, 0.9, 1], (r) => r * f0);
    const section = medium(lossless({ z0Ohm: 70.7107, velocityFactor: 1 }), f);
    const length = SPEED_OF_LIGHT / f0 / 4;
    const gamma = createCascade(f).gamma([step(portMedium(50, 5), section), stretch(section, length)], {
      type: 'load',
      parameters: [100 / 70.7107, 0],
    });
    expected.forEach((value, i) => {
      expect(magnitude(gamma, i)).toBeCloseTo(value, 4);
    });
  });

  it('gamma of a 75 Ω half and quarter wave in 50 Ω follows the steady-state formula', () => {
    // θ = 90°: Γ 0.384615; θ = 180°: 0. Pozar 4e section 2.3, computed.
    const f = Float64Array.of(1e9, 2e9);
    const section = medium(lossless({ z0Ohm: 75, velocityFactor: 1 }), f);
    const line = medium(lossless({ velocityFactor: 1 }), f);
    const gamma = createCascade(f).gamma(
      [step(line, section), stretch(section, SPEED_OF_LIGHT / 1e9 / 4), step(section, line)],
      matched,
    );
    expect(magnitude(gamma, 0)).toBeCloseTo(0.384615, 6);
    expect(magnitude(gamma, 1)).toBeCloseTo(0, 9);
  });

  it('gamma of an open lossy line has twice the one-way loss as return loss', () => {
    // 7.00 dB/100 m, 30 m → 4.200 dB: definition, references of the trade (RL = 2αl).
    const f = Float64Array.of(1e9);
    const k2 = 7 / 1000;
    const line = medium(cable({ k1: 0, k2 }), f);
    const gamma = createCascade(f).gamma([stretch(line, 30)], full);
    // The causal dielectric takes the loss from tanδ exactly, so its attenuation is right to second order in tanδ.
    expect(-DB_PER_NEPER * Math.log(magnitude(gamma))).toBeCloseTo(4.2, 4);
  });

  it.each([
    // Pozar 4e section 4.3 and Table 4.2, computed: |Γ| in a matched 50 Ω line.
    ['series-resistance', 10, 1e9, 0.090909, 0],
    ['series-resistance', 100, 1e9, 0.5, 0],
    ['shunt-leakage', 1000, 1e9, 0.02439, 180],
    ['shunt-leakage', 100, 1e9, 0.2, 180],
    ['series-inductance', 1e-9, 1e8, 0.006283, 89.64],
    ['series-inductance', 1e-9, 1e9, 0.062708, 86.405],
    ['series-inductance', 1e-9, 3e9, 0.185234, 79.325],
    ['series-inductance', 5e-9, 1e9, 0.299717, 72.559],
    ['shunt-capacitance', 1e-12, 1e8, 0.015706, -90.9],
    ['shunt-capacitance', 1e-12, 1e9, 0.155177, -98.927],
    ['shunt-capacitance', 1e-12, 3e9, 0.426279, -115.232],
    ['shunt-capacitance', 0.1e-12, 3e9, 0.047072, null],
  ] as const)('gamma of %s %d at %d Hz is %d', (kind, value, frequencyHz, size, degrees) => {
    const f = Float64Array.of(frequencyHz);
    const line = medium(lossless(), f);
    const gamma = createCascade(f).gamma([lumped(kind, value, line)], matched);
    expect(magnitude(gamma)).toBeCloseTo(size, 6);
    if (degrees !== null) {
      const angle = (Math.atan2(gamma.im[0]!, gamma.re[0]!) * 180) / Math.PI;
      expect(Math.abs(angle - degrees) % 360).toBeLessThan(0.001);
    }
  });

  it.each([
    [75, 0.2],
    [72, 0.180328],
    [100, 1 / 3],
    [25, -1 / 3],
    [48, -0.020408],
  ])('gamma of a step from 50 to %d Ω is %d', (ohm, expected) => {
    // Pozar 4e section 2.3, computed.
    const f = Float64Array.of(1e9);
    const gamma = createCascade(f).gamma(
      [step(portMedium(50, 1), medium(lossless({ z0Ohm: ohm }), f))],
      matched,
    );
    expect(gamma.re[0]!).toBeCloseTo(expected, 6);
    expect(gamma.im[0]!).toBeCloseTo(0, 12);
  });

  it('gamma of a far echo behind a near step carries the pass through it twice, and its ghost', () => {
    // RL1 20 dB at d1, RL2 20 dB at d2, no loss: far echo −20.087 dB, ghost at 2·d2 − d1 −60.087 dB. Bounce diagram.
    const points = 2048;
    const f = grid(1e6, 2.048e9, points);
    const first = medium(lossless({ velocityFactor: 1 }), f);
    const ohm = (50 * 1.1) / 0.9;
    const second = medium(lossless({ velocityFactor: 1, z0Ohm: ohm }), f);
    const binM = SPEED_OF_LIGHT / 1e6 / points / 2;
    const gamma = createCascade(f).gamma(
      [stretch(first, 100 * binM), step(first, second), stretch(second, 40 * binM)],
      { type: 'load', parameters: [1.1 / 0.9, 0] },
    );
    const at = (bin: number): number => {
      let re = 0;
      let im = 0;
      for (let i = 0; i < points; i++) {
        const angle = (2 * Math.PI * bin * (i + 1)) / points;
        re += gamma.re[i]! * Math.cos(angle) - gamma.im[i]! * Math.sin(angle);
        im += gamma.re[i]! * Math.sin(angle) + gamma.im[i]! * Math.cos(angle);
      }
      return 20 * Math.log10(Math.hypot(re, im) / points);
    };
    expect(at(100)).toBeCloseTo(-20, 3);
    expect(at(140)).toBeCloseTo(-20.087, 3);
    expect(at(180)).toBeCloseTo(-60.087, 2);
  });

  it('gamma of a causal line has nothing before its delay', () => {
    // Harmonic grid to 20 GHz; a taper keeps the leakage of the band limit under −100 dB.
    const points = 8192;
    const f = grid(2.5e6, 2.5e6 * points, points);
    const line = medium(cable({ k1: 1.3364, k2: 0.028075, velocityFactor: 0.66 }), f);
    const lengthM = 5;
    const gamma = createCascade(f).gamma([stretch(line, lengthM)], full);
    const response = (timeS: number): number => {
      let sum = 0;
      for (let i = 0; i < points; i++) {
        const x = (i + 1) / (points + 1);
        const taper =
          0.35875 +
          0.48829 * Math.cos(Math.PI * x) +
          0.14128 * Math.cos(2 * Math.PI * x) +
          0.01168 * Math.cos(3 * Math.PI * x);
        const angle = 2 * Math.PI * f[i]! * timeS;
        sum += taper * (gamma.re[i]! * Math.cos(angle) - gamma.im[i]! * Math.sin(angle));
      }
      return Math.abs(sum) / points;
    };
    // The light-speed limit of this line: permittivity at the top of the band, where it is lowest.
    const arrivalS = (2 * lengthM * line.gamma.im[points - 1]!) / (2 * Math.PI * f[points - 1]!);
    let before = 0;
    for (let t = arrivalS * 0.7; t < arrivalS * 0.99; t += 20e-12) before = Math.max(before, response(t));
    let peak = 0;
    for (let t = arrivalS; t < arrivalS * 1.05; t += 20e-12) peak = Math.max(peak, response(t));
    expect(peak).toBeGreaterThan(0.01);
    // The grid starts at 2.5 MHz, so the missing constant leaves a small pedestal; the wave itself is 40 dB above it.
    expect(before / peak).toBeLessThan(0.01);
  });

  it('linearise agrees with finite differences for every kind of parameter', () => {
    const f = grid(20e6, 1.5e9, 23);
    const a = medium(cable(), f);
    const b = medium(cable({ z0Ohm: 52, velocityFactor: 0.81, k1: 0.33, k2: 0.0012 }), f);
    const values = [1.7, 0.12, 3e-12, 1.04, 2.2, -0.2, -4e-12, 1.1, 0.05, 0.07, 0.3];
    const build = (p: readonly number[]): { stages: Stage[]; end: EndModel } => ({
      stages: [
        { type: 'line', medium: a, lengthM: p[0]!, conductor: p[8]!, dielectric: p[9]! },
        { type: 'resistive', medium: a, strength: p[1]! },
        { type: 'reactive', medium: a, strength: p[2]! },
        { type: 'step', before: a, after: b, ratio: p[3]! },
        { type: 'line', medium: b, lengthM: p[4]!, conductor: p[8]!, dielectric: p[9]! },
        { type: 'resistive', medium: b, strength: p[5]! },
        { type: 'reactive', medium: b, strength: p[6]! },
        { type: 'line', medium: b, lengthM: p[7]!, conductor: 0, dielectric: 0 },
      ],
      end: { type: 'antenna', parameters: [0.8, 0.05, -1.4, p[10]!, 12, 0.9e9] },
    });
    const slots: Slot[] = [
      { stage: 0, of: 'length', column: 0, factor: 1 },
      { stage: 1, of: 'strength', column: 1, factor: 1 },
      { stage: 2, of: 'strength', column: 2, factor: 1 },
      { stage: 3, of: 'strength', column: 3, factor: 1 / values[3]! },
      { stage: 4, of: 'length', column: 4, factor: 1 },
      { stage: 5, of: 'strength', column: 5, factor: 1 },
      { stage: 6, of: 'strength', column: 6, factor: 1 },
      { stage: 7, of: 'length', column: 7, factor: 1 },
      { stage: 0, of: 'conductor', column: 8, factor: 1 },
      { stage: 4, of: 'conductor', column: 8, factor: 1 },
      { stage: 0, of: 'dielectric', column: 9, factor: 1 },
      { stage: 4, of: 'dielectric', column: 9, factor: 1 },
      { stage: 8, of: 3, column: 10, factor: 1 },
    ];
    compareWithDifferences(f, values, build, slots);
  });

  it.each<[string, EndModel['type'], number[]]>([
    ['open', 'open', [3e-12]],
    ['short', 'short', [2e-12]],
    ['inductive load', 'load', [1.2, 4e-12]],
    ['capacitive load', 'load', [0.8, -5e-12]],
    ['antenna', 'antenna', [1, 0.1, -1.9, 0.1, 15, 0.8e9, 0.2, -0.3, 40, 1.1e9]],
  ])('linearise agrees with finite differences for the parameters of a %s', (_, type, values) => {
    const f = grid(20e6, 1.5e9, 31);
    const line = medium(cable(), f);
    compareWithDifferences(
      f,
      values,
      (p) => ({ stages: [stretch(line, 1.3)], end: { type, parameters: p } }),
      values.map((__, i) => ({ stage: 1, of: i, column: i, factor: 1 })),
    );
  });
});

function compareWithDifferences(
  f: Float64Array,
  values: readonly number[],
  build: (p: readonly number[]) => { stages: Stage[]; end: EndModel },
  slots: readonly Slot[],
): void {
  const cascade = createCascade(f);
  const columns = values.map(() => complexZeros(f.length));
  const { stages, end } = build(values);
  cascade.linearise(stages, end, slots, columns);
  values.forEach((value, k) => {
    const h = Math.abs(value) * 1e-5;
    const shifted = (by: number): ReturnType<Cascade['gamma']> => {
      const changed = build(values.map((v, i) => (i === k ? v + by : v)));
      return complexCopy(createCascade(f).gamma(changed.stages, changed.end));
    };
    const up = shifted(h);
    const down = shifted(-h);
    let scale = 0;
    let worst = 0;
    for (let i = 0; i < f.length; i++) {
      const re = (up.re[i]! - down.re[i]!) / (2 * h);
      const im = (up.im[i]! - down.im[i]!) / (2 * h);
      scale = Math.max(scale, Math.hypot(re, im));
      worst = Math.max(worst, Math.hypot(re - columns[k]!.re[i]!, im - columns[k]!.im[i]!));
    }
    expect(scale, `parameter ${k} has an effect`).toBeGreaterThan(0);
    // Central differences with a relative step of 1e-5 are right to about 1e-6 of the derivative here.
    expect(worst / scale, `derivative by parameter ${k}`).toBeLessThan(1e-5);
  });
}
