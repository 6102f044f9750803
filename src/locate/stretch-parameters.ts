/** The free numbers of a stretch, with what is known of them. */
import type { Freedom, StretchModel } from './line-model.ts';
import type { Parameter } from './parameter.ts';

/** Columns of a stretch's parameters; −1 for those that may not move. */
export type StretchColumns = {
  readonly fromM: number;
  readonly toM: number;
  readonly ratio: number;
  readonly slowness: number;
  readonly dielectric: number;
};

const NO_COLUMNS: StretchColumns = { fromM: -1, toM: -1, ratio: -1, slowness: -1, dielectric: -1 };

/** Priors of a stretch: a wrong cable's impedance, velocity and loss lie within these of the described one. */
const STRETCH_SIGMAS = { ratio: 0.5, slowness: 0.25, dielectric: 10 };

/** Adds a stretch's parameters. @returns The column of each. */
export function addStretchParameters(
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
