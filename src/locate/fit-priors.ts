/** What is known before the sweep is looked at, as a share of the cost. */
import type { LineModel } from './line-model.ts';
import type { Parameter } from './parameter.ts';

/** Share of the fourth power in a stiff prior: as much as the square at four standard deviations. */
export const STIFFNESS = 1 / 16;

/** Adds the priors to gradient and curvature (when given) and returns their share of the cost. */
export function addPriors(
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
