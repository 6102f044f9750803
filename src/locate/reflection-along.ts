/** The reflection that a line has built up by each distance: the low-pass step response with the path undone. */
import { type MediumRun, pathTo } from '../line/medium-run.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import { type DistanceGrid, factorAt, type Piece, piecesOf } from './path-factor.ts';

export type ReflectionOptions = {
  /** From 0, not falling, Hz; length n. */
  readonly frequencyHz: Float64Array;
  /** Reflection there; real at 0. */
  readonly gamma: ComplexArray;
  /** The line there. */
  readonly run: MediumRun;
  /** For each section, by how much its γ changes over what each frequency stands for, 1/m. */
  readonly cells: readonly ComplexArray[];
  /** Begins so far before 0 that nothing is reflected yet. */
  readonly grid: DistanceGrid;
  /** Weight at a share 0..1 of the band in use, 1 at 0. */
  readonly taper: (share: number) => number;
  /** What takes more than this on the way there and back is left out of the band, Np. */
  readonly mostLossNp: number;
};

/** A band cut to fewer frequencies than this says nothing. */
const FEWEST_FREQUENCIES = 60;

/** The taper is fitted anew when the band in use has shrunk by this share. */
const BAND_CHANGE = 0.01;

/**
 * Running sum over distance of ρ(d) = (2/π)·Im Σ taper·Γ·e^{2∫γ}·Δγ, the sum over distance by the trapezoid rule.
 *
 * Cost: steps of the band in use times distances.
 *
 * @returns Reflection built up by each distance; shorter than the grid where loss leaves no band to speak of.
 */
export function reflectionAlong(options: ReflectionOptions): Float64Array {
  const { run, grid } = options;
  const built = new Float64Array(grid.points);
  let sum = 0;
  let before = 0;
  let inUse = options.gamma.re.length;
  for (const piece of piecesOf(run, grid)) {
    const walk = walkPiece(options, piece, inUse);
    for (let j = 0; j < piece.count; j++) {
      const density = walk.next();
      if (density === null) return built.subarray(0, piece.first + j);
      if (piece.first + j > 0) sum += ((before + density) / 2) * grid.stepM;
      before = density;
      built[piece.first + j] = sum;
    }
    inUse = walk.inUse();
  }
  return built;
}

/** Walks the distances of one piece; `next` gives ρ in 1/m, or null when the band has shrunk to nothing. */
type Walk = { next(): number | null; inUse(): number };

function walkPiece(options: ReflectionOptions, piece: Piece, from: number): Walk {
  const { frequencyHz, gamma, run, grid, taper, mostLossNp } = options;
  const alpha = run.alpha[piece.section]!;
  const beta = run.beta[piece.section]!;
  const cells = options.cells[piece.section]!;
  const startM = grid.fromM + piece.first * grid.stepM;
  const loss = pathTo(run, startM).attenuation;
  const turned = productOf(gamma, factorAt(run, startM, 'undo'), from);
  const step = stepFactor(alpha, beta, grid.stepM, from);
  let inUse = from;
  let tapered = 0;
  let weight = complexZeros(0);
  let offsetM = 0;
  return {
    inUse: () => inUse,
    next() {
      while (inUse > 0 && 2 * (loss[inUse - 1]! + alpha[inUse - 1]! * offsetM) > mostLossNp) inUse--;
      if (inUse < FEWEST_FREQUENCIES) return null;
      if (tapered === 0 || inUse < tapered * (1 - BAND_CHANGE)) {
        tapered = inUse;
        weight = weightsOf(cells, frequencyHz, taper, inUse);
      }
      let sum = 0;
      for (let k = 0; k < inUse; k++) {
        const re = turned.re[k]!;
        const im = turned.im[k]!;
        sum += re * weight.im[k]! + im * weight.re[k]!;
        turned.re[k] = re * step.re[k]! - im * step.im[k]!;
        turned.im[k] = re * step.im[k]! + im * step.re[k]!;
      }
      offsetM += grid.stepM;
      return (2 / Math.PI) * sum;
    },
  };
}

function productOf(a: ComplexArray, b: ComplexArray, length: number): ComplexArray {
  const product = complexZeros(length);
  for (let k = 0; k < length; k++) {
    product.re[k] = a.re[k]! * b.re[k]! - a.im[k]! * b.im[k]!;
    product.im[k] = a.re[k]! * b.im[k]! + a.im[k]! * b.re[k]!;
  }
  return product;
}

function stepFactor(alpha: Float64Array, beta: Float64Array, stepM: number, length: number): ComplexArray {
  const factor = complexZeros(length);
  for (let k = 0; k < length; k++) {
    const size = Math.exp(2 * alpha[k]! * stepM);
    factor.re[k] = size * Math.cos(2 * beta[k]! * stepM);
    factor.im[k] = size * Math.sin(2 * beta[k]! * stepM);
  }
  return factor;
}

/** taper·Δγ, the taper over the band in use. */
function weightsOf(
  cells: ComplexArray,
  frequencyHz: Float64Array,
  taper: (share: number) => number,
  length: number,
): ComplexArray {
  const weight = complexZeros(length);
  const topHz = frequencyHz[length - 1]!;
  for (let k = 0; k < length; k++) {
    const share = taper(frequencyHz[k]! / topHz);
    weight.re[k] = share * cells.re[k]!;
    weight.im[k] = share * cells.im[k]!;
  }
  return weight;
}
