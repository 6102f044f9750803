/** Where a scene's faults go: within cables clear of joints, or at joints where they can be seen. */

import { sectionMedia } from './build-scene.ts';
import { fourierResolutionM } from './coax-medium.ts';
import type { Draws } from './draws.ts';
import {
  drawJointFault,
  type Fault,
  faultOfLevel,
  LUMPED_KINDS,
  type LumpedKind,
  lossUpTo,
} from './fault.ts';
import type { Recipe } from './recipe.ts';
import { jointDistances, type PlacedFault } from './run.ts';

/** A stretch of cable in which a fault may lie. */
type Room = { readonly fromM: number; readonly toM: number };

/** Fourier resolution in the section at a distance, m. */
export function resolutionAt(recipe: Recipe, distanceM: number): number {
  const { sections } = recipe.run;
  const joints = jointDistances(sections);
  const index = Math.max(
    0,
    joints.findLastIndex((jointM, j) => jointM <= distanceM && j < sections.length),
  );
  return fourierResolutionM(sections[index]!.figures, recipe.plan.frequencyHz);
}

/** Parts of the sections clear of joints and end by 1.5 resolutions and 0.5 m, and of the port by 1 m. */
function rooms(recipe: Recipe): Room[] {
  const joints = jointDistances(recipe.run.sections);
  return recipe.run.sections.flatMap((section, s) => {
    const margin = Math.max(0.5, 1.5 * fourierResolutionM(section.figures, recipe.plan.frequencyHz));
    const fromM = Math.max(joints[s]! + margin, 1);
    const toM = joints[s + 1]! - margin;
    return toM - fromM > 0.2 ? [{ fromM, toM }] : [];
  });
}

/** Draws a distance inside a cable, with `spanM` free after it; null when no section has the room. */
export function drawCableDistance(
  recipe: Recipe,
  draws: Draws,
  options: { readonly afterM?: number; readonly beforeM?: number; readonly spanM?: number } = {},
): number | null {
  const { afterM = 0, beforeM = Number.POSITIVE_INFINITY, spanM = 0 } = options;
  const fitting = rooms(recipe)
    .map(({ fromM, toM }) => ({ fromM: Math.max(fromM, afterM), toM: Math.min(toM, beforeM) - spanM }))
    .filter(({ fromM, toM }) => toM > fromM);
  const total = fitting.reduce((sum, { fromM, toM }) => sum + toM - fromM, 0);
  if (total <= 0) return null;
  let left = draws.uniform(0, total);
  for (const { fromM, toM } of fitting) {
    if (left <= toM - fromM) return fromM + left;
    left -= toM - fromM;
  }
  return fitting.at(-1)!.toM;
}

/**
 * Joints, counted from 1, at which a fault shows by itself: not the one at the port, under the calibration's residue, and
 * not the last one, which a sweep from one side can't part from what it feeds.
 */
export function visibleJoints(recipe: Recipe): number[] {
  return Array.from({ length: Math.max(0, recipe.run.sections.length - 1) }, (_, i) => i + 2);
}

/** The joint before a load or antenna; none before an open or short, where a fault carries no current or no voltage. */
export function lastJoint(recipe: Recipe): number[] {
  const bareEnd = recipe.run.end.kind === 'open' || recipe.run.end.kind === 'short';
  return bareEnd ? [] : [recipe.run.sections.length + 1];
}

/** A lumped fault inside a cable that looks `levelDb` large from the port. */
export function faultInCable(
  recipe: Recipe,
  kind: LumpedKind,
  levelDb: number,
  distanceM: number,
): PlacedFault {
  const { frequencyHz } = recipe.plan;
  const loss = lossUpTo(distanceM, sectionMedia(recipe.run, frequencyHz));
  return {
    fault: faultOfLevel(kind, levelDb, frequencyHz, loss),
    distanceM,
    joint: null,
    half: 'near',
  };
}

/** A bad joint; null when the run has none where it would show. */
export function faultAtJoint(
  recipe: Recipe,
  draws: Draws,
  fault?: Fault,
  joints: readonly number[] = visibleJoints(recipe),
): PlacedFault | null {
  if (joints.length === 0) return null;
  const joint = draws.pick(joints);
  return {
    fault: fault ?? drawJointFault(draws.pick(LUMPED_KINDS), draws, recipe.plan.frequencyHz),
    distanceM: jointDistances(recipe.run.sections)[joint - 1]!,
    joint,
    half: draws.pick(['near', 'far']),
  };
}

/** The recipe with these faults. */
export function withFaults(recipe: Recipe, faults: readonly PlacedFault[]): Recipe {
  return { ...recipe, run: { ...recipe.run, faults } };
}
