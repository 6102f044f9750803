/** The end once more, when what stands before it is explained: its kind, and whether it is seen at all. */
import { complexEnergy } from '../numerics/complex.ts';
import { likelyKinds } from './end-kinds.ts';
import type { EndFound, EndSearch, FoundEnd } from './end-search.ts';
import type { FitContext } from './fit-context.ts';
import { bestEnd } from './fit-end.ts';
import { cloneModel, type LineModel, NOTHING_FREE, restoreModel } from './line-model.ts';
import { linearise } from './linearise.ts';
import { expectBoundary } from './place-joints.ts';

/**
 * Looks at the end again once strong things before it are explained: only then does it show how large it is.
 *
 * @param model Changed in place when another kind explains the sweep better.
 */
export function reviseEnd(
  context: FitContext,
  model: LineModel,
  search: EndSearch,
  found: Pick<EndFound, 'kind' | 'lead'>,
): Pick<EndFound, 'kind' | 'lead'> {
  const level = endLevel(context, model);
  const kinds = new Set<FoundEnd>([found.kind, ...likelyKinds(search.line, context.frequencyHz, level)]);
  if (kinds.size === 1 && found.kind !== 'antenna') return found;
  const atM = model.boundaryM[model.boundaryM.length - 1]!;
  const before = cloneModel(model);
  const best = bestEnd(context, model, { ...search, jointsKnown: true }, [...kinds], [atM]);
  if (best.kind === found.kind && found.kind !== 'antenna') restoreModel(model, before);
  return { kind: best.kind, lead: best.lead };
}

/** Evidence for the end's own echo, in −2 ln likelihood, under which it is noise. */
const UNSEEN = 40;

/** A load that returns less than this, −46 dB, can't be told from what cable as sold shows here and there. */
const FAINTEST_LOAD = 0.005;

/**
 * A load that reflects too little to be seen is taken as matched and left where the description puts it, instead of
 * drawing every distance to where noise would have it.
 *
 * @param variance Of the residual per real component. @returns True when the end is not seen.
 */
export function leaveUnseenEnd(context: FitContext, model: LineModel, variance: number): boolean {
  if (model.end.type !== 'load') return false;
  const { stages } = linearise(context, model, NOTHING_FREE, 1).translation;
  const through = context.cascade.sensitivity(stages.length);
  const own = context.cascade.behind(stages.length);
  let energy = 0;
  for (let i = 0; i < context.weight.length; i++)
    energy +=
      context.weight[i]! * (through.re[i]! ** 2 + through.im[i]! ** 2) * (own.re[i]! ** 2 + own.im[i]! ** 2);
  const level = Math.sqrt(complexEnergy(own) / own.re.length);
  if (energy > UNSEEN * variance && level > FAINTEST_LOAD) return false;
  model.end = { type: 'load', parameters: [1, 0] };
  const last = model.boundaryM.length - 1;
  const others = new Set([...model.boundaryM.keys()].filter((i) => i !== last));
  model.boundaryM[last] = Math.max(
    expectBoundary(model, others, last).meanM,
    (model.boundaryM[last - 1] ?? 0) + 0.01,
  );
  return true;
}

/** RMS size of the end's own reflection as modelled, weighed by what comes back from it. */
function endLevel(context: FitContext, model: LineModel): number {
  const { stages } = linearise(context, model, NOTHING_FREE, 1).translation;
  const through = context.cascade.sensitivity(stages.length);
  const own = context.cascade.behind(stages.length);
  const { residual } = context;
  let power = 0;
  let weight = 0;
  for (let i = 0; i < residual.re.length; i++) {
    const s2 = through.re[i]! ** 2 + through.im[i]! ** 2;
    power += s2 * (own.re[i]! ** 2 + own.im[i]! ** 2);
    weight += s2;
  }
  return Math.sqrt(power / Math.max(weight, 1e-30));
}
