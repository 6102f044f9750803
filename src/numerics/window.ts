/** Windows by name: their values over a sweep, and what each trades of resolution against side lobes. */
import { fail, type Outcome, succeed } from '../outcome.ts';
import { besselI0 } from './bessel.ts';
import { createChirpZ } from './chirp-z.ts';
import { complexZeros } from './complex.ts';
import { windowFigures } from './window-figures.ts';

/** A window's name with its setting, where it has one. */
export type WindowSpec =
  | { readonly kind: PlainWindowKind }
  | { readonly kind: 'kaiser'; readonly beta: number }
  | { readonly kind: 'dolph-chebyshev'; readonly sideLobeDb: number };

export type PlainWindowKind = 'rectangular' | 'hann' | 'hamming' | 'blackman' | 'blackman-harris';

/** Values over n points and the figures that follow from them; the figures are worked out when first asked for. */
export type Window = {
  readonly spec: WindowSpec;
  /** Length n, highest about 1. */
  readonly values: Float64Array;
  /** Mean of the values: what a lone line's height is multiplied by. */
  readonly coherentGain: number;
  /** Equivalent noise bandwidth, bins. */
  readonly enbwBins: number;
  /** Full width of the main lobe at half power (3.0103 dB), bins. */
  readonly width3DbBins: number;
  /** Full width of the main lobe at half amplitude (6.0206 dB), bins. */
  readonly width6DbBins: number;
  /** Highest side lobe against the main lobe, dB, negative; −Infinity when there is none. */
  readonly sideLobeDb: number;
};

/**
 * Terms of the cosine windows: w(x) = Σ (−1)^k·a_k·cos(2πk·x), x = 0…1.
 *
 * @source F. J. Harris, On the use of windows for harmonic analysis with the DFT, Proc. IEEE 66(1), 1978;
 *   coefficients as confirmed by Heinzel, Rüdiger, Schilling, 2002.
 */
const COSINE_TERMS: Readonly<Record<PlainWindowKind, readonly number[]>> = {
  rectangular: [1],
  hann: [0.5, 0.5],
  hamming: [0.54, 0.46],
  blackman: [0.42, 0.5, 0.08],
  'blackman-harris': [0.35875, 0.48829, 0.14128, 0.01168],
};

/** Used when a name comes without its setting: side lobes of −44 dB at 0.8 of a Hann window's noise bandwidth. */
const DEFAULT_KAISER_BETA = 6;
const DEFAULT_CHEBYSHEV_DB = 60;
const KAISER_BETA_RANGE = [0, 30] as const;
const CHEBYSHEV_DB_RANGE = [20, 150] as const;

/**
 * Reads a window as people type it: `hann`, `kaiser:6`, `dolph-chebyshev:60`.
 *
 * @returns The spec, or one problem that names the windows there are.
 */
export function parseWindow(text: string): Outcome<WindowSpec> {
  const [name = '', setting, ...rest] = text.trim().toLowerCase().split(':');
  if (rest.length > 0) return unknownWindow(text);
  if (name === 'kaiser') {
    const beta = settingOf(setting, DEFAULT_KAISER_BETA, KAISER_BETA_RANGE);
    return beta === null ? badSetting(text, 'β', KAISER_BETA_RANGE) : succeed({ kind: 'kaiser', beta });
  }
  if (name === 'dolph-chebyshev') {
    const sideLobeDb = settingOf(setting, DEFAULT_CHEBYSHEV_DB, CHEBYSHEV_DB_RANGE);
    return sideLobeDb === null
      ? badSetting(text, 'side lobes in dB', CHEBYSHEV_DB_RANGE)
      : succeed({ kind: 'dolph-chebyshev', sideLobeDb });
  }
  if (setting === undefined && isPlainKind(name)) return succeed({ kind: name });
  return unknownWindow(text);
}

/** A window as `parseWindow` reads it. */
export function windowText(spec: WindowSpec): string {
  if (spec.kind === 'kaiser') return `kaiser:${spec.beta}`;
  if (spec.kind === 'dolph-chebyshev') return `dolph-chebyshev:${spec.sideLobeDb}`;
  return spec.kind;
}

/**
 * A window over n evenly spaced points.
 *
 * Each point stands at the middle of its n-th share of the span, so no point gets the weight 0 and the figures
 * are those of the usual periodic sampling. Dolph-Chebyshev has its own exact values for n points.
 *
 * @param n Whole number ≥ 1.
 * @throws RangeError When n is not a whole number ≥ 1 or the spec's setting is out of range.
 * @source Figures tested against Harris 1978 Table I and its corrections.
 */
export function createWindow(spec: WindowSpec, n: number): Window {
  if (!(Number.isInteger(n) && n >= 1)) throw new RangeError(`a window needs n from 1 up, not ${n}`);
  const values =
    spec.kind === 'dolph-chebyshev'
      ? dolphChebyshev(n, spec.sideLobeDb)
      : Float64Array.from({ length: n }, sampleAt(windowSampler(spec), n));
  let sum = 0;
  let sumOfSquares = 0;
  for (const value of values) {
    sum += value;
    sumOfSquares += value * value;
  }
  let figures: ReturnType<typeof windowFigures> | null = null;
  const lazily = () => {
    figures ??= windowFigures(n <= LONGEST_MEASURED ? values : createWindow(spec, LONGEST_MEASURED).values);
    return figures;
  };
  return {
    spec,
    values,
    coherentGain: sum / n,
    enbwBins: (n * sumOfSquares) / (sum * sum),
    get width3DbBins() {
      return lazily().width3DbBins;
    },
    get width6DbBins() {
      return lazily().width6DbBins;
    },
    get sideLobeDb() {
      return lazily().sideLobeDb;
    },
  };
}

/** Widths and side lobes no longer change with n beyond this many points. */
const LONGEST_MEASURED = 4096;

/**
 * A window as a function of place x, 0 at the start of the span and 1 at its end: for uneven grids.
 *
 * Cosine windows and Kaiser are exact; Dolph-Chebyshev is read between the points of a 1024-point one.
 *
 * @returns A function that gives 0 outside 0..1.
 * @throws RangeError When the spec's setting is out of range.
 * @source J. F. Kaiser's I₀ window as in Harris 1978, section V-I, β = π·α.
 */
export function windowSampler(spec: WindowSpec): (x: number) => number {
  if (spec.kind === 'kaiser') {
    requireRange(spec.beta, KAISER_BETA_RANGE);
    const scale = 1 / besselI0(spec.beta);
    return within((x) => besselI0(spec.beta * Math.sqrt(Math.max(0, 4 * x * (1 - x)))) * scale);
  }
  if (spec.kind === 'dolph-chebyshev') {
    const points = dolphChebyshev(CHEBYSHEV_TABLE, spec.sideLobeDb);
    return within((x) => between(points, x * CHEBYSHEV_TABLE - 0.5));
  }
  const terms = COSINE_TERMS[spec.kind];
  return within((x) => cosineSum(terms, x));
}

const CHEBYSHEV_TABLE = 1024;

function sampleAt(sampler: (x: number) => number, n: number): (_: unknown, k: number) => number {
  return (_, k) => sampler((k + 0.5) / n);
}

function within(inside: (x: number) => number): (x: number) => number {
  return (x) => (x >= 0 && x <= 1 ? inside(x) : 0);
}

function cosineSum(terms: readonly number[], x: number): number {
  let value = 0;
  for (let k = 0; k < terms.length; k++)
    value += (k % 2 === 0 ? terms[k]! : -terms[k]!) * Math.cos(2 * Math.PI * k * x);
  return value;
}

/**
 * Dolph-Chebyshev values: all side lobes at the same level, the narrowest main lobe that allows it.
 *
 * @source C. L. Dolph, Proc. IRE 34, 1946; frequency samples as in Harris 1978, section V-H.
 */
function dolphChebyshev(n: number, sideLobeDb: number): Float64Array {
  requireRange(sideLobeDb, CHEBYSHEV_DB_RANGE);
  if (n === 1) return Float64Array.of(1);
  const order = n - 1;
  const stretch = Math.cosh(Math.acosh(10 ** (sideLobeDb / 20)) / order);
  const spectrum = complexZeros(n);
  for (let k = 0; k < n; k++)
    spectrum.re[k] = chebyshevPolynomial(order, stretch * Math.cos((Math.PI * k) / n));
  const stepRad = (2 * Math.PI) / n;
  const values = createChirpZ({ n, m: n, startRad: (-order / 2) * stepRad, stepRad }).transform(spectrum).re;
  const highest = values.reduce((most, value) => Math.max(most, value), 0);
  return values.map((value) => value / highest);
}

/** T_order(x) for any real x. @source NIST Digital Library of Mathematical Functions 18.5.1. */
function chebyshevPolynomial(order: number, x: number): number {
  if (Math.abs(x) <= 1) return Math.cos(order * Math.acos(x));
  const size = Math.cosh(order * Math.acosh(Math.abs(x)));
  return x < 0 && order % 2 === 1 ? -size : size;
}

function between(points: Float64Array, position: number): number {
  const at = Math.max(0, Math.min(points.length - 1, position));
  const below = Math.floor(at);
  const low = points[below]!;
  return low + (at - below) * (points[Math.min(below + 1, points.length - 1)]! - low);
}

function isPlainKind(name: string): name is PlainWindowKind {
  return Object.hasOwn(COSINE_TERMS, name);
}

type Range = readonly [number, number];

function settingOf(text: string | undefined, byDefault: number, range: Range): number | null {
  if (text === undefined) return byDefault;
  if (!/^\d+(\.\d+)?$/.test(text)) return null;
  const value = Number(text);
  return value >= range[0] && value <= range[1] ? value : null;
}

function requireRange(value: number, range: Range): void {
  if (!(value >= range[0] && value <= range[1]))
    throw new RangeError(`a window's setting must be ${range[0]}..${range[1]}, not ${value}`);
}

function badSetting(text: string, meaning: string, range: Range): Outcome<WindowSpec> {
  return fail({
    code: 'window-setting',
    what: `the window's setting (${meaning}) must be a number from ${range[0]} to ${range[1]}`,
    found: shown(text),
    mend: 'write for example kaiser:6 or dolph-chebyshev:60',
  });
}

function unknownWindow(text: string): Outcome<WindowSpec> {
  return fail({
    code: 'window-name',
    what: 'there is no window of this name',
    found: shown(text),
    mend: `use ${Object.keys(COSINE_TERMS).join(', ')}, kaiser:6 or dolph-chebyshev:60`,
  });
}

/** Text as typed, made harmless and short. */
function shown(text: string): string {
  return text.replace(/\p{C}/gu, '').slice(0, 40);
}
