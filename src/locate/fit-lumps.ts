/** One or two discontinuities in the open cable: which kinds, where and how large, from what a place shows by itself. */
import type { LocalEcho, LocalPart } from './local-echo.ts';
import { fitLocal, fitTables, type MatchTables, matchTables, type TableColumn } from './local-echo.ts';
import { lumpedTypeOf, PURE_TYPES, type PureType, pureTypeOf } from './probe.ts';

/** A discontinuity of a pure kind. */
export type PlacedLump = {
  readonly type: PureType;
  /** Signed, as the lumps of the cascade take it. */
  readonly strength: number;
  /** Model distance, m. */
  readonly distanceM: number;
};

export type LumpFit = {
  readonly lumps: readonly PlacedLump[];
  /** −2 ln likelihood, up to a constant that all fits to one echo share. */
  readonly cost: number;
};

/** Grid of the first look, as a share of half a wavelength at the top of the band. */
const GRID_SHARE = 1 / 12;

/** Tips tried per kind: neighbours half a wave away are nearly alike in a narrow sweep. */
const MOST_TIPS = 3;

/**
 * The best fit of every pure kind within reach of the echo's plane, best first.
 *
 * @param variance Of the sweep's residual per real component.
 */
export function fitOneLump(echo: LocalEcho, reachM: number, variance: number): LumpFit[] {
  const { tables, gridM, count } = lookAround(echo, reachM, 0);
  const fits = PURE_TYPES.flatMap((type): LumpFit[] => {
    const tips: { readonly at: number; readonly strength: number; readonly gain: number }[] = [];
    const at = (k: number) => signedMatch(tables, type, k, variance);
    for (let k = -count; k <= count; k++) {
      const { gain, strength } = at(k);
      if (gain > 0 && gain >= at(Math.max(-count, k - 1)).gain && gain >= at(Math.min(count, k + 1)).gain)
        tips.push({ at: k, strength, gain });
    }
    tips.sort((a, b) => b.gain - a.gain);
    const trials = tips
      .slice(0, MOST_TIPS)
      .map((tip) => refineLumps(echo, [{ type, strength: tip.strength, offsetM: tip.at * gridM }], variance))
      .filter((fit) => fit.lumps[0]!.type === type);
    return trials.sort((a, b) => a.cost - b.cost).slice(0, 1);
  });
  return fits.sort((a, b) => a.cost - b.cost);
}

/** Combinations of kinds that are refined. */
const MOST_REFINED = 6;

/**
 * The best fits of two lumps together, best first: every two places and kinds by linear least squares, the best few
 * refined with the bounces between them.
 *
 * @param apartM Nearest and farthest that the two may stand.
 */
export function fitTwoLumps(
  echo: LocalEcho,
  reachM: number,
  apartM: readonly [number, number],
  variance: number,
): LumpFit[] {
  const { tables, gridM, count } = lookAround(echo, reachM, apartM[1]);
  const nearest = Math.max(1, Math.floor(apartM[0] / gridM));
  const farthest = Math.ceil(apartM[1] / gridM);
  const best = new Map<string, { readonly starts: readonly Start[]; readonly gain: number }>();
  for (let i = -count; i <= count; i++) {
    for (let j = i + nearest; j <= Math.min(count, i + farthest); j++) {
      for (let combination = 0; combination < 4; combination++) {
        const first = pairColumn((combination & 1) === 1, i);
        const second = pairColumn(combination >> 1 === 1, j);
        const pair = fitPair(tables, first, second);
        if (pair === null) continue;
        const typeA = pureTypeOf(first.reactive ? 'reactive' : 'resistive', pair.a);
        const typeB = pureTypeOf(second.reactive ? 'reactive' : 'resistive', pair.b);
        const key = `${typeA} ${typeB}`;
        if (pair.gain <= (best.get(key)?.gain ?? 0)) continue;
        best.set(key, {
          gain: pair.gain,
          starts: [
            { type: typeA, strength: pair.a, offsetM: i * gridM },
            { type: typeB, strength: pair.b, offsetM: j * gridM },
          ],
        });
      }
    }
  }
  return [...best.values()]
    .sort((a, b) => b.gain - a.gain)
    .slice(0, MOST_REFINED)
    .map(({ starts }) => refineLumps(echo, starts, variance))
    .sort((a, b) => a.cost - b.cost);
}

type Start = { readonly type: PureType; readonly strength: number; readonly offsetM: number };

/** Fits strengths and places from a start; a lump may turn into its dual on the way, and is named by what it became. */
function refineLumps(echo: LocalEcho, starts: readonly Start[], variance: number): LumpFit {
  const top = echo.omega[echo.omega.length - 1]!;
  const kinds = starts.map(({ type }) => lumpedTypeOf(type));
  const fit = fitLocal(
    echo,
    {
      start: starts.flatMap(({ strength, offsetM }) => [strength, offsetM]),
      steps: kinds.flatMap((kind) => [kind === 'resistive' ? 1e-5 : 1e-5 / top, 1e-6]),
      parts: (p) =>
        kinds
          .map((type, k): LocalPart => ({ type, strength: p[2 * k]!, offsetM: p[2 * k + 1]! }))
          .sort((a, b) => a.offsetM - b.offsetM),
      priors: () => [],
    },
    variance,
  );
  const lumps = kinds.map((kind, k): PlacedLump => {
    const strength = fit.parameters[2 * k]!;
    return {
      type: pureTypeOf(kind, strength),
      strength,
      distanceM: echo.planeM + fit.parameters[2 * k + 1]!,
    };
  });
  return { lumps, cost: fit.cost };
}

function lookAround(
  echo: LocalEcho,
  reachM: number,
  apartM: number,
): { readonly tables: MatchTables; readonly gridM: number; readonly count: number } {
  const gridM = (Math.PI / echo.beta[echo.beta.length - 1]!) * GRID_SHARE;
  const count = Math.ceil(reachM / gridM);
  return { tables: matchTables(echo, 0, gridM, count, Math.ceil(apartM / gridM)), gridM, count };
}

/** Strength and gain of one kind at one offset; nothing where the sign is the dual's. */
function signedMatch(
  tables: MatchTables,
  type: PureType,
  at: number,
  variance: number,
): { readonly strength: number; readonly gain: number } {
  const reactive = lumpedTypeOf(type) === 'reactive';
  const column: TableColumn = { reactive, at, sigma: Number.POSITIVE_INFINITY };
  const fit = fitTables(tables, [column], variance);
  const strength = fit?.strengths[0] ?? 0;
  return fit === null || strength === 0 || pureTypeOf(lumpedTypeOf(type), strength) !== type
    ? { strength: 0, gain: 0 }
    : { strength, gain: fit.gain };
}

type PairColumn = { readonly reactive: boolean; readonly at: number };

function pairColumn(reactive: boolean, at: number): PairColumn {
  return { reactive, at };
}

/** Templates more alike than this can't be told apart. */
const LEAST_INDEPENDENCE = 0.02;

/** Two parts by linear least squares, written out: this is the inner loop of the search for pairs. */
function fitPair(
  tables: MatchTables,
  first: PairColumn,
  second: PairColumn,
): { readonly a: number; readonly b: number; readonly gain: number } | null {
  const energyA = (first.reactive ? tables.reactiveReactive : tables.resistiveResistive)[0]!;
  const energyB = (second.reactive ? tables.reactiveReactive : tables.resistiveResistive)[0]!;
  const x = (first.reactive ? tables.reactive : tables.resistive)[tables.centre + first.at]!;
  const y = (second.reactive ? tables.reactive : tables.resistive)[tables.centre + second.at]!;
  const apart = second.at - first.at;
  const cross =
    first.reactive === second.reactive
      ? (first.reactive ? tables.reactiveReactive : tables.resistiveResistive)[apart]!
      : first.reactive
        ? -tables.resistiveReactive[apart]!
        : tables.resistiveReactive[apart]!;
  const determinant = energyA * energyB - cross * cross;
  if (determinant < LEAST_INDEPENDENCE * energyA * energyB) return null;
  const a = (energyB * x - cross * y) / determinant;
  const b = (energyA * y - cross * x) / determinant;
  return { a, b, gain: a * x + b * y };
}
