/** Seeded random draws for the scenes: the same words give the same numbers on every machine. */

export type Draws = {
  /** Evenly spread over from..to. */
  readonly uniform: (from: number, to: number) => number;
  /** Evenly spread in the logarithm; both limits positive. */
  readonly logUniform: (from: number, to: number) => number;
  /** Whole number, both limits included. */
  readonly integer: (from: number, to: number) => number;
  readonly chance: (probability: number) => boolean;
  readonly pick: <T>(choices: readonly T[]) => T;
  /** Gaussian with mean 0 and deviation 1. */
  readonly normal: () => number;
  /** Student's t with 3 degrees of freedom, cut at ±5: mostly small, now and then large. */
  readonly heavyTail: () => number;
};

/**
 * Opens a stream of draws named by words, for example a suite, a seed and an index.
 *
 * @source Xorshift with 128 bits of state: Marsaglia, Xorshift RNGs, J. Stat. Softw. 8(14), 2003, section 3.1.
 */
export function seededDraws(...words: readonly (string | number)[]): Draws {
  const state = seedState(words.join('\u0000'));
  const next = () => nextUnit(state);
  const uniform = (from: number, to: number) => from + (to - from) * next();
  const normal = () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next());
  return {
    uniform,
    normal,
    logUniform: (from, to) => Math.exp(uniform(Math.log(from), Math.log(to))),
    integer: (from, to) => Math.min(to, from + Math.floor((to - from + 1) * next())),
    chance: (probability) => next() < probability,
    pick: (choices) => choices[Math.min(choices.length - 1, Math.floor(choices.length * next()))]!,
    heavyTail: () => {
      const spread = Math.sqrt((normal() ** 2 + normal() ** 2 + normal() ** 2) / 3);
      return Math.max(-5, Math.min(5, normal() / spread));
    },
  };
}

/** Four words of state from text by the 32-bit FNV-1a hash, never all zero; then stirred. */
function seedState(text: string): Uint32Array {
  const state = new Uint32Array(4);
  let hash = 0x811c9dc5;
  for (let round = 0; round < 4; round++) {
    for (let i = 0; i < text.length; i++) hash = Math.imul(hash ^ text.charCodeAt(i), 0x01000193);
    hash = Math.imul(hash ^ (round + 1), 0x01000193);
    state[round] = hash === 0 ? 1 : hash;
  }
  for (let i = 0; i < 32; i++) nextUnit(state);
  return state;
}

/** One step of the generator, twice, for 52 bits: 0 ≤ value < 1. */
function nextUnit(state: Uint32Array): number {
  const high = step(state) >>> 6;
  const low = step(state) >>> 6;
  return (high * 0x4000000 + low) / 0x10000000000000;
}

function step(state: Uint32Array): number {
  const mixed = state[0]! ^ (state[0]! << 11);
  state[0] = state[1]!;
  state[1] = state[2]!;
  state[2] = state[3]!;
  state[3] = state[3]! ^ (state[3]! >>> 19) ^ (mixed ^ (mixed >>> 8));
  return state[3]!;
}
