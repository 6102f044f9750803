/** The media along a run at a sweep's frequencies: all that a transform to distance needs to know of a line. */
import type { Medium } from './medium.ts';

/** Sections in order from the port; before the first and beyond the last, that section's medium goes on. */
export type MediumRun = {
  /** Start of each section, m, then the total length as last item: sections + 1 items, the first 0. */
  readonly startM: Float64Array;
  /** Attenuation of each section at each frequency of the sweep, Np/m. */
  readonly alpha: readonly Float64Array[];
  /** Phase constant of each section at each frequency of the sweep, rad/m. */
  readonly beta: readonly Float64Array[];
};

/**
 * Run of described sections.
 *
 * @param media One per section, in order.
 * @param lengthsM As many, each ≥ 0.
 * @throws RangeError When the counts differ, there is no section, or a length is below 0.
 */
export function runOfMedia(media: readonly Medium[], lengthsM: readonly number[]): MediumRun {
  return runOf(
    lengthsM,
    media.map((medium) => medium.gamma.re),
    media.map((medium) => medium.gamma.im),
  );
}

/** A stretch with nothing but a velocity. */
export type LosslessStretch = { readonly lengthM: number; readonly velocityMPerS: number };

/**
 * Run without loss or dispersion, for a look at a sweep before anything is known of its line.
 *
 * @throws RangeError When there is no stretch, a length is below 0, or a velocity is not above 0.
 */
export function losslessRun(frequencyHz: Float64Array, stretches: readonly LosslessStretch[]): MediumRun {
  for (const { velocityMPerS } of stretches)
    if (!(velocityMPerS > 0)) throw new RangeError(`a velocity must be above 0, not ${velocityMPerS}`);
  return runOf(
    stretches.map((stretch) => stretch.lengthM),
    stretches.map(() => new Float64Array(frequencyHz.length)),
    stretches.map(({ velocityMPerS }) => frequencyHz.map((f) => (2 * Math.PI * f) / velocityMPerS)),
  );
}

function runOf(
  lengthsM: readonly number[],
  alpha: readonly Float64Array[],
  beta: readonly Float64Array[],
): MediumRun {
  if (lengthsM.length === 0 || lengthsM.length !== alpha.length)
    throw new RangeError(`a run needs as many lengths as media: ${lengthsM.length} and ${alpha.length}`);
  const startM = new Float64Array(lengthsM.length + 1);
  lengthsM.forEach((length, i) => {
    if (!(length >= 0)) throw new RangeError(`a length must not be below 0: ${length}`);
    startM[i + 1] = startM[i]! + length;
  });
  return { startM, alpha, beta };
}

/** Total length of the run, m. */
export function runLengthM(run: MediumRun): number {
  return run.startM[run.startM.length - 1]!;
}

/** Section that a distance lies in; at a boundary the one behind it. */
export function sectionAt(run: MediumRun, distanceM: number): number {
  let section = run.alpha.length - 1;
  while (section > 0 && distanceM < run.startM[section]!) section--;
  return section;
}

/**
 * Mean group delay of each section over the sweep's band, one way, s/m.
 *
 * @param frequencyHz Frequencies of the run, rising, length n ≥ 2.
 */
export function groupDelaySPerM(run: MediumRun, frequencyHz: Float64Array): Float64Array {
  const last = frequencyHz.length - 1;
  const spanRadPerS = 2 * Math.PI * (frequencyHz[last]! - frequencyHz[0]!);
  return Float64Array.from(run.beta, (beta) => (beta[last]! - beta[0]!) / spanRadPerS);
}

/**
 * Slowest group delay of each section within the sweep's band, one way, s/m: what the distance at which echoes fold
 * has to be worked out with where delay depends on frequency.
 *
 * By differences between neighbouring points; of a guide's steep first step that is the mean of the step.
 *
 * @param frequencyHz Frequencies of the run, strictly rising, length n ≥ 2.
 */
export function slowestGroupDelaySPerM(run: MediumRun, frequencyHz: Float64Array): Float64Array {
  return Float64Array.from(run.beta, (beta) => {
    let slowest = Number.NEGATIVE_INFINITY;
    for (let k = 1; k < beta.length; k++)
      slowest = Math.max(slowest, (beta[k]! - beta[k - 1]!) / (frequencyHz[k]! - frequencyHz[k - 1]!));
    return slowest / (2 * Math.PI);
  });
}

/**
 * Distance that a round trip of a given delay reaches, m: delay used up section by section.
 *
 * @param delaysSPerM One-way delay of each section, s/m, as from `groupDelaySPerM`.
 */
export function distanceOfDelay(run: MediumRun, delaysSPerM: Float64Array, roundTripS: number): number {
  let left = roundTripS / 2;
  const last = delaysSPerM.length - 1;
  for (let section = 0; section < last; section++) {
    const oneWayS = (run.startM[section + 1]! - run.startM[section]!) * delaysSPerM[section]!;
    if (left <= oneWayS) return run.startM[section]! + left / delaysSPerM[section]!;
    left -= oneWayS;
  }
  return run.startM[last]! + left / delaysSPerM[last]!;
}

/** Attenuation (Np) and phase (rad), one way, from the reference plane to a distance, at every frequency. */
export type PathToDistance = { readonly attenuation: Float64Array; readonly phase: Float64Array };

/**
 * Path along the run to a distance, which may lie a little before the reference plane or beyond the end.
 *
 * @returns One value per frequency of the run.
 */
export function pathTo(run: MediumRun, distanceM: number): PathToDistance {
  const n = run.alpha[0]!.length;
  const attenuation = new Float64Array(n);
  const phase = new Float64Array(n);
  const last = sectionAt(run, distanceM);
  for (let section = 0; section <= last; section++) {
    const stop = section === last ? distanceM : run.startM[section + 1]!;
    const lengthM = stop - run.startM[section]!;
    const alpha = run.alpha[section]!;
    const beta = run.beta[section]!;
    for (let k = 0; k < n; k++) {
      attenuation[k] = attenuation[k]! + alpha[k]! * lengthM;
      phase[k] = phase[k]! + beta[k]! * lengthM;
    }
  }
  return { attenuation, phase };
}
