/** The suites of scenes, named as the design's section 13 names its figures. */
import { buildScene } from './build-scene.ts';
import { CABLE_FIGURES } from './cable-figures.ts';
import { NO_CONNECTOR } from './connector.ts';
import { type Draws, seededDraws } from './draws.ts';
import { LUMPED_KINDS, type LumpedKind } from './fault.ts';
import { guideScene } from './guide-scene.ts';
import { NO_RESIDUE } from './instrument.ts';
import {
  drawCableDistance,
  faultAtJoint,
  faultInCable,
  lastJoint,
  resolutionAt,
  withFaults,
} from './place-fault.ts';
import { drawHealthy, type Recipe, type RecipeOptions, USUAL } from './recipe.ts';
import type { RippleMeasure } from './ripple.ts';
import { jointDistances, type PlacedFault } from './run.ts';
import type { Scene } from './scene.ts';
import { drawStretch } from './stretch.ts';
import { evenGrid } from './sweep-plan.ts';

/** Draws one recipe; null when the drawn line has no room for what the suite needs, and another is drawn. */
type Suite = (draws: Draws, options: RecipeOptions) => Recipe | null;

export const SUITES = {
  single,
  pairs,
  'behind-strong': behindStrong,
  joints,
  'last-joint': lastJointBad,
  healthy: drawHealthy,
  'unknown-length': unknownLength,
  wet: wetOrDry,
  loss,
  'wrong-cable': wrongCable,
  'off-length': offLength,
  'lone-echo': loneEcho,
} as const satisfies Record<string, Suite>;

export type SuiteName = keyof typeof SUITES | 'guide';

export const SUITE_NAMES: readonly SuiteName[] = [
  ...(Object.keys(SUITES) as (keyof typeof SUITES)[]),
  'guide',
];

/** Share of the guide runs with a fault; the others are sound. */
const GUIDE_FAULT_SHARE = 2 / 3;

/**
 * One scene of a suite: the same name, seed and index give the same scene, character for character.
 *
 * @param options.rippleMeasure How the 35–45 dB of structural return loss are read: 'worst' over the band (default)
 *   or 'rms', which makes the structure about 8 dB larger.
 */
export function drawScene(
  suite: SuiteName,
  seed: number,
  index: number,
  options: { readonly rippleMeasure?: RippleMeasure } = {},
): Scene {
  if (suite === 'guide')
    return guideScene({ suite, seed, index }, seededDraws(suite, seed, index), GUIDE_FAULT_SHARE);
  const usual = { ...USUAL, rippleMeasure: options.rippleMeasure ?? USUAL.rippleMeasure };
  for (let attempt = 0; ; attempt++) {
    const recipe = SUITES[suite](seededDraws(suite, seed, index, attempt, 'recipe'), usual);
    if (recipe !== null)
      return buildScene(recipe, { suite, seed, index }, seededDraws(suite, seed, index, 'measurement'));
  }
}

/** One fault: a third weak (34–45 dB as seen from the port), some cuts and shorts, some at joints. */
function single(draws: Draws, options: RecipeOptions): Recipe | null {
  const recipe = drawHealthy(draws, options);
  const fate = draws.uniform(0, 1);
  if (fate < 0.25) {
    const atJoint = faultAtJoint(recipe, draws);
    return atJoint && withFaults(recipe, [atJoint]);
  }
  const distanceM = drawCableDistance(recipe, draws);
  if (distanceM === null) return null;
  if (fate < 0.37) {
    const kind = draws.pick(['open', 'short'] as const);
    return withFaults(recipe, [{ fault: { kind, value: null }, distanceM, joint: null, half: 'near' }]);
  }
  const levelDb = fate < 0.6 ? draws.uniform(34, 45) : draws.uniform(12, 34);
  return withFaults(recipe, [faultInCable(recipe, draws.pick(LUMPED_KINDS), levelDb, distanceM)]);
}

/** Two faults in one run: four in ten 0.5–1 resolution apart, three in ten 1–3, the rest anywhere. */
function pairs(draws: Draws, options: RecipeOptions): Recipe | null {
  const recipe = drawHealthy(draws, options);
  const fate = draws.uniform(0, 1);
  const cells = fate < 0.4 ? draws.uniform(0.5, 1) : fate < 0.7 ? draws.uniform(1, 3) : null;
  const first = drawCableDistance(recipe, draws);
  if (first === null) return null;
  const apartM = cells === null ? null : cells * resolutionAt(recipe, first);
  const near = apartM === null ? first : drawCableDistance(recipe, draws, { spanM: apartM });
  if (near === null) return null;
  const far =
    apartM === null
      ? drawCableDistance(recipe, draws, { afterM: near + 3 * resolutionAt(recipe, near) })
      : near + apartM;
  if (far === null) return null;
  const levelDb = draws.uniform(14, 30);
  const kinds = [draws.pick(LUMPED_KINDS), draws.pick(LUMPED_KINDS)] as const;
  const levels = [levelDb, levelDb + draws.uniform(-6, 6)] as const;
  if (apartM !== null && looksLikeStretch(kinds, levels)) return null;
  return withFaults(recipe, [
    faultInCable(recipe, kinds[0], levels[0], near),
    faultInCable(recipe, kinds[1], levels[1], far),
  ]);
}

/** A resistance and a leak of nearly one size close together reflect just as a stretch of other impedance does. */
function looksLikeStretch(kinds: readonly LumpedKind[], levels: readonly number[]): boolean {
  const real = kinds.includes('series-resistance') && kinds.includes('shunt-leakage');
  return real && Math.abs(levels[0]! - levels[1]!) < 3;
}

/** A weak fault 16–28 dB under a strong one before it; in four of ten a second strong one, for the ghosts. */
function behindStrong(draws: Draws, options: RecipeOptions): Recipe | null {
  const recipe = drawHealthy(draws, { ...options, shortestMainM: 12 });
  const lengthM = jointDistances(recipe.run.sections).at(-1)!;
  const first = drawCableDistance(recipe, draws, { beforeM: lengthM * 0.6 });
  if (first === null) return null;
  const gapM = Math.max(1.5, 3 * resolutionAt(recipe, first));
  const strongDb = draws.uniform(9, 15);
  const faults: PlacedFault[] = [faultInCable(recipe, draws.pick(LUMPED_KINDS), strongDb, first)];
  if (draws.chance(0.4)) {
    const second = drawCableDistance(recipe, draws, { afterM: first + gapM, beforeM: lengthM * 0.7 });
    if (second === null) return null;
    faults.push(faultInCable(recipe, draws.pick(LUMPED_KINDS), strongDb + draws.uniform(2, 6), second));
  }
  const before = faults.at(-1)!.distanceM;
  const weak = drawCableDistance(recipe, draws, { afterM: before + gapM });
  if (weak === null || faults.some((f) => Math.abs(2 * before - f.distanceM - weak) < gapM)) return null;
  const levelDb = Math.min(44, strongDb + draws.uniform(16, 28));
  return withFaults(recipe, [...faults, faultInCable(recipe, draws.pick(LUMPED_KINDS), levelDb, weak)]);
}

/** One bad joint. */
function joints(draws: Draws, options: RecipeOptions): Recipe | null {
  const recipe = drawHealthy(draws, options);
  const atJoint = faultAtJoint(recipe, draws);
  return atJoint && withFaults(recipe, [atJoint]);
}

/** A bad joint right before a load or an antenna. */
function lastJointBad(draws: Draws, options: RecipeOptions): Recipe | null {
  const recipe = drawHealthy(draws, options);
  const atJoint = faultAtJoint(recipe, draws, undefined, lastJoint(recipe));
  return atJoint && withFaults(recipe, [atJoint]);
}

/** One cable of which only the type is known; three in ten with a fault on the way. */
function unknownLength(draws: Draws, options: RecipeOptions): Recipe | null {
  const recipe: Recipe = {
    ...drawHealthy(draws, { ...options, shapes: ['single'], ends: ['open', 'short', 'load', 'antenna'] }),
    describedTemperatureC: null,
    describedEnd: 'unknown',
    lineDescribed: false,
  };
  if (!draws.chance(0.3)) return recipe;
  const distanceM = drawCableDistance(recipe, draws);
  if (distanceM === null) return null;
  return withFaults(recipe, [
    faultInCable(recipe, draws.pick(LUMPED_KINDS), draws.uniform(14, 32), distanceM),
  ]);
}

/** Open or short at the end; half the lines have a wet stretch, the others are dry. */
function wetOrDry(draws: Draws, options: RecipeOptions): Recipe | null {
  const recipe = drawHealthy(draws, { ...options, ends: ['open', 'short'], shortestMainM: 10 });
  if (draws.chance(0.5)) return recipe;
  return drawStretch(recipe, 'wet', draws);
}

/** A healthy line with an open or a short at its end, for the loss check. */
function loss(draws: Draws, options: RecipeOptions): Recipe {
  return drawHealthy(draws, { ...options, ends: ['open', 'short'] });
}

/** A piece of 75 Ω cable in the run. */
function wrongCable(draws: Draws, options: RecipeOptions): Recipe | null {
  const recipe = drawHealthy(draws, { ...options, shortestMainM: 10 });
  return drawStretch(recipe, 'wrong-cable', draws);
}

/** One fault, one section's length described 2 % wrong, temperature mostly unknown. */
function offLength(draws: Draws, options: RecipeOptions): Recipe | null {
  const recipe = drawHealthy(draws, { ...options, lengthError: 0.02, noTemperatureShare: 0.7 });
  const atJoint = draws.chance(0.5) ? faultAtJoint(recipe, draws) : null;
  if (atJoint !== null) return withFaults(recipe, [atJoint]);
  const distanceM = drawCableDistance(recipe, draws);
  if (distanceM === null) return null;
  return withFaults(recipe, [
    faultInCable(recipe, draws.pick(LUMPED_KINDS), draws.uniform(14, 34), distanceM),
  ]);
}

/**
 * One echo in white noise on an otherwise ideal, exactly described line with a matched end: what the Cramér–Rao
 * bound speaks of (references.md section 6).
 */
function loneEcho(draws: Draws, options: RecipeOptions): Recipe | null {
  const drawn = drawHealthy(draws, {
    ...options,
    shapes: ['single'],
    ends: ['load'],
    unevenShare: 0,
    noTemperatureShare: 0,
    plans: ['band-limited', 'narrow-high', 'narrow-low'],
  });
  const [section] = drawn.run.sections;
  if (section === undefined) return null;
  const count = draws.pick([401, 801, 1001]);
  const exact: Recipe = {
    ...drawn,
    plan: { ...drawn.plan, frequencyHz: evenGrid(drawn.plan.name, count) },
    run: {
      ...drawn.run,
      sections: [{ ...section, figures: CABLE_FIGURES[section.cable] }],
      joints: [NO_CONNECTOR, NO_CONNECTOR],
      temperatureC: 20,
      end: { kind: 'load', resistanceOhm: 50, inductanceH: 0, capacitanceF: 0 },
    },
    ripple: null,
    residue: NO_RESIDUE,
    noiseDb: -draws.uniform(50, 65),
    carriers: false,
    describedTemperatureC: 20,
  };
  const distanceM = drawCableDistance(exact, draws);
  if (distanceM === null) return null;
  return withFaults(exact, [faultInCable(exact, draws.pick(LUMPED_KINDS), draws.uniform(16, 28), distanceM)]);
}
