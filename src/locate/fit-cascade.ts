/** Joint refinement of everything in the model against the sweep: damped least squares on the full cascade. */
import { type Cascade, createCascade } from '../line/cascade.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { invertSymmetric, solveSymmetric } from '../numerics/linear-solve.ts';
import { createResidueModel, type ResidueModel } from './instrument-residue.ts';
import type { Freedom, LineModel } from './line-model.ts';
import { type Parameter, type Translation, translate } from './translate-model.ts';

/** The sweep as the solver sees it, with buffers that every fit reuses. */
export type FitContext = {
  readonly frequencyHz: Float64Array;
  readonly measured: ComplexArray;
  /** Weight of each point: 0 leaves it out (interference, outside a device's pass band), 1 counts it. */
  readonly weight: Float64Array;
  readonly cascade: Cascade;
  /** Measured − modelled of the last evaluation. */
  readonly residual: ComplexArray;
  /** Modelled reading of the last evaluation, every point. */
  readonly modelled: ComplexArray;
  readonly columns: ComplexArray[];
  readonly residueModel: ResidueModel;
  /** Scattered parts of the points by size, for curvatures. */
  readonly scattered: Map<number, Int32Array>;
};

export type FitOptions = {
  /** Variance of the residual per real component. */
  readonly variance: number;
  readonly maxIterations: number;
  /** Fall of the cost, in −2 ln likelihood, below which the fit has settled. */
  readonly tolerance?: number;
};

export type FitResult = {
  /** Weighted residual energy over variance plus priors: −2 ln(likelihood × prior) up to a constant. */
  readonly cost: number;
  readonly iterations: number;
  readonly settled: boolean;
};

/** A fall of a tenth moves no parameter by more than a third of its standard deviation. */
const SETTLED = 0.1;

/** Prepares buffers for fits to one sweep. */
export function createFitContext(
  frequencyHz: Float64Array,
  measured: ComplexArray,
  weight: Float64Array,
): FitContext {
  return {
    frequencyHz,
    measured,
    weight,
    cascade: createCascade(frequencyHz),
    residual: complexZeros(frequencyHz.length),
    modelled: complexZeros(frequencyHz.length),
    columns: [],
    residueModel: createResidueModel(frequencyHz),
    scattered: new Map(),
  };
}

/**
 * Moves the free parameters of `model` to the best fit, in place.
 *
 * Levenberg–Marquardt on normal equations scaled by their diagonal, with Gaussian priors and bounds.
 *
 * @source Marquardt, J. SIAM 11(2), 431–441, 1963; Madsen, Nielsen & Tingleff, Methods for Non-Linear Least Squares
 *   Problems, 2004 (damping rule), from memory.
 */
export function refine(
  context: FitContext,
  model: LineModel,
  freedom: Freedom,
  options: FitOptions,
): FitResult {
  const tolerance = options.tolerance ?? SETTLED;
  let linear = linearise(context, model, freedom, options.variance, 'some');
  let damping = 1e-3;
  let growth = 2;
  let iterations = 0;
  let settled = linear.translation.parameters.length === 0;
  while (!settled && iterations < options.maxIterations) {
    iterations++;
    const { parameters } = linear.translation;
    const before = parameters.map((parameter) => parameter.get());
    const step = dampedStep(linear, damping, atBound(linear, before));
    if (step === null) {
      damping *= 10;
      if (damping > 1e9) break;
      continue;
    }
    let predicted = 0;
    parameters.forEach((parameter, k) => {
      const limited = limitStep(parameter, before[k]!, step[k]!);
      predicted += limited * linear.gradient[k]!;
      parameter.set(before[k]! + limited);
    });
    const cost = evaluateCost(context, model, freedom, options.variance);
    if (cost < linear.cost) {
      const fall = linear.cost - cost;
      settled = fall < tolerance;
      linear = linearise(context, model, freedom, options.variance, 'some');
      damping = Math.max(1e-9, damping / (predicted > 0 && fall > 0.5 * predicted ? 10 : 3));
      growth = 2;
    } else {
      parameters.forEach((parameter, k) => {
        parameter.set(before[k]!);
      });
      settled = cost - linear.cost < 1e-3 * tolerance;
      damping *= growth;
      growth *= 2;
      if (damping > 1e9) break;
    }
  }
  // Leaves residual and cascade in the state of the answer.
  evaluateResidual(context, model, linear.translation);
  return { cost: linear.cost, iterations, settled };
}

/** Normal equations at the model as it stands. */
export type Linearisation = {
  readonly translation: Translation;
  readonly cost: number;
  /** JᵀW r / variance − prior gradient: the direction of descent. */
  readonly gradient: Float64Array;
  /** Row-major curvature, priors included. */
  readonly curvature: Float64Array;
};

/**
 * Residual, Jacobian and normal equations of the model as it stands.
 *
 * @param curvatureFrom `some`: curvature from a part of the points, for the steps of a search. The gradient is exact
 *   either way, and with it where the search ends.
 */
export function linearise(
  context: FitContext,
  model: LineModel,
  freedom: Freedom,
  variance: number,
  curvatureFrom: 'all' | 'some' = 'all',
): Linearisation {
  const translation = translate(model, freedom);
  const { parameters, slots, stages } = translation;
  const p = parameters.length;
  while (context.columns.length < p) context.columns.push(complexZeros(context.frequencyHz.length));
  const columns = context.columns.slice(0, p);
  const modelled = context.cascade.linearise(stages, model.end, slots, columns);
  writeResidual(context, model, modelled);
  const cascadeColumns = freedom.residue ? translation.residueColumn : p;
  for (let k = 0; k < cascadeColumns; k++) context.residueModel.carry(columns[k]!);
  if (freedom.residue) {
    model.residue.forEach((term, k) => {
      const at = translation.residueColumn + 2 * k;
      context.residueModel.derivatives(term, columns[at]!, columns[at + 1]!);
    });
  }
  for (const column of columns) applyWeight(column, context.weight);
  const inverse = 1 / variance;
  const gradient = new Float64Array(p);
  for (let a = 0; a < p; a++) gradient[a] = dot(columns[a]!, context.residual) * inverse;
  const curvature = productsOf(columns, curvatureFrom === 'some' ? somePoints(context, p) : null, inverse);
  const cost = residualEnergy(context) * inverse + addPriors(model, parameters, gradient, curvature);
  return { translation, cost, gradient, curvature };
}

/** Cost of the model as it stands; leaves the residual in the context. */
export function evaluateCost(
  context: FitContext,
  model: LineModel,
  freedom: Freedom,
  variance: number,
): number {
  const translation = translate(model, freedom);
  evaluateResidual(context, model, translation);
  return residualEnergy(context) / variance + addPriors(model, translation.parameters, null, null);
}

/** Writes measured − modelled into the context. */
export function evaluateResidual(context: FitContext, model: LineModel, translation: Translation): void {
  writeResidual(context, model, context.cascade.gamma(translation.stages, model.end));
}

/** Sum of |residual|² over the points that count. */
export function residualEnergy(context: FitContext): number {
  return dot(context.residual, context.residual);
}

/** Variance of the residual per real component, as the last evaluation left it. */
export function residualVariance(context: FitContext): number {
  let points = 0;
  for (const w of context.weight) points += w;
  return Math.max(residualEnergy(context) / (2 * points), 1e-12);
}

/** Covariance of the free parameters at the model as it stands, row-major; null when they are not determined. */
export function fitCovariance(linear: Linearisation): Float64Array | null {
  return invertSymmetric(linear.curvature, linear.gradient.length);
}

function writeResidual(context: FitContext, model: LineModel, modelled: ComplexArray): void {
  const { residual, measured, weight } = context;
  context.residueModel.apply(model.residue, modelled);
  context.modelled.re.set(modelled.re);
  context.modelled.im.set(modelled.im);
  for (let i = 0; i < residual.re.length; i++) {
    residual.re[i] = measured.re[i]! - modelled.re[i]!;
    residual.im[i] = measured.im[i]! - modelled.im[i]!;
  }
  applyWeight(residual, weight);
}

function applyWeight(values: ComplexArray, weight: Float64Array): void {
  for (let i = 0; i < weight.length; i++) {
    values.re[i] = values.re[i]! * weight[i]!;
    values.im[i] = values.im[i]! * weight[i]!;
  }
}

/** Re Σ conj(a)·b. */
function dot(a: ComplexArray, b: ComplexArray): number {
  let sum = 0;
  for (let i = 0; i < a.re.length; i++) sum += a.re[i]! * b.re[i]! + a.im[i]! * b.im[i]!;
  return sum;
}

/** Points per parameter from which the curvature is read when some will do, and the fewest. */
const POINTS_PER_PARAMETER = 10;
const FEWEST_POINTS = 300;

/** Golden-ratio stride: a scattered part of the points folds no distance onto another. */
const SCATTER = (Math.sqrt(5) - 1) / 2;

/** A scattered part of the points, or null where all of them are as few. */
function somePoints(context: FitContext, parameters: number): Int32Array | null {
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
function productsOf(
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

/** Share of the fourth power in a stiff prior: as much as the square at four standard deviations. */
export const STIFFNESS = 1 / 16;

/** Adds the priors to gradient and curvature (when given) and returns their share of the cost. */
function addPriors(
  model: LineModel,
  parameters: readonly Parameter[],
  gradient: Float64Array | null,
  curvature: Float64Array | null,
): number {
  const p = parameters.length;
  let cost = 0;
  parameters.forEach((parameter, k) => {
    if (parameter.sigma === null) return;
    const precision = 1 / (parameter.sigma * parameter.sigma);
    const off = parameter.get() - parameter.mean;
    const square = off * off * precision;
    const stiffness = parameter.stiff ? STIFFNESS : 0;
    cost += square + stiffness * square * square;
    if (gradient && curvature) {
      gradient[k] = gradient[k]! - off * precision * (1 + 2 * stiffness * square);
      curvature[k * p + k] = curvature[k * p + k]! + precision * (1 + 6 * stiffness * square);
    }
  });
  const { boundaryMeanM, boundaryPrecision } = model.priors;
  const n = boundaryMeanM.length;
  parameters.forEach((parameter, k) => {
    if (parameter.boundary === null) return;
    let pull = 0;
    for (let j = 0; j < n; j++) {
      pull += boundaryPrecision[parameter.boundary * n + j]! * (model.boundaryM[j]! - boundaryMeanM[j]!);
    }
    cost += pull * (model.boundaryM[parameter.boundary]! - boundaryMeanM[parameter.boundary]!);
    if (!gradient || !curvature) return;
    gradient[k] = gradient[k]! - pull;
    parameters.forEach((other, j) => {
      if (other.boundary === null) return;
      curvature[k * p + j] =
        curvature[k * p + j]! + boundaryPrecision[parameter.boundary! * n + other.boundary]!;
    });
  });
  return cost;
}

/** Parameters that stand at a bound and would go on beyond it. */
function atBound(linear: Linearisation, values: readonly number[]): boolean[] {
  return linear.translation.parameters.map((parameter, k) => {
    const pull = linear.gradient[k]!;
    return (values[k]! <= parameter.minimum && pull < 0) || (values[k]! >= parameter.maximum && pull > 0);
  });
}

function dampedStep(linear: Linearisation, damping: number, held: readonly boolean[]): Float64Array | null {
  const p = linear.gradient.length;
  const damped = linear.curvature.slice();
  const gradient = linear.gradient.slice();
  for (let k = 0; k < p; k++) {
    if (held[k]) {
      for (let j = 0; j < p; j++) {
        damped[k * p + j] = 0;
        damped[j * p + k] = 0;
      }
      damped[k * p + k] = 1;
      gradient[k] = 0;
    }
    damped[k * p + k] = damped[k * p + k]! * (1 + damping) + 1e-300;
  }
  return solveSymmetric(damped, gradient);
}

function limitStep(parameter: Parameter, from: number, step: number): number {
  const limited = Math.max(-parameter.stepLimit, Math.min(parameter.stepLimit, step));
  return Math.max(parameter.minimum, Math.min(parameter.maximum, from + limited)) - from;
}
