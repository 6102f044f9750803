/** Return loss or VSWR against frequency, with the limits of the bands and where each is worst. */
import type { EndReflection } from '../assess/end-match.ts';
import type { LimitResult } from '../assess/limits-check.ts';
import type { MatchCurves } from '../assess/match-curves.ts';
import { gammaOfReturnLoss, vswr } from '../line/reflection.ts';
import type { ChartMark, Series } from '../plot/chart.ts';
import { SEVERITY_GLYPHS } from '../plot/line-strip.ts';
import type { Domain } from '../plot/scale.ts';
import { type Drawing, dottedKey, type KeyEntry, lineKey, markKey } from './drawing.ts';
import { frequencyAxis, sweptDomain } from './frequency-axis.ts';

/** Where one looks: at the port as swept, or at the end with the line taken away. */
export type MatchPlane = 'port' | 'end';

/** How a match is written. */
export type MatchScale = 'return-loss' | 'vswr';

export type MatchDrawingOptions = {
  readonly plane: MatchPlane;
  readonly scale: MatchScale;
  /** Frequencies in view; the whole sweep unless given. */
  readonly domainHz?: Domain | undefined;
};

/** Reflections below −60 dB are drawn at −60 dB: nobody reads a match that deep. */
const DEEPEST_DB = -60;
/** The axis of return loss goes at least and at most this deep. */
const LEAST_DEPTH_DB = 30;
const STEP_DB = 10;
/** Room of the axis beyond a limit. */
const ROOM_DB = 12;
/** The axis of VSWR spans at least and at most this. */
const LEAST_VSWR = 2;
const MOST_VSWR = 6;

/** Draws it. A curve that leaves the axis at the top is worse than the axis shows. */
export function matchDrawing(match: MatchCurves, options: MatchDrawingOptions): Drawing {
  const { plane, scale } = options;
  const toValue = scale === 'vswr' ? vswr : levelOf;
  const curves = plane === 'port' ? [match.port] : match.end;
  const series = curves.map((curve): Series => seriesOf(curve, toValue));
  const results = match.results.filter(({ limit }) => limit === `match-at-${plane}`);
  const limits = limitSeries(match, results, toValue);
  const domainHz = options.domainHz ?? sweptDomain(match.port.frequencyHz);
  return {
    title: `${scale === 'vswr' ? 'VSWR' : 'return loss'} ${plane === 'port' ? 'at the port' : 'at the end, the line taken away'}`,
    chart: {
      x: frequencyAxis(domainHz),
      y:
        scale === 'vswr'
          ? { domain: vswrDomain(series, limits), unit: '' }
          : { domain: levelDomain(series, limits), unit: 'dB', perUnit: -1 },
      series: [...limits, ...series],
      levels: [],
      marks: results.flatMap((result) => worstMark(result, toValue)),
      cursor: null,
    },
    key: keyOf(plane, limits.length > 0, results),
  };
}

/** A level in dB at or below 0; return loss with its sign turned. */
function levelOf(gamma: number): number {
  return Math.max(DEEPEST_DB, 20 * Math.log10(Math.max(gamma, 1e-12)));
}

function seriesOf({ frequencyHz, gamma }: EndReflection, toValue: (gamma: number) => number): Series {
  const y = Float64Array.from(gamma.re, (re, i) => toValue(Math.hypot(re, gamma.im[i]!)));
  return { x: frequencyHz, y, role: 'trace' };
}

/** A dotted line over each band at its limit. */
function limitSeries(
  { bands, port }: MatchCurves,
  results: readonly LimitResult[],
  toValue: (gamma: number) => number,
): readonly Series[] {
  const named = bands.map(({ fromHz, toHz, returnLossDb }) => ({ fromHz, toHz, returnLossDb }));
  const [fromHz, toHz] = sweptDomain(port.frequencyHz);
  const usual =
    named.length > 0 ? [] : results.map(({ limitDb }) => ({ fromHz, toHz, returnLossDb: limitDb }));
  return [...named, ...usual].map((band): Series => {
    const y = toValue(gammaOfReturnLoss(band.returnLossDb));
    return {
      x: Float64Array.of(band.fromHz, band.toHz),
      y: Float64Array.of(y, y),
      role: 'guide',
      dotted: true,
    };
  });
}

function worstMark(
  { valueDb, atHz, pass, isDefault }: LimitResult,
  toValue: (gamma: number) => number,
): ChartMark[] {
  if (valueDb === null || atHz === null || pass === null) return [];
  const severity = pass ? 'sound' : isDefault ? 'watch' : 'fault';
  return [
    { x: atHz, y: toValue(gammaOfReturnLoss(valueDb)), glyph: SEVERITY_GLYPHS[severity], role: severity },
  ];
}

function levelDomain(series: readonly Series[], limits: readonly Series[]): Domain {
  let deepest = -LEAST_DEPTH_DB;
  for (const { y } of limits) deepest = Math.min(deepest, y[0]! - ROOM_DB);
  // Nine points in ten are drawn; the rest are nulls.
  for (const { y } of series) deepest = Math.min(deepest, lowTenth(y));
  return [Math.max(DEEPEST_DB, STEP_DB * Math.floor(deepest / STEP_DB)), 0];
}

function lowTenth(values: Float64Array): number {
  const sorted = values.slice().sort();
  return sorted[Math.floor(sorted.length / 10)] ?? 0;
}

function vswrDomain(series: readonly Series[], limits: readonly Series[]): Domain {
  let highest = LEAST_VSWR;
  for (const { y } of limits) highest = Math.max(highest, 1.5 * y[0]!);
  // One point in ten may lie above the axis: outside its bands an antenna reflects nearly all.
  for (const { y } of series) {
    const sorted = y.slice().sort();
    highest = Math.max(highest, sorted[Math.floor(0.9 * (sorted.length - 1))] ?? 0);
  }
  return [1, Math.ceil(Math.min(MOST_VSWR, highest))];
}

function keyOf(plane: MatchPlane, hasLimits: boolean, results: readonly LimitResult[]): readonly KeyEntry[] {
  const judged = results.filter(({ pass }) => pass !== null);
  return [
    lineKey('trace', plane === 'port' ? 'this sweep, at the port' : 'the end by itself'),
    ...(hasLimits ? [dottedKey('guide', 'limit')] : []),
    ...(judged.some(({ pass }) => pass) ? [markKey('sound', SEVERITY_GLYPHS.sound, 'worst, kept')] : []),
    ...(judged.some(({ pass }) => !pass) ? [markKey('fault', SEVERITY_GLYPHS.fault, 'worst, missed')] : []),
  ];
}
