/** Small nonlinear least squares: few parameters, a function that is cheap to call, derivatives by differences. */
import { invertSymmetric, solveSymmetric } from './linear-solve.ts';

export type LeastSquaresFit = {
  readonly parameters: Float64Array;
  /** Σ r² at the parameters. */
  readonly cost: number;
  /** (JᵀJ)⁻¹, row-major; null when the parameters are not determined. */
  readonly covariance: Float64Array | null;
  /** True when it stopped because nothing was left to gain. */
  readonly settled: boolean;
};

export type LeastSquaresOptions = {
  /** Step of the differences for each parameter; also the scale below which a change does not matter. */
  readonly steps: readonly number[];
  readonly maxIterations?: number;
  /** Fall of the cost, relative and absolute, below which the fit has settled. Default 1e-6. */
  readonly tolerance?: number;
};

/**
 * Minimises Σ r(p)² by Levenberg and Marquardt's method.
 *
 * @param residuals Writes the residuals at `parameters` into `out`, always the same length. Priors go in as rows.
 * @param count Number of residuals, at least as many as parameters.
 * @param start Where to begin; not changed.
 * @throws RangeError When there are more parameters than residuals, or a step for each is missing.
 * @source Marquardt, J. SIAM 11(2), 431–441, 1963.
 */
export function fitLeastSquares(
  residuals: (parameters: Float64Array, out: Float64Array) => void,
  count: number,
  start: ArrayLike<number>,
  options: LeastSquaresOptions,
): LeastSquaresFit {
  const p = start.length;
  const { steps, maxIterations = 20, tolerance = 1e-6 } = options;
  if (count < p || steps.length !== p)
    throw new RangeError(`${count} residuals and ${steps.length} steps do not fit ${p} parameters`);
  const parameters = Float64Array.from(start);
  const trial = new Float64Array(p);
  const here = new Float64Array(count);
  const there = new Float64Array(count);
  const columns = Array.from({ length: p }, () => new Float64Array(count));
  residuals(parameters, here);
  let cost = sumOfSquares(here);
  let damping = 1e-3;
  let settled = p === 0;
  let normal = new Float64Array(0);
  for (let iteration = 0; iteration < maxIterations && !settled; iteration++) {
    differences(residuals, parameters, here, steps, columns, there);
    normal = products(columns);
    const gradient = Float64Array.from(columns, (column) => -dot(column, here));
    let improved = false;
    while (!improved && damping < 1e8) {
      const damped = normal.slice();
      for (let k = 0; k < p; k++) damped[k * p + k] = damped[k * p + k]! * (1 + damping) + 1e-300;
      const step = solveSymmetric(damped, gradient);
      if (step !== null) {
        for (let k = 0; k < p; k++) trial[k] = parameters[k]! + step[k]!;
        residuals(trial, there);
        const next = sumOfSquares(there);
        if (next < cost) {
          improved = true;
          settled = cost - next < tolerance * (1 + cost);
          cost = next;
          parameters.set(trial);
          here.set(there);
          damping = Math.max(damping / 8, 1e-9);
          break;
        }
      }
      damping *= 6;
    }
    if (!improved) settled = true;
  }
  if (normal.length === 0 || settled) {
    differences(residuals, parameters, here, steps, columns, there);
    normal = products(columns);
  }
  return { parameters, cost, covariance: invertSymmetric(normal, p), settled };
}

/** Columns of the Jacobian by forward differences. */
function differences(
  residuals: (parameters: Float64Array, out: Float64Array) => void,
  parameters: Float64Array,
  here: Float64Array,
  steps: readonly number[],
  columns: readonly Float64Array[],
  scratch: Float64Array,
): void {
  columns.forEach((column, k) => {
    const value = parameters[k]!;
    parameters[k] = value + steps[k]!;
    residuals(parameters, scratch);
    parameters[k] = value;
    for (let i = 0; i < column.length; i++) column[i] = (scratch[i]! - here[i]!) / steps[k]!;
  });
}

function products(columns: readonly Float64Array[]): Float64Array<ArrayBuffer> {
  const p = columns.length;
  const out = new Float64Array(p * p);
  for (let a = 0; a < p; a++)
    for (let b = 0; b <= a; b++) {
      const value = dot(columns[a]!, columns[b]!);
      out[a * p + b] = value;
      out[b * p + a] = value;
    }
  return out;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}

function sumOfSquares(values: Float64Array): number {
  return dot(values, values);
}
