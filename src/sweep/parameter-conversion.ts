/**
 * Y, Z, G and H parameters into the scattering parameters seen from one port.
 *
 * All four are one case. Write each port's voltage and current as waves over √reference: v = a + b, i = a − b. A
 * matrix M that maps currents (or, at a port given as an admittance, voltages) to the other quantity then gives
 * b' = (1 − 2·(M + 1)⁻¹)·a, where b' is b at an impedance port and −b at an admittance port.
 */
import type { NetworkParameter } from './touchstone-option-line.ts';

/** Most ports for which a matrix is converted: the work grows with their cube, at every frequency. */
export const CONVERSION_PORT_LIMIT = 128;

/** Reflection at one port and transmission from it to the other (0 unless there are two ports). */
export type PortScattering = { re: number; im: number; throughRe: number; throughIm: number };

/** Converts matrices of one network, one frequency after another, into the same result object. */
export type ParameterConverter = (matrixRe: Float64Array, matrixIm: Float64Array) => PortScattering;

/**
 * A converter for one port.
 *
 * @param parameter What the matrices hold, row by row, n × n. G and H need n = 2.
 * @param referenceOhm Reference of each port, length n.
 * @param options.normalised True when values are already relative to the reference (all references equal then).
 * @param options.port Counted from 1.
 * @returns A function whose result is not finite when the matrix has no scattering form (M + 1 singular).
 * @source Pozar, Microwave Engineering, 4th ed., section 4.3 and table 4.2 (from memory); with unequal references
 * Kurokawa, IEEE Trans. MTT-13, 1965, for real references (from memory).
 */
export function createParameterConverter(
  parameter: Exclude<NetworkParameter, 's'>,
  referenceOhm: readonly number[],
  options: { readonly normalised: boolean; readonly port: number },
): ParameterConverter {
  const n = referenceOhm.length;
  const column = options.port - 1;
  const scale = options.normalised ? null : normalisingScale(parameter, referenceOhm);
  const sign = referenceOhm.map((_, row) => (isAdmittancePort(parameter, row) ? -1 : 1));
  const work = { re: new Float64Array(n * n), im: new Float64Array(n * n) };
  const solution = { re: new Float64Array(n), im: new Float64Array(n) };
  const other = n === 2 ? 1 - column : -1;
  const result = { re: 0, im: 0, throughRe: 0, throughIm: 0 };

  return (matrixRe, matrixIm) => {
    for (let i = 0; i < n * n; i++) {
      const factor = scale === null ? 1 : scale[i]!;
      work.re[i] = matrixRe[i]! * factor;
      work.im[i] = matrixIm[i]! * factor;
    }
    for (let i = 0; i < n; i++) work.re[i * n + i]! += 1;
    solution.re.fill(0);
    solution.im.fill(0);
    solution.re[column] = 1;
    solveComplexInPlace(work.re, work.im, solution.re, solution.im);
    result.re = sign[column]! * (1 - 2 * solution.re[column]!);
    result.im = sign[column]! * -2 * solution.im[column]!;
    if (other >= 0) {
      result.throughRe = sign[other]! * -2 * solution.re[other]!;
      result.throughIm = sign[other]! * -2 * solution.im[other]!;
    }
    return result;
  };
}

/**
 * Solves A·x = b for one right-hand side by Gaussian elimination with partial pivoting; A is destroyed and b becomes
 * x. A singular A leaves values that are not finite in x.
 *
 * @param aRe Row by row, n × n.
 * @param bRe Length n.
 * @source Golub & Van Loan, Matrix Computations, algorithm 3.4.1 (from memory).
 */
export function solveComplexInPlace(
  aRe: Float64Array,
  aIm: Float64Array,
  bRe: Float64Array,
  bIm: Float64Array,
): void {
  const n = bRe.length;
  for (let k = 0; k < n; k++) {
    const pivot = largestInColumn(aRe, aIm, n, k);
    if (pivot !== k) swapRows(aRe, aIm, bRe, bIm, k, pivot);
    const pivotRe = aRe[k * n + k]!;
    const pivotIm = aIm[k * n + k]!;
    const size = pivotRe * pivotRe + pivotIm * pivotIm;
    for (let row = k + 1; row < n; row++) {
      const re = aRe[row * n + k]!;
      const im = aIm[row * n + k]!;
      const factorRe = (re * pivotRe + im * pivotIm) / size;
      const factorIm = (im * pivotRe - re * pivotIm) / size;
      for (let c = k + 1; c < n; c++) {
        aRe[row * n + c]! -= factorRe * aRe[k * n + c]! - factorIm * aIm[k * n + c]!;
        aIm[row * n + c]! -= factorRe * aIm[k * n + c]! + factorIm * aRe[k * n + c]!;
      }
      bRe[row]! -= factorRe * bRe[k]! - factorIm * bIm[k]!;
      bIm[row]! -= factorRe * bIm[k]! + factorIm * bRe[k]!;
    }
  }
  for (let row = n - 1; row >= 0; row--) {
    let re = bRe[row]!;
    let im = bIm[row]!;
    for (let c = row + 1; c < n; c++) {
      re -= aRe[row * n + c]! * bRe[c]! - aIm[row * n + c]! * bIm[c]!;
      im -= aRe[row * n + c]! * bIm[c]! + aIm[row * n + c]! * bRe[c]!;
    }
    const pivotRe = aRe[row * n + row]!;
    const pivotIm = aIm[row * n + row]!;
    const size = pivotRe * pivotRe + pivotIm * pivotIm;
    bRe[row] = (re * pivotRe + im * pivotIm) / size;
    bIm[row] = (im * pivotRe - re * pivotIm) / size;
  }
}

/** H gives port 2 as an admittance, G port 1, Y every port. */
function isAdmittancePort(parameter: Exclude<NetworkParameter, 's'>, row: number): boolean {
  if (parameter === 'y') return true;
  if (parameter === 'h') return row === 1;
  return parameter === 'g' && row === 0;
}

/** Factor of each matrix element that makes it relative to the references: √R at an impedance port is 1/√R there. */
function normalisingScale(
  parameter: Exclude<NetworkParameter, 's'>,
  referenceOhm: readonly number[],
): Float64Array {
  const root = referenceOhm.map((ohm, row) =>
    isAdmittancePort(parameter, row) ? Math.sqrt(ohm) : 1 / Math.sqrt(ohm),
  );
  return Float64Array.from(root.flatMap((left) => root.map((right) => left * right)));
}

function largestInColumn(aRe: Float64Array, aIm: Float64Array, n: number, k: number): number {
  let best = k;
  let bestSize = -1;
  for (let row = k; row < n; row++) {
    const size = Math.hypot(aRe[row * n + k]!, aIm[row * n + k]!);
    if (size > bestSize) {
      best = row;
      bestSize = size;
    }
  }
  return best;
}

function swapRows(
  aRe: Float64Array,
  aIm: Float64Array,
  bRe: Float64Array,
  bIm: Float64Array,
  one: number,
  two: number,
): void {
  const n = bRe.length;
  for (const values of [aRe, aIm]) {
    for (let c = 0; c < n; c++) {
      const kept = values[one * n + c]!;
      values[one * n + c] = values[two * n + c]!;
      values[two * n + c] = kept;
    }
  }
  for (const values of [bRe, bIm]) {
    const kept = values[one]!;
    values[one] = values[two]!;
    values[two] = kept;
  }
}
