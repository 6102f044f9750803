/** Loss against its limit over the bands of a line. */
import type { Line } from '../line/line.ts';
import type { Notice } from '../outcome.ts';
import { formatFrequency } from '../sweep/quantity-format.ts';

/** The loss of one band where its margin is smallest; null where the sweep cannot tell. */
export type BandLoss = {
  readonly name: string;
  readonly fromHz: number;
  readonly toHz: number;
  readonly atHz: number;
  readonly lossDb: number | null;
  readonly sigmaDb: number | null;
  readonly tableLossDb: number;
  /** What faults on the way add, dB. */
  readonly faultsDb: number;
  readonly limitDb: number;
  readonly marginDb: number | null;
  readonly pass: boolean | null;
};

/** Curves of length n. */
export type LossCurves = {
  readonly line: Line;
  readonly frequencyHz: Float64Array;
  readonly lossDb: Float64Array | null;
  readonly sigmaDb: Float64Array | null;
  readonly faultsDb: Float64Array;
  readonly tableLossDb: Float64Array;
  readonly limitDb: Float64Array;
};

/** Name of the one frequency that is judged where the line names no band. */
export const MIDDLE = 'middle of the sweep';

/** One entry per band of the line that was swept; the middle of the sweep where there is none. */
export function bandLosses(curves: LossCurves): {
  readonly bands: readonly BandLoss[];
  readonly notices: readonly Notice[];
} {
  const { line, frequencyHz } = curves;
  const n = frequencyHz.length;
  const missed: Notice[] = [];
  const bands = line.limits.bands.flatMap(({ name, fromHz, toHz }) => {
    const inside: number[] = [];
    frequencyHz.forEach((f, i) => {
      if (f >= fromHz && f <= toHz) inside.push(i);
    });
    if (inside.length > 0) return [worstOf(curves, { name, fromHz, toHz }, inside)];
    missed.push({
      code: 'band-not-swept',
      what: `the band ${name}, ${formatFrequency(fromHz)} to ${formatFrequency(toHz)}, was not swept`,
    });
    return [];
  });
  if (bands.length > 0) return { bands, notices: missed };
  const centreHz = (frequencyHz[0]! + frequencyHz[n - 1]!) / 2;
  const at = frequencyHz.findIndex((f) => f >= centreHz);
  const middle = { name: MIDDLE, fromHz: frequencyHz[at]!, toHz: frequencyHz[at]! };
  return { bands: [worstOf(curves, middle, [at])], notices: missed };
}

/** The band with the least margin. */
export function worstBand(bands: readonly BandLoss[]): BandLoss {
  return bands.reduce((a, b) => ((b.marginDb ?? 0) < (a.marginDb ?? 0) ? b : a));
}

function worstOf(
  { frequencyHz, lossDb, sigmaDb, faultsDb, tableLossDb, limitDb }: LossCurves,
  band: Pick<BandLoss, 'name' | 'fromHz' | 'toHz'>,
  inside: readonly number[],
): BandLoss {
  const marginAt = (i: number): number => limitDb[i]! - (lossDb === null ? 0 : lossDb[i]! + faultsDb[i]!);
  const at = inside.reduce((a, b) => (marginAt(b) < marginAt(a) ? b : a));
  const marginDb = lossDb === null ? null : marginAt(at);
  return {
    ...band,
    atHz: frequencyHz[at]!,
    lossDb: lossDb?.[at] ?? null,
    sigmaDb: sigmaDb?.[at] ?? null,
    tableLossDb: tableLossDb[at]!,
    faultsDb: faultsDb[at]!,
    limitDb: limitDb[at]!,
    marginDb,
    pass: marginDb === null ? null : marginDb >= 0,
  };
}
