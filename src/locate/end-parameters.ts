/** The free numbers of an end, with what is known of them. */
import type { Slot } from '../line/cascade.ts';
import type { EndModel } from '../line/end.ts';
import type { LineModel } from './line-model.ts';
import type { Parameter } from './parameter.ts';

/** Fringe of an open or inductance of a short, as a delay, s. From memory: a fraction of a picofarad at 50 Ω. */
const FRINGE_SIGMA_S = 5e-12;

/** Adds the end's parameters and their derivative slots. @param stage Index of the end among the stages. */
export function addEndParameters(
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
