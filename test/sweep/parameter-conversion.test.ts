import { describe, expect, it } from 'vitest';
import { createRandom } from '../../src/numerics/random.ts';
import { createParameterConverter, solveComplexInPlace } from '../../src/sweep/parameter-conversion.ts';

describe('solveComplexInPlace', () => {
  it('solves a random system to rounding, pivoting included', () => {
    const random = createRandom(4);
    const n = 6;
    const draw = (size: number) => Float64Array.from({ length: size }, () => random.normal());
    const a = { re: draw(n * n), im: draw(n * n) };
    a.re[0] = 0;
    a.im[0] = 0;
    const x = { re: draw(n), im: draw(n) };
    const b = { re: new Float64Array(n), im: new Float64Array(n) };
    for (let row = 0; row < n; row++) {
      for (let c = 0; c < n; c++) {
        const [aRe, aIm] = [a.re[row * n + c]!, a.im[row * n + c]!];
        b.re[row] = b.re[row]! + aRe * x.re[c]! - aIm * x.im[c]!;
        b.im[row] = b.im[row]! + aRe * x.im[c]! + aIm * x.re[c]!;
      }
    }
    solveComplexInPlace(a.re, a.im, b.re, b.im);
    for (let i = 0; i < n; i++) {
      expect(b.re[i]).toBeCloseTo(x.re[i]!, 11);
      expect(b.im[i]).toBeCloseTo(x.im[i]!, 11);
    }
  });

  it('leaves no finite value where the system is singular', () => {
    const b = { re: Float64Array.of(1, 1), im: new Float64Array(2) };
    solveComplexInPlace(Float64Array.of(1, 2, 2, 4), new Float64Array(4), b.re, b.im);
    expect(b.re.some(Number.isFinite)).toBe(false);
  });
});

describe('createParameterConverter', () => {
  /** A shunt resistance of one reference between two ports: S11 = −1/3, S21 = 2/3 (Pozar, table 4.2). */
  const shunt = { re: -1 / 3, im: 0, throughRe: 2 / 3, throughIm: 0 };

  it('converts Z of a shunt resistance', () => {
    const convert = createParameterConverter('z', [50, 50], { normalised: false, port: 1 });
    const found = convert(Float64Array.of(50, 50, 50, 50), new Float64Array(4));
    for (const key of ['re', 'im', 'throughRe', 'throughIm'] as const)
      expect(found[key]).toBeCloseTo(shunt[key], 12);
  });

  it('agrees with Y and with references that differ: power is kept by a lossless network', () => {
    // Series reactance j30 Ω between 50 and 75 Ω.
    const y = -1 / 30;
    const convert = createParameterConverter('y', [50, 75], { normalised: false, port: 1 });
    const found = convert(new Float64Array(4), Float64Array.of(y, -y, -y, y));
    const powers = found.re ** 2 + found.im ** 2 + found.throughRe ** 2 + found.throughIm ** 2;
    expect(powers).toBeCloseTo(1, 12);
    // Seen from port 1: (75 + j30 − 50)/(75 + j30 + 50)
    expect(found.re).toBeCloseTo((25 * 125 + 30 * 30) / (125 ** 2 + 30 ** 2), 12);
    expect(found.im).toBeCloseTo((30 * 125 - 25 * 30) / (125 ** 2 + 30 ** 2), 12);
  });

  it('gives no finite value for a matrix without a scattering form', () => {
    const convert = createParameterConverter('z', [50], { normalised: true, port: 1 });
    expect(Number.isFinite(convert(Float64Array.of(-1), new Float64Array(1)).re)).toBe(false);
  });
});
