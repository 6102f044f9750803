import { describe, expect, it } from 'vitest';
import { createRandom, createWordStream, splitMix64 } from '../../src/numerics/random.ts';

describe('splitMix64', () => {
  it('gives the published outputs for seed 1234567', () => {
    // @source Reference outputs circulated with the authors' C code (from memory).
    const outputs: bigint[] = [];
    let state = 1234567n;
    for (let i = 0; i < 3; i++) {
      const step = splitMix64(state);
      state = step.state;
      outputs.push(step.output);
    }
    expect(outputs).toEqual([6457827717110365317n, 3203168211198807973n, 9817491932198370423n]);
  });
});

describe('createWordStream', () => {
  it('follows the definition of xoshiro128** from state 1, 2, 3, 4', () => {
    // Worked by hand from the paper: 2·5 = 10, rotated 7 = 1280, ·9 = 11520; then b = 1 ^ 2 ^ 3 = 0 gives 0.
    const next = createWordStream([1, 2, 3, 4]);
    expect([next(), next()]).toEqual([11520, 0]);
  });

  it('agrees with the same generator in exact whole-number arithmetic', () => {
    const next = createWordStream([0xdeadbeef, 0x12345678, 0x9abcdef0, 1]);
    const mask = 0xffffffffn;
    const rotate = (word: bigint, by: bigint) => ((word << by) | (word >> (32n - by))) & mask;
    let [a, b, c, d] = [0xdeadbeefn, 0x12345678n, 0x9abcdef0n, 1n];
    for (let i = 0; i < 500; i++) {
      expect(next()).toBe(Number((rotate((b * 5n) & mask, 7n) * 9n) & mask));
      const t = (b << 9n) & mask;
      c ^= a;
      d ^= b;
      b ^= c;
      a ^= d;
      c ^= t;
      d = rotate(d, 11n);
    }
  });

  it('refuses the state that would stay zero', () => {
    expect(() => createWordStream([0, 0, 0, 0])).toThrow(RangeError);
  });
});

describe('createRandom', () => {
  it('repeats itself for the same seed and not for another', () => {
    const take = (seed: number) => {
      const random = createRandom(seed);
      return [random.uniform(), random.normal(), random.integer(1000)];
    };
    expect(take(7)).toEqual(take(7));
    expect(take(7)).not.toEqual(take(8));
    expect(take(-1)).not.toEqual(take(1));
  });

  it('has the moments of its distributions', () => {
    const random = createRandom(42);
    const n = 100_000;
    let uniformSum = 0;
    let sum = 0;
    let squares = 0;
    let fourths = 0;
    for (let i = 0; i < n; i++) {
      uniformSum += random.uniform();
      const x = random.normal();
      sum += x;
      squares += x * x;
      fourths += x ** 4;
    }
    // Five standard errors: 0.289/√n, 1/√n, √2/√n, √96/√n.
    expect(Math.abs(uniformSum / n - 0.5)).toBeLessThan(0.0046);
    expect(Math.abs(sum / n)).toBeLessThan(0.016);
    expect(Math.abs(squares / n - 1)).toBeLessThan(0.023);
    expect(Math.abs(fourths / n - 3)).toBeLessThan(0.16);
  });

  it('draws whole numbers evenly and inside their range', () => {
    const random = createRandom(5);
    const counts = [0, 0, 0];
    for (let i = 0; i < 30_000; i++) counts[random.integer(3)]!++;
    // Five standard errors of a binomial count, √(n·⅓·⅔) = 82.
    for (const count of counts) expect(Math.abs(count - 10_000)).toBeLessThan(410);
  });

  it('refuses broken seeds and ranges', () => {
    expect(() => createRandom(0.5)).toThrow(RangeError);
    expect(() => createRandom(Number.NaN)).toThrow(RangeError);
    expect(() => createRandom(1).integer(0)).toThrow(RangeError);
  });
});
