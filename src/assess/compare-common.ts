/** What two sweeps share: band, points that count, port. */

import { createFitContext } from '../locate/fit-context.ts';
import { leaveOutInterference } from '../locate/interference.ts';
import type { Solution } from '../locate/solution.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import { median, quantile } from '../numerics/statistics.ts';
import { fail, type Notice, type Outcome, succeed } from '../outcome.ts';
import type { Sweep } from '../sweep/sweep.ts';

export type SolvedSweep = { readonly sweep: Sweep; readonly solution: Solution };

export type CommonSweeps = {
  /** The later sweep's points that the earlier one covers. */
  readonly frequencyHz: Float64Array;
  readonly after: ComplexArray;
  /** 0 where a carrier has hit one of the two. */
  readonly weight: Float64Array;
  /** All points of the earlier sweep, rising, without repeats, carriers replaced by the model. */
  readonly beforeHz: Float64Array;
  readonly before: ComplexArray;
  /** Step of the earlier sweep, Hz: an ordinary large one where it is uneven. */
  readonly beforeStepHz: number;
};

/** Fewest common points of which anything can be made. */
const FEWEST_POINTS = 24;

/** Points of the later sweep around one of the earlier sweep that a carrier has hit, in steps. */
const SPOILT_STEPS = 1.5;

/** Finds it; its notices say aloud where the two sweeps differ. */
export function commonSweeps(before: SolvedSweep, after: SolvedSweep): Outcome<CommonSweeps> {
  const { frequencyHz: beforeAll } = before.sweep;
  const { frequencyHz: afterAll } = after.sweep;
  const [from, to] = [beforeAll[0]!, beforeAll[beforeAll.length - 1]!];
  const inside = indicesWhere(afterAll, (f, i) => f >= from && f <= to && f !== afterAll[i - 1]);
  if (inside.length < FEWEST_POINTS)
    return fail({
      code: 'nothing-in-common',
      file: after.sweep.file,
      what:
        `the two sweeps share ${inside.length} points of the band ` +
        `(${megahertz(from, to)} and ${megahertz(afterAll[0]!, afterAll[afterAll.length - 1]!)})`,
      mend: 'compare sweeps of the same band',
    });
  const frequencyHz = Float64Array.from(inside, (i) => afterAll[i]!);
  const gamma = atPort(after.sweep, before.sweep.portOhm);
  const weight = new Float64Array(inside.length).fill(1);
  const afterHits = new Set(carriersOf(after));
  inside.forEach((i, k) => {
    if (afterHits.has(i)) weight[k] = 0;
  });
  const kept = indicesWhere(beforeAll, (f, i) => f !== beforeAll[i - 1]);
  const beforeHz = Float64Array.from(kept, (i) => beforeAll[i]!);
  const steps = beforeHz.slice(1).map((f, i) => f - beforeHz[i]!);
  const beforeHits = new Set(carriersOf(before));
  for (const i of beforeHits) {
    frequencyHz.forEach((f, k) => {
      if (Math.abs(f - beforeAll[i]!) < SPOILT_STEPS * median(steps)) weight[k] = 0;
    });
  }
  const source = complexZeros(kept.length);
  kept.forEach((i, k) => {
    const from_ = beforeHits.has(i) ? before.solution.modelGamma : before.sweep.gamma;
    source.re[k] = from_.re[i]!;
    source.im[k] = from_.im[i]!;
  });
  return succeed(
    {
      frequencyHz,
      after: {
        re: Float64Array.from(inside, (i) => gamma.re[i]!),
        im: Float64Array.from(inside, (i) => gamma.im[i]!),
      },
      weight,
      beforeHz,
      before: source,
      beforeStepHz: quantile(steps, 0.9),
    },
    gridNotices(before.sweep, after.sweep, frequencyHz),
  );
}

function gridNotices(before: Sweep, after: Sweep, frequencyHz: Float64Array): Notice[] {
  const notices: Notice[] = [];
  const same =
    before.frequencyHz.length === after.frequencyHz.length &&
    before.frequencyHz.every((f, i) => f === after.frequencyHz[i]);
  if (!same) {
    const span = (sweep: Sweep): string =>
      `${megahertz(sweep.frequencyHz[0]!, sweep.frequencyHz[sweep.frequencyHz.length - 1]!)} in ` +
      `${sweep.frequencyHz.length} points`;
    notices.push({
      code: 'different-grids',
      what:
        `the sweeps were not taken alike (${span(before)} before, ${span(after)} after): they are compared at ` +
        `${frequencyHz.length} points, ${megahertz(frequencyHz[0]!, frequencyHz[frequencyHz.length - 1]!)}`,
    });
  }
  if (before.portOhm !== after.portOhm)
    notices.push({
      code: 'different-ports',
      what: `the sweeps refer to ${before.portOhm} Ω and ${after.portOhm} Ω: the later one is turned to ${before.portOhm} Ω`,
    });
  return notices;
}

function megahertz(fromHz: number, toHz: number): string {
  const text = (hz: number): string => String(Number((hz / 1e6).toPrecision(6)));
  return `${text(fromHz)}–${text(toHz)} MHz`;
}

/** Points where the sweep stands far off its own model, next to points that don't. */
function carriersOf({ sweep, solution }: SolvedSweep): number[] {
  const n = sweep.frequencyHz.length;
  const context = createFitContext(sweep.frequencyHz, sweep.gamma, new Float64Array(n).fill(1));
  for (let i = 0; i < n; i++) {
    context.residual.re[i] = sweep.gamma.re[i]! - solution.modelGamma.re[i]!;
    context.residual.im[i] = sweep.gamma.im[i]! - solution.modelGamma.im[i]!;
  }
  return leaveOutInterference(context);
}

/** Reflection seen from another port impedance: Γ' = (Γ − ρ)/(1 − ρΓ), ρ = (R' − R)/(R' + R). */
function atPort(sweep: Sweep, portOhm: number): ComplexArray {
  if (sweep.portOhm === portOhm) return sweep.gamma;
  const rho = (portOhm - sweep.portOhm) / (portOhm + sweep.portOhm);
  const out = complexZeros(sweep.gamma.re.length);
  for (let i = 0; i < out.re.length; i++) {
    const re = sweep.gamma.re[i]! - rho;
    const im = sweep.gamma.im[i]!;
    const dRe = 1 - rho * sweep.gamma.re[i]!;
    const dIm = -rho * im;
    const size = dRe * dRe + dIm * dIm;
    out.re[i] = (re * dRe + im * dIm) / size;
    out.im[i] = (im * dRe - re * dIm) / size;
  }
  return out;
}

function indicesWhere(values: Float64Array, keep: (value: number, index: number) => boolean): number[] {
  return Array.from(values, (_, i) => i).filter((i) => keep(values[i]!, i));
}
