/** Works a recipe out into a scene: sweep text, line text, truth. */
import { CABLE_FIGURES } from './cable-figures.ts';
import {
  type CableFigures,
  coaxMedium,
  DB_IN_NEPER,
  fourierResolutionM,
  tableLossDb,
  unambiguousM,
} from './coax-medium.ts';
import type { Draws } from './draws.ts';
import { apparentReturnLossDb, FAULT_UNITS, lossUpTo } from './fault.ts';
import { addCarriers, addNoise, addResidue } from './instrument.ts';
import { chainToPort, reflectionAtPort, type Spectrum } from './ladder.ts';
import type { Recipe } from './recipe.ts';
import { jointDistances, type LaidRun, layRun, type TrueRun } from './run.ts';
import type { Scene, TrueFault, TrueStretch } from './scene.ts';
import { terminate } from './termination.ts';
import { PORT_OHM, type SceneName, touchstoneText } from './touchstone-text.ts';

/** Noise-free, residue-free reflection of a recipe's run at the port. */
export function trueReflection(recipe: Recipe, draws: Draws): Spectrum {
  const { frequencyHz } = recipe.plan;
  return reflectionOf(layRun(recipe.run, frequencyHz, recipe.ripple, draws), frequencyHz);
}

function reflectionOf(laid: LaidRun, frequencyHz: Float64Array): Spectrum {
  const port = chainToPort(laid.elements, terminate(laid.end, frequencyHz), frequencyHz);
  return reflectionAtPort(port, PORT_OHM);
}

/** One-way loss at each frequency of all the cable that was laid, each piece matched, dB; connectors have none. */
function cableLossDb(laid: LaidRun, points: number): Float64Array {
  const lossDb = new Float64Array(points);
  for (const element of laid.elements) {
    if (element.type !== 'slab') continue;
    for (let k = 0; k < points; k++) lossDb[k]! += DB_IN_NEPER * element.medium.gammaRe[k]! * element.lengthM;
  }
  return lossDb;
}

/** The whole scene; `draws` feeds the ripple, the noise and the carriers. */
export function buildScene(recipe: Recipe, name: SceneName, draws: Draws): Scene {
  const { frequencyHz } = recipe.plan;
  const { sections } = recipe.run;
  const laid = layRun(recipe.run, frequencyHz, recipe.ripple, draws);
  const measured = addResidue(reflectionOf(laid, frequencyHz), recipe.residue, frequencyHz);
  const interfered = recipe.carriers ? addCarriers(measured, draws) : [];
  addNoise(measured, recipe.noiseDb, draws);
  const longest = sections.reduce((a, b) => (a.lengthM >= b.lengthM ? a : b));
  const jointM = jointDistances(sections);
  return {
    ...name,
    sweepText: touchstoneText(name, frequencyHz, measured),
    lineText: lineText(recipe, name),
    lineDescribed: recipe.lineDescribed,
    truth: {
      faults: trueFaults(recipe),
      stretches: trueStretches(recipe),
      end: recipe.run.end.kind,
      lengthM: jointM.at(-1)!,
      jointM,
      jointReturnLossDb: recipe.run.joints.map((joint) => joint.returnLossDb),
      ghostsM: ghosts(recipe, unambiguousM(longest.figures, frequencyHz)),
      plan: recipe.plan.name,
      points: frequencyHz.length,
      even: recipe.plan.even,
      spanHz: frequencyHz.at(-1)! - frequencyHz[0]!,
      resolutionM: fourierResolutionM(longest.figures, frequencyHz),
      noiseDb: recipe.noiseDb,
      structuralReturnLossDb: recipe.ripple?.returnLossDb ?? null,
      temperatureC: recipe.run.temperatureC,
      cableLossDb: cableLossDb(laid, frequencyHz.length),
      interfered,
    },
  };
}

/** Sections with their media at the swept frequencies, for levels as seen from the port. */
export function sectionMedia(run: TrueRun, frequencyHz: Float64Array) {
  return run.sections.map(({ lengthM, figures }) => ({
    lengthM,
    medium: coaxMedium(figures, run.temperatureC, frequencyHz),
  }));
}

function trueFaults(recipe: Recipe): TrueFault[] {
  const { frequencyHz } = recipe.plan;
  const media = sectionMedia(recipe.run, frequencyHz);
  return recipe.run.faults
    .map(({ fault, distanceM, joint }) => ({
      distanceM,
      kind: fault.kind,
      value: fault.value,
      unit: FAULT_UNITS[fault.kind],
      joint,
      apparentReturnLossDb: apparentReturnLossDb(fault, frequencyHz, lossUpTo(distanceM, media)),
    }))
    .sort((a, b) => a.distanceM - b.distanceM);
}

function trueStretches(recipe: Recipe): TrueStretch[] {
  const { frequencyHz } = recipe.plan;
  const centreHz = (frequencyHz[0]! + frequencyHz.at(-1)!) / 2;
  const joints = jointDistances(recipe.run.sections);
  return recipe.run.stretches.map(({ kind, fromM, toM, rampM, figures }) => {
    const index = joints.findIndex((_, j) => (joints[j + 1] ?? Number.POSITIVE_INFINITY) > fromM + 1e-6);
    const section = recipe.run.sections[index]!;
    // The two ramps together count as one full-effect length of one ramp.
    const lengthM = toM - fromM - rampM;
    const changed = tableLossDb(figures(section.figures, 1), lengthM, centreHz);
    return { kind, fromM, toM, excessLossDb: changed - tableLossDb(section.figures, lengthM, centreHz) };
  });
}

/** First bounces between any two of faults and end, at 2·d2 − d1, folded into the sweep's reach. */
function ghosts(recipe: Recipe, reachM: number): number[] {
  const places = recipe.run.faults.map((placed) => placed.distanceM);
  const cut = recipe.run.faults.filter((p) => p.fault.kind === 'open' || p.fault.kind === 'short');
  if (cut.length === 0) places.push(jointDistances(recipe.run.sections).at(-1)!);
  places.sort((a, b) => a - b);
  const found: number[] = [];
  for (let i = 0; i < places.length; i++)
    for (let j = i + 1; j < places.length; j++) found.push((2 * places[j]! - places[i]!) % reachM);
  return found;
}

/** The line file: what the crew knows. A line of unknown length names its cable and no more. */
function lineText(recipe: Recipe, name: SceneName): string {
  const cableOf = (section: TrueRun['sections'][number]) => {
    const table: CableFigures = CABLE_FIGURES[section.cable];
    if (!section.inline) return section.cable;
    return {
      id: `sheet-${section.cable}`,
      z0: table.z0Ohm,
      velocityFactor: table.velocityFactor,
      k1: table.k1,
      k2: table.k2,
    };
  };
  if (!recipe.lineDescribed)
    return `${JSON.stringify({ sections: recipe.run.sections.map((s) => ({ cable: cableOf(s) })) })}\n`;
  const line = {
    name: `scene ${name.suite} ${name.seed}/${name.index}`,
    sections: recipe.run.sections.map((section) => ({
      cable: cableOf(section),
      lengthM: section.describedLengthM,
      label: section.label,
    })),
    end: recipe.describedEnd,
    ...(recipe.describedTemperatureC === null ? {} : { temperatureC: recipe.describedTemperatureC }),
  };
  return `${JSON.stringify(line, null, 2)}\n`;
}
