/**
 * One place of the line by itself: what comes back from around it, with everything else explained and the way there and
 * back undone.
 *
 * The sweep is carried to the place, where an echo turns slowly with frequency, and gathered into blocks; some hundred
 * numbers then say all that the sweep knows of the place, and hypotheses about it can be fitted in no time. What a
 * discontinuity does to echoes behind it is left out: the line behind is free to follow, so it tells nothing more.
 */
import { complexRms, complexZeros } from '../numerics/complex.ts';
import { fitLeastSquares, type LeastSquaresFit } from '../numerics/least-squares.ts';
import { solveSymmetric } from '../numerics/linear-solve.ts';
import type { FitContext } from './fit-context.ts';
import { type LineModel, NOTHING_FREE } from './line-model.ts';
import { linearise } from './linearise.ts';
import { putBack, putBackEnd } from './probe.ts';

/** What the sweep shows at a place. */
export type LocalEcho = {
  /** Model distance of the plane that phases refer to, m. */
  readonly planeM: number;
  readonly omega: Float64Array;
  /** Phase constant of the line there, rad/m. */
  readonly beta: Float64Array;
  /** Reflection of the place, by block. */
  readonly re: Float64Array;
  readonly im: Float64Array;
  /** Σ|S|² of each block: what an error of the reflection there costs in energy of the sweep. */
  readonly weight: Float64Array;
};

/** Blocks that the sweep is gathered into: an echo two resolutions off the plane still turns little in one. */
const BLOCKS = 64;

/**
 * Gathers what comes back from around a place.
 *
 * @param atM Plane that phases refer to.
 * @param own Stages whose echoes belong to the place, in order from the port; empty when nothing stands there yet.
 */
export function localEcho(
  context: FitContext,
  model: LineModel,
  atM: number,
  own: { readonly lumps: readonly number[]; readonly boundary: number | null; readonly end?: boolean },
): LocalEcho {
  const { stages, stageOfLump, stageOfBoundary } = linearise(context, model, NOTHING_FREE, 1).translation;
  const mine = own.lumps.map((id) => stageOfLump.get(id)!);
  if (own.boundary !== null && stageOfBoundary[own.boundary] !== undefined)
    mine.push(stageOfBoundary[own.boundary]!);
  for (const stage of mine) putBack(context, stage);
  if (own.end) putBackEnd(context, stages.length);
  // The stretch before the first of them (or the one that holds the plane) leads there.
  let leadM = 0;
  let lead = -1;
  let startM = 0;
  const firstOwn = mine.length > 0 ? Math.min(...mine) : Number.POSITIVE_INFINITY;
  let passedM = 0;
  for (let k = 0; k < stages.length && k < firstOwn; k++) {
    const stage = stages[k]!;
    if (stage.type !== 'line') continue;
    if (lead >= 0 && passedM >= atM && firstOwn === Number.POSITIVE_INFINITY) break;
    lead = k;
    leadM = passedM;
    passedM += stage.lengthM;
  }
  startM = leadM;
  const stage = stages[Math.max(lead, 0)]!;
  const medium = stage.type === 'line' ? stage.medium : model.media[0]!;
  const through = context.cascade.sensitivity(Math.max(lead, 0));
  return gather(context, medium, through, atM - startM, atM, model);
}

function gather(
  context: FitContext,
  medium: LineModel['media'][number],
  through: { readonly re: Float64Array; readonly im: Float64Array },
  offsetM: number,
  planeM: number,
  model: LineModel,
): LocalEcho {
  const { residual, weight, frequencyHz } = context;
  const n = frequencyHz.length;
  const blocks = Math.min(BLOCKS, n);
  const out = {
    planeM,
    omega: new Float64Array(blocks),
    beta: new Float64Array(blocks),
    re: new Float64Array(blocks),
    im: new Float64Array(blocks),
    weight: new Float64Array(blocks),
  };
  const { gamma, gammaPerConductorLoss: c, gammaPerDielectricLoss: d } = medium;
  for (let i = 0; i < n; i++) {
    if (weight[i] === 0) continue;
    const alpha = gamma.re[i]! + model.conductor * c.re[i]! + model.dielectric * d.re[i]!;
    const beta = gamma.im[i]! + model.conductor * c.im[i]! + model.dielectric * d.im[i]!;
    const shrink = Math.exp(-2 * alpha * offsetM);
    const turnRe = shrink * Math.cos(2 * beta * offsetM);
    const turnIm = -shrink * Math.sin(2 * beta * offsetM);
    const sRe = through.re[i]! * turnRe - through.im[i]! * turnIm;
    const sIm = through.re[i]! * turnIm + through.im[i]! * turnRe;
    const power = sRe * sRe + sIm * sIm;
    const b = Math.floor((i * blocks) / n);
    out.re[b] = out.re[b]! + sRe * residual.re[i]! + sIm * residual.im[i]!;
    out.im[b] = out.im[b]! + sRe * residual.im[i]! - sIm * residual.re[i]!;
    out.weight[b] = out.weight[b]! + power;
    out.omega[b] = out.omega[b]! + power * 2 * Math.PI * frequencyHz[i]!;
    out.beta[b] = out.beta[b]! + power * beta;
  }
  for (let b = 0; b < blocks; b++) {
    const w = out.weight[b]!;
    if (w === 0) continue;
    out.re[b] = out.re[b]! / w;
    out.im[b] = out.im[b]! / w;
    out.omega[b] = out.omega[b]! / w;
    out.beta[b] = out.beta[b]! / w;
  }
  return out;
}

/** One part of a hypothesis about a place. */
export type LocalPart =
  /** Strength as the lumps of the cascade take it. @see writeLumped */
  | { readonly type: 'resistive' | 'reactive'; readonly strength: number; readonly offsetM: number }
  /** Step of impedance, ln(Z behind / Z before). */
  | { readonly type: 'step'; readonly strength: number; readonly offsetM: number };

/**
 * Reflection of parts that stand close together, seen from the plane, with all bounces between them.
 *
 * @param parts In order of offset. @param out Overwritten, one value per block.
 */
export function writeLocalReflection(
  echo: Pick<LocalEcho, 'omega' | 'beta'>,
  parts: readonly LocalPart[],
  out: { readonly re: Float64Array; readonly im: Float64Array },
): void {
  const { omega, beta } = echo;
  for (let b = 0; b < omega.length; b++) {
    let re = 0;
    let im = 0;
    let atM = parts.length > 0 ? parts[parts.length - 1]!.offsetM : 0;
    for (let k = parts.length - 1; k >= 0; k--) {
      const part = parts[k]!;
      if (part.offsetM !== atM) {
        const angle = -2 * beta[b]! * (atM - part.offsetM);
        const turnRe = Math.cos(angle);
        const turnIm = Math.sin(angle);
        const next = re * turnRe - im * turnIm;
        im = re * turnIm + im * turnRe;
        re = next;
        atM = part.offsetM;
      }
      // S11 of the part, its S21·S12, and S22 = mirror·S11.
      const size = Math.abs(part.strength);
      let sRe: number;
      let sIm: number;
      let tRe: number;
      let tIm: number;
      let mirror = 1;
      if (part.type === 'step') {
        sRe = Math.tanh(part.strength / 2);
        sIm = 0;
        tRe = 1 - sRe * sRe;
        tIm = 0;
        mirror = -1;
      } else {
        const sign = part.strength >= 0 ? 1 : -1;
        if (part.type === 'resistive') {
          const w = size / (2 + size);
          sRe = sign * w;
          sIm = 0;
          tRe = (1 - w) * (1 - w);
          tIm = 0;
        } else {
          const x = omega[b]! * size;
          const inverse = 1 / (4 + x * x);
          const wRe = x * x * inverse;
          const wIm = 2 * x * inverse;
          sRe = sign * wRe;
          sIm = sign * wIm;
          tRe = (1 - wRe) * (1 - wRe) - wIm * wIm;
          tIm = -2 * (1 - wRe) * wIm;
        }
      }
      if (re === 0 && im === 0) {
        re = sRe;
        im = sIm;
        continue;
      }
      const dRe = 1 - mirror * (sRe * re - sIm * im);
      const dIm = -mirror * (sRe * im + sIm * re);
      const inverse = 1 / (dRe * dRe + dIm * dIm);
      const qRe = (re * dRe + im * dIm) * inverse;
      const qIm = (im * dRe - re * dIm) * inverse;
      re = sRe + tRe * qRe - tIm * qIm;
      im = sIm + tRe * qIm + tIm * qRe;
    }
    const angle = -2 * beta[b]! * atM;
    const turnRe = Math.cos(angle);
    const turnIm = Math.sin(angle);
    out.re[b] = re * turnRe - im * turnIm;
    out.im[b] = re * turnIm + im * turnRe;
  }
}

/** RMS return loss over the band of some parts together, dB. */
export function reflectionDb(echo: LocalEcho, parts: readonly LocalPart[]): number {
  const own = complexZeros(echo.omega.length);
  writeLocalReflection(echo, parts, own);
  return -20 * Math.log10(complexRms(own) + 1e-12);
}

/**
 * Everything that linear fits of small parts on a grid of offsets need: matches of the echo with a resistive and a
 * reactive part at each offset, and the products of two such parts by how far apart they stand.
 */
export type MatchTables = {
  readonly resistive: Float64Array;
  readonly reactive: Float64Array;
  /** Index of offset 0 in the matches. */
  readonly centre: number;
  readonly resistiveResistive: Float64Array;
  readonly reactiveReactive: Float64Array;
  /** Resistive part, and a reactive one behind it. */
  readonly resistiveReactive: Float64Array;
};

/**
 * @param step Described step at the plane, ln; taken off the echo first.
 * @param gridM Distance of neighbouring offsets. @param reach Offsets on each side. @param apart Farthest two parts.
 */
export function matchTables(
  echo: LocalEcho,
  step: number,
  gridM: number,
  reach: number,
  apart: number,
): MatchTables {
  const size = 2 * reach + 1;
  const tables = {
    resistive: new Float64Array(size),
    reactive: new Float64Array(size),
    centre: reach,
    resistiveResistive: new Float64Array(apart + 1),
    reactiveReactive: new Float64Array(apart + 1),
    resistiveReactive: new Float64Array(apart + 1),
  };
  const known = Math.tanh(step / 2);
  for (let b = 0; b < echo.omega.length; b++) {
    const w = echo.weight[b]!;
    const omega = echo.omega[b]!;
    const angle = 2 * echo.beta[b]! * gridM;
    const turnRe = Math.cos(angle);
    const turnIm = Math.sin(angle);
    const startRe = Math.cos(-reach * angle);
    const startIm = Math.sin(-reach * angle);
    // (q − known)·e^{2jβo}: the known step stands at the plane.
    const qRe = echo.re[b]! - known;
    const qIm = echo.im[b]!;
    let re = qRe * startRe - qIm * startIm;
    let im = qRe * startIm + qIm * startRe;
    for (let k = 0; k < size; k++) {
      tables.resistive[k] = tables.resistive[k]! + 0.5 * w * re;
      tables.reactive[k] = tables.reactive[k]! + 0.5 * w * omega * im;
      const next = re * turnRe - im * turnIm;
      im = re * turnIm + im * turnRe;
      re = next;
    }
    let cos = 1;
    let sin = 0;
    for (let d = 0; d <= apart; d++) {
      tables.resistiveResistive[d] = tables.resistiveResistive[d]! + 0.25 * w * cos;
      tables.reactiveReactive[d] = tables.reactiveReactive[d]! + 0.25 * w * omega * omega * cos;
      tables.resistiveReactive[d] = tables.resistiveReactive[d]! + 0.25 * w * omega * sin;
      const next = cos * turnRe - sin * turnIm;
      sin = cos * turnIm + sin * turnRe;
      cos = next;
    }
  }
  return tables;
}

/** One small part of a linear fit: what it is, where on the grid, and the spread of its prior. */
export type TableColumn = { readonly reactive: boolean; readonly at: number; readonly sigma: number };

/** Strengths of several small parts fitted together, and what they explain in −2 ln likelihood, priors counted. */
export function fitTables(
  tables: MatchTables,
  columns: readonly TableColumn[],
  variance: number,
): { readonly strengths: Float64Array; readonly gain: number } | null {
  const p = columns.length;
  const normal = new Float64Array(p * p);
  const right = new Float64Array(p);
  // Scaled to like sizes: reactive strengths are some 1e-12 s, resistive ones 0.01.
  const scale = columns.map((column) =>
    Math.sqrt((column.reactive ? tables.reactiveReactive : tables.resistiveResistive)[0]!),
  );
  for (let a = 0; a < p; a++) {
    const one = columns[a]!;
    const match = one.reactive ? tables.reactive : tables.resistive;
    right[a] = match[tables.centre + one.at]! / (scale[a]! * variance);
    for (let b = 0; b <= a; b++) {
      const value = productOf(tables, one, columns[b]!) / (scale[a]! * scale[b]! * variance);
      normal[a * p + b] = value;
      normal[b * p + a] = value;
    }
    normal[a * p + a] = normal[a * p + a]! * (1 + 1e-9) + 1 / (one.sigma * scale[a]!) ** 2;
  }
  const solved = solveSymmetric(normal, right.slice());
  if (solved === null) return null;
  let gain = 0;
  for (let a = 0; a < p; a++) {
    gain += solved[a]! * right[a]!;
    solved[a] = solved[a]! / scale[a]!;
  }
  return { strengths: solved, gain };
}

function productOf(tables: MatchTables, a: TableColumn, b: TableColumn): number {
  const apart = Math.abs(a.at - b.at);
  if (a.reactive === b.reactive)
    return (a.reactive ? tables.reactiveReactive : tables.resistiveResistive)[apart]!;
  const [resistive, reactive] = a.reactive ? [b, a] : [a, b];
  return (reactive.at >= resistive.at ? 1 : -1) * tables.resistiveReactive[apart]!;
}

/** A hypothesis about a place: parts as a function of a few parameters, and what is expected of these. */
export type LocalHypothesis = {
  readonly start: readonly number[];
  /** Differences for the derivatives, in each parameter's own unit. */
  readonly steps: readonly number[];
  /** Parts in order of offset. */
  readonly parts: (parameters: Float64Array) => LocalPart[];
  /** Rows whose squares are the prior's share of −2 ln likelihood. */
  readonly priors: (parameters: Float64Array) => number[];
};

/** Enough for starts that a linear fit has given. */
const LOCAL_ITERATIONS = 14;
const LOCAL_TOLERANCE = 1e-4;

/**
 * Fits a hypothesis to what the sweep shows at a place.
 *
 * @param variance Of the sweep's residual per real component.
 * @returns Cost in −2 ln(likelihood × prior), up to a constant that all hypotheses about the same echo share.
 */
export function fitLocal(echo: LocalEcho, hypothesis: LocalHypothesis, variance: number): LeastSquaresFit {
  const blocks = echo.omega.length;
  const scale = echo.weight.map((w) => Math.sqrt(w / variance));
  const modelled = complexZeros(blocks);
  const priorCount = hypothesis.priors(Float64Array.from(hypothesis.start)).length;
  const write = (parameters: Float64Array, out: Float64Array): void => {
    writeLocalReflection(echo, hypothesis.parts(parameters), modelled);
    for (let b = 0; b < blocks; b++) {
      out[2 * b] = scale[b]! * (echo.re[b]! - modelled.re[b]!);
      out[2 * b + 1] = scale[b]! * (echo.im[b]! - modelled.im[b]!);
    }
    out.set(hypothesis.priors(parameters), 2 * blocks);
  };
  return fitLeastSquares(write, 2 * blocks + priorCount, hypothesis.start, {
    steps: hypothesis.steps,
    maxIterations: LOCAL_ITERATIONS,
    tolerance: LOCAL_TOLERANCE,
  });
}
