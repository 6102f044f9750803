/**
 * Re-reflections that would fool the eye: what bounces between echoes stands in the trace like an echo of its own.
 *
 * The cascade explains them all. To tell where they stand, the single trips of every echo are taken from the whole of
 * the model; what is left of it has bounced more than once.
 */
import { complexZeros } from '../numerics/complex.ts';
import { findPeaks } from '../numerics/peaks.ts';
import type { Echo } from './echo.ts';
import type { FitContext } from './fit-context.ts';
import { type LineModel, NOTHING_FREE } from './line-model.ts';
import { linearise } from './linearise.ts';
import { addEcho } from './probe.ts';
import type { SearchSettings } from './residual-floor.ts';
import type { Ghost } from './solution.ts';

/** A ghost weaker than this, or than this over the strongest residual of the model, fools nobody. */
const WEAKEST_GHOST = 10 ** (-50 / 20);
const OVER_RESIDUAL = 1.5;

/** Share of the strongest ghost, and distance from a stronger one in 6 dB widths, under which one is not told. */
const LEAST_SHARE = 0.2;
const FOOT = 2;

/** Most ghosts that are told, the strongest. */
const MOST_GHOSTS = 6;

/**
 * Ghosts along the line, in order of distance.
 *
 * @param context Its residual is overwritten. @param echoes With scaled distances. @param scale Physical over model.
 */
export function findGhosts(
  context: FitContext,
  model: LineModel,
  settings: SearchSettings,
  echoes: readonly Echo[],
  scale: number,
): Ghost[] {
  const { stages } = linearise(context, model, NOTHING_FREE, 1).translation;
  const left = settings.tracer(context.residual);
  const n = context.frequencyHz.length;
  const { residual } = context;
  const bounced = complexZeros(n);
  const port = context.cascade.behind(0);
  bounced.re.set(port.re);
  bounced.im.set(port.im);
  // The single trips, summed where the residual stood.
  residual.re.fill(0);
  residual.im.fill(0);
  stages.forEach((stage, k) => {
    if (stage.type !== 'line') addEcho(context, context.cascade.reflection(k), k);
  });
  addEcho(context, context.cascade.behind(stages.length), stages.length);
  for (let i = 0; i < n; i++) {
    bounced.re[i] = bounced.re[i]! - residual.re[i]!;
    bounced.im[i] = bounced.im[i]! - residual.im[i]!;
  }
  const trace = settings.tracer(bounced);
  const endM = model.boundaryM[model.boundaryM.length - 1]!;
  return findPeaks(trace.level)
    .filter(({ index }) => {
      const level = trace.level[index]!;
      const apartM = settings.resolutionM;
      const atM = index * trace.stepM;
      const alone = echoes.every((echo) => Math.abs(echo.distanceM / scale - atM) > apartM);
      return alone && atM < endM && level > WEAKEST_GHOST && level > OVER_RESIDUAL * left.level[index]!;
    })
    .sort((a, b) => trace.level[b.index]! - trace.level[a.index]!)
    .filter(({ index }, i, all) =>
      // What stands near a stronger one, or far under the strongest, is its foot.
      all
        .slice(0, i)
        .every(
          (other) =>
            trace.level[index]! > LEAST_SHARE * trace.level[other.index]! &&
            Math.abs(other.index - index) * trace.stepM > FOOT * settings.resolutionM,
        ),
    )
    .slice(0, MOST_GHOSTS)
    .map(({ index }): Ghost => {
      const distanceM = index * trace.stepM * scale;
      return {
        distanceM,
        returnLossDb: -20 * Math.log10(trace.level[index]!),
        betweenM: bouncesOf(distanceM, echoes, settings.resolutionM * scale),
      };
    })
    .filter((ghost) => ghost.betweenM.length > 0)
    .sort((a, b) => a.distanceM - b.distanceM);
}

/** The two echoes between which a wave that seems to come from a distance has gone back and forth once more. */
function bouncesOf(distanceM: number, echoes: readonly Echo[], withinM: number): number[] {
  let best: number[] = [];
  let strongest = Number.POSITIVE_INFINITY;
  for (const near of echoes) {
    for (const far of echoes) {
      if (far.distanceM <= near.distanceM) continue;
      if (Math.abs(2 * far.distanceM - near.distanceM - distanceM) > withinM) continue;
      const lossDb = near.correctedReturnLossDb + 2 * far.correctedReturnLossDb;
      if (lossDb >= strongest) continue;
      strongest = lossDb;
      best = [near.distanceM, far.distanceM];
    }
  }
  return best;
}
