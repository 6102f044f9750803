/** Seeded random numbers for simulated noise and tests: same seed, same numbers, on every machine. */

/** A stream of random numbers. */
export type Random = {
  /** Uniform in [0, 1), 53 bits. */
  uniform(): number;
  /** Normal with mean 0 and standard deviation 1. */
  normal(): number;
  /** Whole number 0 … n−1, each as likely. @throws RangeError When n is not a whole number in 1..2³². */
  integer(n: number): number;
};

/**
 * A stream of random numbers from a seed: xoshiro128** with its four words filled by SplitMix64.
 *
 * Fast and good enough for noise and scenes; not for secrets.
 *
 * @param seed Whole number, |seed| ≤ 2⁵³.
 * @throws RangeError When the seed is not a safe whole number.
 * @source D. Blackman, S. Vigna, Scrambled linear pseudorandom number generators, ACM TOMS 47(4), 2021
 *   (xoshiro128**); G. Steele, D. Lea, C. Flood, Fast splittable pseudorandom number generators, OOPSLA 2014
 *   (SplitMix64); G. Marsaglia, T. Bray, A convenient method for generating normal variables, SIAM Review 6(3),
 *   1964 (polar method).
 */
export function createRandom(seed: number): Random {
  if (!Number.isSafeInteger(seed)) throw new RangeError(`a seed must be a whole number, not ${seed}`);
  const next = createWordStream(wordsFromSeed(seed));
  let spare: number | null = null;

  function uniform(): number {
    const high = next() >>> 5;
    const low = next() >>> 6;
    return (high * 0x4000000 + low) / 0x20000000000000;
  }

  function normal(): number {
    if (spare !== null) {
      const value = spare;
      spare = null;
      return value;
    }
    for (;;) {
      const x = 2 * uniform() - 1;
      const y = 2 * uniform() - 1;
      const square = x * x + y * y;
      if (square > 0 && square < 1) {
        const scale = Math.sqrt((-2 * Math.log(square)) / square);
        spare = y * scale;
        return x * scale;
      }
    }
  }

  function integer(n: number): number {
    if (!(Number.isInteger(n) && n >= 1 && n <= 0x100000000))
      throw new RangeError(`integer(n) needs a whole n in 1..2^32, not ${n}`);
    const fair = 0x100000000 - (0x100000000 % n);
    let word = next();
    while (word >= fair) word = next();
    return word % n;
  }

  return { uniform, normal, integer };
}

/**
 * The bare xoshiro128** stream of 32-bit words, for those who want bits.
 *
 * @param state Four words, not all 0.
 * @throws RangeError When all four words are 0.
 */
export function createWordStream(state: readonly [number, number, number, number]): () => number {
  let [a, b, c, d] = state.map((word) => word >>> 0) as [number, number, number, number];
  if ((a | b | c | d) === 0) throw new RangeError('the state must not be all zeros');
  return () => {
    const result = Math.imul(rotateLeft(Math.imul(b, 5), 7), 9) >>> 0;
    const shifted = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= shifted;
    d = rotateLeft(d, 11);
    return result;
  };
}

/** One SplitMix64 step: the next state and its 64-bit output. */
export function splitMix64(state: bigint): { readonly state: bigint; readonly output: bigint } {
  const next = BigInt.asUintN(64, state + 0x9e3779b97f4a7c15n);
  let z = next;
  z = BigInt.asUintN(64, (z ^ (z >> 30n)) * 0xbf58476d1ce4e5b9n);
  z = BigInt.asUintN(64, (z ^ (z >> 27n)) * 0x94d049bb133111ebn);
  return { state: next, output: z ^ (z >> 31n) };
}

function wordsFromSeed(seed: number): [number, number, number, number] {
  const first = splitMix64(BigInt.asUintN(64, BigInt(seed)));
  const second = splitMix64(first.state);
  const words = [first.output, second.output].flatMap((word) => [
    Number(word & 0xffffffffn),
    Number(word >> 32n),
  ]);
  return words as [number, number, number, number];
}

function rotateLeft(word: number, by: number): number {
  return (word << by) | (word >>> (32 - by));
}
