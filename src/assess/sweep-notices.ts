/** What a sweep cannot do on its line, and what sweep would: said with the result, since it bounds what it can mean. */
import { medianStepHz } from '../locate/grid-weights.ts';
import type { Reach } from '../locate/reach.ts';
import type { Notice } from '../outcome.ts';
import { formatFrequency, formatSweepRange } from '../sweep/quantity-format.ts';
import { harmonicRange, roundStepHz, UNAMBIGUOUS_ROOM } from './sweep-steps.ts';

/** Resolutions on a line below which a sweep is called narrow for it. Choice of this program. */
const FEW_RESOLUTIONS = 10;
/** Resolutions on a line that a better sweep is asked for. */
const ENOUGH_RESOLUTIONS = 20;

export type SweepOnLine = {
  /** Rising, above 0; length n ≥ 2. */
  readonly frequencyHz: Float64Array;
  readonly reach: Reach;
  /** Distance to the end, m: described, or found where it was not. */
  readonly lengthM: number;
};

/** A notice for each limit that the sweep meets on this line, each with what would lift it. */
export function sweepNotices(given: SweepOnLine): Notice[] {
  const folding = foldingNotice(given);
  return [folding, narrowNotice(given), folding ? null : ohmsNotice(given)].filter(
    (notice) => notice !== null,
  );
}

/** A line longer than the sweep can tell apart. */
function foldingNotice(given: SweepOnLine): Notice | null {
  const { frequencyHz, reach, lengthM } = given;
  if (lengthM <= reach.unambiguousM) return null;
  const stepHz = wantedStepHz(given);
  const points = Math.ceil(bandOf(frequencyHz) / stepHz) + 1;
  const apartM = reach.unambiguousM.toFixed(1);
  return {
    code: 'line-folds',
    what:
      `the line of ${lengthM.toFixed(1)} m is longer than the ${apartM} m that steps of ` +
      `${formatFrequency(medianStepHz(frequencyHz), 3)} tell apart, so what lies beyond is seen ${apartM} m nearer; ` +
      `steps of ${formatFrequency(stepHz)}, ${points} points over this band, would show it where it is`,
  };
}

/** A band too narrow to part what lies on the line. */
function narrowNotice({ frequencyHz, reach, lengthM }: SweepOnLine): Notice | null {
  if (!(reach.resolutionM * FEW_RESOLUTIONS > lengthM)) return null;
  const bandHz = bandOf(frequencyHz);
  const wantedM = lengthM / ENOUGH_RESOLUTIONS;
  return {
    code: 'band-narrow',
    what:
      `the band of ${formatFrequency(bandHz, 3)} parts only what is ${reach.resolutionM.toFixed(2)} m apart, on a ` +
      `line of ${lengthM.toFixed(1)} m; ${formatFrequency((bandHz * reach.resolutionM) / wantedM, 2)} would part ` +
      `${wantedM.toFixed(2)} m, as far as line and instrument allow it`,
  };
}

/** A start too high for ohms: what keeps a line that does not fold from being measured. */
function ohmsNotice(given: SweepOnLine): Notice | null {
  const { frequencyHz, reach } = given;
  if (reach.impedanceProfile !== 'modelled') return null;
  const stepHz = wantedStepHz(given);
  const range = formatSweepRange(harmonicRange(0, frequencyHz[frequencyHz.length - 1]!, stepHz));
  return {
    code: 'ohms-not-measured',
    what:
      `the sweep starts too high, at ${formatFrequency(frequencyHz[0]!)}, for ohms against distance to be measured; ` +
      `one of ${range} would do; until then they are drawn from the solved line`,
  };
}

/** A step of 1, 2 or 5 times a power of ten with which the whole line is told apart, and some room beyond, Hz. */
function wantedStepHz({ frequencyHz, reach, lengthM }: SweepOnLine): number {
  const largestHz = (medianStepHz(frequencyHz) * reach.unambiguousM) / (UNAMBIGUOUS_ROOM * lengthM);
  return Math.min(frequencyHz[frequencyHz.length - 1]! / 2, roundStepHz(largestHz));
}

function bandOf(frequencyHz: Float64Array): number {
  return frequencyHz[frequencyHz.length - 1]! - frequencyHz[0]!;
}
