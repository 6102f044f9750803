/**
 * What has changed on a line between two sweeps: the earlier one is turned into what the later day would have shown of
 * it, the two are subtracted, so that ripple and joints cancel, and what is left over is placed and named.
 */
import type { Line } from '../line/line.ts';
import { groupDelaySPerM } from '../line/medium-run.ts';
import { createWindow } from '../numerics/window.ts';
import { type Notice, type Outcome, succeed } from '../outcome.ts';
import type { Sweep } from '../sweep/sweep.ts';
import type { Alignment } from './compare-align.ts';
import { placeChange } from './compare-change.ts';
import { commonSweeps, type SolvedSweep } from './compare-common.ts';
import { endChange } from './compare-end.ts';
import { lossPerGrowthDb, type SolvedRun, solvedRun } from './compare-run.ts';
import { subtractSweeps } from './compare-subtract.ts';
import { COMPARE_WINDOW } from './compare-trace.ts';
import type { BandChange, Change, Comparison } from './comparison.ts';
import { inMetres, type LengthWords } from './place-text.ts';

export type CompareRequest = {
  /** As described for the earlier sweep. */
  readonly line: Line;
  readonly before: SolvedSweep;
  readonly after: SolvedSweep;
};

/** Compares two sweeps of one line. Notices travel in the comparison. */
export function compareSweeps(
  request: CompareRequest,
  lengthWords: LengthWords = inMetres,
): Outcome<Comparison> {
  const { line, before, after } = request;
  const common = commonSweeps(before, after);
  if (!common.ok) return common;
  const { frequencyHz } = common.value;
  const solved = solvedRun(line, before.solution, frequencyHz, before.sweep.portOhm);
  const resolutionM = resolutionOf(frequencyHz, solved);
  // Behind a cut nothing can be compared.
  const seenToM = Math.min(solved.jointM.at(-1)!, after.solution.lengthM / after.solution.distanceScale);
  const subtraction = subtractSweeps(common.value, solved, seenToM, resolutionM);
  const { alignment } = subtraction;
  const placed = subtraction.found.map((change) =>
    placeChange(line, before.solution, change, resolutionM, lengthWords),
  );
  const ended = endChange(request, common.value, subtraction, solved.jointM.at(-1)!, lengthWords);
  const changes =
    ended === null ? placed : [...placed.filter((c) => c.distanceM < ended.distanceM - resolutionM), ended];
  const perGrowthDb = lossPerGrowthDb(solved, frequencyHz);
  return succeed({
    verdict: changes.length > 0 ? 'changed' : 'unchanged',
    changes,
    stretchPpm: 1e6 * alignment.change.stretch,
    stretchSigmaPpm: 1e6 * Math.hypot(alignment.stretchSigma, LEAST_STRETCH_SIGMA),
    lossChangeDb: perGrowthDb * alignment.change.loss,
    lossChangeSigmaDb: Math.hypot(perGrowthDb * alignment.lossSigma, LEAST_LOSS_SIGMA_DB),
    bands: line.limits.bands.map(
      (band): BandChange => ({
        name: band.name,
        fromHz: band.fromHz,
        toHz: band.toHz,
        beforeDb: worstReturnLossDb(before.sweep, band),
        afterDb: worstReturnLossDb(after.sweep, band),
      }),
    ),
    end: {
      before: before.solution.end,
      after: after.solution.end,
      lengthBeforeM: before.solution.lengthM,
      lengthAfterM: after.solution.lengthM,
    },
    common: { startHz: frequencyHz[0]!, stopHz: frequencyHz.at(-1)!, points: frequencyHz.length },
    difference: { frequencyHz, gamma: alignment.difference },
    notices: [...common.notices, ...subtraction.notices, ...strangers(changes, alignment)],
  });
}

/** Doubt that no noise tells of: sections that weather differently, corrections. Chosen by `npm run bench:change`. */
const LEAST_STRETCH_SIGMA = 12e-6;
const LEAST_LOSS_SIGMA_DB = 0.06;

/** Changes, and growth of delay, from which two sweeps are hardly of one line. */
const MANY_CHANGES = 5;
const FAR_STRETCH = 1200e-6;

function strangers(changes: readonly Change[], { change }: Alignment): Notice[] {
  if (changes.length < MANY_CHANGES && Math.abs(change.stretch) < FAR_STRETCH) return [];
  return [
    {
      code: 'not-alike',
      what:
        'the two sweeps differ nearly everywhere: either much was changed on this line, or they are not of the same ' +
        'line, or not taken at the same reference plane',
    },
  ];
}

/** 6 dB width of an echo with the comparison's taper, m, mean over the run. */
function resolutionOf(frequencyHz: Float64Array, { run, jointM, endS }: SolvedRun): number {
  const bandHz = frequencyHz[frequencyHz.length - 1]! - frequencyHz[0]!;
  const width = createWindow(COMPARE_WINDOW, frequencyHz.length).width6DbBins;
  const lengthM = jointM[jointM.length - 1]!;
  const delaySPerM = lengthM > 0 ? endS / (2 * lengthM) : groupDelaySPerM(run, frequencyHz)[0]!;
  return width / (2 * bandHz * delaySPerM);
}

function worstReturnLossDb(
  sweep: Sweep,
  band: { readonly fromHz: number; readonly toHz: number },
): number | null {
  const { frequencyHz, gamma } = sweep;
  if (frequencyHz[0]! > band.fromHz || frequencyHz.at(-1)! < band.toHz) return null;
  let worst = 0;
  frequencyHz.forEach((f, i) => {
    if (f >= band.fromHz && f <= band.toHz) worst = Math.max(worst, Math.hypot(gamma.re[i]!, gamma.im[i]!));
  });
  return worst > 0 ? -20 * Math.log10(worst) : null;
}
