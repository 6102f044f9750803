/**
 * How the model's distances, which rest on velocity factors, become distances along the cable as it was laid.
 *
 * An error of velocity stretches the whole picture. Where the line ends about where its description says, the described
 * lengths are the better tape: every section is stretched to its own. Where it does not, the velocity factor is.
 */
import { describedLengthM, type Line } from '../line/line.ts';
import type { Notice } from '../outcome.ts';
import {
  boundaryAt,
  LENGTH_SIGMA_M,
  LENGTH_SIGMA_RELATIVE,
  type LineModel,
  sectionAt,
} from './line-model.ts';

/** A model distance on the physical line. */
export type PhysicalPlace = {
  readonly distanceM: number;
  /** Change of the physical distance per metre of the model distance. */
  readonly perM: number;
  /** The same per metre of each boundary, counted from 0 (the first joint behind the port). */
  readonly perBoundary: ReadonlyMap<number, number>;
  /** What the scale itself is uncertain by, m. */
  readonly sigmaM: number;
};

export type DistanceScale = {
  readonly to: 'description' | 'velocity-factor';
  /** Physical over model distance of the whole line. */
  readonly factor: number;
  /** @param distanceM Model distance. @param atBoundary Set for what stands at that boundary and moves with it. */
  place(distanceM: number, atBoundary: number | null): PhysicalPlace;
  readonly notices: readonly Notice[];
};

/** Measured and described length may always differ by this share. Common practice: velocity factors are good to 1 %. */
const ALWAYS_TRUSTED = 0.011;

/** Share of a difference that stays in doubt: whether it was the velocity factor or the tape. */
const LEFT_IN_DOUBT = 0.3;

/**
 * Decides what the distances are scaled to.
 *
 * @param line As described. @param cut True when the line ends before its description does.
 */
export function createDistanceScale(line: Line, model: LineModel, cut: boolean): DistanceScale {
  const described = describedLengthM(line);
  const measured = boundaryAt(model, model.boundaryM.length);
  const tolerance = velocityTolerance(line);
  const off = described === null ? 0 : measured / described - 1;
  const trusted = Math.abs(off) <= Math.max(ALWAYS_TRUSTED, tolerance);
  if (described !== null && !cut && trusted)
    return scaleToDescription(line, model, LEFT_IN_DOUBT * Math.abs(off));
  const notices = described === null || cut ? [] : [lengthNotice(measured, described, off)];
  return scaleToVelocity(line, model, tolerance, notices);
}

/** Each section stretched to its described length. */
function scaleToDescription(line: Line, model: LineModel, doubt: number): DistanceScale {
  const starts = [0];
  for (const section of line.sections) starts.push(starts.at(-1)! + section.lengthM!);
  const last = model.boundaryM.length;
  return {
    to: 'description',
    factor: starts[last]! / boundaryAt(model, last),
    place(distanceM, atBoundary) {
      const place = placeBetween(line, model, starts, distanceM, atBoundary);
      return { ...place, sigmaM: Math.hypot(place.sigmaM, doubt * distanceM) };
    },
    notices: [],
  };
}

/** Sections that are known whole by their described lengths, the rest by its velocity factor. */
function scaleToVelocity(
  line: Line,
  model: LineModel,
  tolerance: number,
  notices: readonly Notice[],
): DistanceScale {
  const byDescription = notices.length === 0;
  const whole = model.boundaryM.length - 1;
  const starts = [0];
  for (let i = 0; i < whole; i++) starts.push(starts[i]! + (line.sections[i]!.lengthM ?? 0));
  return {
    to: 'velocity-factor',
    factor: 1,
    place(distanceM, atBoundary) {
      const section = sectionAt(model, distanceM);
      if (byDescription && section < whole) return placeBetween(line, model, starts, distanceM, atBoundary);
      const fromM = byDescription ? boundaryAt(model, whole) : 0;
      const baseM = byDescription ? starts[whole]! : 0;
      const perBoundary = new Map<number, number>();
      if (fromM > 0) perBoundary.set(whole - 1, -1);
      if (atBoundary !== null) perBoundary.set(atBoundary - 1, (perBoundary.get(atBoundary - 1) ?? 0) + 1);
      return {
        distanceM: baseM + distanceM - fromM,
        perM: atBoundary === null ? 1 : 0,
        perBoundary,
        sigmaM: Math.hypot(tolerance * (distanceM - fromM), tapeSigmaM(line, whole)),
      };
    },
    notices,
  };
}

/** A place by linear interpolation between the two joints around it. */
function placeBetween(
  line: Line,
  model: LineModel,
  starts: readonly number[],
  distanceM: number,
  atBoundary: number | null,
): PhysicalPlace {
  if (atBoundary !== null)
    return {
      distanceM: starts[atBoundary]!,
      perM: 0,
      perBoundary: new Map(),
      sigmaM: tapeSigmaM(line, atBoundary),
    };
  const section = sectionAt(model, distanceM);
  const fromM = boundaryAt(model, section);
  const span = boundaryAt(model, section + 1) - fromM;
  const stretch = (starts[section + 1]! - starts[section]!) / span;
  const share = (distanceM - fromM) / span;
  const perBoundary = new Map([[section, -share * stretch]]);
  if (section > 0) perBoundary.set(section - 1, -(1 - share) * stretch);
  return {
    distanceM: starts[section]! + (distanceM - fromM) * stretch,
    perM: stretch,
    perBoundary,
    sigmaM: Math.hypot(tapeSigmaM(line, section), share * sectionSigmaM(line, section)),
  };
}

/** Uncertainty of the described distance to a boundary, m. */
function tapeSigmaM(line: Line, boundary: number): number {
  let variance = 0;
  for (let i = 0; i < boundary; i++) variance += sectionSigmaM(line, i) ** 2;
  return Math.sqrt(variance);
}

function sectionSigmaM(line: Line, section: number): number {
  return LENGTH_SIGMA_M / 3 + LENGTH_SIGMA_RELATIVE * 0.5 * (line.sections[section]?.lengthM ?? 0);
}

/** Relative velocity tolerance of the run, weighted by length. */
function velocityTolerance(line: Line): number {
  let weighted = 0;
  let total = 0;
  for (const section of line.sections) {
    if (section.type !== 'coax') continue;
    const length = section.lengthM ?? 1;
    weighted += (section.cable.velocityFactorTolerance / section.cable.velocityFactor) * length;
    total += length;
  }
  return total > 0 ? weighted / total : 0.01;
}

/** Says that a line measures other than it is described. @param off Measured over described, minus 1. */
export function lengthNotice(measuredM: number, describedM: number, off: number): Notice {
  return {
    code: 'length-differs',
    what:
      `the line measures ${measuredM.toFixed(2)} m by its velocity factor but is described as ` +
      `${describedM.toFixed(2)} m (${off > 0 ? '+' : ''}${(100 * off).toFixed(1)} %): a length or the velocity factor ` +
      'is wrong; distances follow the velocity factor',
  };
}
