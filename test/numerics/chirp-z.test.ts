import { describe, expect, it } from 'vitest';
import { createChirpZ } from '../../src/numerics/chirp-z.ts';
import { type ComplexArray, complexZeros } from '../../src/numerics/complex.ts';
import { createFft } from '../../src/numerics/fft.ts';
import { createRandom } from '../../src/numerics/random.ts';

function noise(n: number, seed: number): ComplexArray {
  const random = createRandom(seed);
  const values = complexZeros(n);
  for (let k = 0; k < n; k++) {
    values.re[k] = random.normal();
    values.im[k] = random.normal();
  }
  return values;
}

function directSum(input: ComplexArray, angleRad: number): [number, number] {
  let re = 0;
  let im = 0;
  for (let k = 0; k < input.re.length; k++) {
    const c = Math.cos(k * angleRad);
    const s = Math.sin(k * angleRad);
    re += input.re[k]! * c - input.im[k]! * s;
    im += input.re[k]! * s + input.im[k]! * c;
  }
  return [re, im];
}

describe('createChirpZ', () => {
  it.each([
    [1, 1, 0.3, 0.2],
    [1, 7, 0.3, 0.2],
    [9, 1, -2, 0.2],
    [17, 64, 0.1, 0.05],
    [100, 33, -1.7, -0.013],
    [401, 500, 12.5, 0.31],
  ])('equals the direct sum for n = %i, m = %i, start %d, step %d', (n, m, startRad, stepRad) => {
    const input = noise(n, 11);
    const output = createChirpZ({ n, m, startRad, stepRad }).transform(input);
    for (let j = 0; j < m; j++) {
      const [re, im] = directSum(input, startRad + j * stepRad);
      // Rounding of angles up to 10⁵ rad in the direct sum itself, times √n terms.
      expect(Math.abs(output.re[j]! - re)).toBeLessThan(1e-9);
      expect(Math.abs(output.im[j]! - im)).toBeLessThan(1e-9);
    }
  });

  it('equals the inverse transform, unscaled, on its own grid', () => {
    const size = 64;
    const input = noise(size, 3);
    const interleaved = new Float64Array(2 * size);
    for (let k = 0; k < size; k++) {
      interleaved[2 * k] = input.re[k]!;
      interleaved[2 * k + 1] = input.im[k]!;
    }
    const expected = new Float64Array(2 * size);
    createFft(size).inverse(interleaved, expected);
    const output = createChirpZ({ n: size, m: size, stepRad: (2 * Math.PI) / size }).transform(input);
    for (let j = 0; j < size; j++) {
      expect(output.re[j]).toBeCloseTo(size * expected[2 * j]!, 10);
      expect(output.im[j]).toBeCloseTo(size * expected[2 * j + 1]!, 10);
    }
  });

  it('turns a lone input into a pure rotation', () => {
    const input = complexZeros(5);
    input.re[3] = 1;
    const output = createChirpZ({ n: 5, m: 4, startRad: 0.5, stepRad: 0.1 }).transform(input);
    for (let j = 0; j < 4; j++) {
      expect(output.re[j]).toBeCloseTo(Math.cos(3 * (0.5 + 0.1 * j)), 13);
      expect(output.im[j]).toBeCloseTo(Math.sin(3 * (0.5 + 0.1 * j)), 13);
    }
  });

  it('keeps its digits over 100 000 points', () => {
    const n = 100_000;
    const input = complexZeros(n);
    input.re.fill(1 / n);
    const stepRad = (2 * Math.PI) / n;
    const output = createChirpZ({ n, m: 3, startRad: 0, stepRad }).transform(input);
    expect(output.re[0]).toBeCloseTo(1, 9);
    // A constant has nothing in the other bins; what is left is rounding.
    expect(Math.hypot(output.re[1]!, output.im[1]!)).toBeLessThan(1e-9);
  });

  it('writes into a given array from an index on, and may overwrite its input', () => {
    const plan = createChirpZ({ n: 6, m: 4, stepRad: 0.3 });
    const input = noise(6, 5);
    const expected = plan.transform(input);
    const wide = complexZeros(10);
    plan.transform(input, wide, 5);
    expect(wide.re.slice(5, 9)).toEqual(expected.re);
    expect(wide.re[4]).toBe(0);
    plan.transform(input, input);
    expect(input.im.slice(0, 4)).toEqual(expected.im);
  });

  it('refuses empty shapes, angles that are not finite, and arrays that do not fit', () => {
    expect(() => createChirpZ({ n: 0, m: 1, stepRad: 1 })).toThrow(RangeError);
    expect(() => createChirpZ({ n: 1, m: 1.5, stepRad: 1 })).toThrow(RangeError);
    expect(() => createChirpZ({ n: 1, m: 1, stepRad: Number.NaN })).toThrow(RangeError);
    expect(() => createChirpZ({ n: 2, m: 2, stepRad: 1 }).transform(complexZeros(3))).toThrow(RangeError);
    expect(() =>
      createChirpZ({ n: 2, m: 2, stepRad: 1 }).transform(complexZeros(2), complexZeros(1)),
    ).toThrow(RangeError);
  });
});
