/** The solver's picture of a line as stages of the cascade and a flat vector of parameters. */
import type { Slot, Stage } from '../line/cascade.ts';
import { addEndParameters } from './end-parameters.ts';
import { RESIDUE_SIGMA } from './instrument-residue.ts';
import { boundaryAt, type Freedom, type LineModel, type StretchModel } from './line-model.ts';
import type { Parameter } from './parameter.ts';
import { type EdgeEvent, eventsIn, placeKey } from './section-events.ts';
import { addStretchParameters, type StretchColumns } from './stretch-parameters.ts';

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

function isFree(set: ReadonlySet<number> | null, index: number): boolean {
  return set === null || set.has(index);
}
