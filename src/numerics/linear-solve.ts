/** Linear least squares with covariance, and a fast solver for small symmetric systems. */
import { Matrix, QrDecomposition, SingularValueDecomposition } from 'ml-matrix';

/** Solution of a linear least-squares problem. */
export type LeastSquaresSolution = {
  /** Length `columns`; the shortest of all best solutions when columns depend on each other. */
  readonly solution: Float64Array;
  /** (AᵀA)⁻¹, row-major columns × columns: covariance for unit noise variance; pseudo-inverse when rank is short. */
  readonly covariance: Float64Array;
  /** Sum of squared residuals over (rows − rank); 0 when there are none to spare. */
  readonly noiseVariance: number;
  readonly rank: number;
  /** Largest over smallest kept singular value. */
  readonly condition: number;
};

/** Singular values below this share of the largest count as zero. */
const RANK_TOLERANCE = 1e-12;

/**
 * Solves min ‖A·x − b‖ by QR, then a singular value decomposition of the small triangle.
 *
 * @param a Row-major rows × columns.
 * @param rows At least `columns`.
 * @param b Length rows.
 * @throws RangeError When the shapes don't fit, or rows < columns.
 * @source G. H. Golub, C. F. Van Loan, Matrix Computations, 4th ed., sections 5.3 and 5.5 (from memory).
 */
export function solveLeastSquares(
  a: Float64Array,
  rows: number,
  columns: number,
  b: Float64Array,
): LeastSquaresSolution {
  if (columns < 1 || rows < columns || a.length !== rows * columns || b.length !== rows)
    throw new RangeError(`shapes do not fit: ${a.length} = ${rows} x ${columns}, right side ${b.length}`);
  const matrix = Matrix.from1DArray(rows, columns, a);
  const qr = new QrDecomposition(matrix);
  const projected = qr.orthogonalMatrix.transpose().mmul(Matrix.columnVector(b));
  const svd = new SingularValueDecomposition(qr.upperTriangularMatrix);
  const singular = svd.diagonal;
  const largest = Math.max(...singular);
  const kept = singular.map((value) => value > largest * RANK_TOLERANCE && value > 0);
  const rank = kept.filter(Boolean).length;

  const solution = new Float64Array(columns);
  const covariance = new Float64Array(columns * columns);
  const left = svd.leftSingularVectors;
  const right = svd.rightSingularVectors;
  for (let s = 0; s < columns; s++) {
    if (!kept[s]) continue;
    let component = 0;
    for (let i = 0; i < columns; i++) component += left.get(i, s) * projected.get(i, 0);
    component /= singular[s]!;
    const weight = 1 / (singular[s]! * singular[s]!);
    for (let i = 0; i < columns; i++) {
      solution[i] = solution[i]! + component * right.get(i, s);
      for (let j = 0; j < columns; j++)
        covariance[i * columns + j] =
          covariance[i * columns + j]! + weight * right.get(i, s) * right.get(j, s);
    }
  }
  const smallest = Math.min(...singular.filter((_, s) => kept[s]));
  return {
    solution,
    covariance,
    noiseVariance: residualEnergy(a, columns, b, solution) / Math.max(rows - rank, 1),
    rank,
    condition: rank === 0 ? Number.POSITIVE_INFINITY : largest / smallest,
  };
}

/**
 * Factors a symmetric positive definite matrix as L·Lᵀ, only its lower triangle read.
 *
 * @param matrix Row-major n × n.
 * @param factor Receives L in its lower triangle, row-major n × n; may be `matrix` itself.
 * @returns False when the matrix is not positive definite to working precision: more damping is needed.
 * @throws RangeError When the arrays are smaller than n × n.
 * @source Golub & Van Loan, Matrix Computations, 4th ed., section 4.2 (from memory).
 */
export function factorSymmetric(matrix: Float64Array, n: number, factor: Float64Array): boolean {
  if (matrix.length < n * n || factor.length < n * n)
    throw new RangeError(`a ${n} x ${n} factor needs ${n * n} cells, not ${matrix.length}, ${factor.length}`);
  for (let j = 0; j < n; j++) {
    const rowJ = j * n;
    const original = matrix[rowJ + j]!;
    let diagonal = original;
    for (let k = 0; k < j; k++) diagonal -= factor[rowJ + k]! * factor[rowJ + k]!;
    if (!(diagonal > original * POSITIVE_TOLERANCE && diagonal > 0)) return false;
    const pivot = Math.sqrt(diagonal);
    factor[rowJ + j] = pivot;
    for (let i = j + 1; i < n; i++) {
      const rowI = i * n;
      let sum = matrix[rowI + j]!;
      for (let k = 0; k < j; k++) sum -= factor[rowI + k]! * factor[rowJ + k]!;
      factor[rowI + j] = sum / pivot;
    }
  }
  return true;
}

/** A pivot that lost this share of its diagonal is rounding noise. */
const POSITIVE_TOLERANCE = 1e-14;

/** Solves L·Lᵀ·x = b in place of b, for an L of `factorSymmetric`. */
export function solveFactored(factor: Float64Array, n: number, b: Float64Array): void {
  for (let i = 0; i < n; i++) {
    let sum = b[i]!;
    for (let k = 0; k < i; k++) sum -= factor[i * n + k]! * b[k]!;
    b[i] = sum / factor[i * n + i]!;
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = b[i]!;
    for (let k = i + 1; k < n; k++) sum -= factor[k * n + i]! * b[k]!;
    b[i] = sum / factor[i * n + i]!;
  }
}

/**
 * Solves a symmetric positive definite system, such as damped normal equations, n up to about 100.
 *
 * @param matrix Row-major n × n, only its lower triangle read, not changed.
 * @param rightSide Length n, not changed.
 * @returns Solution, length n; null when the matrix is not positive definite to working precision.
 * @throws RangeError When the matrix is smaller than n × n.
 */
export function solveSymmetric(matrix: Float64Array, rightSide: Float64Array): Float64Array | null {
  const n = rightSide.length;
  const factor = new Float64Array(n * n);
  if (!factorSymmetric(matrix, n, factor)) return null;
  const solution = rightSide.slice();
  solveFactored(factor, n, solution);
  return solution;
}

/**
 * Inverse of a symmetric positive definite matrix, row-major n × n; both triangles filled.
 *
 * @returns Null when the matrix is not positive definite to working precision.
 * @throws RangeError When the matrix is smaller than n × n.
 */
export function invertSymmetric(matrix: Float64Array, n: number): Float64Array | null {
  const factor = new Float64Array(n * n);
  if (!factorSymmetric(matrix, n, factor)) return null;
  const inverse = new Float64Array(n * n);
  const column = new Float64Array(n);
  for (let j = 0; j < n; j++) {
    column.fill(0);
    column[j] = 1;
    solveFactored(factor, n, column);
    for (let i = 0; i < n; i++) inverse[i * n + j] = column[i]!;
  }
  return inverse;
}

function residualEnergy(a: Float64Array, columns: number, b: Float64Array, x: Float64Array): number {
  let energy = 0;
  for (let row = 0; row < b.length; row++) {
    let residual = b[row]!;
    for (let j = 0; j < columns; j++) residual -= a[row * columns + j]! * x[j]!;
    energy += residual * residual;
  }
  return energy;
}
