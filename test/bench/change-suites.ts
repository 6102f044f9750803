/** Suites of pairs of sweeps of one line, compared by the program as the command line does. */
import { compare } from '../../src/app/compare.ts';
import type { Comparison } from '../../src/assess/comparison.ts';
import type { CableTable } from '../../src/line/cable-table.ts';
import { type ChangePair, drawChangePair } from '../scenes/change-pair.ts';
import { requestOf } from './run-program.ts';
import { type ChangeScore, scoreChange } from './score-change.ts';

/** Share of each suite's pairs whose second sweep is set otherwise. */
const OTHER_GRID_SHARES = { change: 0.2, 'change-grids': 1 } as const;

export type ChangeSuiteName = keyof typeof OTHER_GRID_SHARES;

export const CHANGE_SUITE_NAMES = Object.keys(OTHER_GRID_SHARES) as ChangeSuiteName[];

/** A pair's score, and a line of text for each thing that the program got wrong. */
export type ScoredPair = { readonly score: ChangeScore; readonly misses: readonly string[] };

/** Draws a pair, has the program compare it, and scores what it says. */
export function scoredPair(
  suite: ChangeSuiteName,
  seed: number,
  index: number,
  cables: CableTable,
): ScoredPair {
  const pair = drawChangePair(seed, index, OTHER_GRID_SHARES[suite]);
  const [before, after] = [pair.beforeText, pair.afterText].map((sweepText) =>
    requestOf({ sweepText, lineText: pair.lineText, lineDescribed: true }, cables),
  );
  if (!before?.ok || !after?.ok) throw new Error(`pair ${seed}/${index} has no line`);
  const started = performance.now();
  const outcome = compare({ before: before.value, after: after.value });
  const ms = performance.now() - started;
  const failed = outcome.ok ? null : outcome.problems.map((problem) => problem.what).join('; ');
  const comparison = outcome.ok ? outcome.value.comparison : null;
  const score = scoreChange(pair, comparison, ms, failed);
  return { score, misses: missesOf(suite, pair, comparison, score) };
}

function missesOf(
  suite: ChangeSuiteName,
  { truth, seed, index }: ChangePair,
  comparison: Comparison | null,
  score: ChangeScore,
): string[] {
  const name =
    `${suite} ${seed}/${index} ${truth.plan} ${truth.points.join('/')} pts (${truth.grid}) ${truth.end} ` +
    `${truth.lengthM.toFixed(1)} m`;
  if (score.failed !== null) return [`${name}: ${score.failed}`];
  const { change } = truth;
  const misses: string[] = [];
  if (change !== null && !score.found)
    misses.push(
      `${name}: missed ${change.kind} at ${change.distanceM.toFixed(2)} m` +
        `${change.joint === null ? '' : ` (joint ${change.joint})`}, ${change.levelDb.toFixed(1)} dB`,
    );
  if (score.falseChanges > 0)
    misses.push(
      `${name}: of ${(comparison?.changes ?? []).map((c) => `${c.kind} ${c.distanceM.toFixed(2)} m ${c.levelDb.toFixed(1)} dB`).join(', ')} ` +
        `${score.falseChanges} false`,
    );
  return misses;
}
