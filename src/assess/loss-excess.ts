/** Where loss beyond the table sits, as far as the solved line tells. */

import { DB_PER_NEPER } from '../line/constants.ts';
import type { Line } from '../line/line.ts';
import type { Solution } from '../locate/solution.ts';
import { placesOf } from './find-findings.ts';
import { type LengthWords, stretchPlaceText } from './place-text.ts';
import { isLossy, passingNp } from './run-path.ts';

export type Excess = {
  /** A resistive fault, a wet stretch, or the cable as a whole. */
  readonly kind: 'fault' | 'wet' | 'all-along';
  /** "at joint 3, main run to top jumper". */
  readonly where: string;
  /** What it is, in words. */
  readonly what: string;
  /** One way, dB. */
  readonly lossDb: number;
  readonly sigmaDb: number | null;
};

export type ExcessQuestion = {
  readonly line: Line;
  readonly solution: Solution;
  /** Loss of the cable over its table where the check is made, and its σ, dB. */
  readonly overTableDb: number;
  readonly sigmaDb: number;
  readonly tableLossDb: number;
  /** True where the loss grows with frequency as water's does. */
  readonly growing: boolean;
  readonly lengthWords: LengthWords;
};

/** Loss over the table that samples of sound cable show. @source ±5 % (common practice). */
const SAMPLE_SHARE = 0.05;
/** Excess that is worth a word, in σ. */
const SURE_SIGMAS = 2;

/** Faults first, then wet stretches, then what the cable as a whole has too much. */
export function excessOf(question: ExcessQuestion): Excess[] {
  const { line, solution, overTableDb, sigmaDb, tableLossDb, growing, lengthWords } = question;
  const places = placesOf(line, solution, lengthWords);
  const faults = solution.echoes.slice(0, -1).flatMap((echo, i): Excess[] => {
    if (!isLossy(echo)) return [];
    const lossDb = passingNp([echo], Float64Array.of(1))[0]! * DB_PER_NEPER;
    const what = echo.kind === 'series-resistance' ? 'a series resistance' : 'a shunt leakage';
    return [{ kind: 'fault', where: places[i]!, what, lossDb, sigmaDb: null }];
  });
  const wet = solution.stretches.flatMap((stretch): Excess[] =>
    stretch.kind === 'wet'
      ? [
          {
            kind: 'wet',
            where: stretchPlaceText(line, stretch, lengthWords),
            what: 'wet cable',
            lossDb: overTableDb,
            sigmaDb,
          },
        ]
      : [],
  );
  const much = overTableDb > SURE_SIGMAS * sigmaDb + SAMPLE_SHARE * tableLossDb;
  if (wet.length > 0 || !much) return [...faults, ...wet];
  return [
    ...faults,
    {
      kind: growing ? 'wet' : 'all-along',
      where: 'somewhere along the run',
      what: growing
        ? 'loss that grows with frequency, as that of wet cable does'
        : 'more loss than the table gives: another or an older cable, a warmer one, or joints that lose',
      lossDb: overTableDb,
      sigmaDb,
    },
  ];
}
