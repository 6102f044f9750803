/** The solver's picture of a line as stages of the cascade and a flat vector of parameters. */
import type { Slot, Stage } from '../line/cascade.ts';
import type { EndModel } from '../line/end.ts';
import { RESIDUE_SIGMA } from './instrument-residue.ts';
import {
  boundaryAt,
  type Freedom,
  type LineModel,
  type Lump,
  lumpDistanceM,
  type StretchModel,
} from './line-model.ts';

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
  let within: { readonly stretch: StretchModel; readonly columns: StretchColumns } | null = null;
  const stretchTo = (to: Place, section: number): void => {
    const stage = stages.length;
    const slow = 1 + (within?.stretch.slowness ?? 0);
    stages.push({
      type: 'line',
      medium: model.media[section]!,
      lengthM: (to.valueM - from.valueM) * slow,
      conductor: model.conductor,
      dielectric: model.dielectric + (within?.stretch.dielectric ?? 0),
    });
    for (const column of to.terms) slots.push({ stage, of: 'length', column, factor: slow });
    for (const column of from.terms) slots.push({ stage, of: 'length', column, factor: -slow });
    if (within !== null && within.columns.slowness >= 0) {
      const { slowness, dielectric } = within.columns;
      slots.push({ stage, of: 'length', column: slowness, factor: to.valueM - from.valueM });
      slots.push({ stage, of: 'dielectric', column: dielectric, factor: 1 });
    }
    if (lossColumn >= 0) {
      slots.push({ stage, of: 'conductor', column: lossColumn, factor: 1 });
      slots.push({ stage, of: 'dielectric', column: lossColumn, factor: 1 });
    }
    if (dielectricColumn >= 0) slots.push({ stage, of: 'dielectric', column: dielectricColumn, factor: 1 });
    from = to;
  };

  const columnsOf = new Map<number, StretchColumns>();
  /** Goes into a stretch, or out of it. */
  const passEdge = ({ stretch, edge }: EdgeEvent, section: number): void => {
    const medium = model.media[section]!;
    if (edge === 'from') columnsOf.set(stretch.id, addStretchParameters(stretch, freedom, add));
    const columns = columnsOf.get(stretch.id)!;
    const key = placeKey(stretch, edge);
    const place = columns[key];
    stretchTo({ valueM: stretch[key], terms: place >= 0 ? [place] : [] }, section);
    const sign = edge === 'from' ? 1 : -1;
    if (columns.ratio >= 0)
      slots.push({ stage: stages.length, of: 'strength', column: columns.ratio, factor: sign });
    stages.push({ type: 'step', before: medium, after: medium, ratio: Math.exp(sign * stretch.ratio) });
    within = edge === 'from' ? { stretch, columns } : null;
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
    for (const event of eventsIn(model, section)) {
      if (event.type === 'edge') {
        passEdge(event, section);
        continue;
      }
      const { lump } = event;
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

type EdgeEvent = { readonly type: 'edge'; readonly stretch: StretchModel; readonly edge: 'from' | 'to' };
type Event = { readonly type: 'lump'; readonly lump: Lump } | EdgeEvent;

/** What stands in a section, in order of distance. */
function eventsIn(model: LineModel, section: number): Event[] {
  const events: { readonly atM: number; readonly event: Event }[] = [];
  for (const lump of model.lumps)
    if (lump.section === section)
      events.push({ atM: lumpDistanceM(model, lump), event: { type: 'lump', lump } });
  for (const stretch of model.stretches) {
    if (stretch.section !== section) continue;
    for (const edge of ['from', 'to'] as const)
      events.push({ atM: stretch[placeKey(stretch, edge)], event: { type: 'edge', stretch, edge } });
  }
  return events.sort((a, b) => a.atM - b.atM).map(({ event }) => event);
}

/** Which of a stretch's places its nearer or farther edge is: a step of the search may have crossed them. */
function placeKey(stretch: StretchModel, edge: 'from' | 'to'): 'fromM' | 'toM' {
  const crossed = stretch.toM < stretch.fromM;
  return (edge === 'from') === crossed ? 'toM' : 'fromM';
}

/** Columns of a stretch's parameters; −1 for those that may not move. */
type StretchColumns = {
  readonly fromM: number;
  readonly toM: number;
  readonly ratio: number;
  readonly slowness: number;
  readonly dielectric: number;
};

const NO_COLUMNS: StretchColumns = { fromM: -1, toM: -1, ratio: -1, slowness: -1, dielectric: -1 };

/** Priors of a stretch: a wrong cable's impedance, velocity and loss lie within these of the described one. */
const STRETCH_SIGMAS = { ratio: 0.5, slowness: 0.25, dielectric: 10 };

function addStretchParameters(
  stretch: StretchModel,
  freedom: Freedom,
  add: (parameter: Parameter) => number,
): StretchColumns {
  if (!freedom.stretches) return NO_COLUMNS;
  const one = (
    key: Exclude<keyof StretchModel, 'id' | 'section'>,
    limits: Pick<Parameter, 'sigma' | 'stepLimit' | 'minimum' | 'maximum'>,
  ): number =>
    add({
      name: stretchParameter(stretch.id, key),
      boundary: null,
      lump: null,
      mean: 0,
      get: () => stretch[key],
      set: (v) => {
        stretch[key] = v;
      },
      ...limits,
    });
  const place = { sigma: null, stepLimit: 0.1, minimum: 0.001, maximum: 1e6 };
  return {
    fromM: one('fromM', place),
    toM: one('toM', place),
    ratio: one('ratio', { sigma: STRETCH_SIGMAS.ratio, stepLimit: 0.2, minimum: -1.5, maximum: 1.5 }),
    slowness: one('slowness', {
      sigma: STRETCH_SIGMAS.slowness,
      stepLimit: 0.05,
      minimum: -0.4,
      maximum: 0.8,
    }),
    dielectric: one('dielectric', {
      sigma: STRETCH_SIGMAS.dielectric,
      stepLimit: 2,
      minimum: -1,
      maximum: 200,
    }),
  };
}

/** Name of one parameter of a stretch. */
export function stretchParameter(id: number, key: string): string {
  return `${key} of stretch ${id}`;
}

function isFree(set: ReadonlySet<number> | null, index: number): boolean {
  return set === null || set.has(index);
}
