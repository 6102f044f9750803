/**
 * Points of the sweep that a carrier on the antenna has hit: their residual stands far over that of their neighbours,
 * which nothing on the line can do, for what the line leaves over changes slowly from point to point.
 */
import { median } from '../numerics/statistics.ts';
import type { FitContext } from './fit-context.ts';

/** Points on each side that a point is compared with. */
const NEIGHBOURS = 16;

/**
 * Power over the median of the neighbours from which a point counts as hit. Noise alone goes beyond 45 times its median
 * once in 2^45 points, but where the residual passes through a null the median is small.
 */
const OVER_MEDIAN = 45;

/** So a hit must also stand this far over the median power of the whole residual. */
const OVER_ALL = 20;

/** More hits than this share are no carriers but a model that does not fit. */
const MOST_HIT = 0.04;

/** Gives points that are hit a weight of 0, in place, and names them. */
export function leaveOutInterference(context: FitContext): number[] {
  const { residual, weight } = context;
  const n = weight.length;
  const power = Float64Array.from({ length: n }, (_, i) => residual.re[i]! ** 2 + residual.im[i]! ** 2);
  const overall = median(power);
  const hit: number[] = [];
  for (let i = 0; i < n; i++) {
    if (weight[i] === 0 || power[i]! < OVER_ALL * overall) continue;
    const around: number[] = [];
    for (let k = Math.max(0, i - NEIGHBOURS); k <= Math.min(n - 1, i + NEIGHBOURS); k++)
      if (k !== i && weight[k]! > 0) around.push(power[k]!);
    if (around.length > 0 && power[i]! > OVER_MEDIAN * median(Float64Array.from(around))) hit.push(i);
  }
  if (hit.length > Math.max(2, MOST_HIT * n)) return [];
  for (const i of hit) weight[i] = 0;
  return hit;
}
