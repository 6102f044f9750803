/** Sweeps made of echoes and noise, for tests. */
import { createRandom } from '../../src/numerics/random.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';

export type DrawnEcho = { readonly delayS: number; readonly gamma: number };

/** Even frequencies. */
export function evenHz(startHz: number, stopHz: number, points: number): Float64Array {
  return Float64Array.from({ length: points }, (_, k) => startHz + ((stopHz - startHz) * k) / (points - 1));
}

/**
 * A sweep of plain echoes with complex normal noise.
 *
 * @param noiseDb Complex RMS of one point; none unless given.
 */
export function drawnSweep(
  frequencyHz: Float64Array,
  echoes: readonly DrawnEcho[],
  { noiseDb = Number.NEGATIVE_INFINITY, seed = 1 } = {},
): Sweep {
  const random = createRandom(seed);
  const size = 10 ** (noiseDb / 20) / Math.SQRT2;
  const gamma = { re: new Float64Array(frequencyHz.length), im: new Float64Array(frequencyHz.length) };
  frequencyHz.forEach((f, k) => {
    gamma.re[k] = size * random.normal();
    gamma.im[k] = size * random.normal();
    for (const echo of echoes) {
      const angle = -2 * Math.PI * f * echo.delayS;
      gamma.re[k] = gamma.re[k]! + echo.gamma * Math.cos(angle);
      gamma.im[k] = gamma.im[k]! + echo.gamma * Math.sin(angle);
    }
  });
  return sweepFrom(frequencyHz, gamma);
}

/** A one-port sweep of these values, relative to 50 Ω. */
export function sweepFrom(frequencyHz: Float64Array, gamma: Sweep['gamma'], portOhm = 50): Sweep {
  return { frequencyHz, gamma, portOhm, port: 1, ports: 1, file: 'drawn.s1p', comments: [] };
}
