/** Joint refinement of everything in the model against the sweep: damped least squares on the full cascade. */
import { solveSymmetric } from '../numerics/linear-solve.ts';
import type { FitContext } from './fit-context.ts';
import type { Freedom, LineModel } from './line-model.ts';
import { evaluateCost, evaluateResidual, type Linearisation, linearise } from './linearise.ts';
import type { Parameter } from './parameter.ts';

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
