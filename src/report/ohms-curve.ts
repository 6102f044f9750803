/** Ohms against distance: the axis that suits them, and why there are none where there are none. */
import { hasGuide, type Line } from '../line/line.ts';
import type { ImpedanceProfile } from '../locate/impedance-profile.ts';
import type { Reach } from '../locate/reach.ts';
import type { Solution } from '../locate/solution.ts';
import { frequencyText } from '../plot/quantity-text.ts';
import { type Domain, paddedDomain } from '../plot/scale.ts';
import type { Sweep } from '../sweep/sweep.ts';

/** What of an analysis is asked. */
export type OhmsQuestion = {
  readonly sweep: Sweep;
  readonly line: Line;
  readonly reach: Reach;
  readonly solution: Solution;
};

/** A sound line would otherwise fill the plot with a fraction of an ohm. */
const SMALLEST_SPAN_OHM = 8;
/** An open reads as thousands of ohms; the axis ends here, at multiples of the port's. */
const MOST_TIMES_PORT = 3;
/** The end's own step begins so many resolutions before it. */
const BEFORE_END_RESOLUTIONS = 2;

/** The axis of ohms: the end may read as nothing or as thousands, and the axis is for what lies before it. */
export function ohmsInView(
  { sweep: { portOhm }, reach, solution }: OhmsQuestion,
  profile: ImpedanceProfile,
  [from, to]: Domain,
): Domain {
  const lastM = Math.min(to, solution.lengthM - BEFORE_END_RESOLUTIONS * reach.resolutionM);
  const inView = profile.impedanceOhm.filter(
    (ohm, i) =>
      profile.distanceM[i]! >= from && profile.distanceM[i]! <= lastM && ohm < MOST_TIMES_PORT * portOhm,
  );
  const [low, high] = paddedDomain([portOhm, ...inView], {
    fallback: [0, 2 * portOhm],
    smallestSpan: SMALLEST_SPAN_OHM,
  });
  return [Math.max(0, low), high];
}

/** Ohms at a distance, straight between the samples; NaN outside them. */
export function ohmsAt({ distanceM, impedanceOhm }: ImpedanceProfile, atM: number): number {
  const after = distanceM.findIndex((d) => d >= atM);
  if (after < 0) return Number.NaN;
  if (distanceM[after] === atM) return impedanceOhm[after]!;
  if (after === 0) return Number.NaN;
  const share = (atM - distanceM[after - 1]!) / (distanceM[after]! - distanceM[after - 1]!);
  return impedanceOhm[after - 1]! + share * (impedanceOhm[after]! - impedanceOhm[after - 1]!);
}

/** Why a sweep has no ohms along its line, a paragraph each. */
export function whyNoOhms({ sweep, line, reach }: OhmsQuestion): readonly string[] {
  if (hasGuide(line)) return ['A waveguide has no ohms of its own, so none can be drawn along this line.'];
  if (reach.impedanceProfile !== 'no') return ['This answer carries no ohms along the line.'];
  const startHz = sweep.frequencyHz[0]!;
  const stopHz = sweep.frequencyHz.at(-1)!;
  const stepHz = (stopHz - startHz) / (sweep.frequencyHz.length - 1);
  return [
    'This sweep gives no ohms along the line.',
    `It starts at ${frequencyText(startHz)}. Ohms need a sweep that begins near zero: at most a few of its own ` +
      `steps (${frequencyText(stepHz)} here) above 0 Hz, evenly spaced.`,
  ];
}
