import { describe, expect, it } from 'vitest';
import { coaxMedium, losslessMedium } from './coax-medium.ts';
import { faultElement, type LumpedKind } from './fault.ts';
import { chainToPort, type Element, reflectionAtPort, type Spectrum, type Termination } from './ladder.ts';
import { terminate } from './termination.ts';

const GHZ = Float64Array.of(1e9);

function matched(n: number, ohm = 50): Termination {
  return {
    voltage: { re: new Float64Array(n).fill(ohm), im: new Float64Array(n) },
    current: { re: new Float64Array(n).fill(1), im: new Float64Array(n) },
  };
}

function reflect(elements: readonly Element[], frequencyHz: Float64Array, end = matched(frequencyHz.length)) {
  return reflectionAtPort(chainToPort(elements, end, frequencyHz), 50);
}

const sizeOf = (gamma: Spectrum, k = 0) => Math.hypot(gamma.re[k]!, gamma.im[k]!);
const degreesOf = (gamma: Spectrum, k = 0) => (Math.atan2(gamma.im[k]!, gamma.re[k]!) * 180) / Math.PI;

describe('chainToPort and reflectionAtPort', () => {
  // @source references.md section 5.2: series Z/(Z + 2·z0), shunt −Y·z0/(Y·z0 + 2) in 50 Ω.
  const lumped: readonly [LumpedKind, number, number, number, number][] = [
    ['series-resistance', 10, 1e9, 0.090909, 0],
    ['series-resistance', 100, 1e9, 0.5, 0],
    ['shunt-leakage', 500, 1e9, 0.047619, 180],
    ['shunt-leakage', 25, 1e9, 0.5, 180],
    ['series-inductance', 1, 1e9, 0.062708, 86.405],
    ['series-inductance', 1, 3e9, 0.185234, 79.325],
    ['series-inductance', 5, 1e9, 0.299717, 72.559],
    ['shunt-capacitance', 1, 1e8, 0.015706, -90.9],
    ['shunt-capacitance', 1, 3e9, 0.426279, -115.232],
  ];
  it.each(lumped)('give the printed reflection of %s %d at %d Hz', (kind, value, hz, size, degrees) => {
    const gamma = reflect([faultElement(kind, value)], Float64Array.of(hz));
    // Printed to six and three decimals.
    expect(sizeOf(gamma)).toBeCloseTo(size, 5);
    expect(Math.abs(degreesOf(gamma))).toBeCloseTo(Math.abs(degrees), 2);
    if (degrees !== 180) expect(Math.sign(gamma.im[0]!)).toBe(Math.sign(degrees));
  });

  it('give 112.5 Ω, Γ 0.384615, for a quarter wave of 75 Ω in 50 Ω, and nothing for a half wave', () => {
    // @source references.md section 5.3, steady state of a 75 Ω section.
    const medium = losslessMedium(75, 1, GHZ);
    const quarterM = 299_792_458 / 1e9 / 4;
    const slab = (lengthM: number): Element => ({ type: 'slab', medium, lengthM, impedanceScale: 1 });
    expect(reflect([slab(quarterM)], GHZ).re[0]).toBeCloseTo(0.384615, 6);
    expect(sizeOf(reflect([slab(2 * quarterM)], GHZ))).toBeLessThan(1e-9);
  });

  it('give the printed band of a quarter-wave transformer from 50 to 100 Ω', () => {
    // @source references.md section 5.3: |Γ| at f/f0 of 0.5, 0.75, 0.8, 0.9, 1.
    const frequencyHz = Float64Array.of(0.5e9, 0.75e9, 0.8e9, 0.9e9, 1e9);
    const medium = losslessMedium(Math.sqrt(50 * 100), 1, frequencyHz);
    const lengthM = 299_792_458 / 1e9 / 4;
    const gamma = reflect(
      [{ type: 'slab', medium, lengthM, impedanceScale: 1 }],
      frequencyHz,
      matched(5, 100),
    );
    const printed = [0.24254, 0.13408, 0.10861, 0.05522, 0];
    for (const [k, size] of printed.entries()) expect(sizeOf(gamma, k)).toBeCloseTo(size, 5);
  });

  it('give return loss 2·α·l for an open-ended lossy line', () => {
    // @source references.md section 5.3: 7.00 dB/100 m, 30 m → 4.200 dB. Zc's small angle moves it by less than 0.02 dB.
    const medium = coaxMedium({ z0Ohm: 50, velocityFactor: 0.66, k1: 0, k2: 0.007 }, 20, GHZ);
    const open = terminate({ kind: 'open', fringeF: 0 }, GHZ);
    const gamma = reflect([{ type: 'slab', medium, lengthM: 30, impedanceScale: 1 }], GHZ, open);
    expect(-20 * Math.log10(sizeOf(gamma))).toBeCloseTo(4.2, 1);
  });

  it('give the bounces of a 75 Ω section, separated in time: 0.2, −0.192, −0.00768', () => {
    // @source references.md section 5.3, first rows. Harmonic grid, so that the inverse sum is exact in time.
    const n = 256;
    const frequencyHz = Float64Array.from({ length: n }, (_, k) => (k + 1) * 1e7);
    const delayed = (samples: number) => (samples * 299_792_458) / (2 * n * 1e7);
    const slab = (ohm: number, samples: number): Element => ({
      type: 'slab',
      medium: losslessMedium(ohm, 1, frequencyHz),
      lengthM: delayed(samples),
      impedanceScale: 1,
    });
    const gamma = reflect([slab(50, 20), slab(75, 30)], frequencyHz);
    const at = (sample: number) => {
      let sum = 0;
      for (let k = 0; k < n; k++) {
        const angle = (2 * Math.PI * (k + 1) * sample) / n;
        sum += gamma.re[k]! * Math.cos(angle) - gamma.im[k]! * Math.sin(angle);
      }
      return sum / n;
    };
    // Bounces later than the grid's period are below 1e-12.
    expect(at(20)).toBeCloseTo(0.2, 6);
    expect(at(50)).toBeCloseTo(-0.192, 6);
    expect(at(80)).toBeCloseTo(-0.00768, 6);
    expect(at(40)).toBeCloseTo(0, 6);
  });
});
