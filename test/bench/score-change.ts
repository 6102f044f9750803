/** Compares what `compare` concluded with the truth of a pair of sweeps. */
import type { Comparison } from '../../src/assess/comparison.ts';
import type { ChangePair, GridChange } from '../scenes/change-pair.ts';

export type ChangeScore = {
  readonly seed: number;
  readonly index: number;
  /** Level of the true change, dB; null where there is none. */
  readonly levelDb: number | null;
  readonly atJoint: boolean;
  readonly grid: GridChange;
  readonly even: boolean;
  readonly wide: boolean;
  /** The rest of these is null when it wasn't found. */
  readonly found: boolean;
  readonly kindRight: boolean | null;
  readonly placeRight: boolean | null;
  readonly errorM: number | null;
  readonly sigmaM: number | null;
  readonly levelErrorDb: number | null;
  /** Changes that are none. */
  readonly falseChanges: number;
  readonly stretchErrorPpm: number | null;
  readonly lossErrorDb: number | null;
  readonly compareMs: number;
  readonly failed: string | null;
};

/** How far a change may be placed from the truth: half a resolution, 0.15 m or 3σ, the latter at most 1 % of the line. */
function toleranceM({ truth }: ChangePair, sigmaM: number): number {
  return Math.max(0.5 * truth.resolutionM, 0.15, Math.min(3 * sigmaM, 0.01 * truth.lengthM));
}

/** Scores one comparison; null for one that could not be made. */
export function scoreChange(
  pair: ChangePair,
  comparison: Comparison | null,
  compareMs: number,
  failed: string | null = null,
): ChangeScore {
  const { change } = pair.truth;
  const changes = comparison?.changes ?? [];
  const near =
    change === null
      ? []
      : changes.filter((c) => Math.abs(c.distanceM - change.distanceM) <= toleranceM(pair, c.distanceSigmaM));
  const partner = near.sort((a, b) => b.levelDb - a.levelDb)[0] ?? null;
  return {
    seed: pair.seed,
    index: pair.index,
    levelDb: change?.levelDb ?? null,
    atJoint: change !== null && change.joint !== null,
    grid: pair.truth.grid,
    even: pair.truth.even,
    wide: !pair.truth.plan.startsWith('narrow'),
    found: partner !== null,
    kindRight: partner && partner.kind === change?.kind,
    placeRight: partner && (partner.joint?.index ?? null) === (change?.joint ?? null),
    errorM: partner && change && Math.abs(partner.distanceM - change.distanceM),
    sigmaM: partner?.distanceSigmaM ?? null,
    levelErrorDb: partner && change && partner.levelDb - change.levelDb,
    falseChanges: changes.length - (partner === null ? 0 : 1),
    stretchErrorPpm: comparison && comparison.stretchPpm - pair.truth.stretchPpm,
    lossErrorDb: comparison && comparison.lossChangeDb - pair.truth.lossChangeDb,
    compareMs,
    failed,
  };
}
