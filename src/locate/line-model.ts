/**
 * The solver's picture of a line: the described run plus the discontinuities found so far, and the translation of
 * both into stages of the cascade and a flat vector of parameters.
 */
import type { Slot, Stage } from '../line/cascade.ts';
import type { LumpedType } from '../line/discontinuity.ts';
import type { EndModel } from '../line/end.ts';
import type { Line } from '../line/line.ts';
import { type Medium, portMedium, sectionMedium } from '../line/medium.ts';
import { invertSymmetric } from '../numerics/linear-solve.ts';
import { assertNever } from '../outcome.ts';
import { RESIDUE_SIGMA, type ResidueTerm, residueTerms } from './instrument-residue.ts';

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

/** One free number of the model. */
export type Parameter = {
  readonly name: string;
  readonly get: () => number;
  readonly set: (value: number) => void;
  /** Standard deviation of an independent prior around `mean`; null for none (or for the joint boundary prior). */
  readonly sigma: number | null;
  readonly mean: number;
  /** True where the prior grows faster than a Gaussian: what is sound has limits, and beyond them it is a fault. */
  readonly stiff?: boolean;
  /** Largest change in one step of the search. */
  readonly stepLimit: number;
  readonly minimum: number;
  readonly maximum: number;
  /** Index of the boundary when the parameter is one, for the joint prior. */
  readonly boundary: number | null;
  /** Lump that the parameter belongs to. */
  readonly lump: number | null;
};

/** Names of the two loss parameters. */
export const LOSS_PARAMETERS = { common: 'loss', dielectric: 'dielectric loss beyond that' };

/** The model translated for one evaluation. */
export type Translation = {
  readonly stages: readonly Stage[];
  readonly parameters: readonly Parameter[];
  readonly slots: readonly Slot[];
  /** Column of the first residue parameter (re, im pairs follow); the instrument stands outside the cascade. */
  readonly residueColumn: number;
  /** Stage index of each lump by id. */
  readonly stageOfLump: ReadonlyMap<number, number>;
  /** Stage index of the step at boundary i (0 = port); absent at the end. */
  readonly stageOfBoundary: readonly number[];
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
    impedances: new Set(near.flatMap((i) => (i + 1 < model.media.length ? [i, i + 1] : [i]))),
    boundaries: null,
    // An antenna's many numbers follow slowly, and its band hides what little a fault before it changes.
    end: model.end.type !== 'antenna',
    residue: fromM <= 0,
    lumps: new Set(lumps.map((lump) => lump.id)),
  };
}

function isFree(set: ReadonlySet<number> | null, index: number): boolean {
  return set === null || set.has(index);
}

/**
 * Stages, free parameters and derivative slots of the model as it stands.
 *
 * @param freedom What may move; what may not gets no column.
 */
export function translate(model: LineModel, freedom: Freedom): Translation {
  const parameters: Parameter[] = [];
  const slots: Slot[] = [];
  const stages: Stage[] = [];
  const stageOfLump = new Map<number, number>();
  const stageOfBoundary: number[] = [];
  const add = (parameter: Parameter): number => parameters.push(parameter) - 1;
  const free = { boundary: null, lump: null, mean: 0 };

  const lossColumn = freedom.loss
    ? add({
        ...free,
        name: LOSS_PARAMETERS.common,
        get: () => model.conductor,
        set: (v) => {
          model.dielectric += v - model.conductor;
          model.conductor = v;
        },
        sigma: model.priors.lossSigma,
        stepLimit: 0.3,
        minimum: -0.8,
        maximum: 3,
      })
    : -1;
  const dielectricColumn = freedom.loss
    ? add({
        ...free,
        name: LOSS_PARAMETERS.dielectric,
        get: () => model.dielectric - model.conductor,
        set: (v) => {
          model.dielectric = model.conductor + v;
        },
        // The loss that is linear in frequency varies more between samples than the conductor's.
        sigma: Math.max(0.18, model.priors.lossSigma),
        stepLimit: 0.5,
        minimum: -1,
        maximum: 10,
      })
    : -1;
  const impedanceColumns = model.impedanceRatio.map((_, i) =>
    isFree(freedom.impedances, i)
      ? add({
          ...free,
          name: `impedance of section ${i + 1}`,
          get: () => model.impedanceRatio[i]!,
          set: (v) => {
            model.impedanceRatio[i] = v;
          },
          sigma: model.priors.impedanceSigma[i]!,
          stepLimit: 0.2,
          stiff: true,
          minimum: -1.5,
          maximum: 1.5,
        })
      : -1,
  );
  const boundaryColumns = model.boundaryM.map((_, i) =>
    isFree(freedom.boundaries, i)
      ? add({
          ...free,
          name: `boundary ${i + 1}`,
          boundary: i,
          get: () => model.boundaryM[i]!,
          set: (v) => {
            model.boundaryM[i] = v;
          },
          sigma: null,
          stepLimit: 0.2,
          minimum: 0.001,
          maximum: 1e6,
        })
      : -1,
  );

  /** A place on the line as a number and the parameters it moves with. */
  type Place = { readonly valueM: number; readonly terms: readonly number[] };
  const boundaryPlace = (index: number): Place => ({
    valueM: boundaryAt(model, index),
    terms: index === 0 || boundaryColumns[index - 1]! < 0 ? [] : [boundaryColumns[index - 1]!],
  });
  let from: Place = { valueM: 0, terms: [] };
  const stretchTo = (to: Place, section: number): void => {
    const stage = stages.length;
    stages.push({
      type: 'line',
      medium: model.media[section]!,
      lengthM: to.valueM - from.valueM,
      conductor: model.conductor,
      dielectric: model.dielectric,
    });
    for (const column of to.terms) slots.push({ stage, of: 'length', column, factor: 1 });
    for (const column of from.terms) slots.push({ stage, of: 'length', column, factor: -1 });
    if (lossColumn >= 0) {
      slots.push({ stage, of: 'conductor', column: lossColumn, factor: 1 });
      slots.push({ stage, of: 'dielectric', column: lossColumn, factor: 1 });
    }
    if (dielectricColumn >= 0) slots.push({ stage, of: 'dielectric', column: dielectricColumn, factor: 1 });
    from = to;
  };

  for (let section = 0; section < model.media.length; section++) {
    const medium = model.media[section]!;
    const before = section === 0 ? model.port : model.media[section - 1]!;
    stageOfBoundary.push(stages.length);
    for (const [side, factor] of [
      [section, 1],
      [section - 1, -1],
    ] as const) {
      const column = impedanceColumns[side] ?? -1;
      if (column >= 0) slots.push({ stage: stages.length, of: 'strength', column, factor });
    }
    const ratio = Math.exp(
      model.impedanceRatio[section]! - (section > 0 ? model.impedanceRatio[section - 1]! : 0),
    );
    stages.push({ type: 'step', before, after: medium, ratio });
    const inside = model.lumps
      .filter((lump) => lump.section === section)
      .sort((a, b) => lumpDistanceM(model, a) - lumpDistanceM(model, b));
    for (const lump of inside) {
      const mayMove = isFree(freedom.lumps, lump.id);
      const base = lump.boundary === null ? { valueM: 0, terms: [] } : boundaryPlace(lump.boundary);
      const terms = [...base.terms];
      if (mayMove && lump.offsetSigmaM !== 0) {
        terms.push(
          add({
            name: `place of lump ${lump.id}`,
            boundary: null,
            lump: lump.id,
            get: () => lump.offsetM,
            set: (v) => {
              lump.offsetM = v;
            },
            sigma: lump.offsetSigmaM,
            mean: lump.offsetMeanM,
            stepLimit: 0.1,
            minimum: lump.boundary === null ? 0.001 : -1e6,
            maximum: 1e6,
          }),
        );
      }
      stretchTo({ valueM: base.valueM + lump.offsetM, terms }, section);
      const stage = stages.length;
      stageOfLump.set(lump.id, stage);
      stages.push({ type: lump.type, medium, strength: lump.strength });
      if (mayMove) {
        const column = add({
          name: `strength of lump ${lump.id}`,
          boundary: null,
          lump: lump.id,
          get: () => lump.strength,
          set: (v) => {
            lump.strength = v;
          },
          sigma: lump.strengthSigma,
          mean: 0,
          stepLimit: Number.POSITIVE_INFINITY,
          stiff: true,
          minimum: Number.NEGATIVE_INFINITY,
          maximum: Number.POSITIVE_INFINITY,
        });
        slots.push({ stage, of: 'strength', column, factor: 1 });
      }
    }
    stretchTo(boundaryPlace(section + 1), section);
  }
  if (freedom.end) addEndParameters(model, add, slots, stages.length);
  const residueColumn = parameters.length;
  if (freedom.residue) {
    for (const term of model.residue) {
      for (const part of ['re', 'im'] as const) {
        add({
          ...free,
          name: `correction residue ${part}`,
          get: () => term[part],
          set: (v) => {
            term[part] = v;
          },
          sigma: RESIDUE_SIGMA,
          stepLimit: Number.POSITIVE_INFINITY,
          minimum: -1,
          maximum: 1,
        });
      }
    }
  }
  return { stages, parameters, slots, residueColumn, stageOfLump, stageOfBoundary };
}

/** Fringe of an open or inductance of a short, as a delay, s. From memory: a fraction of a picofarad at 50 Ω. */
const FRINGE_SIGMA_S = 5e-12;

function addEndParameters(
  model: LineModel,
  add: (parameter: Parameter) => number,
  slots: Slot[],
  stage: number,
): void {
  const type = model.end.type;
  model.end.parameters.forEach((_, i) => {
    const limits = endLimits(type, i, model.frequencyHz);
    const column = add({
      name: `end parameter ${i + 1}`,
      boundary: null,
      lump: null,
      get: () => model.end.parameters[i]!,
      set: (v) => {
        const changed = model.end.parameters.slice();
        changed[i] = v;
        model.end = { type, parameters: changed };
      },
      ...limits,
    });
    slots.push({ stage, of: i, column, factor: 1 });
  });
}

/** Highest quality of an antenna's resonance. Common practice: broadband antennas stay below 30. */
const SHARPEST_ANTENNA = 40;

function endLimits(
  type: EndModel['type'],
  index: number,
  frequencyHz: Float64Array,
): Pick<Parameter, 'sigma' | 'mean' | 'stepLimit' | 'minimum' | 'maximum'> {
  if (type === 'open' || type === 'short') {
    return { sigma: FRINGE_SIGMA_S, mean: 0, stepLimit: 10e-12, minimum: -100e-12, maximum: 100e-12 };
  }
  if (type === 'load') {
    return index === 0
      ? { sigma: 1, mean: 1, stepLimit: 0.5, minimum: 0.02, maximum: 50 }
      : { sigma: 30e-12, mean: 0, stepLimit: 30e-12, minimum: -1e-9, maximum: 1e-9 };
  }
  if (index < 2)
    return { sigma: index === 0 ? 1 : 0.4, mean: 0, stepLimit: 0.3, minimum: -1.2, maximum: 1.2 };
  const top = frequencyHz[frequencyHz.length - 1]!;
  switch ((index - 2) % 4) {
    case 0:
    case 1:
      return { sigma: 1, mean: 0, stepLimit: 0.5, minimum: -2.2, maximum: 2.2 };
    case 2:
      return { sigma: null, mean: 0, stepLimit: 5, minimum: 0.5, maximum: SHARPEST_ANTENNA };
    default:
      return {
        sigma: null,
        mean: 0,
        stepLimit: top * 0.05,
        minimum: frequencyHz[0]! * 0.5,
        maximum: top * 1.5,
      };
  }
}
