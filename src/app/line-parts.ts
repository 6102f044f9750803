/** A described line with its faults as parts in order from the port: what the cascade needs, without a frequency. */
import type { Guide } from '../line/guide.ts';
import type { Line, Section } from '../line/line.ts';
import type { AsBuilt, SectionAsBuilt } from './as-built.ts';
import { type Fault, type FaultPlace, isLump, type LumpedFault, type LumpedFaultKind } from './fault-text.ts';

/** One sample of cable, guide or device: the parts that share it share its medium. */
export type Material = { readonly section: Section };

/** Size of a lumped fault: in Ω, H or F, or normalised to the line it sits in. */
export type FaultSize = { readonly unit: 'own' | 'normalised'; readonly value: number };

export type Part =
  /** `ratio`: impedance over that of the material. */
  | { readonly type: 'line'; readonly material: Material; readonly lengthM: number; readonly ratio: number }
  | { readonly type: 'fault'; readonly kind: LumpedFaultKind; readonly size: FaultSize }
  /** A reactance as time in the line's own impedance, s: series above 0, shunt below. */
  | { readonly type: 'reactive'; readonly strengthS: number };

export type LineParts = {
  readonly parts: readonly Part[];
  /** Set when a fault cuts the line off: nothing behind it is seen. */
  readonly cut: 'open' | 'short' | null;
};

/**
 * The line as parts, with its faults in place and cut off behind an open or a short.
 *
 * @param line Every length known.
 * @param faults Each within the line.
 */
export function linePartsOf(line: Line, faults: readonly Fault[], built: AsBuilt): LineParts {
  const jointsM = [0];
  for (const section of line.sections) jointsM.push(jointsM.at(-1)! + (section.lengthM ?? 0));
  const placeM = (place: FaultPlace): number =>
    place.at === 'joint' ? jointsM[place.joint - 1]! : place.distanceM;

  const cut = faults
    .flatMap((fault) => (fault.kind === 'open' || fault.kind === 'short' ? [fault] : []))
    .sort((a, b) => placeM(a.place) - placeM(b.place))[0];
  const cutM = cut ? placeM(cut.place) : Number.POSITIVE_INFINITY;
  const lumps = faults
    .flatMap((fault) =>
      isLump(fault) ? [{ kind: fault.kind, size: sizeOf(fault), atM: placeM(fault.place) }] : [],
    )
    .filter((lump) => lump.atM <= cutM);
  const stretches = faults.filter((fault) => fault.kind === 'section' || fault.kind === 'wet');
  const edgesM = [...stretches.flatMap((s) => [s.fromM, s.toM]), ...lumps.map((lump) => lump.atM), cutM];

  const parts: Part[] = [];
  const placed = new Set<(typeof lumps)[number]>();
  const addLumpsUpTo = (atM: number): void => {
    for (const lump of lumps)
      if (!placed.has(lump) && lump.atM <= atM + 1e-9) {
        parts.push({ type: 'fault', kind: lump.kind, size: lump.size });
        placed.add(lump);
      }
  };
  const addJoint = (index: number): void => {
    const joint = built.joints[index]!;
    if (joint.inductiveS === 0 && joint.capacitiveS === 0) return;
    parts.push({ type: 'reactive', strengthS: joint.inductiveS / 2 });
    parts.push({ type: 'reactive', strengthS: -joint.capacitiveS });
    parts.push({ type: 'reactive', strengthS: joint.inductiveS / 2 });
  };

  const materials = createMaterials();
  line.sections.forEach((section, s) => {
    const startM = jointsM[s]!;
    if (startM > cutM) return;
    addJoint(s);
    addLumpsUpTo(startM);
    let slabStartM = startM;
    for (const slab of built.sections[s]!.slabs) {
      const slabEndM = slabStartM + slab.lengthM;
      const inside = edgesM.filter((m) => m > slabStartM && m < slabEndM).sort((a, b) => a - b);
      let fromM = slabStartM;
      for (const toM of [...inside, slabEndM]) {
        if (fromM < cutM && toM > fromM) {
          const middleM = (fromM + toM) / 2;
          const within = stretches.filter((stretch) => stretch.fromM < middleM && middleM < stretch.toM);
          const material = materials.of(section, built.sections[s]!, within);
          parts.push({ type: 'line', material, lengthM: toM - fromM, ratio: slab.ratio });
        }
        if (toM <= cutM) addLumpsUpTo(toM);
        fromM = toM;
      }
      slabStartM = slabEndM;
    }
  });
  if (cutM > jointsM.at(-1)!) addJoint(line.sections.length);
  addLumpsUpTo(Number.POSITIVE_INFINITY);
  return { parts, cut: cut?.kind ?? null };
}

function sizeOf(fault: LumpedFault): FaultSize {
  return 'value' in fault
    ? { unit: 'own', value: fault.value }
    : { unit: 'normalised', value: fault.normalised };
}

/** Samples of cable by section and by what was done to them, each made once. */
function createMaterials() {
  const known = new Map<string, Material>();
  const numbers = new Map<Section, number>();
  return {
    of(
      section: Section,
      sample: SectionAsBuilt,
      stretches: readonly Extract<Fault, { kind: 'section' | 'wet' }>[],
    ): Material {
      if (!numbers.has(section)) numbers.set(section, numbers.size);
      const key = JSON.stringify([numbers.get(section), stretches]);
      let material = known.get(key);
      if (!material) {
        material = { section: alter(section, sample, stretches) };
        known.set(key, material);
      }
      return material;
    },
  };
}

function alter(
  section: Section,
  sample: SectionAsBuilt,
  stretches: readonly Extract<Fault, { kind: 'section' | 'wet' }>[],
): Section {
  if (section.type === 'guide') return { ...section, guide: alterGuide(section.guide, sample) };
  if (section.type !== 'coax') return section;
  let { z0Ohm, velocityFactor, k1, k2 } = section.cable;
  z0Ohm *= sample.impedance;
  velocityFactor *= sample.velocity;
  k1 *= sample.loss;
  k2 *= sample.loss;
  for (const stretch of stretches) {
    if (stretch.kind === 'section') z0Ohm = stretch.impedanceOhm;
    else {
      // C grows with the permittivity: z0 and velocity both fall by its root.
      const root = Math.sqrt(stretch.permittivityFactor);
      z0Ohm /= root;
      velocityFactor /= root;
      k2 *= stretch.k2Factor;
    }
  }
  return { ...section, cable: { ...section.cable, z0Ohm, velocityFactor, k1, k2 } };
}

/** Wider or narrower, lossier or better; its impedance is what it is matched to, whatever the sample. */
function alterGuide(guide: Guide, sample: SectionAsBuilt): Guide {
  return {
    ...guide,
    aMm: guide.aMm * sample.velocity,
    // Loss goes with the root of the walls' resistivity.
    conductivitySPerM: guide.conductivitySPerM === null ? null : guide.conductivitySPerM / sample.loss ** 2,
    lossDbPer100m: guide.lossDbPer100m === null ? null : guide.lossDbPer100m * sample.loss,
  };
}
