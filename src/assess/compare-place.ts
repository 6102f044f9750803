/** What a change is: its kind, size and distance, from the complex difference around it with the way there undone. */
import { type MediumRun, pathTo, sectionAt } from '../line/medium-run.ts';
import { fitOneLump, type PlacedLump } from '../locate/fit-lumps.ts';
import {
  fitTables,
  type LocalEcho,
  matchTables,
  type TableColumn,
  writeLocalReflection,
} from '../locate/local-echo.ts';
import { lumpedTypeOf, type PureType, pureTypeOf } from '../locate/probe.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';

/** The difference as the fits see it. */
export type Difference = {
  readonly frequencyHz: Float64Array;
  /** After − before, 0 where a point does not count. */
  readonly gamma: ComplexArray;
  readonly weight: Float64Array;
  /** The line as it was when the later sweep was taken. */
  readonly run: MediumRun;
};

export type ChangeFit = {
  readonly lump: PlacedLump;
  /** Lead over the next kind, nats. */
  readonly lead: number;
  /** 1σ of the distance, from the noise around it alone. */
  readonly sigmaM: number;
};

const BLOCKS = 96;

/** The best pure kind within reach of a distance; null when none explains anything. */
export function fitChange(
  difference: Difference,
  atM: number,
  reachM: number,
  variance: number,
): ChangeFit | null {
  const echo = localDifference(difference, atM);
  const [best, second] = fitOneLump(echo, reachM, variance);
  if (best === undefined) return null;
  const lump = best.lumps[0]!;
  return {
    lump,
    lead: second === undefined ? Number.POSITIVE_INFINITY : (second.cost - best.cost) / 2,
    sigmaM: placeSigmaM(echo, lump, variance),
  };
}

/** Takes a change out of the difference, in place, and tells its RMS size as seen from the port. */
export function takeOut(difference: Difference, lump: PlacedLump): number {
  const { frequencyHz, gamma, weight, run } = difference;
  const seen = seenReflection(difference, lump);
  let power = 0;
  for (let i = 0; i < frequencyHz.length; i++) {
    power += seen.re[i]! ** 2 + seen.im[i]! ** 2;
    gamma.re[i] = gamma.re[i]! - weight[i]! * seen.re[i]!;
    gamma.im[i] = gamma.im[i]! - weight[i]! * seen.im[i]!;
  }
  return Math.sqrt(power / run.alpha[0]!.length);
}

/** Reflection of a lone lump as seen from the port, at every frequency. */
export function seenReflection(
  { frequencyHz, run }: Pick<Difference, 'frequencyHz' | 'run'>,
  lump: PlacedLump,
): ComplexArray {
  const out = complexZeros(frequencyHz.length);
  writeLocalReflection(
    {
      omega: frequencyHz.map((f) => 2 * Math.PI * f),
      beta: run.beta[sectionAt(run, lump.distanceM)]!,
    },
    [{ type: lumpedTypeOf(lump.type), strength: lump.strength, offsetM: 0 }],
    out,
  );
  const way = pathTo(run, lump.distanceM);
  for (let i = 0; i < frequencyHz.length; i++) {
    const size = Math.exp(-2 * way.attenuation[i]!);
    const cos = size * Math.cos(2 * way.phase[i]!);
    const sin = -size * Math.sin(2 * way.phase[i]!);
    const re = out.re[i]!;
    out.re[i] = re * cos - out.im[i]! * sin;
    out.im[i] = re * sin + out.im[i]! * cos;
  }
  return out;
}

/** The difference carried to a distance and gathered into blocks, as `localEcho` does with a sweep's residual. */
export function localDifference(difference: Difference, planeM: number): LocalEcho {
  const { frequencyHz, gamma, weight, run } = difference;
  const n = frequencyHz.length;
  const blocks = Math.min(BLOCKS, n);
  const zeros = (): Float64Array => new Float64Array(blocks);
  const out = { planeM, omega: zeros(), beta: zeros(), re: zeros(), im: zeros(), weight: zeros() };
  const way = pathTo(run, planeM);
  const beta = run.beta[sectionAt(run, planeM)]!;
  for (let i = 0; i < n; i++) {
    if (weight[i] === 0) continue;
    const size = Math.exp(-2 * way.attenuation[i]!);
    const cos = size * Math.cos(2 * way.phase[i]!);
    const sin = size * Math.sin(2 * way.phase[i]!);
    const power = size * size;
    const b = Math.floor((i * blocks) / n);
    out.re[b] = out.re[b]! + cos * gamma.re[i]! - sin * gamma.im[i]!;
    out.im[b] = out.im[b]! + cos * gamma.im[i]! + sin * gamma.re[i]!;
    out.weight[b] = out.weight[b]! + power;
    out.omega[b] = out.omega[b]! + power * 2 * Math.PI * frequencyHz[i]!;
    out.beta[b] = out.beta[b]! + power * beta[i]!;
  }
  for (let b = 0; b < blocks; b++) {
    const w = out.weight[b]!;
    if (w === 0) continue;
    for (const values of [out.re, out.im, out.omega, out.beta]) values[b] = values[b]! / w;
  }
  return out;
}

/** 1/σ² = Σ w·|∂q/∂d|² with ∂q/∂d = −2jβ·q, less what the phase of a free size would take. */
function placeSigmaM(echo: LocalEcho, lump: PlacedLump, variance: number): number {
  const own = complexZeros(echo.omega.length);
  writeLocalReflection(echo, [{ type: lumpedTypeOf(lump.type), strength: lump.strength, offsetM: 0 }], own);
  let information = 0;
  for (let b = 0; b < echo.omega.length; b++)
    information +=
      (echo.weight[b]! * (2 * echo.beta[b]!) ** 2 * (own.re[b]! ** 2 + own.im[b]! ** 2)) / variance;
  return information > 0 ? 1 / Math.sqrt(information) : Number.POSITIVE_INFINITY;
}

/** Halves of a connector stand about this far apart, m. Common practice. */
const HALVES_M = 0.04;
const GRID_M = 0.01;

/** Reflection at the top of the band by which opening and closing one half of a joint changes it, 1σ. */
const RE_TORQUE_REFLECTION = 0.006;

export type JointFit = {
  /** What a resistance in series or across the line explains beyond re-torquing, nats. */
  readonly lead: number;
  readonly type: PureType;
  readonly strength: number;
  readonly distanceM: number;
};

/**
 * Weighs two accounts of a difference at a joint: two reactive halves that have moved a little, or a resistance beside
 * them.
 */
export function fitJoint(
  difference: Difference,
  atM: number,
  reachM: number,
  variance: number,
  ownReflection: number,
): JointFit {
  const echo = localDifference(difference, atM);
  const reach = Math.max(4, Math.ceil(reachM / GRID_M));
  const half = Math.round(HALVES_M / 2 / GRID_M);
  const tables = matchTables(echo, 0, GRID_M, reach + half, 2 * half);
  const top = echo.omega[echo.omega.length - 1]!;
  // S = ωx/2 of a small reactive part of strength x.
  const sigma = (2 * Math.max(RE_TORQUE_REFLECTION, 0.2 * ownReflection)) / top;
  let plain = 0;
  let with_ = { gain: 0, strength: 0, at: 0 };
  for (let at = -reach; at <= reach; at++) {
    const halves: TableColumn[] = [
      { reactive: true, at: at - half, sigma },
      { reactive: true, at: at + half, sigma },
    ];
    plain = Math.max(plain, fitTables(tables, halves, variance)?.gain ?? 0);
    for (const place of [at - half, at + half]) {
      // The first account may be larger than a wrench explains: that is for the caller to judge.
      const large: TableColumn = { reactive: true, at: place, sigma: 1 / top };
      plain = Math.max(plain, fitTables(tables, [...halves, large], variance)?.gain ?? 0);
      const fit = fitTables(tables, [...halves, { reactive: false, at: place, sigma: 0.5 }], variance);
      if (fit !== null && fit.gain > with_.gain)
        with_ = { gain: fit.gain, strength: fit.strengths[2]!, at: place };
    }
  }
  return {
    lead: (with_.gain - plain) / 2,
    type: pureTypeOf('resistive', with_.strength),
    strength: with_.strength,
    distanceM: atM + with_.at * GRID_M,
  };
}
