/** Bounces between a line's end and what stands before it, which a sweep of too few points folds back into the line. */

/** What of a line decides where its bounces fold to. */
export type FoldedLine = {
  /** Distances of joints 1 … n+1, m; the last is the end. */
  readonly jointM: readonly number[];
  /** Distances at which the two sweeps fold, m. */
  readonly reachM: readonly [number, number];
  /** Sizes of the trace of the line itself. */
  readonly ownSizes: Float64Array;
  readonly resolutionM: number;
};

/** A place that a bounce folds to, how far around it shows, and the size that it may have there. */
export type FoldedBounce = { readonly distanceM: number; readonly smearM: number; readonly allowed: number };

/** Share of the end's echo that its bounces off joints have, and by how much of the reach dispersion smears them. */
const FOLDED_SHARE = 0.01;
const SMEARED = 0.005;
const BOUNCE_SHARE = 1.5;

/**
 * Where bounces between the end and a joint fold back into the line: there the weather moves them the wrong way, and two
 * grids fold them to two places.
 */
export function foldedBounces(
  { jointM, reachM, ownSizes, resolutionM }: FoldedLine,
  found: readonly { readonly distanceM: number; readonly reflection: number }[],
): FoldedBounce[] {
  const smearM = 1.5 * resolutionM + SMEARED * Math.max(...reachM);
  const endM = jointM[jointM.length - 1]!;
  const endSize = ownSizes.reduce((most, size) => Math.max(most, size), 0);
  const mirrors = [
    ...jointM.slice(0, -1).map((distanceM) => ({ distanceM, allowed: FOLDED_SHARE * endSize })),
    // The bounce off a change has no counterpart before.
    ...found.map(({ distanceM, reflection }) => ({
      distanceM,
      allowed: BOUNCE_SHARE * reflection * endSize,
    })),
  ];
  return reachM.flatMap((reach) =>
    mirrors
      .map(({ distanceM, allowed }) => ({ distanceM: 2 * endM - distanceM, allowed }))
      .filter(({ distanceM }) => distanceM > NEAR_REACH * reach)
      .map(({ distanceM, allowed }) => ({
        distanceM: Math.abs(distanceM - reach * Math.round(distanceM / reach)),
        smearM,
        allowed,
      })),
  );
}

/** Share of the reach from which a sweep's own estimate of what is between its points is no longer good. */
const NEAR_REACH = 0.9;

/** Size that bounces may have at a distance; 0 where none comes to. */
export function foldedSize(bounces: readonly FoldedBounce[], distanceM: number): number {
  return bounces.reduce(
    (most, bounce) =>
      Math.abs(distanceM - bounce.distanceM) < bounce.smearM ? Math.max(most, bounce.allowed) : most,
    0,
  );
}
