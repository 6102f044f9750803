import { describe, expect, it } from 'vitest';
import { type EndModel, writeEnd } from '../../src/line/end.ts';
import { complexZeros } from '../../src/numerics/complex.ts';

const GRID = Float64Array.from({ length: 40 }, (_, k) => 2e6 + k * 68e6);

function gammaOf(end: EndModel, frequencyHz = GRID) {
  const out = complexZeros(frequencyHz.length);
  writeEnd(end, frequencyHz, out, null);
  return out;
}

/** Γ of an impedance r + jx (relative to z0), by (z − 1)/(z + 1). */
function gammaOfImpedance(r: number, x: number): [number, number] {
  const size = (r + 1) ** 2 + x * x;
  return [(r * r - 1 + x * x) / size, (2 * x) / size];
}

const ENDS: readonly EndModel[] = [
  { type: 'open', parameters: [4e-12] },
  { type: 'short', parameters: [3e-12] },
  { type: 'load', parameters: [1.06, 5e-12] },
  { type: 'load', parameters: [0.94, -5e-12] },
  { type: 'antenna', parameters: [-1, 0.1, 1.9, 0.1, 6, 1.9e9] },
  { type: 'antenna', parameters: [1, -0.2, -1.8, 0.1, 5, 0.9e9, -0.9, 0.2, 8, 1.9e9] },
];

describe('writeEnd', () => {
  it('is +1 for a bare open and −1 for a bare short, at every frequency', () => {
    const open = gammaOf({ type: 'open', parameters: [0] });
    const short = gammaOf({ type: 'short', parameters: [0] });
    expect(open.re.every((re, k) => re === 1 && Math.abs(open.im[k]!) === 0)).toBe(true);
    expect(short.re.every((re, k) => re === -1 && Math.abs(short.im[k]!) === 0)).toBe(true);
  });

  it('is an open with a capacitance of τ/z0 and a short with an inductance of τ·z0', () => {
    const tau = 4e-12;
    const open = gammaOf({ type: 'open', parameters: [tau] });
    const short = gammaOf({ type: 'short', parameters: [tau] });
    GRID.forEach((f, k) => {
      const x = 2 * Math.PI * f * tau;
      const [openRe, openIm] = gammaOfImpedance(0, -1 / x);
      const [shortRe, shortIm] = gammaOfImpedance(0, x);
      expect(Math.hypot(open.re[k]! - openRe, open.im[k]! - openIm)).toBeLessThan(1e-12);
      expect(Math.hypot(short.re[k]! - shortRe, short.im[k]! - shortIm)).toBeLessThan(1e-12);
    });
  });

  it('is a load of r·z0 with a series inductance above 0, and a shunt capacitance below', () => {
    const series = gammaOf({ type: 'load', parameters: [1.3, 6e-12] });
    const shunt = gammaOf({ type: 'load', parameters: [1.3, -6e-12] });
    GRID.forEach((f, k) => {
      const x = 2 * Math.PI * f * 6e-12;
      const [re, im] = gammaOfImpedance(1.3, x);
      expect(Math.hypot(series.re[k]! - re, series.im[k]! - im)).toBeLessThan(1e-12);
      // y = 1/1.3 + jx: Γ = −(y − 1)/(y + 1)
      const [minusRe, minusIm] = gammaOfImpedance(1 / 1.3, x);
      expect(Math.hypot(shunt.re[k]! + minusRe, shunt.im[k]! + minusIm)).toBeLessThan(1e-12);
    });
    expect(gammaOf({ type: 'load', parameters: [1, 0] }).re.every((re) => re === 0)).toBe(true);
  });

  it('is a load behind a tuned circuit exactly, as an antenna with g = −1, h = 0 and a = 2r/(r + 1)', () => {
    // Parallel tuned circuit across r: y = 1/r + jq·δ, δ = f/f0 − f0/f. Γ = (1 − y)/(1 + y) = −1 + 2/(1 + y)
    // = −1 + a/(1 + jQδ) with a = 2r/(r + 1), Q = q·r/(r + 1).
    const [r, q, f0] = [1.1, 9, 1.9e9];
    const gamma = gammaOf({
      type: 'antenna',
      parameters: [-1, 0, (2 * r) / (r + 1), 0, (q * r) / (r + 1), f0],
    });
    GRID.forEach((f, k) => {
      const susceptance = q * (f / f0 - f0 / f);
      const [re, im] = gammaOfImpedance(1 / r, susceptance);
      expect(Math.hypot(gamma.re[k]! + re, gamma.im[k]! + im)).toBeLessThan(1e-12);
    });
  });

  it('is a matched antenna in its band and reflects outside it', () => {
    const antenna: EndModel = { type: 'antenna', parameters: [-1, 0, 1, 0, 10, 1e9] };
    const gamma = gammaOf(antenna, Float64Array.of(0.1e9, 1e9, 3e9));
    expect(Math.hypot(gamma.re[1]!, gamma.im[1]!)).toBeLessThan(1e-12);
    expect(Math.hypot(gamma.re[0]!, gamma.im[0]!)).toBeGreaterThan(0.99);
    expect(Math.hypot(gamma.re[2]!, gamma.im[2]!)).toBeGreaterThan(0.99);
  });

  it.each(ENDS)('gives derivatives that agree with finite differences: $type $parameters', (end) => {
    const derivatives = end.parameters.map(() => complexZeros(GRID.length));
    const out = complexZeros(GRID.length);
    writeEnd(end, GRID, out, derivatives);
    const plain = gammaOf(end);
    expect([out.re, out.im]).toEqual([plain.re, plain.im]);
    end.parameters.forEach((value, p) => {
      const step = Math.max(Math.abs(value), 1e-12) * 1e-5;
      const shifted = (by: number) =>
        gammaOf({ ...end, parameters: end.parameters.map((v, i) => (i === p ? v + by : v)) });
      const [low, high] = [shifted(-step), shifted(step)];
      const largest = Math.max(...derivatives[p]!.re.map(Math.abs), ...derivatives[p]!.im.map(Math.abs));
      GRID.forEach((_, k) => {
        const re = (high.re[k]! - low.re[k]!) / (2 * step);
        const im = (high.im[k]! - low.im[k]!) / (2 * step);
        const away = Math.hypot(re - derivatives[p]!.re[k]!, im - derivatives[p]!.im[k]!);
        // Central differences: error of the order of the step squared, and of rounding over the step.
        expect(away / largest).toBeLessThan(1e-6);
      });
    });
  });
});
