/** Cost of a model against the sweep, and its normal equations. */
import { complexZeros } from '../numerics/complex.ts';
import { invertSymmetric } from '../numerics/linear-solve.ts';
import { productsOf, somePoints } from './curvature.ts';
import { applyWeight, dot, type FitContext, residualEnergy, writeResidual } from './fit-context.ts';
import { addPriors } from './fit-priors.ts';
import type { Freedom, LineModel } from './line-model.ts';
import { type Translation, translate } from './translate-model.ts';

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

/** Covariance of the free parameters at the model as it stands, row-major; null when they are not determined. */
export function fitCovariance(linear: Linearisation): Float64Array | null {
  return invertSymmetric(linear.curvature, linear.gradient.length);
}
