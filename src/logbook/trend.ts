/** One line over the years: which echo of one sweep is which of the next, and how each changes. */
import type { BandFigures, EchoFigures, EntryFigures, EntryKey } from './entry.ts';

/** One sweep of the line. */
export type Moment = {
  readonly key: EntryKey;
  /** Wall time on site, `2026-05-03` or `2026-05-03T14:30`. */
  readonly takenAt: string;
  readonly figures: EntryFigures;
};

/** A figure of one sweep; `at` is the place of the sweep in the history, from 0. */
export type TrendPoint = { readonly at: number; readonly value: number };

export type Course = {
  /** In order of time; sweeps that do not have the figure are left out. */
  readonly points: readonly TrendPoint[];
  /** Last less first; null for a single point. */
  readonly change: number | null;
  /** Slope of the straight line of least squares; null when the points span less than 90 days. */
  readonly perYear: number | null;
};

export type EchoTrend = {
  /** Where it was last seen, in words. */
  readonly place: string;
  readonly joint: number | null;
  /** What it was when last seen. */
  readonly kind: string;
  readonly words: string;
  /** Last sweep that has it, from 0. */
  readonly lastAt: number;
  readonly echoes: readonly { readonly at: number; readonly echo: EchoFigures }[];
  /** Level with line loss and upstream mismatch removed, dB, negative: it rises as the echo grows. */
  readonly levelDb: Course;
};

export type LineTrend = {
  readonly moments: readonly Moment[];
  /** In order of distance. */
  readonly echoes: readonly EchoTrend[];
  /** One way, of the sweeps that tell it at the frequency of the last one that does. */
  readonly lossDb: Course;
  readonly lossAtHz: number | null;
  readonly lengthM: Course;
  /**
   * Worst return loss over each named band, dB, positive; of sweeps that cover the band as the last one did, with an
   * end that takes the power: behind a short or an open there is no match to speak of.
   */
  readonly match: readonly { readonly band: string; readonly returnLossDb: Course }[];
};

/** Shortest span of which a change per year is told, days. */
const SHORTEST_SLOPE_DAYS = 90;
const DAYS_PER_YEAR = 365.25;
const MS_PER_DAY = 86_400_000;

/** Two frequencies closer than this share are the same. */
const SAME_FREQUENCY = 0.01;

/** How far a joint may seem to move before it is taken for another one of that number: m, and share of distance. */
const JOINT_MOVES_M = 1;
const JOINT_MOVES_SHARE = 0.05;
/** Least distance within which two echoes inside a section are the same one, m. */
const SAME_PLACE_M = 0.2;

/**
 * Follows a line through its sweeps.
 *
 * An echo at a joint is the same as that at the same joint before, as long as the joint has not moved by more than a
 * metre or 5 %; one inside a section is the same as the nearest before it within 3σ of both, or one resolution. The end
 * is followed apart for each thing that stood there: antenna, load, short, open.
 *
 * @param moments In order of time.
 */
export function followLine(moments: readonly Moment[]): LineTrend {
  const days = moments.map(({ takenAt }) => dayOf(takenAt));
  const course = (figureOf: (figures: EntryFigures) => number | null | undefined): Course =>
    courseOf(
      moments.flatMap(({ figures }, at) => {
        const value = figureOf(figures);
        return value === null || value === undefined ? [] : [{ at, value }];
      }),
      days,
    );
  const lossAtHz = moments.findLast(({ figures }) => figures.lossDb !== null)?.figures.lossAtHz ?? null;
  return {
    moments,
    echoes: trackEchoes(moments).map((seen) => {
      const last = seen.at(-1)!;
      return {
        place: last.echo.place,
        joint: last.echo.joint,
        kind: last.echo.kind,
        words: last.echo.words,
        lastAt: last.at,
        echoes: seen,
        levelDb: courseOf(
          seen.map(({ at, echo }) => ({ at, value: -echo.correctedReturnLossDb })),
          days,
        ),
      };
    }),
    lossDb: course(({ lossDb, lossAtHz: atHz }) =>
      atHz !== null && lossAtHz !== null && sameFrequency(atHz, lossAtHz) ? lossDb : null,
    ),
    lossAtHz,
    lengthM: course(({ lengthM }) => lengthM),
    match: lastBands(moments).map((wanted) => ({
      band: wanted.name,
      returnLossDb: course((figures) => matchOver(wanted, figures)),
    })),
  };
}

/** Every band that was judged, as the last sweep has it that does. */
function lastBands(moments: readonly Moment[]): readonly BandFigures[] {
  const bands = new Map<string, BandFigures>();
  for (const { figures } of moments)
    if (takesPower(figures)) for (const band of figures.bands) bands.set(band.name, band);
  return [...bands.values()];
}

function matchOver(wanted: BandFigures, figures: EntryFigures): number | null {
  const band = takesPower(figures) ? figures.bands.find(({ name }) => name === wanted.name) : undefined;
  return band && sameFrequency(band.fromHz, wanted.fromHz) && sameFrequency(band.toHz, wanted.toHz)
    ? band.worstReturnLossDb
    : null;
}

function takesPower({ end }: EntryFigures): boolean {
  return end !== 'open' && end !== 'short';
}

function sameFrequency(a: number, b: number): boolean {
  return Math.abs(a - b) <= SAME_FREQUENCY * Math.max(a, b);
}

/** Days since 1970 of a wall time. */
export function dayOf(takenAt: string): number {
  return Date.parse(takenAt.length > 10 ? `${takenAt}Z` : `${takenAt}T00:00Z`) / MS_PER_DAY;
}

type Track = { readonly at: number; readonly echo: EchoFigures }[];

function trackEchoes(moments: readonly Moment[]): readonly Track[] {
  const all: Track[] = [];
  const atJoint = new Map<string, Track>();
  /** Those inside sections, in order of the distance at which they were last seen. */
  const between: Track[] = [];
  const endJoint = moments.reduce(
    (highest, { figures }) => figures.echoes.reduce((max, { joint }) => Math.max(max, joint ?? 0), highest),
    0,
  );
  for (const [at, { figures }] of moments.entries())
    for (const echo of [...figures.echoes].sort((a, b) => a.distanceM - b.distanceM)) {
      const jointKey =
        echo.joint === null ? null : `${echo.joint}${echo.joint === endJoint ? ` ${figures.end}` : ''}`;
      const known =
        jointKey === null
          ? takeNearest(between, echo, at, figures.resolutionM)
          : sameJoint(atJoint.get(jointKey), echo);
      const track = known ?? [];
      if (!known) all.push(track);
      track.push({ at, echo });
      if (jointKey === null) between.splice(placeOf(between, echo.distanceM), 0, track);
      else atJoint.set(jointKey, track);
    }
  return all.sort((a, b) => lastOf(a).distanceM - lastOf(b).distanceM);
}

function sameJoint(track: Track | undefined, echo: EchoFigures): Track | null {
  if (!track) return null;
  const moved = Math.abs(lastOf(track).distanceM - echo.distanceM);
  return moved <= Math.max(JOINT_MOVES_M, JOINT_MOVES_SHARE * echo.distanceM) ? track : null;
}

/** Takes the track out of the list whose echo is nearest, near enough, and not of this very sweep. */
function takeNearest(between: Track[], echo: EchoFigures, at: number, resolutionM: number): Track | null {
  const middle = placeOf(between, echo.distanceM);
  let nearest = -1;
  let nearestM = Number.POSITIVE_INFINITY;
  for (const step of [-1, 1] as const)
    for (let i = step < 0 ? middle - 1 : middle; i >= 0 && i < between.length; i += step) {
      const other = lastOf(between[i]!);
      const apartM = Math.abs(other.distanceM - echo.distanceM);
      const reachM = Math.max(
        SAME_PLACE_M,
        resolutionM,
        3 * Math.hypot(echo.distanceSigmaM, other.distanceSigmaM),
      );
      if (apartM > reachM) break;
      if (between[i]!.at(-1)!.at === at) continue;
      if (apartM < nearestM) {
        nearest = i;
        nearestM = apartM;
      }
      break;
    }
  return nearest < 0 ? null : (between.splice(nearest, 1)[0] ?? null);
}

/** First index whose track was last seen beyond this distance. */
function placeOf(between: readonly Track[], distanceM: number): number {
  let low = 0;
  let high = between.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (lastOf(between[middle]!).distanceM > distanceM) high = middle;
    else low = middle + 1;
  }
  return low;
}

function lastOf(track: Track): EchoFigures {
  return track.at(-1)!.echo;
}

function courseOf(points: readonly TrendPoint[], days: readonly number[]): Course {
  const first = points[0];
  const last = points.at(-1);
  const change = first && last && points.length > 1 ? last.value - first.value : null;
  return { points, change, perYear: slopePerYear(points, days) };
}

function slopePerYear(points: readonly TrendPoint[], days: readonly number[]): number | null {
  const n = points.length;
  if (n < 2 || days[points[n - 1]!.at]! - days[points[0]!.at]! < SHORTEST_SLOPE_DAYS) return null;
  let meanDay = 0;
  let meanValue = 0;
  for (const { at, value } of points) {
    meanDay += days[at]! / n;
    meanValue += value / n;
  }
  let top = 0;
  let bottom = 0;
  for (const { at, value } of points) {
    top += (days[at]! - meanDay) * (value - meanValue);
    bottom += (days[at]! - meanDay) ** 2;
  }
  return (top / bottom) * DAYS_PER_YEAR;
}
