/**
 * A line as it was built, not as it was drawn: cable whose impedance wanders, connectors that reflect a little,
 * samples that differ from their type. All of it drawn from one seed, and none of it a fault.
 *
 * The figures are common practice for sound lines; they make simulated sweeps look like the field.
 */

import { type GuideSection, hasGuide, type Line, type Section } from '../line/line.ts';
import { sectionMedium } from '../line/medium.ts';
import { gammaOfReturnLoss } from '../line/reflection.ts';
import { createRandom, type Random } from '../numerics/random.ts';

/** One slab of a section: length and impedance against its type. */
export type Slab = { readonly lengthM: number; readonly ratio: number };

export type SectionAsBuilt = {
  /** Velocity factor (of a guide: width), impedance and losses of this sample over those of its type. */
  readonly velocity: number;
  readonly impedance: number;
  readonly loss: number;
  /** From the port's side; the lengths add up to the section's. */
  readonly slabs: readonly Slab[];
};

/** A connector or flange as L/2 – C – L/2, both as times in the line's own impedance (L/z0 and C·z0), s. */
export type JointAsBuilt = { readonly inductiveS: number; readonly capacitiveS: number };

export type AsBuilt = {
  readonly sections: readonly SectionAsBuilt[];
  /** One more than sections. */
  readonly joints: readonly JointAsBuilt[];
  /** Stray reactance of the end, s: fringe of an open, inductance of a short. */
  readonly endStrayS: number;
};

const SLAB_M = [0.05, 0.25] as const;
/** Structural return loss of the whole run, dB, RMS of the band: a short piece of the same cable has less. */
const STRUCTURAL_DB = [35, 45] as const;
/** The same of the guides of a run: drawn tube is more even than cable. */
const GUIDE_STRUCTURAL_DB = [45, 55] as const;
/** Return loss of a sound connector at the top of the band, dB. */
const JOINT_DB = [30, 40] as const;
/** The same of two flanges. */
const FLANGE_DB = [36, 46] as const;
/** 1σ of a sample against its type. */
const VELOCITY_SPREAD = 0.002;
/** Tubes of one lot share a die: the same deviation of the width, and hardly one of their own. */
const GUIDE_LOT_SPREAD = 0.0005;
const GUIDE_WIDTH_SPREAD = 0.00003;
const IMPEDANCE_SPREAD = 0.006;
const LOSS_SPREAD = 0.02;
/** Fringe capacitance of a cut 50 Ω line is some 0.05 pF, a soldered short some 0.1 nH: both about 2 ps. */
const END_STRAY_S = [1e-12, 3e-12] as const;
/** A plate across a flange is a short to a hundredth of that. */
const GUIDE_END_STRAY = 0.01;
/** Frequencies at which loss is looked at when the ripple is scaled. */
const RIPPLE_POINTS = 16;

/** The ideal line: exactly its description. */
export function asDrawn(line: Line): AsBuilt {
  return {
    sections: line.sections.map((section) => ({
      velocity: 1,
      impedance: 1,
      loss: 1,
      slabs: [{ lengthM: section.lengthM ?? 0, ratio: 1 }],
    })),
    joints: Array.from({ length: line.sections.length + 1 }, () => ({ inductiveS: 0, capacitiveS: 0 })),
    endStrayS: 0,
  };
}

/**
 * Draws a sound line.
 *
 * @param line Every length known.
 * @param band Over which ripple and connectors are judged.
 * @param seed Same seed and line, same line as built.
 */
export function drawAsBuilt(
  line: Line,
  band: { readonly startHz: number; readonly stopHz: number },
  seed: number,
): AsBuilt {
  const random = createRandom(seed);
  const lots = new Map<string, number>();
  const drawn = line.sections.map((section) => ({
    section,
    velocity:
      section.type === 'guide' ? drawWidth(section, lots, random) : 1 + VELOCITY_SPREAD * random.normal(),
    impedance: 1 + IMPEDANCE_SPREAD * random.normal(),
    loss: 1 + LOSS_SPREAD * random.normal(),
    shapes: section.type === 'device' ? [] : drawShapes(section.lengthM ?? 0, random),
  }));
  const rippleOf = (type: Section['type'], returnLossDb: number): number => {
    const alike = drawn.filter(({ section }) => section.type === type);
    return rippleScale(alike, returnLossDb, band, line.temperatureC);
  };
  const scales = {
    coax: rippleOf('coax', between(STRUCTURAL_DB, random)),
    guide: hasGuide(line) ? rippleOf('guide', between(GUIDE_STRUCTURAL_DB, random)) : 0,
  };
  const sections = drawn.map(
    ({ section, velocity, impedance, loss, shapes }): SectionAsBuilt =>
      section.type === 'device'
        ? { velocity: 1, impedance: 1, loss: 1, slabs: [{ lengthM: section.lengthM, ratio: 1 }] }
        : {
            velocity,
            impedance,
            loss,
            slabs: shapes.map(({ lengthM, shape }) => ({
              lengthM,
              ratio: Math.exp(scales[section.type] * shape),
            })),
          },
  );
  const joints = Array.from({ length: sections.length + 1 }, (_, i) => {
    const described = i === 0 ? null : (line.sections[i - 1]?.jointAfter.returnLossDb ?? null);
    const flanges = isGuided(line, i - 1) && isGuided(line, i);
    return drawJoint(described ?? between(flanges ? FLANGE_DB : JOINT_DB, random), band.stopHz, random);
  });
  const stray = line.sections.at(-1)?.type === 'guide' ? GUIDE_END_STRAY : 1;
  return { sections, joints, endStrayS: stray * between(END_STRAY_S, random) };
}

/** True on a guide, and beyond either end of a line, where what it is joined to has a flange too. */
function isGuided(line: Line, section: number): boolean {
  return (line.sections[section]?.type ?? 'guide') === 'guide';
}

/** Width of a tube over that of its type. */
function drawWidth(section: GuideSection, lots: Map<string, number>, random: Random): number {
  const { id } = section.guide;
  if (!lots.has(id)) lots.set(id, 1 + GUIDE_LOT_SPREAD * random.normal());
  return lots.get(id)! + GUIDE_WIDTH_SPREAD * random.normal();
}

/** A slab before its ripple is scaled. */
type Shape = { readonly lengthM: number; readonly shape: number };

/**
 * Slabs whose impedance deviates by a heavy-tailed (double exponential) draw, as real cable does: mostly very little,
 * now and then a lot.
 */
function drawShapes(lengthM: number, random: Random): Shape[] {
  const shapes: Shape[] = [];
  for (let left = lengthM; left > 0; ) {
    const wanted = between(SLAB_M, random);
    const slabM = left - wanted < SLAB_M[0] ? left : wanted;
    shapes.push({ lengthM: slabM, shape: doubleExponential(random) });
    left -= slabM;
  }
  return shapes;
}

/**
 * The factor on all shapes of a run with which their reflections, added at random phase through the loss before them,
 * have this return loss.
 */
function rippleScale(
  sections: readonly { readonly section: Section; readonly shapes: readonly Shape[] }[],
  returnLossDb: number,
  band: { readonly startHz: number; readonly stopHz: number },
  temperatureC: number,
): number {
  const frequencyHz = Float64Array.from(
    { length: RIPPLE_POINTS },
    (_, i) => band.startHz + ((band.stopHz - band.startHz) * (i + 0.5)) / RIPPLE_POINTS,
  );
  const passedNp = new Float64Array(RIPPLE_POINTS);
  let energy = 0;
  const addStep = (step: number): void => {
    for (const np of passedNp) energy += ((step / 2) ** 2 * Math.exp(-4 * np)) / RIPPLE_POINTS;
  };
  for (const { section, shapes } of sections) {
    // What a guide or device is matched to does not matter here: its impedance is not looked at.
    const alpha = sectionMedium(section, frequencyHz, { temperatureC, z0Ohm: 50 }).gamma.re;
    let before = 0;
    for (const { lengthM, shape } of shapes) {
      addStep(shape - before);
      before = shape;
      for (let k = 0; k < RIPPLE_POINTS; k++) passedNp[k]! += alpha[k]! * lengthM;
    }
    addStep(-before);
  }
  return energy > 0 ? gammaOfReturnLoss(returnLossDb) / Math.sqrt(energy) : 0;
}

/** A connector whose inductance and capacitance partly cancel; what is left has the given return loss at the top. */
function drawJoint(returnLossDb: number, topHz: number, random: Random): JointAsBuilt {
  // |Γ| = ω·|L/z0 − C·z0|/2 for a small L/2 – C – L/2.
  const net = (2 * gammaOfReturnLoss(returnLossDb)) / (2 * Math.PI * topHz);
  const cancelled = net * random.uniform();
  return random.uniform() < 0.5
    ? { inductiveS: net + cancelled, capacitiveS: cancelled }
    : { inductiveS: cancelled, capacitiveS: net + cancelled };
}

/** Mean 0, standard deviation 1. */
function doubleExponential(random: Random): number {
  const u = random.uniform() - 0.5;
  return (-Math.sign(u) * Math.log(1 - 2 * Math.abs(u))) / Math.SQRT2;
}

function between(range: readonly [number, number], random: Random): number {
  return range[0] + (range[1] - range[0]) * random.uniform();
}
