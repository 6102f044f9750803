/** The plain sum over frequencies at evenly spaced distances of one section: exact, and cheapest for few points. */
import type { MediumRun } from '../line/medium-run.ts';
import { complexZeros } from '../numerics/complex.ts';
import {
  type DistanceGrid,
  factorAt,
  type LossHandling,
  type Piece,
  type PieceTransform,
  signOf,
} from './path-factor.ts';

/**
 * Plans the plain sum for one piece: for each frequency the distances are walked with one complex multiplication a
 * step. Cost n·points.
 */
export function planPlainSum(
  run: MediumRun,
  grid: DistanceGrid,
  loss: LossHandling,
  piece: Piece,
): PieceTransform {
  const sign = signOf(loss);
  const start = factorAt(run, grid.fromM + piece.first * grid.stepM, loss);
  const alpha = run.alpha[piece.section]!;
  const beta = run.beta[piece.section]!;
  const n = alpha.length;
  const step = complexZeros(n);
  for (let k = 0; k < n; k++) {
    const size = Math.exp(2 * sign * alpha[k]! * grid.stepM);
    step.re[k] = size * Math.cos(2 * beta[k]! * grid.stepM);
    step.im[k] = size * Math.sin(2 * beta[k]! * grid.stepM);
  }
  return (input, output) => {
    const re = output.re.subarray(piece.first, piece.first + piece.count);
    const im = output.im.subarray(piece.first, piece.first + piece.count);
    re.fill(0);
    im.fill(0);
    // Two frequencies at a time: two independent chains of multiplications, half the traffic to memory.
    for (let k = 0; k < n; k += 2) {
      const next = k + 1 < n ? k + 1 : k;
      const share = next === k ? 0 : 1;
      const stepRe = step.re[k]!;
      const stepIm = step.im[k]!;
      const otherStepRe = step.re[next]!;
      const otherStepIm = step.im[next]!;
      let aRe = input.re[k]! * start.re[k]! - input.im[k]! * start.im[k]!;
      let aIm = input.re[k]! * start.im[k]! + input.im[k]! * start.re[k]!;
      let bRe = share * (input.re[next]! * start.re[next]! - input.im[next]! * start.im[next]!);
      let bIm = share * (input.re[next]! * start.im[next]! + input.im[next]! * start.re[next]!);
      for (let j = 0; j < piece.count; j++) {
        re[j] = re[j]! + (aRe + bRe);
        im[j] = im[j]! + (aIm + bIm);
        const aNext = aRe * stepRe - aIm * stepIm;
        aIm = aRe * stepIm + aIm * stepRe;
        aRe = aNext;
        const bNext = bRe * otherStepRe - bIm * otherStepIm;
        bIm = bRe * otherStepIm + bIm * otherStepRe;
        bRe = bNext;
      }
    }
  };
}
