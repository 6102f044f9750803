/** The exponent that a run puts on each frequency at a distance, and the words shared by the sums over it. */
import { type MediumRun, pathTo, sectionAt } from '../line/medium-run.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import { assertNever } from '../outcome.ts';

/** What the sum does about loss: leave it, weigh by it (as a matched filter does), or undo it. */
export type LossHandling = 'leave' | 'weigh' | 'undo';

/** Evenly spaced distances, m. */
export type DistanceGrid = { readonly fromM: number; readonly stepM: number; readonly points: number };

/** Part of the distance grid inside one section. */
export type Piece = { readonly section: number; readonly first: number; readonly count: number };

export type PieceTransform = (input: ComplexArray, output: ComplexArray) => void;

/** Sign of the loss in the exponent. */
export function signOf(loss: LossHandling): number {
  switch (loss) {
    case 'leave':
      return 0;
    case 'weigh':
      return -1;
    case 'undo':
      return 1;
    default:
      return assertNever(loss);
  }
}

/** e^{2s·A(d) + 2j·B(d)} at one distance, for every frequency. */
export function factorAt(run: MediumRun, distanceM: number, loss: LossHandling): ComplexArray {
  const { attenuation, phase } = pathTo(run, distanceM);
  const sign = signOf(loss);
  const factor = complexZeros(phase.length);
  for (let k = 0; k < phase.length; k++) {
    const size = Math.exp(2 * sign * attenuation[k]!);
    factor.re[k] = size * Math.cos(2 * phase[k]!);
    factor.im[k] = size * Math.sin(2 * phase[k]!);
  }
  return factor;
}

/** The distance grid cut at the boundaries of sections, in order. */
export function piecesOf(run: MediumRun, grid: DistanceGrid): Piece[] {
  const pieces: Piece[] = [];
  let first = 0;
  let section = sectionAt(run, grid.fromM);
  for (let j = 1; j <= grid.points; j++) {
    const here = j < grid.points ? sectionAt(run, grid.fromM + j * grid.stepM) : -1;
    if (here === section) continue;
    pieces.push({ section, first, count: j - first });
    first = j;
    section = here;
  }
  return pieces;
}
