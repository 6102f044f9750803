/** The figures of comparisons, with the targets of design section 13, by level and by how the second sweep is set. */
import { median } from '../../src/numerics/statistics.ts';
import type { FigureKind } from './figure-text.ts';
import type { ChangeScore } from './score-change.ts';

export type ChangeFigure = FigureKind & {
  readonly label: string;
  /** The scores that are counted. */
  readonly which: (score: ChangeScore) => boolean;
  /** Null where there is nothing to count. */
  readonly value: (counted: readonly ChangeScore[]) => number | null;
};

const found = (score: ChangeScore): boolean => score.found;
const changed = ({ levelDb }: ChangeScore): boolean => levelDb !== null;
const unchanged = (score: ChangeScore): boolean => !changed(score);
const within =
  (fromDb: number, toDb: number) =>
  ({ levelDb }: ChangeScore): boolean =>
    levelDb !== null && levelDb < fromDb && levelDb >= toDb;

function share(
  label: string,
  target: FigureKind['target'],
  which: (score: ChangeScore) => boolean,
  passes: (score: ChangeScore) => boolean,
): ChangeFigure {
  const value = (counted: readonly ChangeScore[]) =>
    counted.length === 0 ? null : counted.filter(passes).length / counted.length;
  return { label, unit: 'percent', target, which, value };
}

function middle(
  label: string,
  unit: FigureKind['unit'],
  pick: (score: ChangeScore) => number | null,
): ChangeFigure {
  const value = (counted: readonly ChangeScore[]) => {
    const sizes = counted.flatMap((score) => pick(score) ?? []).map(Math.abs);
    return sizes.length === 0 ? null : median(sizes);
  };
  return { label, unit, target: null, which: () => true, value };
}

const isFalse = (score: ChangeScore): boolean => score.falseChanges > 0;
/** In the order of the table's rows. */
const GRIDS = [
  ['both set alike', ({ grid, even }: ChangeScore) => grid === 'same' && even],
  ['uneven sweeps', ({ even }: ChangeScore) => !even],
  ['other points', ({ grid }: ChangeScore) => grid === 'points'],
  ['another start', ({ grid }: ChangeScore) => grid === 'start'],
  ['another stop', ({ grid }: ChangeScore) => grid === 'stop'],
] as const;

export const CHANGE_FIGURES: readonly ChangeFigure[] = [
  share('changes of −35 to −60 dB found', { atLeast: 0.95 }, changed, found),
  share('  of those of −35 to −45 dB', null, within(-35, -45), found),
  share('  of those of −45 to −52 dB', null, within(-45, -52), found),
  share('  of those of −52 to −60 dB', { atLeast: 0.88 }, within(-52, -61), found),
  share('  of those at joints', null, (score) => score.atJoint, found),
  ...GRIDS.map(([label, which]) => share(`  ${label}`, null, (s) => changed(s) && which(s), found)),
  share('unchanged lines called changed', { atMost: 0.03 }, unchanged, isFalse),
  ...GRIDS.map(([label, which]) => share(`  ${label}`, null, (s) => unchanged(s) && which(s), isFalse)),
  share('changed lines with a false change besides', null, changed, isFalse),
  share(
    'kind right in wide sweeps, of found',
    null,
    (s) => s.found && s.wide,
    (s) => s.kindRight === true,
  ),
  share(
    'kind right in narrow sweeps, of found',
    null,
    (s) => s.found && !s.wide,
    (s) => s.kindRight === true,
  ),
  share('joint or cable right, of found', null, found, (s) => s.placeRight === true),
  share(
    'within 2σ, of found',
    { atLeast: 0.9, atMost: 0.98 },
    found,
    (s) => s.errorM !== null && s.sigmaM !== null && s.errorM <= 2 * s.sigmaM,
  ),
  middle('median error of stretch', 'ppm', (s) => s.stretchErrorPpm),
  middle('median error of loss change', 'dB', (s) => s.lossErrorDb),
  middle('median time, two solves included', 'ms', (s) => s.compareMs),
  {
    label: 'pairs without an answer',
    unit: 'count',
    target: { atMost: 0 },
    which: () => true,
    value: (counted) => counted.filter((score) => score.failed !== null).length,
  },
];
