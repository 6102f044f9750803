/**
 * Changes along a line, strongest first: what stands clear of the difference's own floor, and at joints of what opening
 * and closing them does.
 */
import { groupDelaySPerM, sectionAt } from '../line/medium-run.ts';
import type { PlacedLump } from '../locate/fit-lumps.ts';
import type { PureType } from '../locate/probe.ts';
import { localUpperFloor, quantile } from '../numerics/statistics.ts';
import { foldedBounces, foldedSize } from './compare-folds.ts';
import { type Difference, fitChange, fitJoint, takeOut } from './compare-place.ts';
import { type SeenTracer, sizesOf } from './compare-trace.ts';

export type FoundChange = {
  /** Model distance on the later day, m. */
  readonly distanceM: number;
  readonly sigmaM: number;
  /** Apparent RMS level over the band, dB, negative. */
  readonly levelDb: number;
  readonly kind: PureType | 'unresolved';
  /** Joint it sits at, counted from 1; null inside a section. */
  readonly joint: number | null;
  /** RMS reflection at its place. */
  readonly reflection: number;
  /** What was taken out for it. */
  readonly lump: PlacedLump;
};

export type FindRequest = {
  /** Changed: what is found is taken out. */
  readonly difference: Difference;
  readonly tracer: SeenTracer;
  readonly resolutionM: number;
  /** Distances of joints 1 … n+1, m; the first is the port, the last the end. */
  readonly jointM: readonly number[];
  /** Sizes of the trace of the line itself, as it was before and would look on the later day. */
  readonly ownSizes: Float64Array;
  /** Distances at which the two sweeps fold, m. */
  readonly reachM: readonly [number, number];
};

const MOST_CHANGES = 8;

/** Share of the neighbours under the floor, and how far a change stands over it. */
const FLOOR_SHARE = 0.85;
const OVER_FLOOR = 3.4;

/** Smallest apparent size that is called a change, −64 dB: below that no one would climb for it. */
const LEAST_SIZE = 10 ** (-64 / 20);

/** What alignment leaves of an echo, as a share of it. */
const LEFT_SHARE = 0.02;

/** What is left of a change that was taken out, as a share of it, and how far around. */
const HALO_SHARE = 0.08;
const HALO_RESOLUTIONS = 3;

/** Share of its own echo, and reflection of its own, that opening and closing a joint may change. */
const JOINT_SHARE = 0.5;
const JOINT_REFLECTION = 0.011;

/** Lead of a resistance at a joint over re-torquing, nats, and the reflection it must have. */
const JOINT_LEAD = 9;
const LEAST_JOINT_REFLECTION = 0.0065;
const RESISTIVE_SHARE = 0.1;
const MOST_OVER_SHOWN = 1.6;

/** A lump takes twice its reflection off what is behind it; an end that rings shows half as much again beside its peak. */
const WEAKENED = 3;

/** What residues of two corrections leave of the end's own echo, as a share of it. */
const END_SHARE = 0.12;

/** Lead of a kind over the next, nats, below which it is a coin toss. */
const KIND_LEAD = 1;

/** Finds them. */
export function findChanges(request: FindRequest): FoundChange[] {
  const { difference, tracer } = request;
  const found: FoundChange[] = [];
  const done = new Set<number>();
  while (found.length < MOST_CHANGES) {
    const sizes = sizesOf(tracer.trace(difference.gamma));
    const floor = floorOf(request, sizes);
    // The end last: what stands before it changes it too.
    const next =
      strongest(request, sizes, floor, { done, found }, 'line') ??
      strongest(request, sizes, floor, { done, found }, 'end');
    if (next === null) break;
    if (next.joint !== null) done.add(next.joint);
    const change = settle(request, next, floor, found);
    if (change === null) {
      if (next.joint === null) break;
      continue;
    }
    found.push(change);
  }
  return found.sort((a, b) => a.distanceM - b.distanceM);
}

type Candidate = { readonly at: number; readonly joint: number | null; readonly over: number };

function strongest(
  request: FindRequest,
  sizes: Float64Array,
  floor: Float64Array,
  { done, found }: { readonly done: ReadonlySet<number>; readonly found: readonly FoundChange[] },
  where: 'line' | 'end',
): Candidate | null {
  const { tracer, ownSizes, resolutionM } = request;
  const endM = request.jointM[request.jointM.length - 1]!;
  const near = Math.ceil(resolutionM / 2 / tracer.stepM);
  const folded = foldedBounces(request, found);
  let best: Candidate | null = null;
  for (let k = 1; k + 1 < sizes.length; k++) {
    if (sizes[k]! < sizes[k - 1]! || sizes[k]! < sizes[k + 1]!) continue;
    const distanceM = k * tracer.stepM;
    if (distanceM > endM + zoneM(request)) break;
    if (distanceM < portM(request)) continue;
    const joint = jointNear(request, distanceM);
    if ((joint === request.jointM.length) !== (where === 'end')) continue;
    if (joint === 1 || (joint !== null && done.has(joint))) continue;
    let own = 0;
    for (let i = Math.max(0, k - near); i <= Math.min(sizes.length - 1, k + near); i++)
      own = Math.max(own, ownSizes[i]!);
    const fold = foldedSize(folded, distanceM);
    const halo = found
      .filter((change) => Math.abs(change.distanceM - distanceM) < HALO_RESOLUTIONS * resolutionM)
      .reduce((sum, change) => sum + HALO_SHARE * 10 ** (change.levelDb / 20), 0);
    const over = sizes[k]! / Math.max(OVER_FLOOR * floor[k]!, LEFT_SHARE * own, halo, fold, LEAST_SIZE);
    if (over > 1 && over > (best?.over ?? 0)) best = { at: k, joint, over };
  }
  return best;
}

/** Round trip within which residues of the correction lie, s. */
const RESIDUE_S = 1.2e-9;

/** What belongs to the port, m: its joint, and what the correction leaves behind it. */
function portM(request: FindRequest): number {
  const { frequencyHz, run } = request.difference;
  return RESIDUE_S / 2 / groupDelaySPerM(run, frequencyHz)[0]! + request.resolutionM / 2;
}

/** Length of a connector, m. Common practice. */
const JOINT_LENGTH_M = 0.05;

/** Half-width of what belongs to a joint, m. */
function zoneM({ resolutionM }: FindRequest): number {
  return 0.7 * resolutionM + JOINT_LENGTH_M;
}

function jointNear(request: FindRequest, distanceM: number): number | null {
  const reachM = zoneM(request);
  let nearest: number | null = null;
  request.jointM.forEach((jointM, j) => {
    const offM = Math.abs(jointM - distanceM);
    if (offM < reachM && (nearest === null || offM < Math.abs(request.jointM[nearest - 1]! - distanceM)))
      nearest = j + 1;
  });
  return nearest;
}

/** Names and places a candidate and takes it out; null where it is what a joint may show. */
function settle(
  request: FindRequest,
  candidate: Candidate,
  floor: Float64Array,
  found: readonly FoundChange[],
): FoundChange | null {
  const { difference, tracer, resolutionM } = request;
  const atM = candidate.at * tracer.stepM;
  // The floor is an upper quantile of a complex Gaussian's size; both parts of a point have half its power.
  const rms = floor[candidate.at]! / Math.sqrt(-Math.log(1 - FLOOR_SHARE)) / tracer.noiseGain;
  const variance = (rms * rms) / 2;
  if (candidate.joint !== null) return settleJoint(request, candidate.joint, atM, variance, found);
  const fit = fitChange(difference, atM, 0.6 * resolutionM, variance);
  if (fit === null) return null;
  const size = takeOut(difference, fit.lump);
  return {
    distanceM: fit.lump.distanceM,
    sigmaM: fit.sigmaM,
    levelDb: levelOf(size),
    kind: fit.lead < KIND_LEAD ? 'unresolved' : fit.lump.type,
    joint: null,
    reflection: size / throughputAt(request, atM),
    lump: fit.lump,
  };
}

function settleJoint(
  request: FindRequest,
  joint: number,
  atM: number,
  variance: number,
  found: readonly FoundChange[],
): FoundChange | null {
  const { difference, tracer, ownSizes, resolutionM, jointM } = request;
  const through = throughputAt(request, atM);
  const k = Math.min(ownSizes.length - 1, Math.round(atM / tracer.stepM));
  const near = Math.ceil(resolutionM / 2 / tracer.stepM);
  let own = 0;
  for (let i = Math.max(0, k - near); i <= Math.min(ownSizes.length - 1, k + near); i++)
    own = Math.max(own, ownSizes[i]! / through);
  const shownAt = tracer.trace(difference.gamma);
  const atPoint = Math.round(atM / tracer.stepM);
  const place = { distanceM: jointM[joint - 1]!, sigmaM: 0, joint };
  const isEnd = joint === jointM.length;
  const weakened = found.reduce((sum, change) => sum + WEAKENED * change.reflection, 0);
  const allowed = isEnd ? (END_SHARE + weakened) * own : JOINT_SHARE * own;
  const resistive = fitJoint(difference, atM, 0.5 * resolutionM, variance, own);
  const reflection = Math.abs(resistive.strength) / 2;
  const shown = Math.hypot(shownAt.re[atPoint]!, shownAt.im[atPoint]!) / through;
  // A resistance that two halves beside it nearly cancel is no more than a fit to what a joint may show.
  const isResistive = resistive.lead > JOINT_LEAD && reflection < MOST_OVER_SHOWN * shown;
  if (isResistive && reflection > Math.max(LEAST_JOINT_REFLECTION, isEnd ? allowed : RESISTIVE_SHARE * own)) {
    const { type, strength, distanceM } = resistive;
    const lump = { type, strength, distanceM };
    return { ...place, levelDb: levelOf(takeOut(difference, lump)), kind: type, reflection, lump };
  }
  const fit = fitChange(difference, atM, 0.5 * resolutionM, variance);
  if (fit === null) return null;
  const size = takeOut(difference, fit.lump);
  if (size / through < Math.max(JOINT_REFLECTION, allowed)) return null;
  const kind = fit.lead < KIND_LEAD ? 'unresolved' : fit.lump.type;
  return { ...place, levelDb: levelOf(size), kind, reflection: size / through, lump: fit.lump };
}

function levelOf(size: number): number {
  return 20 * Math.log10(size + 1e-12);
}

/** RMS of the way there and back at a distance. */
function throughputAt({ difference: { run } }: FindRequest, distanceM: number): number {
  const last = sectionAt(run, distanceM);
  const n = run.alpha[0]!.length;
  let sum = 0;
  for (let i = 0; i < n; i++) {
    let np = 0;
    for (let s = 0; s <= last; s++) {
      const toM = s === last ? distanceM : run.startM[s + 1]!;
      np += run.alpha[s]![i]! * (toM - run.startM[s]!);
    }
    sum += Math.exp(-4 * np);
  }
  return Math.sqrt(sum / n);
}

/** What a joint shows around it, in resolutions. */
const JOINT_SKIRT = 1.2;
/** Cells that can speak for a line without its joints. */
const FEWEST_QUIET = 10;

/** Floor of the difference along the line, joints left out; nowhere below the middle of the whole. */
function floorOf({ tracer, resolutionM, jointM }: FindRequest, sizes: Float64Array): Float64Array {
  const { stepM } = tracer;
  const skirtM = JOINT_SKIRT * resolutionM + JOINT_LENGTH_M;
  const all = Array.from(sizes, (_, k) => k);
  const between = all.filter((k) => jointM.every((m) => Math.abs(m - k * stepM) > skirtM));
  const quiet = between.length < FEWEST_QUIET ? all : between;
  const levels = Float64Array.from(quiet, (k) => sizes[k]!);
  const guardCells = Math.min(Math.ceil((1.5 * resolutionM) / stepM), (levels.length >> 1) - 2);
  const reachCells = Math.max(Math.ceil((15 * resolutionM) / stepM), Math.ceil(levels.length * 0.12));
  const local = localUpperFloor(levels, {
    reachCells: Math.min(reachCells, levels.length - guardCells - 2),
    guardCells,
    share: FLOOR_SHARE,
  });
  const overall = quantile(levels, 0.5);
  let nearest = 0;
  return sizes.map((_, k) => {
    while (nearest + 1 < quiet.length && Math.abs(quiet[nearest + 1]! - k) <= Math.abs(quiet[nearest]! - k))
      nearest++;
    return Math.max(local[nearest]!, overall);
  });
}
