/** Ohms against distance: measured by a low-pass step response, or drawn from what the solver found. */
import { DB_PER_NEPER } from '../line/constants.ts';
import type { Line, Section } from '../line/line.ts';
import { sectionMedium } from '../line/medium.ts';
import { type MediumRun, runLengthM, runOfMedia } from '../line/medium-run.ts';
import { type ComplexArray, complexSubtract } from '../numerics/complex.ts';
import { type WindowSpec, windowSampler } from '../numerics/window.ts';
import type { Sweep } from '../sweep/sweep.ts';
import { againstMedium, lowPassNodes, planLowPassSpectrum } from './low-pass-spectrum.ts';
import type { DistanceGrid } from './path-factor.ts';
import {
  type Discontinuity,
  nameSteps,
  reflectionOfSteps,
  type StrongStep,
  shareBehind,
  strongSteps,
  withoutReReflections,
} from './re-reflections.ts';
import { reflectionAlong } from './reflection-along.ts';

/** Ohms against distance, with where it comes from. */
export type ImpedanceProfile = {
  /** From the reference plane, rising, m; a drawn step stands as two values at one distance. */
  readonly distanceM: Float64Array;
  readonly impedanceOhm: Float64Array;
  readonly origin: 'measured' | 'modelled';
};

export type MeasuredProfileOptions = {
  /** A sweep whose reach on this line says 'measured'. */
  readonly sweep: Sweep;
  readonly line: Line;
  /** Distance to the end, m. */
  readonly lengthM: number;
  /** Physical distance over the distance by the described velocity; 1 unless given. */
  readonly distanceScale?: number;
  /** Its upper half weighs the band from 0 up; side lobes of −44 dB unless given. */
  readonly window?: WindowSpec;
};

/** Side lobes of a pulse at −44 dB: a step overshoots by less than 1 % of its height. */
const STEP_WINDOW: WindowSpec = { kind: 'kaiser', beta: 6 };

/** Where the top of the band comes back weaker than this (20 dB), undoing it would show noise. */
const MOST_LOSS_NP = 20 / DB_PER_NEPER;

/** Distances per wavelength at the top of the band: the shortest that the running sum follows well. */
const POINTS_PER_WAVELENGTH = 6;
const MOST_POINTS = 4000;

/** Wavelengths at the top of the band before the reference plane and beyond the end. */
const MARGIN_WAVELENGTHS = 2;

/** Rounds of taking re-reflections off, and the change of the reflection at which nothing more is to be had. */
const MOST_ROUNDS = 10;
const SETTLED = 0.002;

/** Steps are believed when they leave what a sound line leaves (one a number looked at), or so much less than before. */
const EXPECTED_MISFIT = 40;
const BELIEVED_SHARE = 0.25;

/**
 * The impedance profile of a line from its own sweep.
 *
 * The reflection per metre is the inverse Laplace transform of Γ in the variable p = 2γ(f) of the section that the
 * distance lies in, with the path before it taken off: ρ(d) = (1/2πj)·∫ Γ·e^{2∫γ}·2dγ. Loss and dispersion are
 * undone by it, since a lone reflector r at d1 is Γ = r·e^{−p·d1} whatever γ(f) is. Its running sum is the reflection
 * S(d), and Z = Z0·(1 + S)/(1 − S).
 *
 * Where loss makes the top of the band too weak the band is narrowed, and steps grow softer with distance instead of
 * noisy. Bounces between strong steps, and between them and the end, are taken off in rounds.
 *
 * @returns From the reference plane to just beyond the end, or to where loss ends the view; within 0.02 to 50 times Z0.
 * @throws RangeError When the line has no section.
 * @source First-order inverse scattering: A. M. Bruckstein, T. Kailath, SIAM Review 29(3), 1987; low-pass step
 *   response: common practice.
 */
export function measuredProfile(options: MeasuredProfileOptions): ImpedanceProfile {
  const { line } = options;
  const sweep = aboveZero(options.sweep);
  const reference = sectionMedium(longestSection(line), sweep.frequencyHz, {
    temperatureC: line.temperatureC,
    z0Ohm: sweep.portOhm,
  });
  const plan = planBuilt({ ...options, sweep });
  const { grid } = plan;
  const seen = againstMedium(sweep.gamma, sweep.portOhm, reference);
  const built = builtWithoutBounces(plan, seen);
  const first = Math.ceil(-grid.fromM / grid.stepM);
  const onLine = built.subarray(Math.min(first, built.length));
  return {
    distanceM: Float64Array.from(onLine, (_, j) => grid.fromM + (first + j) * grid.stepM),
    impedanceOhm: onLine.map((reflection) => ohmOf(reflection, reference.z0Ohm)),
    origin: 'measured',
  };
}

/**
 * The reflection built up by each distance, its bounces taken off in rounds: one more step a round, since a bounce is
 * weaker than the step it comes from, and is gone once that step is known.
 */
function builtWithoutBounces(plan: BuiltPlan, seen: ComplexArray): Float64Array {
  const { grid, pulseM, lengthM } = plan;
  const plain = plan.built(seen, []);
  let built = plain;
  let named: readonly Discontinuity[] = [];
  for (let round = 1; round <= MOST_ROUNDS; round++) {
    const steps = strongSteps(built, grid, { resolutionM: pulseM, toM: lengthM, most: round });
    if (steps.length === 0) break;
    named = nameSteps(steps, (tried) => plan.misfit(seen, tried));
    const before = built;
    built = plan.built(plan.straightened(seen, named), named);
    if (steps.length < round && largestChange(before, built, grid, lengthM) < SETTLED) break;
  }
  if (named.length === 0) return built;
  // Steps that explain little, as on a line of a few resolutions, are better not believed.
  const left = plan.misfit(seen, named);
  return left < EXPECTED_MISFIT || left < BELIEVED_SHARE * plan.misfit(seen, []) ? built : plain;
}

/** What does not change from round to round. */
type BuiltPlan = {
  readonly grid: DistanceGrid;
  /** Length over which a step rises, m. */
  readonly pulseM: number;
  readonly lengthM: number;
  /** A reflection at the sweep's frequencies without its bounces. */
  readonly straightened: (gamma: ComplexArray, known: readonly Discontinuity[]) => ComplexArray;
  /** From such a reflection, with the steps known in it, to the one built up by each distance. */
  readonly built: (gamma: ComplexArray, known: readonly StrongStep[]) => Float64Array;
  /** How badly what these leave of a reflection fits a line, what lies behind them counted at its full size. */
  readonly misfit: (gamma: ComplexArray, known: readonly Discontinuity[]) => number;
};

function planBuilt(options: MeasuredProfileOptions): BuiltPlan {
  const { sweep, window = STEP_WINDOW } = options;
  const measuredRun = runAt(options, sweep.frequencyHz);
  const lengthM = runLengthM(measuredRun);
  const topHz = sweep.frequencyHz[sweep.frequencyHz.length - 1]!;
  const largestBeta = measuredRun.beta.reduce((most, beta) => Math.max(most, beta[beta.length - 1]!), 0);
  const fullM = (2 * Math.PI) / largestBeta;
  // On a line so long that it would take too many distances, the top of the band is left out.
  const pulseM = Math.max(
    fullM,
    (POINTS_PER_WAVELENGTH * (lengthM + 2 * MARGIN_WAVELENGTHS * fullM)) / MOST_POINTS,
  );
  const marginM = MARGIN_WAVELENGTHS * pulseM;
  const points = Math.ceil((POINTS_PER_WAVELENGTH * (lengthM + 2 * marginM)) / pulseM);
  const grid = { fromM: -marginM, stepM: (lengthM + 2 * marginM) / points, points: points + 1 };

  const nodes = lowPassNodes(sweep.frequencyHz, measuredRun, (topHz * fullM) / pulseM);
  const run = runFromZero(options, nodes.frequencyHz);
  const cells = cellsBetween(
    runFromZero(options, nodes.fromHz),
    runFromZero(options, nodes.toHz),
    nodes.share,
  );
  const lowPass = planLowPassSpectrum(sweep.frequencyHz, measuredRun, nodes, run);
  const sampler = windowSampler(window);
  const taper = (share: number): number => sampler(0.5 + share / 2);
  const { frequencyHz } = nodes;
  // What is known need not be guessed where the sweep has no points.
  const unknown = (gamma: ComplexArray, known: readonly StrongStep[]): ComplexArray =>
    complexSubtract(gamma, reflectionOfSteps(measuredRun, known));
  return {
    grid,
    pulseM,
    lengthM,
    straightened: (gamma, known) => withoutReReflections(gamma, measuredRun, known, MOST_LOSS_NP),
    misfit: (gamma, known) =>
      lowPass.misfit(unknown(withoutReReflections(gamma, measuredRun, known, MOST_LOSS_NP), known)) /
      shareBehind(known, measuredRun) ** 2,
    built: (gamma, known) =>
      reflectionAlong({
        frequencyHz,
        gamma: complexAdd(lowPass.spectrum(unknown(gamma, known)), reflectionOfSteps(run, known)),
        run,
        cells,
        grid,
        taper,
        mostLossNp: MOST_LOSS_NP,
      }),
  };
}

function complexAdd(a: ComplexArray, b: ComplexArray): ComplexArray {
  return { re: a.re.map((v, k) => v + b.re[k]!), im: a.im.map((v, k) => v + b.im[k]!) };
}

/** By how much γ of each section changes over each cell, times the cell's share. */
function cellsBetween(from: MediumRun, to: MediumRun, share: Float64Array): ComplexArray[] {
  const change = (a: Float64Array, b: Float64Array): Float64Array =>
    share.map((part, k) => part * (b[k]! - a[k]!));
  return from.alpha.map((alpha, s) => ({
    re: change(alpha, to.alpha[s]!),
    im: change(from.beta[s]!, to.beta[s]!),
  }));
}

/** Largest change between two rounds on the line, its end left out. */
function largestChange(a: Float64Array, b: Float64Array, grid: DistanceGrid, lengthM: number): number {
  const last = Math.min(a.length, b.length, Math.floor((lengthM - grid.fromM) / grid.stepM));
  let largest = 0;
  for (let j = 0; j < last; j++) largest = Math.max(largest, Math.abs(a[j]! - b[j]!));
  return largest;
}

/** Reflections are held within ±0.96, which is 50 times Z0 and its 50th part. */
const LARGEST_REFLECTION = 49 / 51;

function ohmOf(reflection: number, z0Ohm: number): number {
  const held = Math.max(-LARGEST_REFLECTION, Math.min(LARGEST_REFLECTION, reflection));
  return (z0Ohm * (1 + held)) / (1 - held);
}

/** The cascade and its media are not used at 0 Hz. */
function aboveZero(sweep: Sweep): Sweep {
  if (sweep.frequencyHz[0]! > 0) return sweep;
  return {
    ...sweep,
    frequencyHz: sweep.frequencyHz.subarray(1),
    gamma: { re: sweep.gamma.re.subarray(1), im: sweep.gamma.im.subarray(1) },
  };
}

/** The line at frequencies above 0, in physical distance. */
function runAt(options: MeasuredProfileOptions, frequencyHz: Float64Array): MediumRun {
  const { line, sweep, lengthM, distanceScale = 1 } = options;
  const medium = { temperatureC: line.temperatureC, z0Ohm: sweep.portOhm };
  const run = runOfMedia(
    line.sections.map((section) => sectionMedium(section, frequencyHz, medium)),
    sectionLengthsM(line, lengthM),
  );
  const perPhysicalM = (values: Float64Array): Float64Array => values.map((value) => value / distanceScale);
  return { startM: run.startM, alpha: run.alpha.map(perPhysicalM), beta: run.beta.map(perPhysicalM) };
}

/** The same where the first frequency may be 0: coax loses nothing there, a device what it loses everywhere. */
function runFromZero(options: MeasuredProfileOptions, frequencyHz: Float64Array): MediumRun {
  if (frequencyHz[0]! > 0) return runAt(options, frequencyHz);
  const run = runAt(options, frequencyHz.subarray(1));
  const prepend = (value: number, values: Float64Array): Float64Array => {
    const longer = new Float64Array(values.length + 1);
    longer[0] = value;
    longer.set(values, 1);
    return longer;
  };
  const { sections } = options.line;
  return {
    startM: run.startM,
    alpha: run.alpha.map((alpha, i) => prepend(sections[i]!.type === 'device' ? alpha[0]! : 0, alpha)),
    beta: run.beta.map((beta) => prepend(0, beta)),
  };
}

/** Described lengths up to the end that was found; what the description leaves open goes to the last section. */
function sectionLengthsM(line: Line, lengthM: number): number[] {
  let before = 0;
  return line.sections.map((section, i) => {
    const left = Math.max(0, lengthM - before);
    const last = i === line.sections.length - 1;
    const own = last || section.lengthM === null ? left : Math.min(section.lengthM, left);
    before += own;
    return own;
  });
}

function longestSection(line: Line): Section {
  const coax = line.sections.filter((section) => section.type === 'coax');
  const candidates: readonly Section[] = coax.length > 0 ? coax : line.sections;
  if (candidates.length === 0) throw new RangeError('a profile needs a line with a section');
  return candidates.reduce((longest, section) =>
    (section.lengthM ?? Number.POSITIVE_INFINITY) > (longest.lengthM ?? Number.POSITIVE_INFINITY)
      ? section
      : longest,
  );
}
