import { describe, expect, it } from 'vitest';
import { NO_LINE_CHANGE, planWarp } from '../../src/assess/compare-warp.ts';
import { type ComplexArray, complexZeros } from '../../src/numerics/complex.ts';

/** Echoes by round-trip delay and size; the first 20 ns lose twice as much as the rest. */
const ECHOES = [
  [0.2e-9, 0.1],
  [15e-9, 0.05],
  [100e-9, 0.02],
  [333.3e-9, 0.03],
  [398e-9, 0.7],
] as const;
const BEND_S = 20e-9;
const RATES = [2e5, 1e5] as const;

/** The sum of the echoes on a changed line, written out. */
function echoes(frequencyHz: Float64Array, stretch: number, loss: number, offsetS: number): ComplexArray {
  const sum = complexZeros(frequencyHz.length);
  frequencyHz.forEach((f, i) => {
    const skin = loss * Math.sqrt(f / 1e9);
    for (const [delayS, size] of ECHOES) {
      const fade = skin * (RATES[0] * Math.min(delayS, BEND_S) + RATES[1] * Math.max(0, delayS - BEND_S));
      const angle = -2 * Math.PI * f * (delayS * (1 + stretch) + offsetS) - fade;
      sum.re[i] = sum.re[i]! + size * Math.exp(-fade) * Math.cos(angle);
      sum.im[i] = sum.im[i]! + size * Math.exp(-fade) * Math.sin(angle);
    }
  });
  return sum;
}

function planOf(sourceHz: Float64Array, targetHz: Float64Array) {
  const skin = (rate: number) => targetHz.map((f) => rate * Math.sqrt(f / 1e9));
  const pieces = [0, BEND_S].map((fromS, p) => ({
    fromS,
    perLoss: { re: skin(RATES[p]!), im: skin(RATES[p]!) },
  }));
  return { sourceHz, targetHz, pieces, longestS: 420e-9 };
}

/** RMS difference over the band, a few points at its edges left out, dB. */
function apartDb(a: ComplexArray, b: ComplexArray): number {
  const edge = 6;
  let sum = 0;
  for (let i = edge; i < a.re.length - edge; i++)
    sum += (a.re[i]! - b.re[i]!) ** 2 + (a.im[i]! - b.im[i]!) ** 2;
  return 10 * Math.log10(sum / (a.re.length - 2 * edge) + 1e-30);
}

const even = Float64Array.from({ length: 1350 }, (_, i) => 2e6 * (i + 1));

describe('planWarp', () => {
  it('gives a sweep back where nothing has changed', () => {
    const warp = planWarp(planOf(even, even))(echoes(even, 0, 0, 0));
    expect(apartDb(warp(NO_LINE_CHANGE), echoes(even, 0, 0, 0))).toBeLessThan(-75);
  });

  it.each([
    [500e-6, 0.1, 0],
    [-300e-6, -0.05, 3e-12],
    [0, 0.2, 0],
  ])(
    'shows a line with stretch %d, loss %d and offset %d as its echoes written out',
    (stretch, loss, offsetS) => {
      const warp = planWarp(planOf(even, even))(echoes(even, 0, 0, 0));
      expect(apartDb(warp({ stretch, loss, offsetS }), echoes(even, stretch, loss, offsetS))).toBeLessThan(
        -75,
      );
    },
  );

  it('works from an uneven grid to another grid', () => {
    const uneven = even.map((f, i) => (i === 0 || i === even.length - 1 ? f : f + 0.4e6 * Math.sin(7 * i)));
    const target = Float64Array.from({ length: 700 }, (_, i) => 50e6 + i * 3.1e6);
    const warp = planWarp(planOf(uneven, target))(echoes(uneven, 0, 0, 0));
    expect(
      apartDb(warp({ stretch: 4e-4, loss: 0.1, offsetS: 0 }), echoes(target, 4e-4, 0.1, 0)),
    ).toBeLessThan(-70);
  });

  it('makes do with fewer points than it has neighbours', () => {
    const few = even.slice(0, 12);
    const warp = planWarp({ ...planOf(few, few), longestS: 100e-9 })(echoes(few, 0, 0, 0));
    expect(warp(NO_LINE_CHANGE).re.every(Number.isFinite)).toBe(true);
  });
});
