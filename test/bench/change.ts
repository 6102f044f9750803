/**
 * Accuracy of comparisons: `npx tsx test/bench/change.ts --seed 1,2,3 --count 60 --misses`.
 *
 * Pairs of sweeps of one drawn line, compared by the program as the command line does; prints each figure over all
 * seeds, the worst seed's in brackets, beside the targets of design section 13.
 */
import { parseArgs } from 'node:util';
import { loadCableTable } from '../../src/app/cable-files.ts';
import { compare } from '../../src/app/compare.ts';
import type { CableTable } from '../../src/line/cable-table.ts';
import { median } from '../../src/numerics/statistics.ts';
import { type ChangePair, drawChangePair } from '../scenes/change-pair.ts';
import { requestOf } from './run-program.ts';
import { type ChangeScore, scoreChange } from './score-change.ts';

const { values } = parseArgs({
  options: {
    seed: { type: 'string', default: '1,2,3' },
    count: { type: 'string', default: '60' },
    misses: { type: 'boolean', default: false },
  },
});
const seeds = values.seed.split(',').map(Number);
const table = await loadCableTable();
if (!table.ok) throw new Error(table.problems.map((problem) => problem.what).join('; '));
const misses: string[] = [];
const scores = seeds.flatMap((seed) =>
  Array.from({ length: Number(values.count) }, (_, index) => {
    if (process.stderr.isTTY) process.stderr.write(`\r${seed}/${index} `);
    return scoreOf(drawChangePair(seed, index), table.value);
  }),
);
print();

function scoreOf(pair: ChangePair, cables: CableTable): ChangeScore {
  const requests = [pair.beforeText, pair.afterText].map((sweepText) =>
    requestOf({ sweepText, lineText: pair.lineText, lineDescribed: true }, cables),
  );
  const [before, after] = requests;
  if (!before?.ok || !after?.ok) throw new Error(`pair ${pair.seed}/${pair.index} has no line`);
  const started = performance.now();
  const outcome = compare({ before: before.value, after: after.value });
  const ms = performance.now() - started;
  const failed = outcome.ok ? null : outcome.problems.map((problem) => problem.what).join('; ');
  const comparison = outcome.ok ? outcome.value.comparison : null;
  const score = scoreChange(pair, comparison, ms, failed);
  const { truth } = pair;
  const name = `${pair.seed}/${pair.index} ${truth.plan} ${truth.points.join('/')} pts ${truth.end} ${truth.lengthM.toFixed(1)} m`;
  if (failed !== null) misses.push(`${name}: ${failed}`);
  else if (truth.change !== null && !score.found)
    misses.push(
      `${name}: missed ${truth.change.kind} at ${truth.change.distanceM.toFixed(2)} m, ${truth.change.levelDb.toFixed(1)} dB`,
    );
  if (score.falseChanges > 0)
    misses.push(
      `${name}: of ${comparison?.changes.map((c) => `${c.kind} ${c.distanceM.toFixed(2)} m ${c.levelDb.toFixed(1)} dB`).join(', ')} ` +
        `${score.falseChanges} false`,
    );
  return score;
}

type Figure = {
  readonly label: string;
  readonly target: string;
  readonly which: (score: ChangeScore) => boolean;
  readonly passes: (score: ChangeScore) => boolean;
  readonly worst: 'lowest' | 'highest';
};

function print(): void {
  const changed = (s: ChangeScore): boolean => s.levelDb !== null;
  const found = (s: ChangeScore): boolean => s.found;
  const figures: readonly Figure[] = [
    { label: 'changes found', target: '≥ 95 %', which: changed, passes: found, worst: 'lowest' },
    {
      label: '  of those of −52 to −60 dB',
      target: '≥ 88 %',
      which: (s) => s.levelDb !== null && s.levelDb < -52,
      passes: found,
      worst: 'lowest',
    },
    { label: '  of those at joints', target: '', which: (s) => s.atJoint, passes: found, worst: 'lowest' },
    {
      label: 'unchanged lines called changed',
      target: '≤ 3 %',
      which: (s) => s.levelDb === null,
      passes: (s) => s.falseChanges > 0,
      worst: 'highest',
    },
    {
      label: 'changed lines with a false change besides',
      target: '',
      which: changed,
      passes: (s) => s.falseChanges > 0,
      worst: 'highest',
    },
    {
      label: 'kind right in wide sweeps, of found',
      target: '',
      which: (s) => s.found && s.wide,
      passes: (s) => s.kindRight === true,
      worst: 'lowest',
    },
    {
      label: 'kind right in narrow sweeps, of found',
      target: '',
      which: (s) => s.found && !s.wide,
      passes: (s) => s.kindRight === true,
      worst: 'lowest',
    },
    {
      label: 'joint or cable right, of found',
      target: '',
      which: found,
      passes: (s) => s.placeRight === true,
      worst: 'lowest',
    },
    {
      label: 'within 2σ, of found',
      target: '90–98 %',
      which: found,
      passes: (s) => s.errorM !== null && s.sigmaM !== null && s.errorM <= 2 * s.sigmaM,
      worst: 'lowest',
    },
  ];
  console.log(`change: ${scores.length} pairs, seeds ${seeds.join(', ')}`);
  for (const { label, target, which, passes, worst } of figures) {
    const share = (all: readonly ChangeScore[]): number | null =>
      all.some(which) ? all.filter(which).filter(passes).length / all.filter(which).length : null;
    const perSeed = seeds
      .map((seed) => share(scores.filter((score) => score.seed === seed)))
      .filter((value) => value !== null);
    const ranked = perSeed.sort((a, b) => (worst === 'lowest' ? a - b : b - a));
    console.log(
      `  ${label.padEnd(44)} ${percent(share(scores))} of ${String(scores.filter(which).length).padStart(3)}` +
        `  (${percent(ranked[0] ?? null)})  ${target}`,
    );
  }
  const middle = (pick: (score: ChangeScore) => number | null): string =>
    median(scores.flatMap((score) => pick(score) ?? []).map(Math.abs)).toPrecision(2);
  console.log(`  median error of stretch ${middle((s) => s.stretchErrorPpm)} ppm`);
  console.log(`  median error of loss change ${middle((s) => s.lossErrorDb)} dB`);
  console.log(`  median time, two solves included, ${middle((s) => s.compareMs)} ms`);
  console.log(`  without an answer ${scores.filter((score) => score.failed !== null).length}`);
  if (values.misses) for (const miss of misses) console.log(miss);
}

function percent(share: number | null): string {
  return share === null ? '    –' : `${(100 * share).toFixed(1).padStart(5)} %`;
}
