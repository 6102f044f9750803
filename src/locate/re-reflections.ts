/** Strong steps of a profile, and the re-reflections between them and what lies behind, taken out of a reflection. */
import { type MediumRun, pathTo } from '../line/medium-run.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { complexCopy, complexZeros } from '../numerics/complex.ts';
import type { DistanceGrid } from './path-factor.ts';

/** From this distance on the line's impedance is another: (Z − Z0)/(Z + Z0) there, Z0 that of the reference. */
export type ImpedanceStep = { readonly distanceM: number; readonly reflection: number };

/** Steps smaller than this bounce too little to matter: two of them −60 dB. */
const LEAST_STEP = 0.03;

/** A step larger than this is an end, whatever the description says; nothing behind it is known. */
const END_STEP = 0.6;

export type StepSearch = {
  /** What is closer together counts as one step, m. */
  readonly resolutionM: number;
  /** Where the line ends, m. */
  readonly toM: number;
  /** At most so many, the strongest. */
  readonly most: number;
};

/**
 * Steps in the reflection that a line has built up, strong enough to bounce.
 *
 * @param built Reflection at each distance of the grid, as from `reflectionAlong`.
 */
export function strongSteps(
  built: Float64Array,
  grid: DistanceGrid,
  { resolutionM, toM, most }: StepSearch,
): ImpedanceStep[] {
  const reach = Math.max(1, Math.round(resolutionM / grid.stepM));
  const last = Math.min(built.length - 1, Math.floor((toM - grid.fromM) / grid.stepM)) - 2 * reach;
  const across = (j: number): number =>
    built[Math.min(j + reach, built.length - 1)]! - built[Math.max(0, j - reach)]!;
  const found: number[] = [];
  for (let j = 1; j < last; j++) {
    const here = Math.abs(across(j));
    if (here < LEAST_STEP) continue;
    if (here > END_STEP) break;
    let highest = true;
    for (let i = Math.max(1, j - reach); i <= Math.min(last, j + reach); i++)
      if (Math.abs(across(i)) > here || (Math.abs(across(i)) === here && i < j)) highest = false;
    if (highest) found.push(j);
  }
  const strongest = found.sort((a, b) => Math.abs(across(b)) - Math.abs(across(a))).slice(0, most);
  // From step to step, not from 0: a wrong value at 0 Hz tilts the whole profile.
  let reflection = 0;
  return strongest
    .sort((a, b) => a - b)
    .map((j) => {
      reflection += across(j);
      return { distanceM: grid.fromM + crossing(built, j, reach) * grid.stepM, reflection };
    });
}

/** Where a step has risen to half its height, as an index with its fraction. */
function crossing(built: Float64Array, j: number, reach: number): number {
  const from = Math.max(0, j - reach);
  const to = Math.min(built.length - 1, j + reach);
  const half = (built[from]! + built[to]!) / 2;
  const sign = Math.sign(built[to]! - built[from]!);
  let i = j;
  while (i > from && sign * (built[i]! - half) > 0) i--;
  while (i < to - 1 && sign * (built[i + 1]! - half) < 0) i++;
  const rise = built[i + 1]! - built[i]!;
  return rise === 0 ? i : i + Math.max(0, Math.min(1, (half - built[i]!) / rise));
}

/**
 * A reflection with the bounces between known steps, and between them and whatever lies behind the last, taken out:
 * what is left is first order, each step adding its own difference in (Z − Z0)/(Z + Z0).
 *
 * What lies behind the last step is had by peeling the steps off at each frequency; it need not be described. Where
 * the way there and back takes more than `mostLossNp`, nothing is taken off: bounces are lost there too.
 *
 * @param gamma Against the reference's impedance, at the run's frequencies.
 * @param steps In order of distance.
 * @source Layer peeling: A. M. Bruckstein, T. Kailath, SIAM Review 29(3), 1987.
 */
export function withoutReReflections(
  gamma: ComplexArray,
  run: MediumRun,
  steps: readonly ImpedanceStep[],
  mostLossNp: number,
): ComplexArray {
  const straight = complexCopy(gamma);
  if (steps.length === 0) return straight;
  const ways = steps.map((step) => pathTo(run, step.distanceM));
  const locals = steps.map(({ reflection }, i) => {
    const before = steps[i - 1]?.reflection ?? 0;
    return (reflection - before) / (1 - reflection * before);
  });
  const behind = peeled(gamma, ways, locals);
  const lastWay = ways[ways.length - 1]!;
  const lastReflection = steps[steps.length - 1]!.reflection;
  for (let k = 0; k < gamma.re.length; k++) {
    if (2 * lastWay.attenuation[k]! > mostLossNp) continue;
    const size = Math.max(1, Math.hypot(behind.re[k]!, behind.im[k]!));
    let full = { re: behind.re[k]! / size, im: behind.im[k]! / size };
    const share = 1 - lastReflection * lastReflection;
    let first = timesPhasor(share * full.re, share * full.im, lastWay, k, -1);
    for (let i = steps.length - 1; i >= 0; i--) {
      const way = ways[i]!;
      const own = steps[i]!.reflection - (steps[i - 1]?.reflection ?? 0);
      const seen = timesPhasor(own, 0, way, k, -1);
      first = { re: first.re + seen.re, im: first.im + seen.im };
      full = through(full, locals[i]!);
      const before = ways[i - 1];
      const back = timesPhasor(full.re, full.im, way, k, -1);
      full = before ? timesPhasor(back.re, back.im, before, k, 1) : back;
    }
    straight.re[k] = straight.re[k]! - (full.re - first.re);
    straight.im[k] = straight.im[k]! - (full.im - first.im);
  }
  return straight;
}

type Way = { readonly attenuation: Float64Array; readonly phase: Float64Array };
type ComplexNumber = { readonly re: number; readonly im: number };

/** Reflection just behind the last step. */
function peeled(gamma: ComplexArray, ways: readonly Way[], locals: readonly number[]): ComplexArray {
  const behind = complexZeros(gamma.re.length);
  for (let k = 0; k < behind.re.length; k++) {
    let here: ComplexNumber = { re: gamma.re[k]!, im: gamma.im[k]! };
    ways.forEach((way, i) => {
      const before = ways[i - 1];
      const from = before ? timesPhasor(here.re, here.im, before, k, -1) : here;
      here = through(timesPhasor(from.re, from.im, way, k, 1), -locals[i]!);
    });
    behind.re[k] = here.re;
    behind.im[k] = here.im;
  }
  return behind;
}

/** (Γ + r)/(1 + r·Γ): Γ seen through a step; with −r, what stands behind it. */
function through(gamma: ComplexNumber, r: number): ComplexNumber {
  const dRe = 1 + r * gamma.re;
  const dIm = r * gamma.im;
  const size = dRe * dRe + dIm * dIm;
  const nRe = gamma.re + r;
  return { re: (nRe * dRe + gamma.im * dIm) / size, im: (gamma.im * dRe - nRe * dIm) / size };
}

/** z·e^{2s(A + jB)}. */
function timesPhasor(re: number, im: number, way: Way, k: number, sign: 1 | -1): ComplexNumber {
  const size = Math.exp(2 * sign * way.attenuation[k]!);
  const cosine = size * Math.cos(2 * way.phase[k]!);
  const sine = sign * size * Math.sin(2 * way.phase[k]!);
  return { re: re * cosine - im * sine, im: re * sine + im * cosine };
}
