/** Which points of a sweep see a line at all, and which see through to its end. */
import type { Notice } from '../outcome.ts';
import { guideCutoffHz } from './guide.ts';
import type { Line } from './line.ts';

/** Points of a sweep by index: from the first to before the last; empty when they are the same. */
export type PointRange = { readonly from: number; readonly to: number };

export type UsableBand = {
  /**
   * Points at which every section carries a wave. The others lie at or below the cut-off of a guide, where there is no
   * medium to compute with: they are to be dropped.
   */
  readonly carried: PointRange;
  /**
   * Points, among those, at which every device in line lets the wave through. Outside them a sweep shows the device's
   * near face and what comes before it, and nothing of the line behind.
   */
  readonly through: PointRange;
  /** What is left out and why; empty when every point is used. */
  readonly notices: readonly Notice[];
};

/**
 * What a sweep can use of itself on this line: points above the cut-off of every guide, and within the pass band of
 * every device.
 *
 * Both are bands, so each is one run of points. Whoever fits the whole line keeps `through` (or gives the rest of
 * `carried` no weight beyond the device); a band without points means that the sweep was taken where this line cannot
 * be seen, which the notices say too.
 *
 * @param frequencyHz Rising, length n ≥ 1.
 */
export function usableBand(line: Line, frequencyHz: Float64Array): UsableBand {
  const n = frequencyHz.length;
  const notices: Notice[] = [];
  const guide = highestCutoff(line);
  const carried = { from: guide === null ? 0 : pointsUpTo(frequencyHz, guide.cutoffHz), to: n };
  if (guide !== null && carried.from > 0)
    notices.push({
      code: 'below-cutoff',
      what:
        `${countOf(carried.from, n)} at or below the cut-off of ${guide.name}, ${frequencyText(guide.cutoffHz)}, ` +
        `where nothing travels: ${carried.from === 1 ? 'it is' : 'they are'} left out`,
    });
  let { from, to } = carried;
  for (const section of line.sections) {
    if (section.type !== 'device') continue;
    const [lowHz, highHz] = section.passbandHz;
    from = Math.max(from, pointsBelow(frequencyHz, lowHz));
    to = Math.min(to, pointsUpTo(frequencyHz, highHz));
  }
  const through = from < to ? { from, to } : { from: carried.from, to: carried.from };
  const unseen = carried.to - carried.from - (through.to - through.from);
  if (unseen > 0) notices.push(unseenNotice(line, frequencyHz, carried, through, unseen));
  return { carried, through, notices };
}

function unseenNotice(
  line: Line,
  frequencyHz: Float64Array,
  carried: PointRange,
  through: PointRange,
  unseen: number,
): Notice {
  const names = line.sections.flatMap((section) => {
    if (section.type !== 'device') return [];
    const [lowHz, highHz] = section.passbandHz;
    const lowest = frequencyHz[carried.from]!;
    const highest = frequencyHz[carried.to - 1]!;
    if (lowHz <= lowest && highest <= highHz) return [];
    return [`${section.label} (passes ${bandText(lowHz, highHz)})`];
  });
  const used = through.to - through.from;
  const rest =
    used === 0
      ? 'none of the sweep is left to look at the line behind with'
      : `what lies behind is judged by the ${used} point${used === 1 ? '' : 's'} at ` +
        bandText(frequencyHz[through.from]!, frequencyHz[through.to - 1]!);
  return {
    code: 'outside-passband',
    what: `${countOf(unseen, frequencyHz.length)} outside what can be seen through ${names.join(' and ')}: ${rest}`,
  };
}

/** The guide that a sweep must stay above; null on a line without one. */
function highestCutoff(line: Line): { readonly name: string; readonly cutoffHz: number } | null {
  let highest: { readonly name: string; readonly cutoffHz: number } | null = null;
  for (const section of line.sections) {
    if (section.type !== 'guide') continue;
    const cutoffHz = guideCutoffHz(section.guide);
    if (highest === null || cutoffHz > highest.cutoffHz) highest = { name: section.guide.name, cutoffHz };
  }
  return highest;
}

/** How many points lie below a frequency. */
function pointsBelow(frequencyHz: Float64Array, limitHz: number): number {
  const first = frequencyHz.findIndex((f) => f >= limitHz);
  return first < 0 ? frequencyHz.length : first;
}

/** How many points lie at or below a frequency. */
function pointsUpTo(frequencyHz: Float64Array, limitHz: number): number {
  const first = frequencyHz.findIndex((f) => f > limitHz);
  return first < 0 ? frequencyHz.length : first;
}

function countOf(some: number, all: number): string {
  return `${some} of ${all} points lie${some === 1 ? 's' : ''}`;
}

/** "1710–2170 MHz". */
function bandText(lowHz: number, highHz: number): string {
  return `${megahertzText(lowHz)}–${megahertzText(highHz)} MHz`;
}

function frequencyText(frequencyHz: number): string {
  return `${megahertzText(frequencyHz)} MHz`;
}

/** In MHz with a tenth where it matters. */
function megahertzText(frequencyHz: number): string {
  return String(Number((frequencyHz / 1e6).toFixed(1)));
}
