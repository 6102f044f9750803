import { describe, expect, it } from 'vitest';
import {
  createTwoPort,
  type LumpedKind,
  normalisedOf,
  strengthOf,
  strengthOfNormalised,
  writeLumped,
} from '../../src/line/discontinuity.ts';
import { guideMedium } from '../../src/line/medium.ts';
import { shippedTable } from './shipped-cables.ts';

const MIDDLE = 6.9e9;
const BAND = Float64Array.of(5.9e9, MIDDLE, 7.9e9);
const guide = shippedTable().findGuide('WR-137')!;

/** S11 of a lump of this size in a guide, as [re, im] per frequency. */
function reflectionOf(kind: LumpedKind, size: number, z0Ohm = 50): readonly (readonly [number, number])[] {
  const medium = guideMedium(guide, BAND, { temperatureC: 20, z0Ohm });
  const twoPort = createTwoPort(BAND.length);
  writeLumped(twoPort, strengthOfNormalised(kind, size, MIDDLE), medium, BAND);
  return Array.from(BAND, (_, k) => [twoPort.s11.re[k]!, twoPort.s11.im[k]!] as const);
}

describe('strengthOfNormalised', () => {
  it('reflects as the closed forms say, whatever the guide’s impedance is called', () => {
    for (const z0Ohm of [1, 50, 377]) {
      // Series z: z/(2 + z). Shunt y: −y/(2 + y). @source Pozar, 4th ed., Table 4.2, normalised.
      for (const [re, im] of reflectionOf('series-resistance', 0.2, z0Ohm)) {
        expect([re, im]).toEqual([expect.closeTo(0.2 / 2.2, 12), expect.closeTo(0, 12)]);
      }
      for (const [re] of reflectionOf('shunt-leakage', 0.2, z0Ohm)) expect(re).toBeCloseTo(-0.2 / 2.2, 12);
      // jx/(2 + jx) = (x² + 2jx)/(4 + x²)
      const [, series] = reflectionOf('series-inductance', 0.2, z0Ohm);
      expect(series).toEqual([expect.closeTo(0.04 / 4.04, 12), expect.closeTo(0.4 / 4.04, 12)]);
      const [, shunt] = reflectionOf('shunt-capacitance', 0.2, z0Ohm);
      expect(shunt).toEqual([expect.closeTo(-0.04 / 4.04, 12), expect.closeTo(-0.4 / 4.04, 12)]);
    }
  });

  it('keeps r and g over the band, and takes x and b in proportion to frequency', () => {
    const [low, , high] = reflectionOf('series-inductance', 0.2);
    const xOf = ([re, im]: readonly [number, number]): number => (2 * im) / ((1 - re) ** 2 + im * im);
    expect(xOf(low!)).toBeCloseTo((0.2 * 5.9) / 6.9, 10);
    expect(xOf(high!)).toBeCloseTo((0.2 * 7.9) / 6.9, 10);
    const r = reflectionOf('series-resistance', 0.2);
    expect(r[0]).toEqual(r[2]);
  });

  it('is the same as a value in ohms, henries or farads in a line of known impedance', () => {
    const omega = 2 * Math.PI * MIDDLE;
    const values = [
      ['series-resistance', 10, 0.2],
      ['shunt-leakage', 250, 0.2],
      ['series-inductance', 10 / omega, 0.2],
      ['shunt-capacitance', 0.2 / 50 / omega, 0.2],
    ] as const;
    for (const [kind, value, size] of values) {
      const own = strengthOf(kind, value, 50);
      const normalised = strengthOfNormalised(kind, size, MIDDLE);
      expect(normalised.type).toBe(own.type);
      expect(normalised.strength / own.strength).toBeCloseTo(1, 12);
    }
  });

  it('is undone by normalisedOf, with a sign that tells series from shunt', () => {
    const sizes = {
      'series-resistance': 0.3,
      'shunt-leakage': -0.3,
      'series-inductance': 0.3,
      'shunt-capacitance': -0.3,
    };
    for (const [kind, size] of Object.entries(sizes))
      expect(normalisedOf(strengthOfNormalised(kind as LumpedKind, 0.3, MIDDLE), MIDDLE)).toBeCloseTo(
        size,
        14,
      );
  });
});
