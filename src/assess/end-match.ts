/** What the end of a line reflects by itself: the reading with the line before it taken away. */
import type { Line } from '../line/line.ts';
import type { Echo } from '../locate/echo.ts';
import type { Solution } from '../locate/solution.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import { solveSymmetric } from '../numerics/linear-solve.ts';
import type { Sweep } from '../sweep/sweep.ts';
import { delayedEcho, delayGrid, mirrored, quarterTurn } from './delay-grid.ts';
import { type RunPath, runPath } from './run-path.ts';

/** What stands this far before the end and behind it counts as the end, as round-trip delays, s: 0.1 m and 1.3 m. */
const BEFORE_S = 0.8e-9;
const BEHIND_S = 10e-9;
/** Two halves of a connector, and what a place is off by, as round-trip delays either way, s. */
const PLACE_SPAN_S = 0.2e-9;

/** Least variance of one point, per real part, so that a sweep without noise does not drown what is known beforehand. */
const LEAST_VARIANCE = 1e-9;

/** Most echoes before the end that are taken away one by one; the rest are too weak to matter. */
const MOST_ECHOES = 16;

export type EndReflection = { readonly frequencyHz: Float64Array; readonly gamma: ComplexArray };

/** So far beyond a band the sweep is looked at: enough to part the end from a joint half a metre before it, Hz. */
const BESIDE_HZ = 600e6;

/** A column of the fit with 1/σ² of its amplitude. */
type Column = { readonly value: ComplexArray; readonly precision: number };

/**
 * Γ of the end against frequency, the loss and phase of the solved run undone, and every echo before it taken away.
 *
 * A least-squares fit to the reading: the end as a sum of reflections within some nanoseconds, each echo that was found
 * as one of its own size and place, with its bounce off the end. A band too narrow to part the last joint from the end
 * shows the two as one.
 *
 * @param band Where it is wanted: a sweep far beyond it is not looked at.
 * @returns Null where the reading does not determine it.
 */
export function endReflection(
  whole: Sweep,
  line: Line,
  solution: Solution,
  band: { readonly fromHz: number; readonly toHz: number },
): EndReflection | null {
  const sweep = around(whole, band);
  if (sweep.frequencyHz.length < 2) return null;
  const { frequencyHz: f, gamma } = sweep;
  const n = f.length;
  const bandHz = f[n - 1]! - f[0]!;
  const run = runPath(line, solution, f, sweep.portOhm);
  // A matched end does not tell the loss of the run: the description does.
  const { path } = run;
  const delays = delayGrid(-BEFORE_S, BEHIND_S, bandHz);
  const ofEnd = delays.flatMap((delayS) => pairOf(delayedEcho(f, path, delayS), 2 * delays.length));
  const strongest = solution.echoes
    .slice(0, -1)
    .sort((a, b) => a.returnLossDb - b.returnLossDb)
    .slice(0, MOST_ECHOES);
  const before = strongest.flatMap((echo) => echoColumns(echo, f, pathTo(path, run, echo), path));
  const columns = [...ofEnd, ...before];
  const amplitudes = solveColumns(columns, gamma);
  if (amplitudes === null) return null;
  const end = complexZeros(n);
  const flat = { re: new Float64Array(n), im: new Float64Array(n) };
  delays.forEach((delayS, k) => {
    const { re, im } = delayedEcho(f, flat, delayS);
    const a = amplitudes[2 * k]!;
    const b = amplitudes[2 * k + 1]!;
    for (let i = 0; i < n; i++) {
      end.re[i] = end.re[i]! + a * re[i]! - b * im[i]!;
      end.im[i] = end.im[i]! + a * im[i]! + b * re[i]!;
    }
  });
  return { frequencyHz: f, gamma: end };
}

/** The points of a sweep within a band and beside it. */
function around(sweep: Sweep, { fromHz, toHz }: { readonly fromHz: number; readonly toHz: number }): Sweep {
  const { frequencyHz, gamma } = sweep;
  const from = Math.max(
    0,
    frequencyHz.findIndex((f) => f >= fromHz - BESIDE_HZ),
  );
  const beyond = frequencyHz.findIndex((f) => f > toHz + BESIDE_HZ);
  const to = beyond < 0 ? frequencyHz.length : beyond;
  return {
    ...sweep,
    frequencyHz: frequencyHz.slice(from, to),
    gamma: { re: gamma.re.slice(from, to), im: gamma.im.slice(from, to) },
  };
}

/** Path to an echo, by its share of the way: what stands before the end is only to be told from it. */
function pathTo(path: ComplexArray, run: RunPath, echo: Echo): ComplexArray {
  const start = run.startsAt[echo.section]!;
  const next = run.startsAt[echo.section + 1] ?? path;
  const joint = echo.joint === null ? null : (run.startsAt[echo.joint.index - 1] ?? path);
  if (joint !== null) return joint;
  const [fromM, toM] = run.boundsM(echo.section);
  const share = Math.min(1, Math.max(0, (echo.distanceM - fromM) / Math.max(1e-9, toM - fromM)));
  return {
    re: start.re.map((np, i) => np + share * (next.re[i]! - np)),
    im: start.im.map((rad, i) => rad + share * (next.im[i]! - rad)),
  };
}

function echoColumns(echo: Echo, f: Float64Array, own: ComplexArray, path: ComplexArray): Column[] {
  const shifts = delayGrid(-PLACE_SPAN_S, PLACE_SPAN_S, f[f.length - 1]! - f[0]!);
  const precision = (2 * shifts.length) / Math.min(1, 10 ** (-echo.correctedReturnLossDb / 10));
  return shifts.flatMap((shiftS) =>
    [own, mirrored(own, path)].flatMap((to) => pairOf(delayedEcho(f, to, shiftS), precision)),
  );
}

function pairOf(value: ComplexArray, precision: number): Column[] {
  return [
    { value, precision },
    { value: quarterTurn(value), precision },
  ];
}

/** Amplitudes of the columns; the noise is what a first fit leaves over. */
function solveColumns(columns: readonly Column[], measured: ComplexArray): Float64Array | null {
  const p = columns.length;
  const n = measured.re.length;
  const products = new Float64Array(p * p);
  const right = new Float64Array(p);
  for (let a = 0; a < p; a++) {
    right[a] = dot(columns[a]!.value, measured);
    for (let b = 0; b <= a; b++) {
      const product = dot(columns[a]!.value, columns[b]!.value);
      products[a * p + b] = product;
      products[b * p + a] = product;
    }
  }
  const solveWith = (variance: number): Float64Array | null => {
    const curvature = products.slice();
    for (let a = 0; a < p; a++)
      curvature[a * p + a] = curvature[a * p + a]! + columns[a]!.precision * variance;
    return solveSymmetric(curvature, right);
  };
  const first = solveWith(FIRST_VARIANCE);
  if (first === null) return null;
  let left = dot(measured, measured);
  for (let a = 0; a < p; a++) {
    left -= 2 * first[a]! * right[a]!;
    for (let b = 0; b < p; b++) left += first[a]! * products[a * p + b]! * first[b]!;
  }
  return solveWith(Math.max(LEAST_VARIANCE, left / (2 * n)));
}

/** Noise of the first fit, per real part: −43 dB, as the ripple of a cable is. */
const FIRST_VARIANCE = 2.5e-5;

/** Re Σ conj(a)·b. */
function dot(a: ComplexArray, b: ComplexArray): number {
  let sum = 0;
  for (let i = 0; i < a.re.length; i++) sum += a.re[i]! * b.re[i]! + a.im[i]! * b.im[i]!;
  return sum;
}
