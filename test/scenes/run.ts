/** The true run of a scene: sections, connectors, faults and stretches, laid out as a chain of elements. */
import type { CableId } from './cable-figures.ts';
import { type CableFigures, coaxMedium, type Medium } from './coax-medium.ts';
import { type Connector, halfElements, insideElement } from './connector.ts';
import type { Draws } from './draws.ts';
import { type Fault, faultElement } from './fault.ts';
import type { Element } from './ladder.ts';
import { drawSlabs, RIPPLE_BAND_HZ, type Ripple, rippleScale, type Slab } from './ripple.ts';
import type { EndModel } from './termination.ts';

export type TrueSection = {
  readonly cable: CableId;
  readonly label: string;
  /** What this very piece of cable has, off its table's figures. */
  readonly figures: CableFigures;
  readonly lengthM: number;
  readonly describedLengthM: number;
  /** True when the line file spells the cable's figures out instead of naming it. */
  readonly inline: boolean;
};

/** A fault at a place. At a joint, `half` says which half of the connector is bad. */
export type PlacedFault = {
  readonly fault: Fault;
  readonly distanceM: number;
  readonly joint: number | null;
  readonly half: 'near' | 'far';
};

/** A stretch of other cable, or of wet cable; `rampM` at both ends inside it, over which it sets in. */
export type RunStretch = {
  readonly kind: 'wet' | 'wrong-cable';
  readonly fromM: number;
  readonly toM: number;
  readonly rampM: number;
  /** Figures at a share 0..1 of the full effect, from those of the sound cable. */
  readonly figures: (sound: CableFigures, share: number) => CableFigures;
};

export type TrueRun = {
  readonly sections: readonly TrueSection[];
  /** Joints 1 … n+1: one more than sections. */
  readonly joints: readonly Connector[];
  readonly faults: readonly PlacedFault[];
  readonly stretches: readonly RunStretch[];
  readonly temperatureC: number;
  readonly end: EndModel;
};

export type LaidRun = {
  readonly elements: readonly Element[];
  /** The end that the chain reaches: the line's own, or the cut or short before it. */
  readonly end: EndModel;
};

/** Distances of joints 1 … n+1, m. */
export function jointDistances(sections: readonly { readonly lengthM: number }[]): number[] {
  const distances = [0];
  for (const { lengthM } of sections) distances.push(distances.at(-1)! + lengthM);
  return distances;
}

/** A piece of cable between two distances, of one material. */
type Piece = { readonly slab: Slab; readonly fromM: number; readonly figures: CableFigures };

/**
 * Lays the run out: connector halves and what is wrong with them, slabs of cable with ripple and stretches,
 * faults where they are. A cut or a short ends the chain.
 */
export function layRun(
  run: TrueRun,
  frequencyHz: Float64Array,
  ripple: Ripple | null,
  draws: Draws,
): LaidRun {
  const joints = jointDistances(run.sections);
  const pieces = run.sections.map((section, s) => cutSection(run, section, s, joints, draws));
  const scale = ripple === null ? 0 : rippleScale(atRippleBand(pieces.flat(), run.temperatureC), ripple);
  const media = new Map<string, Medium>();
  const mediumOf = (figures: CableFigures): Medium => {
    const key = JSON.stringify(figures);
    const known = media.get(key) ?? coaxMedium(figures, run.temperatureC, frequencyHz);
    media.set(key, known);
    return known;
  };
  const chain: Element[] = [];
  for (let j = 0; j < joints.length; j++) {
    const stop =
      layJoint(run, j, frequencyHz, chain) ?? layPieces(run, pieces[j] ?? [], scale, mediumOf, chain);
    if (stop !== null) return { elements: chain, end: stop };
  }
  return { elements: chain, end: run.end };
}

/** Puts joint j (counted from 0) into the chain; the end that it makes when it is cut or shorted. */
function layJoint(run: TrueRun, j: number, frequencyHz: Float64Array, chain: Element[]): EndModel | null {
  const connector = run.joints[j]!;
  for (const half of ['near', 'far'] as const) {
    chain.push(...halfElements(connector[half]));
    for (const placed of run.faults.filter((p) => p.joint === j + 1 && p.half === half)) {
      const stop = layFault(placed.fault, chain);
      if (stop !== null) return stop;
    }
    if (half === 'near' && connector.lengthM > 0) chain.push(insideElement(connector, frequencyHz));
  }
  return null;
}

/** Puts a section's cable into the chain, splitting slabs where a fault sits. */
function layPieces(
  run: TrueRun,
  pieces: readonly Piece[],
  scale: number,
  mediumOf: (figures: CableFigures) => Medium,
  chain: Element[],
): EndModel | null {
  const inCable = run.faults.filter((p) => p.joint === null);
  for (const { slab, fromM, figures } of pieces) {
    const toM = fromM + slab.lengthM;
    const inside = inCable
      .filter((p) => p.distanceM >= fromM && p.distanceM < toM)
      .sort((a, b) => a.distanceM - b.distanceM);
    let at = fromM;
    const layUpTo = (distanceM: number) => {
      const impedanceScale = Math.exp(scale * slab.shape);
      if (distanceM > at)
        chain.push({ type: 'slab', medium: mediumOf(figures), lengthM: distanceM - at, impedanceScale });
      at = distanceM;
    };
    for (const placed of inside) {
      layUpTo(placed.distanceM);
      const stop = layFault(placed.fault, chain);
      if (stop !== null) return stop;
    }
    layUpTo(toM);
  }
  return null;
}

function layFault(fault: Fault, chain: Element[]): EndModel | null {
  if (fault.kind === 'open') return { kind: 'open', fringeF: 0.03e-12 };
  if (fault.kind === 'short') return { kind: 'short', inductanceH: 0.1e-9 };
  chain.push(faultElement(fault.kind, fault.value ?? Number.NaN));
  return null;
}

/** Cuts a section's cable (what its connectors leave of it) into slabs, and those where a stretch begins or ends. */
function cutSection(
  run: TrueRun,
  section: TrueSection,
  index: number,
  joints: readonly number[],
  draws: Draws,
): Piece[] {
  // The first connector begins at the port and the last ends at the end; the others are centred on their joint.
  const before = run.joints[index]!.lengthM * (index === 0 ? 1 : 0.5);
  const after = run.joints[index + 1]!.lengthM * (index === run.sections.length - 1 ? 1 : 0.5);
  const toM = joints[index + 1]! - after;
  let fromM = joints[index]! + before;
  const pieces: Piece[] = [];
  const cuts = run.stretches.flatMap(stretchCuts).sort((a, b) => a - b);
  for (const slab of drawSlabs(toM - fromM, draws)) {
    const slabEnd = fromM + slab.lengthM;
    const edges = [fromM, ...cuts.filter((cut) => cut > fromM && cut < slabEnd), slabEnd];
    for (let e = 1; e < edges.length; e++) {
      const [near, far] = [edges[e - 1]!, edges[e]!];
      const figures = figuresAt(run, section.figures, (near + far) / 2);
      pieces.push({ slab: { lengthM: far - near, shape: slab.shape }, fromM: near, figures });
    }
    fromM = slabEnd;
  }
  return pieces;
}

/** Steps in which a stretch sets in along its ramp. */
const RAMP_STEPS = 4;

function stretchCuts(stretch: RunStretch): number[] {
  if (stretch.rampM === 0) return [stretch.fromM, stretch.toM];
  const offsets = Array.from({ length: RAMP_STEPS + 1 }, (_, i) => (stretch.rampM * i) / RAMP_STEPS);
  return offsets.flatMap((offset) => [stretch.fromM + offset, stretch.toM - offset]);
}

/** Figures of the cable at a distance: sound, or of the stretch there with its share of the full effect. */
function figuresAt(run: TrueRun, sound: CableFigures, distanceM: number): CableFigures {
  for (const stretch of run.stretches) {
    const depthM = Math.min(distanceM - stretch.fromM, stretch.toM - distanceM);
    if (depthM <= 0) continue;
    const share = stretch.rampM === 0 ? 1 : Math.min(1, depthM / stretch.rampM);
    return stretch.figures(sound, Math.round(share * RAMP_STEPS * 2) / (RAMP_STEPS * 2));
  }
  return sound;
}

/** The slabs with their media at the frequencies where structure is judged. */
function atRippleBand(pieces: readonly Piece[], temperatureC: number): { slab: Slab; medium: Medium }[] {
  const media = new Map<CableFigures, Medium>();
  return pieces.map(({ slab, figures }) => {
    const medium = media.get(figures) ?? coaxMedium(figures, temperatureC, RIPPLE_BAND_HZ);
    media.set(figures, medium);
    return { slab, medium };
  });
}
