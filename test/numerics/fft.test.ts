import { describe, expect, it } from 'vitest';
import { createFft, nextPowerOfTwo } from '../../src/numerics/fft.ts';
import { createRandom } from '../../src/numerics/random.ts';

describe('createFft', () => {
  it.each([2, 4, 8, 32, 128])('equals the direct sum for size %i', (size) => {
    const random = createRandom(2);
    const input = Float64Array.from({ length: 2 * size }, () => random.normal());
    const output = new Float64Array(2 * size);
    createFft(size).forward(input, output);
    for (let k = 0; k < size; k++) {
      let re = 0;
      let im = 0;
      for (let n = 0; n < size; n++) {
        const angle = (-2 * Math.PI * n * k) / size;
        re += input[2 * n]! * Math.cos(angle) - input[2 * n + 1]! * Math.sin(angle);
        im += input[2 * n]! * Math.sin(angle) + input[2 * n + 1]! * Math.cos(angle);
      }
      expect(output[2 * k]).toBeCloseTo(re, 10);
      expect(output[2 * k + 1]).toBeCloseTo(im, 10);
    }
  });

  it('comes back to its input through inverse', () => {
    const random = createRandom(4);
    const input = Float64Array.from({ length: 512 }, () => random.normal());
    const spectrum = new Float64Array(512);
    const back = new Float64Array(512);
    const fft = createFft(256);
    fft.forward(input, spectrum);
    fft.inverse(spectrum, back);
    back.forEach((value, i) => {
      expect(value).toBeCloseTo(input[i]!, 12);
    });
  });

  it('refuses sizes that are not a power of two', () => {
    for (const size of [0, 1, 3, 12, 2.5, Number.NaN]) expect(() => createFft(size)).toThrow(RangeError);
  });
});

describe('nextPowerOfTwo', () => {
  it('gives the smallest fitting transform size', () => {
    expect([0, 1, 2, 3, 4, 5, 3648, 4096, 4097].map(nextPowerOfTwo)).toEqual([
      2, 2, 2, 4, 4, 8, 4096, 4096, 8192,
    ]);
  });
});
