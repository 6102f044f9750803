/** From a change that was found to one that is reported: distance in metres as scaled, its doubt, and where it lies. */
import { jointName, type Line } from '../line/line.ts';
import type { PureType } from '../locate/probe.ts';
import type { Solution } from '../locate/solution.ts';
import type { FoundChange } from './compare-find.ts';
import type { Change } from './comparison.ts';
import { type LengthWords, placeText } from './place-text.ts';

/** Puts a change into words and scale of the earlier sweep's solution. */
export function placeChange(
  line: Line,
  solution: Solution,
  found: FoundChange,
  resolutionM: number,
  lengthWords: LengthWords,
): Change {
  const distanceM = found.distanceM * solution.distanceScale;
  const section = sectionAtM(line, solution, distanceM);
  const mended = wasThere(solution, found, distanceM, resolutionM);
  return {
    distanceM,
    distanceSigmaM: Math.hypot(
      scaleSigmaM(solution, distanceM),
      Math.max(found.sigmaM, LEAST_SIGMA_SHARE * resolutionM),
    ),
    levelDb: found.levelDb,
    kind: mended ?? found.kind,
    gone: mended !== null,
    joint: found.joint === null ? null : { index: found.joint, name: jointName(line, found.joint) },
    place: placeText(line, { distanceM, jointIndex: found.joint, section }, lengthWords),
  };
}

/** What looks like the coming of a kind when its dual goes. */
const DUALS: Readonly<Record<PureType, PureType>> = {
  'series-resistance': 'shunt-leakage',
  'shunt-leakage': 'series-resistance',
  'series-inductance': 'shunt-capacitance',
  'shunt-capacitance': 'series-inductance',
};

/** An echo must be this large beside the change to be what has gone, dB. */
const AS_LARGE_DB = 4;

/** Kind of the earlier sweep's echo whose going the change is; null where nothing of the kind was there. */
function wasThere(
  { echoes }: Solution,
  found: FoundChange,
  distanceM: number,
  resolutionM: number,
): PureType | null {
  if (found.kind === 'unresolved') return null;
  const dual = DUALS[found.kind];
  const there = echoes.some(
    (echo) =>
      echo.kind === dual &&
      (found.joint === null
        ? Math.abs(echo.distanceM - distanceM) < resolutionM / 2
        : echo.joint?.index === found.joint) &&
      -echo.returnLossDb > found.levelDb - AS_LARGE_DB,
  );
  return there ? dual : null;
}

/** What structure and templates leave in a place, as a share of a resolution. */
const LEAST_SIGMA_SHARE = 0.04;

/** Section that a distance lies in, counted from 0, by where the joints were found. */
export function sectionAtM(line: Line, solution: Solution, distanceM: number): number {
  let section = 0;
  for (const { joint, distanceM: jointM } of solution.echoes)
    if (joint !== null && joint.index <= line.sections.length && jointM <= distanceM)
      section = Math.max(section, joint.index - 1);
  return section;
}

/** How well distances are known there: that of the echoes around it, and 0.2 % of the way to the nearer. */
function scaleSigmaM(solution: Solution, distanceM: number): number {
  let nearest = Number.POSITIVE_INFINITY;
  let sigma = solution.lengthSigmaM;
  for (const echo of [{ distanceM: 0, distanceSigmaM: 0 }, ...solution.echoes]) {
    const apartM = Math.abs(echo.distanceM - distanceM);
    if (apartM >= nearest) continue;
    nearest = apartM;
    sigma = echo.distanceSigmaM;
  }
  return Math.hypot(Math.min(sigma, solution.lengthSigmaM), VELOCITY_STRAY * nearest);
}

/** How far a section's velocity strays from that of the whole line. Common practice: 1 % from type to type. */
const VELOCITY_STRAY = 0.002;
