/**
 * The difference of two sweeps of one line, with what the weather and the instrument do taken out.
 *
 * Stretch, loss and the two corrections' residues are fitted together so that Σ |difference| along the line is least:
 * a sum of sizes is not moved by a change at a place, nor by what is left at joints and end.
 */
import { RESIDUE_SIGMA, residueTerms } from '../locate/instrument-residue.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import { solveSymmetric } from '../numerics/linear-solve.ts';
import { median } from '../numerics/statistics.ts';
import { type SeenTracer, sizesOf } from './compare-trace.ts';
import { type LineChange, NO_LINE_CHANGE, planWarp, type Warp, type WarpPlan } from './compare-warp.ts';

export type AlignRequest = {
  /** The later sweep, at the plan's target frequencies. */
  readonly after: ComplexArray;
  /** The earlier one at its own. */
  readonly before: ComplexArray;
  readonly plan: WarpPlan;
  readonly tracer: SeenTracer;
  /** Target points that count: 0 where a carrier has hit one of the sweeps. */
  readonly weight: Float64Array;
  readonly stretch: number;
};

export type Alignment = {
  readonly change: LineChange;
  /** After − before, everything fitted taken out, at the target frequencies; 0 where a point does not count. */
  readonly difference: ComplexArray;
  /** Of stretch and loss, 1σ. */
  readonly stretchSigma: number;
  readonly lossSigma: number;
};

/** What is expected of a line: delay added at the port, growth of loss. */
const OFFSET_SIGMA_S = 10e-12;
const LOSS_SIGMA = 0.15;
const STRETCH_SIGMA = 600e-6;

const ROUNDS = 9;
const SLOPES_ANEW = 3;
/** A round that moves stretch and loss by less than this of their doubt is the last. */
const SETTLED = 0.02;

/** Sizes below this share of the middle one are all alike: a sum of sizes has no curvature at 0. */
const LEAST_SHARE = 0.5;

/** What no alignment takes out of an echo, as a share of it: an end would else outweigh all the rest of the line. */
const LEFT_SHARE = 0.01;

/** Neighbouring points of the trace that say the same thing. */
const ALIKE_POINTS = 4;

/** Aligns the earlier sweep to the later one. */
export function alignSweeps(request: AlignRequest): Alignment {
  const { tracer, weight, plan, after } = request;
  const prepare = planWarp(plan);
  const warp = prepare(request.before);
  let change: LineChange = { stretch: request.stretch, loss: 0, offsetS: 0 };
  const columns = residueColumns(request, prepare, change);
  const traces = columns.map((column) => tracer.trace(masked(column, weight)));
  const own = sizesOf(tracer.trace(masked(after, weight)));
  const amounts = new Float64Array(2 * columns.length);
  let sigmas = { stretch: STRETCH_SIGMA, loss: LOSS_SIGMA };
  // Noise in the earlier sweep alone would make it seem too large, so slopes come from both.
  const later = slopesOf(
    planWarp({ ...plan, sourceHz: plan.targetHz })(withoutGaps(after, warp(change), weight)),
    NO_LINE_CHANGE,
    weight,
    tracer,
  );
  let slopes: readonly ComplexArray[] = later;
  let plain = differenceOf(after, warp(change), weight);
  for (let round = 0; round < ROUNDS; round++) {
    const now = tracer.trace(plain);
    // Once it is nearly there the slopes no longer change.
    if (round < SLOPES_ANEW)
      slopes = slopesOf(warp, change, weight, tracer).map((slope, k) => meanOf(slope, later[k]!));
    const solved = solveRound(now, slopes, traces, amounts, change, own);
    amounts.set(solved.amounts);
    const moved = solved.step;
    change = {
      offsetS: change.offsetS + moved[0],
      stretch: change.stretch + moved[1],
      loss: Math.max(-0.6, Math.min(2, change.loss + moved[2])),
    };
    sigmas = solved.sigmas;
    plain = differenceOf(after, warp(change), weight);
    if (
      round > 1 &&
      Math.abs(moved[1]) < SETTLED * sigmas.stretch &&
      Math.abs(moved[2]) < SETTLED * sigmas.loss
    )
      break;
  }
  const difference = plain;
  columns.forEach((column, k) => {
    const [a, b] = [amounts[2 * k]!, amounts[2 * k + 1]!];
    for (let i = 0; i < weight.length; i++) {
      difference.re[i] = difference.re[i]! - weight[i]! * (a * column.re[i]! - b * column.im[i]!);
      difference.im[i] = difference.im[i]! - weight[i]! * (a * column.im[i]! + b * column.re[i]!);
    }
  });
  return { change, difference, stretchSigma: sigmas.stretch, lossSigma: sigmas.loss };
}

/**
 * What residues of two corrections can add to the difference: D + T·Γ + M·Γ² of the later sweep, and M·Γ² of the
 * earlier one, whose second trip folds otherwise once the line has grown.
 */
function residueColumns(
  request: AlignRequest,
  prepare: (values: ComplexArray) => Warp,
  change: LineChange,
): ComplexArray[] {
  const { after, before, plan } = request;
  const terms = residueTerms(plan.targetHz);
  const squareBefore = product(before, before);
  return [
    ...terms.map(({ family, delayS }) => {
      const phasor = phasorOf(plan.targetHz, delayS);
      if (family === 'directivity') return phasor;
      return product(phasor, family === 'tracking' ? after : product(after, after));
    }),
    ...terms
      .filter(({ family }) => family === 'match')
      .map(({ delayS }) => prepare(product(phasorOf(plan.sourceHz, delayS), squareBefore))(change)),
  ];
}

/** Derivatives of the seen trace by offset, stretch and loss. */
function slopesOf(
  warp: Warp,
  change: LineChange,
  weight: Float64Array,
  tracer: SeenTracer,
): readonly [ComplexArray, ComplexArray, ComplexArray] {
  const by = (low: LineChange, high: LineChange, width: number): ComplexArray => {
    const out = differenceOf(warp(high), warp(low), weight);
    for (let i = 0; i < weight.length; i++) {
      out.re[i] = out.re[i]! / width;
      out.im[i] = out.im[i]! / width;
    }
    return tracer.trace(out);
  };
  const [ds, dl, dt] = [2e-6, 2e-3, 1e-13];
  return [
    by({ ...change, offsetS: change.offsetS - dt }, { ...change, offsetS: change.offsetS + dt }, 2 * dt),
    by({ ...change, stretch: change.stretch - ds }, { ...change, stretch: change.stretch + ds }, 2 * ds),
    by({ ...change, loss: change.loss - dl }, { ...change, loss: change.loss + dl }, 2 * dl),
  ];
}

type Round = {
  readonly step: readonly [number, number, number];
  readonly amounts: Float64Array;
  readonly sigmas: { readonly stretch: number; readonly loss: number };
};

/** One step of weighted least squares whose weights are the inverse sizes that the last one left. */
function solveRound(
  now: ComplexArray,
  slopes: readonly ComplexArray[],
  residue: readonly ComplexArray[],
  amounts: Float64Array,
  change: LineChange,
  own: Float64Array,
): Round {
  const points = now.re.length;
  const left = complexZeros(points);
  left.re.set(now.re);
  left.im.set(now.im);
  residue.forEach((column, k) => {
    const [a, b] = [amounts[2 * k]!, amounts[2 * k + 1]!];
    if (a === 0 && b === 0) return;
    for (let i = 0; i < points; i++) {
      left.re[i] = left.re[i]! - a * column.re[i]! + b * column.im[i]!;
      left.im[i] = left.im[i]! - a * column.im[i]! - b * column.re[i]!;
    }
  });
  const sizes = sizesOf(left);
  const middle = Math.max(median(sizes), 1e-9);
  const weights = sizes.map((size, k) => {
    const expected = middle + LEFT_SHARE * own[k]!;
    return Math.sqrt(1 / (expected * Math.max(size, LEAST_SHARE * expected)));
  });
  const real = [
    ...slopes.map((slope) => interleave(slope, weights, 1)),
    ...residue.flatMap((column) => [interleave(column, weights, 1), interleave(column, weights, 1, true)]),
  ];
  const right = interleave(now, weights, 1);
  const p = real.length;
  // Scales keep the normal equations well set: each unknown in units of what is expected of it.
  const scale = real.map((_, k) => [OFFSET_SIGMA_S, STRETCH_SIGMA, LOSS_SIGMA][k] ?? RESIDUE_SIGMA);
  const was = [change.offsetS, change.stretch, change.loss];
  const normal = new Float64Array(p * p);
  const gradient = new Float64Array(p);
  for (let a = 0; a < p; a++) {
    for (let b = 0; b <= a; b++) {
      const value = dot(real[a]!, real[b]!) * scale[a]! * scale[b]!;
      normal[a * p + b] = value;
      normal[b * p + a] = value;
    }
    normal[a * p + a] = normal[a * p + a]! + ALIKE_POINTS;
    gradient[a] = dot(real[a]!, right) * scale[a]! - (a < 3 ? (ALIKE_POINTS * was[a]!) / scale[a]! : 0);
  }
  const solved = solveSymmetric(normal.slice(), gradient.slice());
  if (solved === null)
    return { step: [0, 0, 0], amounts, sigmas: { stretch: STRETCH_SIGMA, loss: LOSS_SIGMA } };
  const sigma = (k: number): number => {
    const unit = new Float64Array(p);
    unit[k] = 1;
    const inverse = solveSymmetric(normal.slice(), unit);
    return scale[k]! * Math.sqrt(Math.max(0, inverse?.[k] ?? 1) * middle * 2);
  };
  return {
    step: [solved[0]! * scale[0]!, solved[1]! * scale[1]!, solved[2]! * scale[2]!],
    amounts: Float64Array.from(amounts, (_, k) => solved[3 + k]! * scale[3 + k]!),
    sigmas: { stretch: sigma(1), loss: sigma(2) },
  };
}

/** Real parts, then imaginary parts, weighted; `quarter` turns by j first. */
function interleave(
  column: ComplexArray,
  weights: Float64Array,
  sign: number,
  quarter = false,
): Float64Array {
  const n = weights.length;
  const out = new Float64Array(2 * n);
  for (let i = 0; i < n; i++) {
    out[i] = sign * weights[i]! * (quarter ? -column.im[i]! : column.re[i]!);
    out[n + i] = sign * weights[i]! * (quarter ? column.re[i]! : column.im[i]!);
  }
  return out;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}

function differenceOf(a: ComplexArray, b: ComplexArray, weight: Float64Array): ComplexArray {
  const out = complexZeros(weight.length);
  for (let i = 0; i < weight.length; i++) {
    out.re[i] = weight[i]! * (a.re[i]! - b.re[i]!);
    out.im[i] = weight[i]! * (a.im[i]! - b.im[i]!);
  }
  return out;
}

function meanOf(a: ComplexArray, b: ComplexArray): ComplexArray {
  return { re: a.re.map((v, i) => (v + b.re[i]!) / 2), im: a.im.map((v, i) => (v + b.im[i]!) / 2) };
}

/** The sweep with another in place of the points that don't count. */
function withoutGaps(values: ComplexArray, stand: ComplexArray, weight: Float64Array): ComplexArray {
  return {
    re: values.re.map((v, i) => (weight[i] === 0 ? stand.re[i]! : v)),
    im: values.im.map((v, i) => (weight[i] === 0 ? stand.im[i]! : v)),
  };
}

function masked(column: ComplexArray, weight: Float64Array): ComplexArray {
  return { re: column.re.map((v, i) => v * weight[i]!), im: column.im.map((v, i) => v * weight[i]!) };
}

function product(a: ComplexArray, b: ComplexArray): ComplexArray {
  const out = complexZeros(a.re.length);
  for (let i = 0; i < a.re.length; i++) {
    out.re[i] = a.re[i]! * b.re[i]! - a.im[i]! * b.im[i]!;
    out.im[i] = a.re[i]! * b.im[i]! + a.im[i]! * b.re[i]!;
  }
  return out;
}

function phasorOf(frequencyHz: Float64Array, delayS: number): ComplexArray {
  return {
    re: frequencyHz.map((f) => Math.cos(2 * Math.PI * f * delayS)),
    im: frequencyHz.map((f) => -Math.sin(2 * Math.PI * f * delayS)),
  };
}
