/** Curvature of the cost: products of derivative columns, from all points or from a scattered part of them. */
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import type { FitContext } from './fit-context.ts';

/** Points per parameter from which the curvature is read when some will do, and the fewest. */
const POINTS_PER_PARAMETER = 10;
const FEWEST_POINTS = 300;

/** Golden-ratio stride: a scattered part of the points folds no distance onto another. */
const SCATTER = (Math.sqrt(5) - 1) / 2;

/** A scattered part of the points, or null where all of them are as few. */
export function somePoints(context: FitContext, parameters: number): Int32Array | null {
  const n = context.frequencyHz.length;
  const wanted = Math.max(FEWEST_POINTS, POINTS_PER_PARAMETER * parameters);
  if (wanted > 0.7 * n) return null;
  const known = context.scattered.get(wanted);
  if (known) return known;
  const share = wanted / n;
  const points = Int32Array.from(
    Array.from({ length: n }, (_, i) => i).filter((i) => (i * SCATTER) % 1 < share),
  );
  context.scattered.set(wanted, points);
  return points;
}

/**
 * Re conj(column a)·(column b) for every pair, times a factor; two by two, which halves the reading of memory.
 *
 * @param points Those that stand for all; null for all.
 */
export function productsOf(
  columns: readonly ComplexArray[],
  points: Int32Array | null,
  factor: number,
): Float64Array {
  const p = columns.length;
  const used = points === null ? columns : columns.map((column) => pick(column, points));
  const scale = points === null ? factor : (factor * (columns[0]?.re.length ?? 0)) / points.length;
  const products = new Float64Array(p * p);
  const put = (a: number, b: number, value: number): void => {
    products[a * p + b] = value * scale;
    products[b * p + a] = value * scale;
  };
  for (let a = 0; a < p; a += 2) {
    const { re: aRe, im: aIm } = used[a]!;
    const { re: cRe, im: cIm } = used[Math.min(a + 1, p - 1)]!;
    for (let b = 0; b <= a; b += 2) {
      const { re: bRe, im: bIm } = used[b]!;
      const { re: dRe, im: dIm } = used[Math.min(b + 1, p - 1)]!;
      let ab = 0;
      let ad = 0;
      let cb = 0;
      let cd = 0;
      for (let i = 0; i < aRe.length; i++) {
        const ar = aRe[i]!;
        const ai = aIm[i]!;
        const br = bRe[i]!;
        const bi = bIm[i]!;
        const cr = cRe[i]!;
        const ci = cIm[i]!;
        const dr = dRe[i]!;
        const di = dIm[i]!;
        ab += ar * br + ai * bi;
        ad += ar * dr + ai * di;
        cb += cr * br + ci * bi;
        cd += cr * dr + ci * di;
      }
      put(a, b, ab);
      if (b + 1 < p) put(a, b + 1, ad);
      if (a + 1 < p) put(a + 1, b, cb);
      if (a + 1 < p && b + 1 < p) put(a + 1, b + 1, cd);
    }
  }
  return products;
}

function pick(column: ComplexArray, points: Int32Array): ComplexArray {
  const out = complexZeros(points.length);
  for (let k = 0; k < points.length; k++) {
    out.re[k] = column.re[points[k]!]!;
    out.im[k] = column.im[points[k]!]!;
  }
  return out;
}
