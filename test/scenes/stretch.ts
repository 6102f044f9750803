/** Wet stretches and pieces of the wrong cable. */
import { type CableFigures, fourierResolutionM, tableLossDb } from './coax-medium.ts';
import type { Draws } from './draws.ts';
import type { Recipe } from './recipe.ts';
import { jointDistances, type RunStretch } from './run.ts';

/**
 * Water in the dielectric: loss that is linear in frequency times `lossFactor`, permittivity times
 * `permittivityFactor`, so that impedance and velocity fall by its root.
 *
 * @source The `wet` fault of design section 8 (k2 and er factors).
 */
export function wetFigures(
  sound: CableFigures,
  lossFactor: number,
  permittivityFactor: number,
  share: number,
): CableFigures {
  const root = Math.sqrt(1 + (permittivityFactor - 1) * share);
  return {
    z0Ohm: sound.z0Ohm / root,
    velocityFactor: sound.velocityFactor / root,
    k1: sound.k1,
    k2: sound.k2 * (1 + (lossFactor - 1) * share),
  };
}

/** Puts a stretch of 2–30 m (wet) or 1–10 m (wrong cable) into the run; null when nothing is long enough. */
export function drawStretch(recipe: Recipe, kind: 'wet' | 'wrong-cable', draws: Draws): Recipe | null {
  const stretch = kind === 'wet' ? drawWet(recipe, draws) : drawWrongCable(recipe, draws);
  return stretch && { ...recipe, run: { ...recipe.run, stretches: [stretch] } };
}

/** One in five wet lines has a whole wet jumper; in the others the water lies inside a longer section. */
function drawWet(recipe: Recipe, draws: Draws): RunStretch | null {
  const place = draws.chance(0.2) ? jumperPlace(recipe, draws) : innerPlace(recipe, draws, [2, 30]);
  if (place === null) return null;
  const { frequencyHz } = recipe.plan;
  const centreHz = (frequencyHz[0]! + frequencyHz.at(-1)!) / 2;
  const sound = recipe.run.sections[place.section]!.figures;
  const dielectricDb = tableLossDb({ ...sound, k1: 0 }, place.toM - place.fromM, centreHz);
  const lossFactor = 1 + draws.logUniform(0.4, 3) / dielectricDb;
  const permittivityFactor = draws.uniform(1.01, 1.06);
  return {
    kind: 'wet',
    fromM: place.fromM,
    toM: place.toM,
    rampM: place.inner ? Math.min((place.toM - place.fromM) / 4, draws.uniform(0.05, 0.6)) : 0,
    figures: (figures, share) => wetFigures(figures, lossFactor, permittivityFactor, share),
  };
}

function drawWrongCable(recipe: Recipe, draws: Draws): RunStretch | null {
  const place = innerPlace(recipe, draws, [1, 10]);
  if (place === null) return null;
  const wrong: CableFigures = draws.pick([
    { z0Ohm: 75, velocityFactor: 0.66, k1: 0.62047, k2: 0.003673 },
    { z0Ohm: 75, velocityFactor: 0.83, k1: 0.68359, k2: 0 },
  ]);
  const figures = { ...wrong, z0Ohm: wrong.z0Ohm + draws.uniform(-1.5, 1.5) };
  return { kind: 'wrong-cable', fromM: place.fromM, toM: place.toM, rampM: 0, figures: () => figures };
}

type Place = {
  readonly fromM: number;
  readonly toM: number;
  readonly section: number;
  readonly inner: boolean;
};

/** Inside one section, clear of its joints by 1 m and three resolutions, at most eight tenths of it. */
function innerPlace(recipe: Recipe, draws: Draws, rangeM: readonly [number, number]): Place | null {
  const joints = jointDistances(recipe.run.sections);
  const { sections } = recipe.run;
  const section = sections.reduce((best, s, i) => (s.lengthM > sections[best]!.lengthM ? i : best), 0);
  const margin = Math.max(1, 3 * fourierResolutionM(sections[section]!.figures, recipe.plan.frequencyHz));
  const roomM = Math.min(sections[section]!.lengthM * 0.8, sections[section]!.lengthM - 2 * margin);
  const [shortest, longest] = [Math.max(rangeM[0], margin), Math.min(rangeM[1], roomM)];
  if (longest <= shortest) return null;
  const lengthM = draws.logUniform(shortest, longest);
  const fromM = draws.uniform(joints[section]! + margin, joints[section + 1]! - margin - lengthM);
  return { fromM, toM: fromM + lengthM, section, inner: true };
}

/** A whole jumper that isn't the one at the port. */
function jumperPlace(recipe: Recipe, draws: Draws): Place | null {
  const joints = jointDistances(recipe.run.sections);
  const jumpers = recipe.run.sections
    .map((_, i) => i)
    .filter((i) => i > 0 && recipe.run.sections[i]!.lengthM < 8 && recipe.run.sections[i]!.lengthM >= 1.5);
  if (jumpers.length === 0) return null;
  const section = draws.pick(jumpers);
  return { fromM: joints[section]!, toM: joints[section + 1]!, section, inner: false };
}
