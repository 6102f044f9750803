/** Two sweeps of one drawn line, some months apart: other weather, re-torqued connectors, often a change at a place. */

import { sectionMedia, trueReflection } from './build-scene.ts';
import { CABLE_FIGURES } from './cable-figures.ts';
import { unambiguousM } from './coax-medium.ts';
import type { Connector, ConnectorHalf } from './connector.ts';
import { type Draws, seededDraws } from './draws.ts';
import {
  apparentReturnLossDb,
  FAULT_UNITS,
  type Fault,
  LUMPED_KINDS,
  type LumpedKind,
  lossUpTo,
} from './fault.ts';
import { addCarriers, addNoise, addResidue, drawResidue } from './instrument.ts';
import { drawCableDistance, resolutionAt, visibleJoints } from './place-fault.ts';
import { drawHealthy, type Recipe, USUAL } from './recipe.ts';
import { jointDistances, type PlacedFault } from './run.ts';
import { evenGrid } from './sweep-plan.ts';

export type TrueChange = {
  readonly distanceM: number;
  readonly kind: LumpedKind;
  readonly value: number;
  readonly unit: string;
  /** Joint it sits at, counted from 1; null inside a section. */
  readonly joint: number | null;
  /** RMS over the band as seen from the port, dB, negative. */
  readonly levelDb: number;
};

export type ChangePair = {
  readonly seed: number;
  readonly index: number;
  readonly beforeText: string;
  readonly afterText: string;
  readonly lineText: string;
  readonly truth: {
    readonly change: TrueChange | null;
    /** By how much the whole line has grown in delay, parts per million. */
    readonly stretchPpm: number;
    /** One way at the middle of the common band, the change itself not counted, dB. */
    readonly lossChangeDb: number;
    readonly plan: string;
    readonly points: readonly [number, number];
    readonly end: string;
    readonly resolutionM: number;
    readonly lengthM: number;
    readonly swingC: number;
    readonly grid: GridChange;
    readonly even: boolean;
  };
};

/** Share of pairs with a change, and of those at a joint. */
const CHANGED = 0.65;
const AT_JOINT = 0.2;

/** Largest swing of temperature between the two sweeps, °C, and the weather there is. */
const LARGEST_SWING_C = 40;
const COLDEST_C = -25;
const HOTTEST_C = 55;

/** How delay grows with temperature, ppm/°C, and how far each section is off that of the line. From memory. */
const STRETCH_PPM_PER_C = [5, 15] as const;
const SECTION_STRAY = 0.15;

/** A joint is opened between the sweeps this often; how far each of its parts then moves. Common practice. */
const RE_TORQUED = 0.5;
const RE_TORQUE_SIGMA = 0.12;

/** How the second sweep is set: as the first, or with other points over the band, or other ends of it. */
export type GridChange = 'same' | 'points' | 'start' | 'stop';

/** Share of pairs whose second sweep is set otherwise. */
const OTHER_GRID = 0.2;

/**
 * One pair: the same seed and index give the same texts, character for character.
 *
 * @param otherGridShare Share of pairs whose second sweep is set otherwise; uneven sweeps are all set alike.
 */
export function drawChangePair(seed: number, index: number, otherGridShare = OTHER_GRID): ChangePair {
  for (let attempt = 0; ; attempt++) {
    const draws = seededDraws('change', seed, index, attempt);
    const before = drawHealthy(draws, USUAL);
    const pair = drawAfter(before, draws, otherGridShare);
    if (pair !== null) return writePair(before, pair, seed, index);
  }
}

type After = {
  readonly recipe: Recipe;
  readonly grid: GridChange;
  readonly stretches: readonly number[];
  readonly change: PlacedFault | null;
};

function drawAfter(before: Recipe, draws: Draws, otherGridShare: number): After | null {
  const swingC = draws.uniform(-LARGEST_SWING_C, LARGEST_SWING_C);
  const temperatureC = Math.max(COLDEST_C, Math.min(HOTTEST_C, before.run.temperatureC + swingC));
  const common = (temperatureC - before.run.temperatureC) * draws.uniform(...STRETCH_PPM_PER_C) * 1e-6;
  const stretches = before.run.sections.map(
    () => common * (1 + draws.uniform(-SECTION_STRAY, SECTION_STRAY)),
  );
  const joints = before.run.joints.map((joint, j) =>
    j === 0 || draws.chance(RE_TORQUED) ? reTorqued(joint, draws) : joint,
  );
  const grid = draws.chance(otherGridShare)
    ? otherGrid(before, draws)
    : { change: 'same' as const, plan: before.plan };
  if (grid === null) return null;
  const { plan } = grid;
  const unchanged: Recipe = {
    ...before,
    plan,
    residue: drawResidue(draws),
    noiseDb: -draws.uniform(60, 80),
    run: {
      ...before.run,
      temperatureC,
      joints,
      sections: before.run.sections.map((section, s) => ({
        ...section,
        figures: { ...section.figures, velocityFactor: section.figures.velocityFactor / (1 + stretches[s]!) },
      })),
    },
  };
  if (!draws.chance(CHANGED)) return { recipe: unchanged, grid: grid.change, stretches, change: null };
  const change = draws.chance(AT_JOINT) ? jointChange(unchanged, draws) : cableChange(unchanged, draws);
  if (change === null) return null;
  const changed: Recipe = { ...unchanged, run: { ...unchanged.run, faults: [change] } };
  return { recipe: changed, grid: grid.change, stretches, change };
}

function reTorqued(joint: Connector, draws: Draws): Connector {
  const moved = (value: number) => value * Math.max(0, 1 + RE_TORQUE_SIGMA * draws.normal());
  const half = (one: ConnectorHalf): ConnectorHalf => ({
    inductanceH: moved(one.inductanceH),
    capacitanceF: moved(one.capacitanceF),
  });
  return { ...joint, near: half(joint.near), far: half(joint.far) };
}

/** Other points over the same band, or the upper or lower part of it in the same steps; null when it would fold. */
function otherGrid(
  before: Recipe,
  draws: Draws,
): { readonly change: GridChange; readonly plan: Recipe['plan'] } | null {
  const { plan, run } = before;
  if (!plan.even) return { change: 'same', plan };
  const count = plan.frequencyHz.length;
  const change = draws.chance(0.5) ? 'points' : draws.chance(0.5) ? 'start' : 'stop';
  const left = Math.round(count * draws.uniform(0.05, 0.25));
  const frequencyHz = {
    points: () => evenGrid(plan.name, Math.round(count * draws.uniform(0.8, 1.7))),
    start: () => plan.frequencyHz.slice(left),
    stop: () => plan.frequencyHz.slice(0, count - left),
  }[change]();
  const slowest = run.sections.reduce((a, b) =>
    a.figures.velocityFactor < b.figures.velocityFactor ? a : b,
  );
  const lengthM = jointDistances(run.sections).at(-1)!;
  if (unambiguousM(slowest.figures, frequencyHz) < 1.15 * lengthM) return null;
  return { change, plan: { ...plan, frequencyHz } };
}

/** −35 to −60 dB somewhere in the cables. */
function cableChange(recipe: Recipe, draws: Draws): PlacedFault | null {
  const distanceM = drawCableDistance(recipe, draws);
  if (distanceM === null) return null;
  const fault = faultSeenAs(recipe, draws.pick(LUMPED_KINDS), draws.uniform(35, 60), distanceM);
  return { fault, distanceM, joint: null, half: 'near' };
}

/**
 * At a joint between two sections, resistance or leakage larger than what opening and closing it does; as clear of port
 * and end as changes in a cable are. At the port and the end so small a change is as large as the residues of two
 * corrections, −40 to −46 dB of all that comes back.
 */
function jointChange(recipe: Recipe, draws: Draws): PlacedFault | null {
  const places = jointDistances(recipe.run.sections);
  const lengthM = places.at(-1)!;
  const joints = visibleJoints(recipe).filter((joint) => {
    const distanceM = places[joint - 1]!;
    const clearM = Math.max(0.5, 1.5 * resolutionAt(recipe, distanceM));
    return distanceM > Math.max(1, clearM) && distanceM < lengthM - clearM;
  });
  if (joints.length === 0) return null;
  const joint = draws.pick(joints);
  const distanceM = places[joint - 1]!;
  const kind = draws.pick(['series-resistance', 'shunt-leakage'] as const);
  const fault = faultSeenAs(recipe, kind, draws.uniform(35, 45), distanceM);
  return { fault, distanceM, joint, half: draws.pick(['near', 'far']) };
}

/** The size at which a kind looks as large as wanted from the port, however small. */
function faultSeenAs(recipe: Recipe, kind: LumpedKind, wantedDb: number, distanceM: number): Fault {
  const { frequencyHz } = recipe.plan;
  const loss = lossUpTo(distanceM, sectionMedia(recipe.run, frequencyHz));
  let value = kind === 'shunt-leakage' ? 2000 : kind === 'series-resistance' ? 1 : 0.1;
  for (let round = 0; round < 12; round++) {
    const ratio = 10 ** ((apparentReturnLossDb({ kind, value }, frequencyHz, loss) - wantedDb) / 20);
    value *= kind === 'shunt-leakage' ? 1 / ratio : ratio;
  }
  return { kind, value: Number(value.toPrecision(5)) };
}

function writePair(before: Recipe, after: After, seed: number, index: number): ChangePair {
  const sections = before.run.sections;
  const lengthM = jointDistances(sections).at(-1)!;
  const late = after.recipe;
  const [low, high] = [late.plan.frequencyHz[0]!, late.plan.frequencyHz.at(-1)!];
  const middleHz = (low + high) / 2;
  const lossDb = (recipe: Recipe) =>
    sectionMedia(recipe.run, Float64Array.of(middleHz)).reduce(
      (sum, section) => sum + section.medium.gammaRe[0]! * section.lengthM * 8.685_889_638,
      0,
    );
  const delays = sections.map((section) => section.lengthM / section.figures.velocityFactor);
  const delay = delays.reduce((sum, d) => sum + d, 0);
  return {
    seed,
    index,
    beforeText: sweepText(before, seed, index, 'before'),
    afterText: sweepText(late, seed, index, 'after'),
    lineText: lineText(before),
    truth: {
      change: after.change && trueChange(late, after.change),
      stretchPpm: (1e6 * delays.reduce((sum, d, s) => sum + d * after.stretches[s]!, 0)) / delay,
      lossChangeDb: lossDb(late) - lossDb(before),
      plan: before.plan.name,
      points: [before.plan.frequencyHz.length, late.plan.frequencyHz.length],
      end: before.run.end.kind,
      resolutionM: resolutionAt(late, after.change?.distanceM ?? lengthM / 2),
      lengthM,
      swingC: late.run.temperatureC - before.run.temperatureC,
      grid: after.grid,
      even: before.plan.even,
    },
  };
}

function trueChange(recipe: Recipe, placed: PlacedFault): TrueChange {
  const { fault, distanceM, joint } = placed;
  const { frequencyHz } = recipe.plan;
  const loss = lossUpTo(distanceM, sectionMedia(recipe.run, frequencyHz));
  return {
    distanceM,
    kind: fault.kind as LumpedKind,
    value: fault.value ?? Number.NaN,
    unit: FAULT_UNITS[fault.kind] ?? '',
    joint,
    levelDb: -apparentReturnLossDb(fault, frequencyHz, loss),
  };
}

/** The structure of the cable is the same in both sweeps; carriers and noise are not. */
function sweepText(recipe: Recipe, seed: number, index: number, when: string): string {
  const { frequencyHz } = recipe.plan;
  const reflection = trueReflection(recipe, seededDraws('change', seed, index, 'structure'));
  const measured = addResidue(reflection, recipe.residue, frequencyHz);
  const draws = seededDraws('change', seed, index, when);
  if (recipe.carriers) addCarriers(measured, draws);
  addNoise(measured, recipe.noiseDb, draws);
  const rows = Array.from(
    frequencyHz,
    (f, k) => `${f} ${measured.re[k]!.toPrecision(9)} ${measured.im[k]!.toPrecision(9)}`,
  );
  return `! invented pair ${seed}/${index}, ${when}\n# Hz S RI R 50\n${rows.join('\n')}\n`;
}

function lineText(recipe: Recipe): string {
  const sections = recipe.run.sections.map((section) => {
    const table = CABLE_FIGURES[section.cable];
    const sheet = {
      id: `sheet-${section.cable}`,
      z0: table.z0Ohm,
      velocityFactor: table.velocityFactor,
      k1: table.k1,
      k2: table.k2,
    };
    return {
      cable: section.inline ? sheet : section.cable,
      lengthM: section.describedLengthM,
      label: section.label,
    };
  });
  const temperature = recipe.describedTemperatureC;
  return JSON.stringify({
    name: 'pair',
    sections,
    end: recipe.describedEnd,
    ...(temperature === null ? {} : { temperatureC: temperature }),
  });
}
