/** Strong discontinuities of a profile, and the bounces between them and what lies behind, taken out of a reflection. */
import { type MediumRun, pathTo } from '../line/medium-run.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { complexCopy, complexZeros } from '../numerics/complex.ts';
import type { DistanceGrid } from './path-factor.ts';

/** A place where the reflection that a line has built up changes by a step. */
export type StrongStep = {
  readonly distanceM: number;
  readonly change: number;
};

/**
 * What such a step is: from here on the line has another impedance, or a lump of resistance sits here (in series where
 * the change is above 0, across the line where it is below). Seen from behind, the two reflect with opposite signs.
 */
export type Discontinuity = StrongStep & { readonly kind: 'impedance' | 'lump' };

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
 * Steps in the reflection that a line has built up, strong enough to bounce, in order of distance.
 *
 * @param built Reflection at each distance of the grid, as from `reflectionAlong`.
 */
export function strongSteps(
  built: Float64Array,
  grid: DistanceGrid,
  { resolutionM, toM, most }: StepSearch,
): StrongStep[] {
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
  // The change across a step, not the height above 0: a wrong value at 0 Hz tilts the whole profile.
  const strongest = found.sort((a, b) => Math.abs(across(b)) - Math.abs(across(a))).slice(0, most);
  return strongest
    .sort((a, b) => a - b)
    .map((j) => ({ distanceM: grid.fromM + crossing(built, j, reach) * grid.stepM, change: across(j) }));
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
 * Decides what each step is, one after another in rounds, by what leaves the least unexplained: a wrong kind doubles
 * a bounce instead of taking it off.
 *
 * @param misfit What is left unexplained when the steps are these.
 */
export function nameSteps(
  steps: readonly StrongStep[],
  misfit: (discontinuities: readonly Discontinuity[]) => number,
): Discontinuity[] {
  let named = steps.map((step): Discontinuity => ({ ...step, kind: 'impedance' }));
  if (named.length === 0) return named;
  let least = misfit(named);
  for (let round = 0; round < 2; round++) {
    for (let i = 0; i < named.length; i++) {
      const other = named[i]!.kind === 'impedance' ? 'lump' : 'impedance';
      const tried = named.map((step, k): Discontinuity => (k === i ? { ...step, kind: other } : step));
      const left = misfit(tried);
      if (left >= least) continue;
      least = left;
      named = tried;
    }
  }
  return named;
}

/**
 * A reflection with the bounces between known discontinuities, and between them and whatever lies behind the last,
 * taken out: what is left is first order, each adding its own change.
 *
 * What lies behind the last one is had by peeling them off at each frequency; it need not be described. Where the way
 * there and back takes more than `mostLossNp`, nothing is taken off: bounces are lost there too.
 *
 * @param gamma Against the reference's impedance, at the run's frequencies.
 * @param discontinuities In order of distance.
 * @source Layer peeling: A. M. Bruckstein, T. Kailath, SIAM Review 29(3), 1987.
 */
export function withoutReReflections(
  gamma: ComplexArray,
  run: MediumRun,
  discontinuities: readonly Discontinuity[],
  mostLossNp: number,
): ComplexArray {
  const straight = complexCopy(gamma);
  const { elements, share } = elementsOf(discontinuities, run);
  const last = elements[elements.length - 1];
  if (last === undefined) return straight;
  for (let k = 0; k < gamma.re.length; k++) {
    if (2 * last.way.attenuation[k]! > mostLossNp) continue;
    const behind = withinOne(peeled({ re: gamma.re[k]!, im: gamma.im[k]! }, elements, k));
    let first = timesPhasor(share * behind.re, share * behind.im, last.way, k, -1);
    let full = behind;
    for (let i = elements.length - 1; i >= 0; i--) {
      const element = elements[i]!;
      const own = timesPhasor(element.change, 0, element.way, k, -1);
      first = { re: first.re + own.re, im: first.im + own.im };
      full = seenThrough(full, element);
      const back = timesPhasor(full.re, full.im, element.way, k, -1);
      const before = elements[i - 1];
      full = before ? timesPhasor(back.re, back.im, before.way, k, 1) : back;
    }
    straight.re[k] = straight.re[k]! - (full.re - first.re);
    straight.im[k] = straight.im[k]! - (full.im - first.im);
  }
  return straight;
}

/**
 * Reflection of the steps alone, first order.
 *
 * @param run The line at the wanted frequencies.
 */
export function reflectionOfSteps(run: MediumRun, steps: readonly StrongStep[]): ComplexArray {
  const sum = complexZeros(run.alpha[0]!.length);
  for (const { distanceM, change } of steps) {
    const way = pathTo(run, distanceM);
    for (let k = 0; k < sum.re.length; k++) {
      const seen = timesPhasor(change, 0, way, k, -1);
      sum.re[k] = sum.re[k]! + seen.re;
      sum.im[k] = sum.im[k]! + seen.im;
    }
  }
  return sum;
}

/** Share with which what lies behind the last of them shows. */
export function shareBehind(discontinuities: readonly Discontinuity[], run: MediumRun): number {
  return elementsOf(discontinuities, run).share;
}

type Way = { readonly attenuation: Float64Array; readonly phase: Float64Array };
type ComplexNumber = { readonly re: number; readonly im: number };

/** A real two-port on the way, and the change that it makes in first order. */
type Element = {
  readonly way: Way;
  readonly change: number;
  readonly s11: number;
  readonly s22: number;
  /** S21·S12. */
  readonly through: number;
};

/** Two-ports from changes, and the share with which what lies behind the last one shows in first order. */
function elementsOf(
  discontinuities: readonly Discontinuity[],
  run: MediumRun,
): { readonly elements: readonly Element[]; readonly share: number } {
  // (Z − Z0)/(Z + Z0) of the line itself, and what lumps let through.
  let local = 0;
  let passed = 1;
  const elements = discontinuities.map(({ distanceM, change, kind }): Element => {
    const way = pathTo(run, distanceM);
    if (kind === 'impedance') {
      const next = local + change / passed;
      const s11 = (next - local) / (1 - next * local);
      local = next;
      return { way, change, s11, s22: -s11, through: 1 - s11 * s11 };
    }
    const s11 = change / (passed * (1 - local * local));
    const through = (1 - Math.abs(s11)) ** 2;
    passed *= through;
    return { way, change, s11, s22: s11, through };
  });
  return { elements, share: passed * (1 - local * local) };
}

/** Reflection just behind the last element. */
function peeled(gamma: ComplexNumber, elements: readonly Element[], k: number): ComplexNumber {
  let here = gamma;
  elements.forEach((element, i) => {
    const before = elements[i - 1];
    const from = before ? timesPhasor(here.re, here.im, before.way, k, -1) : here;
    here = behindElement(timesPhasor(from.re, from.im, element.way, k, 1), element);
  });
  return here;
}

function withinOne({ re, im }: ComplexNumber): ComplexNumber {
  const size = Math.max(1, Math.hypot(re, im));
  return { re: re / size, im: im / size };
}

/** S11 + S21·S12·Γ/(1 − S22·Γ). */
function seenThrough(gamma: ComplexNumber, { s11, s22, through }: Element): ComplexNumber {
  const passed = quotient(gamma, { re: 1 - s22 * gamma.re, im: -s22 * gamma.im });
  return { re: s11 + through * passed.re, im: through * passed.im };
}

/** What stands behind an element: (Γ − S11)/(S21·S12 + S22·(Γ − S11)). */
function behindElement(gamma: ComplexNumber, { s11, s22, through }: Element): ComplexNumber {
  const top = { re: gamma.re - s11, im: gamma.im };
  return quotient(top, { re: through + s22 * top.re, im: s22 * top.im });
}

function quotient(a: ComplexNumber, b: ComplexNumber): ComplexNumber {
  const size = b.re * b.re + b.im * b.im;
  return { re: (a.re * b.re + a.im * b.im) / size, im: (a.im * b.re - a.re * b.im) / size };
}

/** z·e^{2s(A + jB)}. */
function timesPhasor(re: number, im: number, way: Way, k: number, sign: 1 | -1): ComplexNumber {
  const size = Math.exp(2 * sign * way.attenuation[k]!);
  const cosine = size * Math.cos(2 * way.phase[k]!);
  const sine = sign * size * Math.sin(2 * way.phase[k]!);
  return { re: re * cosine - im * sine, im: re * sine + im * cosine };
}
