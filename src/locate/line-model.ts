/**
 * The solver's picture of a line: the described run, how far it is trusted, and the discontinuities found so far.
 */
import type { LumpedType } from '../line/discontinuity.ts';
import type { EndModel } from '../line/end.ts';
import type { Line } from '../line/line.ts';
import { type Medium, portMedium, sectionMedium } from '../line/medium.ts';
import { invertSymmetric } from '../numerics/linear-solve.ts';
import { assertNever } from '../outcome.ts';
import { type ResidueTerm, residueTerms } from './instrument-residue.ts';

/** A stretch inside a section that differs from it: water in the dielectric, another cable. */
export type StretchModel = {
  readonly id: number;
  readonly section: number;
  fromM: number;
  toM: number;
  /** Impedance over that of the section, ln. */
  ratio: number;
  /** Delay per metre over that of the section, minus 1. */
  slowness: number;
  /** Dielectric loss beyond that of the section, relative to it. */
  dielectric: number;
};

/** A lumped discontinuity, inside a section or tied to a joint. */
export type Lump = {
  readonly id: number;
  readonly type: LumpedType;
  strength: number;
  /** Standard deviation of the strength's prior around 0; null for a fault that may have any size. */
  strengthSigma: number | null;
  /** Section it lies in, from 0. */
  section: number;
  /** Boundary it is tied to (0 = port, n = end), or null when it stands free in its section. */
  readonly boundary: number | null;
  /** Distance from the boundary it is tied to, else from the reference plane, m. */
  offsetM: number;
  /** Standard deviation of the offset's prior around `offsetMeanM`; 0 holds it fixed, null leaves it free. */
  offsetSigmaM: number | null;
  offsetMeanM: number;
};

export type LineModel = {
  readonly frequencyHz: Float64Array;
  readonly media: readonly Medium[];
  readonly port: Medium;
  /** Where section i ends, m; the last is the end. Model distance, before any scaling to what is known. */
  readonly boundaryM: number[];
  /** ln of each section's impedance over its description. */
  readonly impedanceRatio: number[];
  /**
   * Relative changes of conductor and dielectric loss, common to all sections. A sample's loss differs as a whole; what
   * the dielectric has beyond that is water or age.
   */
  conductor: number;
  dielectric: number;
  readonly lumps: Lump[];
  readonly stretches: StretchModel[];
  end: EndModel;
  readonly residue: ResidueTerm[];
  /** How far the description is trusted. */
  readonly priors: Priors;
  nextId: number;
};

export type Priors = {
  /** Mean of each boundary, m. */
  readonly boundaryMeanM: readonly number[];
  /** Covariance of the boundaries and its inverse, row-major n × n, m² and 1/m². */
  readonly boundaryCovariance: Float64Array;
  readonly boundaryPrecision: Float64Array;
  readonly impedanceSigma: readonly number[];
  readonly lossSigma: number;
};

/** Prior of a sound section's impedance around its description, Ω. Common practice: about ±1 Ω. */
const IMPEDANCE_TOLERANCE_OHM = 1;

/** Length that a described section may be off by, beside its velocity tolerance: tape and trim, m and relative. */
export const LENGTH_SIGMA_M = 0.015;
export const LENGTH_SIGMA_RELATIVE = 0.002;

/** Correlation of the velocity error between sections: of the same cable, and of different cables. */
const SAME_CABLE_CORRELATION = 0.95;
const OTHER_CABLE_CORRELATION = 0.5;

/**
 * Builds the model of a described line with nothing found yet.
 *
 * @param lengths Length of every section, m (an unknown last length filled in by the caller).
 * @param trust Prior width of the common loss factor and of the lengths.
 */
export function createLineModel(
  line: Line,
  frequencyHz: Float64Array,
  portOhm: number,
  lengths: readonly number[],
  trust: { readonly lossSigma: number; readonly lengthSigmaM?: number },
): LineModel {
  const reference = line.sections.find((s) => s.type === 'coax');
  const z0Ohm = reference?.type === 'coax' ? reference.cable.z0Ohm : portOhm;
  const media = line.sections.map((section) =>
    sectionMedium(section, frequencyHz, { temperatureC: line.temperatureC, z0Ohm }),
  );
  const boundaryM: number[] = [];
  let sum = 0;
  for (const length of lengths) {
    sum += length;
    boundaryM.push(sum);
  }
  const impedanceSigma = line.sections.map((section) =>
    section.type === 'coax' ? IMPEDANCE_TOLERANCE_OHM / section.cable.z0Ohm : 0.02,
  );
  const covariance = boundaryCovariance(line, lengths, trust.lengthSigmaM ?? 0);
  return {
    frequencyHz,
    media,
    port: portMedium(portOhm, frequencyHz.length),
    boundaryM,
    impedanceRatio: line.sections.map(() => 0),
    conductor: 0,
    dielectric: 0,
    lumps: [],
    stretches: [],
    end: { type: 'load', parameters: [1, 0] },
    residue: residueTerms(frequencyHz),
    priors: {
      boundaryMeanM: boundaryM.slice(),
      boundaryCovariance: covariance,
      boundaryPrecision: invertSymmetric(covariance, lengths.length) ?? new Float64Array(covariance.length),
      impedanceSigma,
      lossSigma: trust.lossSigma,
    },
    nextId: 1,
  };
}

/** Covariance of the boundaries from tolerances of velocity and length, row-major n × n, m². */
function boundaryCovariance(line: Line, lengths: readonly number[], endSigmaM: number): Float64Array {
  const n = lengths.length;
  const ofLengths = (i: number, j: number): number => {
    const a = line.sections[i]!;
    const b = line.sections[j]!;
    const same = a.type === 'coax' && b.type === 'coax' && a.cable.id === b.cable.id;
    const correlation = i === j ? 1 : same ? SAME_CABLE_CORRELATION : OTHER_CABLE_CORRELATION;
    const velocity = correlation * velocitySpread(a) * lengths[i]! * velocitySpread(b) * lengths[j]!;
    if (i !== j) return velocity;
    const own = (LENGTH_SIGMA_M + LENGTH_SIGMA_RELATIVE * lengths[i]!) ** 2;
    return velocity + own + (i === n - 1 ? endSigmaM ** 2 : 0);
  };
  // Boundaries are running sums of lengths.
  const covariance = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      let total = 0;
      for (let p = 0; p <= i; p++) for (let q = 0; q <= j; q++) total += ofLengths(p, q);
      covariance[i * n + j] = total;
    }
  }
  return covariance;
}

/** Relative velocity tolerance of a section. */
function velocitySpread(section: Line['sections'][number]): number {
  switch (section.type) {
    case 'device':
      return DEVICE_VELOCITY_SPREAD;
    case 'guide':
      return GUIDE_VELOCITY_SPREAD;
    case 'coax':
      return section.cable.velocityFactorTolerance / section.cable.velocityFactor;
    default:
      return assertNever(section);
  }
}

/** Relative spread of a guide's velocity, which its width fixes. Common practice: widths hold to 0.1 %. */
const GUIDE_VELOCITY_SPREAD = 0.002;

/** Relative spread of the velocity inside in-line devices, about which descriptions say nothing. */
const DEVICE_VELOCITY_SPREAD = 0.3;

/** Distance of a boundary (0 = the port), m. */
export function boundaryAt(model: LineModel, index: number): number {
  return index === 0 ? 0 : model.boundaryM[index - 1]!;
}

/** Model distance of a lump, m. */
export function lumpDistanceM(model: LineModel, lump: Lump): number {
  return lump.boundary === null ? lump.offsetM : boundaryAt(model, lump.boundary) + lump.offsetM;
}

/** Section that a model distance lies in. */
export function sectionAt(model: LineModel, distanceM: number): number {
  const index = model.boundaryM.findIndex((b) => distanceM < b);
  return index < 0 ? model.boundaryM.length - 1 : index;
}

/** A copy whose numbers can be changed without touching the original; media and frequencies are shared. */
export function cloneModel(model: LineModel): LineModel {
  return {
    ...model,
    boundaryM: model.boundaryM.slice(),
    impedanceRatio: model.impedanceRatio.slice(),
    lumps: model.lumps.map((lump) => ({ ...lump })),
    stretches: model.stretches.map((stretch) => ({ ...stretch })),
    end: { type: model.end.type, parameters: model.end.parameters.slice() },
    residue: model.residue.map((term) => ({ ...term })),
  };
}

/** Puts every number of `from` into `model`. */
export function restoreModel(model: LineModel, from: LineModel): void {
  model.boundaryM.splice(0, model.boundaryM.length, ...from.boundaryM);
  model.impedanceRatio.splice(0, model.impedanceRatio.length, ...from.impedanceRatio);
  model.conductor = from.conductor;
  model.dielectric = from.dielectric;
  model.lumps.splice(0, model.lumps.length, ...from.lumps.map((lump) => ({ ...lump })));
  model.stretches.splice(0, model.stretches.length, ...from.stretches.map((s) => ({ ...s })));
  model.end = { type: from.end.type, parameters: from.end.parameters.slice() };
  model.residue.splice(0, model.residue.length, ...from.residue.map((t) => ({ ...t })));
  model.nextId = Math.max(model.nextId, from.nextId);
}

/** Adds a lump and gives it an id. */
export function addLump(model: LineModel, lump: Omit<Lump, 'id'>): Lump {
  const added = { ...lump, id: model.nextId++ };
  model.lumps.push(added);
  return added;
}

/** Adds a lump that stands free in its section and may have any size. */
export function addFreeLump(
  model: LineModel,
  lump: { readonly type: LumpedType; readonly strength: number; readonly distanceM: number },
): Lump {
  return addLump(model, {
    type: lump.type,
    strength: lump.strength,
    strengthSigma: null,
    section: sectionAt(model, lump.distanceM),
    boundary: null,
    offsetM: lump.distanceM,
    offsetSigmaM: null,
    offsetMeanM: lump.distanceM,
  });
}

export function removeLump(model: LineModel, id: number): void {
  const index = model.lumps.findIndex((lump) => lump.id === id);
  if (index >= 0) model.lumps.splice(index, 1);
}

/** What may move in a fit. */
export type Freedom = {
  readonly loss: boolean;
  readonly stretches: boolean;
  readonly end: boolean;
  readonly residue: boolean;
  /** Sections whose impedance may change; null for all. */
  readonly impedances: ReadonlySet<number> | null;
  /** Boundaries that may move, counted from 0 (the first joint behind the port); null for all. */
  readonly boundaries: ReadonlySet<number> | null;
  /** Lumps that may move, by id; null for all. */
  readonly lumps: ReadonlySet<number> | null;
};

export const ALL_FREE: Freedom = {
  loss: true,
  stretches: true,
  impedances: null,
  boundaries: null,
  end: true,
  residue: true,
  lumps: null,
};

const NOTHING: ReadonlySet<number> = new Set();

/** Nothing at all: for a look at what is left over. */
export const NOTHING_FREE: Freedom = {
  loss: false,
  stretches: false,
  impedances: NOTHING,
  boundaries: NOTHING,
  end: false,
  residue: false,
  lumps: NOTHING,
};

/**
 * What stands between two distances, and what it does to everything behind it: a discontinuity delays and weakens the
 * echoes beyond, which the loss, the joints' places and the end must be free to follow.
 */
export function around(model: LineModel, fromM: number, toM: number): Freedom {
  const within = (m: number): boolean => m >= fromM && m <= toM;
  const near = model.boundaryM.flatMap((m, i) => (within(m) ? [i] : []));
  const lumps = model.lumps.filter((lump) => within(lumpDistanceM(model, lump)));
  return {
    loss: true,
    stretches: true,
    impedances: new Set(near.flatMap((i) => (i + 1 < model.media.length ? [i, i + 1] : [i]))),
    boundaries: null,
    // An antenna's many numbers follow slowly, and its band hides what little a fault before it changes.
    end: model.end.type !== 'antenna',
    residue: fromM <= 0,
    lumps: new Set(lumps.map((lump) => lump.id)),
  };
}
