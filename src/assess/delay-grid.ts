/** Small reflections with delays of their own, as columns of a fit. */
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';

/** Round-trip delays that stand for any between two, no farther apart than the band can tell; at least two. */
export function delayGrid(fromS: number, toS: number, bandHz: number): number[] {
  const count = Math.max(2, 2 + Math.floor((toS - fromS) * bandHz));
  return Array.from({ length: count }, (_, k) => fromS + ((toS - fromS) * k) / (count - 1));
}

/** What a full reflection at the end of a path sends back with a delay added: e^{−2γℓ − jωτ}. */
export function delayedEcho(frequencyHz: Float64Array, path: ComplexArray, delayS: number): ComplexArray {
  const echo = complexZeros(frequencyHz.length);
  for (let i = 0; i < frequencyHz.length; i++) {
    const size = Math.exp(-2 * path.re[i]!);
    const angle = -2 * path.im[i]! - 2 * Math.PI * frequencyHz[i]! * delayS;
    echo.re[i] = size * Math.cos(angle);
    echo.im[i] = size * Math.sin(angle);
  }
  return echo;
}

/** A column a quarter turn on: what its imaginary amplitude does. */
export function quarterTurn({ re, im }: ComplexArray): ComplexArray {
  return { re: im.map((value) => -value), im: re.slice() };
}

/** Path of a bounce between a place and the end behind it: seen as far behind the end as the place lies before it. */
export function mirrored(own: ComplexArray, path: ComplexArray): ComplexArray {
  return {
    re: own.re.map((np, i) => 2 * path.re[i]! - np),
    im: own.im.map((rad, i) => 2 * path.im[i]! - rad),
  };
}
