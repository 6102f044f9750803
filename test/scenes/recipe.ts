/** Recipe of a scene before it is worked out: the true run, what the description says, and how it is swept. */
import { CABLE_FIGURES, type CableId, JUMPER_CABLES, MAIN_CABLES } from './cable-figures.ts';
import { type CableFigures, tableLossDb } from './coax-medium.ts';
import { drawConnector } from './connector.ts';
import type { Draws } from './draws.ts';
import { drawResidue, type Residue } from './instrument.ts';
import type { Ripple, RippleMeasure } from './ripple.ts';
import { jointDistances, type TrueRun, type TrueSection } from './run.ts';
import { drawPlan, PLAN_BANDS, type PlanName, planReaches, type SweepPlan } from './sweep-plan.ts';
import { drawEnd, type EndKind } from './termination.ts';

export type Recipe = {
  readonly run: TrueRun;
  readonly plan: SweepPlan;
  readonly ripple: Ripple | null;
  readonly residue: Residue;
  readonly noiseDb: number;
  readonly carriers: boolean;
  /** What the line file says of the temperature; null when it says nothing. */
  readonly describedTemperatureC: number | null;
  readonly describedEnd: EndKind | 'unknown';
  readonly lineDescribed: boolean;
};

export type RunShape = 'site' | 'single' | 'two' | 'long';

/** What a suite asks of the healthy scene that it starts from. */
export type RecipeOptions = {
  readonly plans: readonly PlanName[];
  readonly shapes: readonly RunShape[];
  readonly ends: readonly EndKind[];
  readonly rippleMeasure: RippleMeasure;
  /** Share of uneven grids. */
  readonly unevenShare: number;
  /** Relative error of one section's described length; 0 for exact. */
  readonly lengthError: number;
  /** Share of line files that don't give the temperature. */
  readonly noTemperatureShare: number;
  readonly shortestMainM: number;
};

export const USUAL: RecipeOptions = {
  plans: ['wide', 'wide', 'wide', 'band-limited', 'narrow-high', 'narrow-low'],
  shapes: ['site', 'site', 'site', 'site', 'single', 'single', 'two', 'long'],
  ends: ['antenna', 'antenna', 'load', 'open', 'short'],
  rippleMeasure: 'worst',
  unevenShare: 0.12,
  lengthError: 0,
  noTemperatureShare: 0.3,
  shortestMainM: 6,
};

/** A crew doesn't sweep a line that swallows the sweep: one-way loss at band centre stays below this, dB. */
const MOST_LOSS_DB = 8;

/** Draws a line without faults, its true figures ±1 % velocity, ±1 Ω, ±5 % loss off the table. */
export function drawHealthy(draws: Draws, options: RecipeOptions): Recipe {
  const planName = draws.pick(options.plans);
  const described = drawDescribed(draws, planName, options);
  const sections = makeTrue(described, draws, options);
  const lengthM = jointDistances(sections).at(-1)!;
  const slowest = sections
    .map((s) => s.figures)
    .reduce((a, b) => (a.velocityFactor < b.velocityFactor ? a : b));
  const plan = drawPlan(planName, draws, slowest, lengthM, options.unevenShare);
  const temperatureC = draws.uniform(-15, 40);
  const endKind = draws.pick(options.ends);
  const noTemperature = draws.chance(options.noTemperatureShare);
  return {
    run: {
      sections,
      joints: Array.from({ length: sections.length + 1 }, () =>
        drawConnector(draws, draws.uniform(28, 45), plan.frequencyHz),
      ),
      faults: [],
      stretches: [],
      temperatureC: noTemperature ? Math.max(0, temperatureC) : temperatureC,
      end: drawEnd(endKind, draws, plan.frequencyHz),
    },
    plan,
    ripple: { returnLossDb: draws.uniform(35, 45), measure: options.rippleMeasure },
    residue: drawResidue(draws),
    noiseDb: -draws.uniform(60, 80),
    carriers: endKind === 'antenna' && draws.chance(0.25),
    describedTemperatureC: noTemperature ? null : Math.round(temperatureC + draws.uniform(-3, 3)),
    describedEnd: endKind,
    lineDescribed: true,
  };
}

type Described = { readonly cable: CableId; readonly lengthM: number; readonly label: string };

/** Draws a run that the plan can see: no folding, not too lossy. */
function drawDescribed(draws: Draws, plan: PlanName, options: RecipeOptions): Described[] {
  const centreHz = (PLAN_BANDS[plan][0] + PLAN_BANDS[plan][1]) / 2;
  const loss = (sections: readonly Described[]) =>
    sections.reduce((sum, s) => sum + tableLossDb(CABLE_FIGURES[s.cable], s.lengthM, centreHz), 0);
  for (;;) {
    const sections = drawShape(draws.pick(options.shapes), draws, options.shortestMainM);
    const lengthM = sections.reduce((sum, s) => sum + s.lengthM, 0);
    const slowest = sections
      .map((s): CableFigures => CABLE_FIGURES[s.cable])
      .reduce((a, b) => (a.velocityFactor < b.velocityFactor ? a : b));
    if (loss(sections) <= MOST_LOSS_DB && planReaches(plan, slowest, lengthM)) return sections;
  }
}

function drawShape(shape: RunShape, draws: Draws, shortestMainM: number): Described[] {
  const jumper = (label: string, cable: CableId): Described => ({
    cable,
    lengthM: centimetres(draws.uniform(1, 4)),
    label,
  });
  const main = (longestM: number): Described => ({
    cable: draws.pick(MAIN_CABLES),
    lengthM: centimetres(draws.logUniform(shortestMainM, longestM)),
    label: 'main run',
  });
  const jumperCable = draws.pick(JUMPER_CABLES);
  switch (shape) {
    case 'single':
      return [main(90)];
    case 'two':
      return draws.chance(0.5)
        ? [jumper('bottom jumper', jumperCable), main(80)]
        : [main(80), jumper('top jumper', jumperCable)];
    case 'site':
      return [jumper('bottom jumper', jumperCable), main(90), jumper('top jumper', jumperCable)];
    case 'long': {
      const cable = draws.pick(MAIN_CABLES);
      const lengths = Array.from({ length: draws.integer(4, 12) }, () =>
        centimetres(draws.logUniform(4, 60)),
      );
      return lengths.map((lengthM, i) => ({ cable, lengthM, label: `run ${i + 1}` }));
    }
  }
}

/** Gives each described section a true piece of cable. */
function makeTrue(described: readonly Described[], draws: Draws, options: RecipeOptions): TrueSection[] {
  const commonLoss = 1 + draws.uniform(-0.04, 0.04);
  const wrong = draws.integer(0, described.length - 1);
  const error = options.lengthError * (draws.chance(0.5) ? 1 : -1);
  return described.map(({ cable, lengthM, label }, s) => ({
    cable,
    label,
    figures: strayed(CABLE_FIGURES[cable], commonLoss, draws),
    lengthM: s === wrong ? centimetres(lengthM * (1 + error)) : lengthM,
    describedLengthM: lengthM,
    inline: draws.chance(0.2),
  }));
}

function strayed(table: CableFigures, commonLoss: number, draws: Draws): CableFigures {
  const loss = commonLoss * (1 + draws.uniform(-0.01, 0.01));
  return {
    z0Ohm: table.z0Ohm + draws.uniform(-1, 1),
    velocityFactor: table.velocityFactor * (1 + draws.uniform(-0.01, 0.01)),
    k1: table.k1 * loss,
    k2: table.k2 * loss,
  };
}

function centimetres(lengthM: number): number {
  return Math.round(lengthM * 100) / 100;
}
