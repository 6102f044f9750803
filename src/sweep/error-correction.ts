/**
 * One-port error correction: what lies between the instrument and the reference plane is taken out of a sweep with
 * the help of sweeps of an open, a short and a load at that plane. Whether the standards themselves are any good is
 * another question, and another file's.
 */
import { fail, type Notice, type Outcome, type Problem, succeed } from '../outcome.ts';
import { solveComplexInPlace } from './parameter-conversion.ts';
import { formatFrequency } from './quantity-format.ts';
import { spacingOf } from './spacing.ts';
import type { Sweep } from './sweep.ts';
import { LARGEST_GAMMA } from './sweep-points.ts';

/** Sweeps of the three standards, made with the same settings as the raw sweep. */
export type Standards = { readonly open: Sweep; readonly short: Sweep; readonly load: Sweep };

/** What the standards really are; ideal unless said. Delays are one way, seconds: the wave passes them twice. */
export type StandardDefinitions = {
  readonly openDelayS?: number;
  readonly shortDelayS?: number;
  readonly loadDelayS?: number;
  /** Resistance of the load; the port's reference unless given. */
  readonly loadOhm?: number;
};

type StandardName = keyof Standards;
const STANDARD_NAMES: readonly StandardName[] = ['open', 'short', 'load'];

/** Two frequencies count as the same when they differ by less than this share of the sweep's step. */
const SAME_FREQUENCY = 1e-3;

/** Two standards count as the same when they read closer than this share of the farthest two. */
const SAME_READING = 0.02;

/**
 * Corrects a raw sweep by the three-term error model: what the instrument reads is
 * M = e00 + e10e01·Γ / (1 − e11·Γ), with directivity e00, source match e11 and reflection tracking e10e01. Three
 * standards of known Γ give three equations linear in (e00, e11, e00·e11 − e10e01), solved at each frequency.
 *
 * The standards may have been swept at more frequencies than the raw sweep, but must hold each of its frequencies:
 * nothing is interpolated, since a test lead turns the phase too fast between points to guess.
 *
 * @returns The sweep at the reference plane; its transmission is dropped, because it stays uncorrected. Problems when
 *   grids or references differ, when two standards read the same, or when the result is not finite.
 * @source Three-term one-port error model (from memory: Rytting, "Network analyzer error models and calibration
 *   methods", 1998); references.md section 5.3, last row.
 */
export function correctSweep(
  raw: Sweep,
  standards: Standards,
  definitions: StandardDefinitions = {},
): Outcome<Sweep> {
  const indices = alignStandards(raw, standards);
  if (!indices.ok) return indices;
  const n = raw.frequencyHz.length;
  const gamma = { re: new Float64Array(n), im: new Float64Array(n) };
  const matrix = { re: new Float64Array(9), im: new Float64Array(9) };
  const terms = { re: new Float64Array(3), im: new Float64Array(3) };
  for (let i = 0; i < n; i++) {
    const frequencyHz = raw.frequencyHz[i]!;
    const readings = STANDARD_NAMES.map((name) => {
      const at = indices.value[name][i]!;
      return [standards[name].gamma.re[at]!, standards[name].gamma.im[at]!] as const;
    });
    const alike = pairAlike(readings);
    if (alike) return fail(alikeProblem(raw, alike, frequencyHz));
    const truths = STANDARD_NAMES.map((name) => trueGamma(name, frequencyHz, raw.portOhm, definitions));
    const mistaken = pairAlike(truths);
    if (mistaken) return fail(definitionProblem(mistaken, frequencyHz));
    for (let s = 0; s < 3; s++) {
      const [readRe, readIm] = readings[s]!;
      const [trueRe, trueIm] = truths[s]!;
      matrix.re.set([1, trueRe * readRe - trueIm * readIm, -trueRe], 3 * s);
      matrix.im.set([0, trueRe * readIm + trueIm * readRe, -trueIm], 3 * s);
      terms.re[s] = readRe;
      terms.im[s] = readIm;
    }
    solveComplexInPlace(matrix.re, matrix.im, terms.re, terms.im);
    undo(raw.gamma.re[i]!, raw.gamma.im[i]!, terms, gamma, i);
    if (!(Math.hypot(gamma.re[i]!, gamma.im[i]!) <= LARGEST_GAMMA))
      return fail(unboundedProblem(raw, frequencyHz));
  }
  return succeed(
    {
      frequencyHz: raw.frequencyHz,
      gamma,
      portOhm: raw.portOhm,
      port: raw.port,
      ports: raw.ports,
      file: raw.file,
      comments: raw.comments,
    },
    raw.transmission ? [transmissionNotice] : [],
  );
}

/** For each standard, where each frequency of the raw sweep stands in it. */
function alignStandards(raw: Sweep, standards: Standards): Outcome<Record<StandardName, Int32Array>> {
  const problems: Problem[] = [];
  const indices: Record<StandardName, Int32Array> = {
    open: new Int32Array(0),
    short: new Int32Array(0),
    load: new Int32Array(0),
  };
  for (const name of STANDARD_NAMES) {
    const standard = standards[name];
    if (standard.portOhm !== raw.portOhm) {
      problems.push({
        code: 'standard-reference',
        file: standard.file,
        what: `the ${name} standard is relative to ${standard.portOhm} Ω, the sweep to ${raw.portOhm} Ω`,
        mend: 'sweep the standards with the same reference as the line',
      });
    }
    const found = alignFrequencies(raw.frequencyHz, standard.frequencyHz);
    if (found instanceof Int32Array) indices[name] = found;
    else problems.push(gridProblem(name, raw, standard, found.missingHz));
  }
  return problems.length > 0 ? fail(...problems) : succeed(indices);
}

/** Index in `available` of each frequency wanted, or the first one that is not there. */
function alignFrequencies(
  wanted: Float64Array,
  available: Float64Array,
): Int32Array | { readonly missingHz: number } {
  const tolerance = SAME_FREQUENCY * spacingOf(wanted).stepHz;
  const found = new Int32Array(wanted.length);
  let at = 0;
  for (let i = 0; i < wanted.length; i++) {
    while (at < available.length && available[at]! < wanted[i]! - tolerance) at++;
    if (!(at < available.length && available[at]! <= wanted[i]! + tolerance))
      return { missingHz: wanted[i]! };
    found[i] = at;
  }
  return found;
}

/** Γ that a standard has at its plane. */
function trueGamma(
  name: StandardName,
  frequencyHz: number,
  portOhm: number,
  definitions: StandardDefinitions,
): readonly [number, number] {
  const loadOhm = definitions.loadOhm ?? portOhm;
  const size = { open: 1, short: -1, load: (loadOhm - portOhm) / (loadOhm + portOhm) }[name];
  const delayS = {
    open: definitions.openDelayS,
    short: definitions.shortDelayS,
    load: definitions.loadDelayS,
  }[name];
  const angle = -4 * Math.PI * frequencyHz * (delayS ?? 0);
  return [size * Math.cos(angle), size * Math.sin(angle)];
}

/** Γ = (M − e00) / (M·e11 − Δ) into `gamma` at `i`. */
function undo(
  readRe: number,
  readIm: number,
  terms: { readonly re: Float64Array; readonly im: Float64Array },
  gamma: { readonly re: Float64Array; readonly im: Float64Array },
  i: number,
): void {
  const topRe = readRe - terms.re[0]!;
  const topIm = readIm - terms.im[0]!;
  const bottomRe = readRe * terms.re[1]! - readIm * terms.im[1]! - terms.re[2]!;
  const bottomIm = readRe * terms.im[1]! + readIm * terms.re[1]! - terms.im[2]!;
  const size = bottomRe * bottomRe + bottomIm * bottomIm;
  gamma.re[i] = (topRe * bottomRe + topIm * bottomIm) / size;
  gamma.im[i] = (topIm * bottomRe - topRe * bottomIm) / size;
}

/** Names of two standards whose values lie too close together to tell them apart; null when none do. */
function pairAlike(
  values: readonly (readonly [number, number])[],
): readonly [StandardName, StandardName] | null {
  let closest: readonly [StandardName, StandardName] = ['open', 'short'];
  let least = Number.POSITIVE_INFINITY;
  let most = 0;
  for (const [a, b] of [
    [0, 1],
    [0, 2],
    [1, 2],
  ] as const) {
    const distance = Math.hypot(values[a]![0] - values[b]![0], values[a]![1] - values[b]![1]);
    most = Math.max(most, distance);
    if (distance >= least) continue;
    least = distance;
    closest = [STANDARD_NAMES[a]!, STANDARD_NAMES[b]!];
  }
  return least > SAME_READING * most ? null : closest;
}

function gridProblem(name: StandardName, raw: Sweep, standard: Sweep, missingHz: number): Problem {
  return {
    code: 'standard-grid',
    file: standard.file,
    what:
      `the ${name} standard was swept ${gridText(standard)}, the sweep ${gridText(raw)}; it has no point at ` +
      formatFrequency(missingHz),
    mend: 'sweep line and standards with the same start, stop and number of points',
  };
}

function gridText(sweep: Sweep): string {
  const n = sweep.frequencyHz.length;
  return `${formatFrequency(sweep.frequencyHz[0]!)} to ${formatFrequency(sweep.frequencyHz[n - 1]!)} in ${n} points`;
}

function alikeProblem(raw: Sweep, pair: readonly [StandardName, StandardName], frequencyHz: number): Problem {
  return {
    code: 'standard-alike',
    file: raw.file,
    what: `the ${pair[0]} and the ${pair[1]} standard read the same at ${formatFrequency(frequencyHz)}`,
    mend: 'check that each file is the standard it is given as, and that each standard was really connected',
  };
}

function definitionProblem(pair: readonly [StandardName, StandardName], frequencyHz: number): Problem {
  return {
    code: 'standard-definition',
    what: `by their delays, the ${pair[0]} and the ${pair[1]} standard are the same at ${formatFrequency(frequencyHz)}`,
    mend: 'check the delays of the standards: they are one way, and for coax standards some tens of picoseconds',
  };
}

function unboundedProblem(raw: Sweep, frequencyHz: number): Problem {
  return {
    code: 'correction-unbounded',
    file: raw.file,
    what: `the corrected reflection has no bound at ${formatFrequency(frequencyHz)}`,
    mend: 'check that sweep and standards were made with the same lead and settings',
  };
}

const transmissionNotice: Notice = {
  code: 'correction-transmission',
  what: 'the correction holds for the reflection only; the transmission of the file was left out',
};
