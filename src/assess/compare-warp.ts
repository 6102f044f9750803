/**
 * One sweep as another day would have shown it: the same reflections on a line that has grown or shrunk a little and
 * loses a little more or less, at the frequencies of another sweep.
 *
 * A sweep is a sum of echoes, each with its delay, so between its points it is band-limited: a value anywhere is the
 * best linear estimate from the points around it. What the weather does to an echo is a factor that depends on its
 * delay, and that goes into the same estimate; no echo has to be known for it.
 *
 * @source Best linear estimation of a band-limited process from samples near by (kriging with a flat spectrum), from
 *   memory: A. Papoulis, Signal Analysis, 1977.
 */
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import { factorSymmetric, solveFactored } from '../numerics/linear-solve.ts';

/** How the line of the later day differs from that of the earlier one. */
export type LineChange = {
  /** Relative growth of delay. */
  readonly stretch: number;
  /** Relative growth of conductor loss. */
  readonly loss: number;
  /** Delay that is added before everything, s. */
  readonly offsetS: number;
};

export const NO_LINE_CHANGE: LineChange = { stretch: 0, loss: 0, offsetS: 0 };

/** A part of the run of one kind of cable, by the round-trip delay at which it begins. */
export type DelayPiece = {
  readonly fromS: number;
  /** Decay and turn for a relative growth of the conductor loss, per second of round trip, at each target frequency. */
  readonly perLoss: ComplexArray;
};

export type WarpPlan = {
  readonly sourceHz: Float64Array;
  readonly targetHz: Float64Array;
  /** Parts of the run in order; the first begins at 0, the last goes on beyond the end. */
  readonly pieces: readonly DelayPiece[];
  /** Longest round trip that echoes are looked for at, s. */
  readonly longestS: number;
};

/** A sweep made ready to be seen under any change of its line. */
export type Warp = (change: LineChange) => ComplexArray;

/** Neighbours that a value is estimated from. */
const NEIGHBOURS = 32;

/** Noise over signal, in power, that the estimate reckons with. */
const NOISE_SHARE = 1e-7;

/** Echoes may seem to come this long before the reference plane: correction and connector. */
const BEFORE_PORT_S = 0.7e-9;

/**
 * Plans the estimates for sweeps at `sourceHz`, rising and without repeats, seen at `targetHz`, which lie within them.
 *
 * @returns Makes one sweep ready.
 */
export function planWarp(plan: WarpPlan): (values: ComplexArray) => Warp {
  const { sourceHz, targetHz } = plan;
  const neighbours = Math.min(NEIGHBOURS, sourceHz.length);
  const spanS = plan.longestS + BEFORE_PORT_S;
  const centreS = (plan.longestS - BEFORE_PORT_S) / 2;
  const first = Int32Array.from(targetHz, (f) => firstNeighbour(sourceHz, f, neighbours));
  const even = isEven(sourceHz, spanS);
  const factors = createFactors(sourceHz, neighbours, spanS, even);
  return (values) => {
    const { re, im } = centred(sourceHz, values, centreS);
    const heldRe = new Float64Array(targetHz.length * neighbours);
    const heldIm = new Float64Array(targetHz.length * neighbours);
    for (let i = 0; i < targetHz.length; i++) {
      const at = first[i]!;
      const same = i > 0 && first[i - 1] === at;
      const rowRe = heldRe.subarray(i * neighbours, (i + 1) * neighbours);
      const rowIm = heldIm.subarray(i * neighbours, (i + 1) * neighbours);
      if (same) {
        rowRe.set(heldRe.subarray((i - 1) * neighbours, i * neighbours));
        rowIm.set(heldIm.subarray((i - 1) * neighbours, i * neighbours));
        continue;
      }
      rowRe.set(re.subarray(at, at + neighbours));
      rowIm.set(im.subarray(at, at + neighbours));
      const factor = factors(at);
      solveFactored(factor, neighbours, rowRe);
      solveFactored(factor, neighbours, rowIm);
      for (let n = 0; n < neighbours; n++) turn(rowRe, rowIm, n, -2 * Math.PI * sourceHz[at + n]! * centreS);
    }
    return (change) => estimate({ ...plan, neighbours, spanS, first, even, heldRe, heldIm }, change);
  };
}

/** The first of the points around a frequency. */
function firstNeighbour(sourceHz: Float64Array, frequencyHz: number, neighbours: number): number {
  let low = 0;
  let high = sourceHz.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (sourceHz[middle]! < frequencyHz) low = middle + 1;
    else high = middle;
  }
  return Math.max(0, Math.min(sourceHz.length - neighbours, low - (neighbours >> 1)));
}

/** Turns the middle of the delays to 0, so that points are alike by a real factor. */
function centred(sourceHz: Float64Array, values: ComplexArray, centreS: number): ComplexArray {
  const out = complexZeros(sourceHz.length);
  for (let i = 0; i < sourceHz.length; i++) {
    const angle = 2 * Math.PI * sourceHz[i]! * centreS;
    const cos = Math.cos(angle);
    const sin = Math.sin(angle);
    out.re[i] = values.re[i]! * cos - values.im[i]! * sin;
    out.im[i] = values.re[i]! * sin + values.im[i]! * cos;
  }
  return out;
}

/** Turns one value by an angle, in place. */
function turn(re: Float64Array, im: Float64Array, at: number, angle: number): void {
  const [cos, sin] = [Math.cos(angle), Math.sin(angle)];
  const was = re[at]!;
  re[at] = was * cos - im[at]! * sin;
  im[at] = was * sin + im[at]! * cos;
}

function isEven(sourceHz: Float64Array, spanS: number): boolean {
  const stepHz = (sourceHz[sourceHz.length - 1]! - sourceHz[0]!) / (sourceHz.length - 1);
  return sourceHz.every((f, i) => Math.abs(f - sourceHz[0]! - i * stepHz) * spanS < 1e-6);
}

/** Factored likeness of neighbours, one for all on an even grid. */
function createFactors(
  sourceHz: Float64Array,
  neighbours: number,
  spanS: number,
  even: boolean,
): (at: number) => Float64Array {
  const known = new Map<number, Float64Array>();
  return (at) => {
    const key = even ? 0 : at;
    let factor = known.get(key);
    if (!factor) {
      factor = new Float64Array(neighbours * neighbours);
      for (let noise = NOISE_SHARE; ; noise *= 10) {
        for (let a = 0; a < neighbours; a++)
          for (let b = 0; b <= a; b++) {
            const x = Math.PI * (sourceHz[key + a]! - sourceHz[key + b]!) * spanS;
            factor[a * neighbours + b] = (x === 0 ? 1 : Math.sin(x) / x) + (a === b ? noise : 0);
          }
        if (factorSymmetric(factor, neighbours, factor)) break;
      }
      known.set(key, factor);
    }
    return factor;
  };
}

/** True when two targets see their neighbours alike, to 1e-7 of a turn over the whole run. */
function sameOffsets(ready: Ready, a: number, b: number): boolean {
  const { sourceHz, targetHz, first, neighbours, spanS, even } = ready;
  const offset = (i: number, n: number): number => sourceHz[first[i]! + n]! - targetHz[i]!;
  const last = neighbours - 1;
  const alike = (n: number): boolean => Math.abs(offset(a, n) - offset(b, n)) * spanS < 1e-7;
  return even && alike(0) && alike(last);
}

type Ready = WarpPlan & {
  readonly neighbours: number;
  readonly spanS: number;
  readonly first: Int32Array;
  /** The earlier sweep's steps are all alike. */
  readonly even: boolean;
  /** Per target, its neighbours' values by the inverse of their likeness. */
  readonly heldRe: Float64Array;
  readonly heldIm: Float64Array;
};

/**
 * Σ c_i·h_i with c_i = (1/T)·∫ e^{−E(f,τ)}·e^{−j2πfτ}·e^{j2πf_i(τ−τc)} dτ, E the accumulated change and h_i the held
 * values: a sum over the pieces of integrals of exponentials.
 */
function estimate(ready: Ready, change: LineChange): ComplexArray {
  const { sourceHz, targetHz, pieces, longestS, neighbours, spanS, first, heldRe, heldIm } = ready;
  const out = complexZeros(targetHz.length);
  const edges = pieces.length + 1;
  const edgeS = Float64Array.from({ length: edges }, (_, p) =>
    p === 0 ? -BEFORE_PORT_S : p === pieces.length ? longestS : pieces[p]!.fromS,
  );
  const kappaRe = new Float64Array(pieces.length);
  const kappaIm = new Float64Array(pieces.length);
  // e^{−E} at the edges.
  const fadeRe = new Float64Array(edges);
  const fadeIm = new Float64Array(edges);
  // e^{j·2π(f_i − f)·τ} at the edges, by neighbour: alike from point to point on even grids.
  const edgeRe = new Float64Array(neighbours * edges);
  const edgeIm = new Float64Array(neighbours * edges);
  let offsetsOf = -1;
  for (let i = 0; i < targetHz.length; i++) {
    const f = targetHz[i]!;
    const omega = 2 * Math.PI * f;
    let exponentRe = 0;
    let exponentIm = omega * change.offsetS;
    for (let p = 0; p < pieces.length; p++) {
      const { perLoss } = pieces[p]!;
      kappaRe[p] = change.loss * perLoss.re[i]!;
      kappaIm[p] = change.loss * perLoss.im[i]! + omega * change.stretch;
      if (p === 0) {
        exponentRe += kappaRe[0]! * edgeS[0]!;
        exponentIm += kappaIm[0]! * edgeS[0]!;
      }
    }
    for (let e = 0; e < edges; e++) {
      const size = Math.exp(-exponentRe) / spanS;
      fadeRe[e] = size * Math.cos(exponentIm);
      fadeIm[e] = -size * Math.sin(exponentIm);
      if (e < pieces.length) {
        exponentRe += kappaRe[e]! * (edgeS[e + 1]! - edgeS[e]!);
        exponentIm += kappaIm[e]! * (edgeS[e + 1]! - edgeS[e]!);
      }
    }
    if (offsetsOf < 0 || !sameOffsets(ready, offsetsOf, i)) {
      offsetsOf = i;
      for (let n = 0; n < neighbours; n++)
        for (let e = 0; e < edges; e++) {
          const angle = 2 * Math.PI * (sourceHz[first[i]! + n]! - f) * edgeS[e]!;
          edgeRe[n * edges + e] = Math.cos(angle);
          edgeIm[n * edges + e] = Math.sin(angle);
        }
    }
    let sumRe = 0;
    let sumIm = 0;
    for (let n = 0; n < neighbours; n++) {
      const source = sourceHz[first[i]! + n]!;
      const rate = 2 * Math.PI * (source - f);
      let cRe = 0;
      let cIm = 0;
      let nearRe = edgeRe[n * edges]!;
      let nearIm = edgeIm[n * edges]!;
      for (let p = 0; p < pieces.length; p++) {
        const lengthS = edgeS[p + 1]! - edgeS[p]!;
        const farRe = edgeRe[n * edges + p + 1]!;
        const farIm = edgeIm[n * edges + p + 1]!;
        // λ = j·rate − κ; ∫ = (e^{…far} − e^{…near})/λ.
        const lRe = -kappaRe[p]!;
        const lIm = rate - kappaIm[p]!;
        const size = lRe * lRe + lIm * lIm;
        const aRe = fadeRe[p]! * nearRe - fadeIm[p]! * nearIm;
        const aIm = fadeRe[p]! * nearIm + fadeIm[p]! * nearRe;
        if (size * lengthS * lengthS < 1e-8) {
          // (1 + λℓ/2)·ℓ
          const hRe = (1 + (lRe * lengthS) / 2) * lengthS;
          const hIm = ((lIm * lengthS) / 2) * lengthS;
          cRe += aRe * hRe - aIm * hIm;
          cIm += aRe * hIm + aIm * hRe;
        } else {
          const bRe = fadeRe[p + 1]! * farRe - fadeIm[p + 1]! * farIm - aRe;
          const bIm = fadeRe[p + 1]! * farIm + fadeIm[p + 1]! * farRe - aIm;
          cRe += (bRe * lRe + bIm * lIm) / size;
          cIm += (bIm * lRe - bRe * lIm) / size;
        }
        nearRe = farRe;
        nearIm = farIm;
      }
      const hRe = heldRe[i * neighbours + n]!;
      const hIm = heldIm[i * neighbours + n]!;
      sumRe += cRe * hRe - cIm * hIm;
      sumIm += cRe * hIm + cIm * hRe;
    }
    out.re[i] = sumRe;
    out.im[i] = sumIm;
  }
  return out;
}
