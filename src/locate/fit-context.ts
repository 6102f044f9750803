/** A sweep with the buffers that every fit to it reuses, and what the last evaluation left over of it. */
import { type Cascade, createCascade } from '../line/cascade.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { createResidueModel, type ResidueModel } from './instrument-residue.ts';
import type { LineModel } from './line-model.ts';

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

/** Writes measured − modelled into the context. @param modelled Reading without what the instrument adds; changed in place. */
export function writeResidual(context: FitContext, model: LineModel, modelled: ComplexArray): void {
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

/** Scales a column by the weight of each point, in place. */
export function applyWeight(values: ComplexArray, weight: Float64Array): void {
  for (let i = 0; i < weight.length; i++) {
    values.re[i] = values.re[i]! * weight[i]!;
    values.im[i] = values.im[i]! * weight[i]!;
  }
}

/** Re Σ conj(a)·b. */
export function dot(a: ComplexArray, b: ComplexArray): number {
  let sum = 0;
  for (let i = 0; i < a.re.length; i++) sum += a.re[i]! * b.re[i]! + a.im[i]! * b.im[i]!;
  return sum;
}
