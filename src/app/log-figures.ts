/** What is followed from sweep to sweep, out of an analysis. */
import { DB_PER_NEPER } from '../line/constants.ts';
import type { BandLimit } from '../line/line.ts';
import { sectionMedium } from '../line/medium.ts';
import { returnLossDb } from '../line/reflection.ts';
import type { BandFigures, EchoFigures, EntryFigures } from '../logbook/entry.ts';
import { echoWords } from '../report/echo-words.ts';
import type { Sweep } from '../sweep/sweep.ts';
import type { Analysis } from './analysis.ts';

/** Name of the match over everything that was swept: what is followed where the line names no bands. */
export const WHOLE_SWEEP = 'whole sweep';

/** Takes the figures out; those of a loss check are null, for `locate` makes none. */
export function figuresOf(analysis: Analysis): EntryFigures {
  const { sweep, line, reach, solution } = analysis;
  const startHz = sweep.frequencyHz[0] ?? 0;
  const stopHz = sweep.frequencyHz.at(-1) ?? 0;
  const loss = solvedLoss(analysis, (startHz + stopHz) / 2);
  const whole: BandLimit = { name: WHOLE_SWEEP, fromHz: startHz, toHz: stopHz, returnLossDb: Number.NaN };
  return {
    startHz,
    stopHz,
    points: sweep.frequencyHz.length,
    resolutionM: reach.resolutionM,
    temperatureC: line.temperatureKnown ? line.temperatureC : null,
    lengthM: solution.lengthM,
    lengthSigmaM: known(solution.lengthSigmaM),
    end: solution.end,
    residualDb: known(solution.residualDb),
    lossDb: loss?.lossDb ?? null,
    lossAtHz: loss?.atHz ?? null,
    lossSigmaDb: null,
    lossMarginDb: null,
    lossPass: null,
    bands: (line.limits.bands.length > 0 ? line.limits.bands : [whole]).flatMap((band) =>
      bandFigures(band, sweep),
    ),
    echoes: solution.echoes.flatMap((echo, i) => {
      const { distanceM, distanceSigmaM, returnLossDb: seenDb, correctedReturnLossDb, kind } = echo;
      const figures: EchoFigures = {
        distanceM,
        distanceSigmaM: known(distanceSigmaM) ?? 0,
        returnLossDb: seenDb,
        correctedReturnLossDb,
        kind,
        words: echoWords(analysis, echo),
        value:
          echo.value && Number.isFinite(echo.value.value)
            ? { ...echo.value, sigma: known(echo.value.sigma) }
            : null,
        joint: echo.joint?.index ?? null,
        place: analysis.places[i] ?? '',
        severity: analysis.severities[i] ?? 'sound',
      };
      return [distanceM, seenDb, correctedReturnLossDb].every(Number.isFinite) ? [figures] : [];
    }),
  };
}

/** One-way loss of the described sections, matched, times the factor that the solver found. */
function solvedLoss(analysis: Analysis, atHz: number): { lossDb: number; atHz: number } | null {
  const { line, solution } = analysis;
  let neper = 0;
  let startM = 0;
  for (const section of line.sections) {
    const lengthM = Math.min(section.lengthM ?? Number.POSITIVE_INFINITY, solution.lengthM - startM);
    if (!(lengthM > 0)) break;
    const medium = sectionMedium(section, Float64Array.of(atHz), {
      temperatureC: line.temperatureC,
      z0Ohm: analysis.sweep.portOhm,
    });
    neper += medium.gamma.re[0]! * lengthM;
    startM += lengthM;
  }
  const lossDb = neper * DB_PER_NEPER * solution.lossFactor;
  return Number.isFinite(lossDb) ? { lossDb, atHz } : null;
}

/** Worst return loss within a band; nothing where the sweep has no point in it. */
function bandFigures(band: BandLimit, { frequencyHz, gamma }: Sweep): BandFigures[] {
  let worst = -1;
  let worstAtHz = 0;
  for (let i = 0; i < frequencyHz.length; i++) {
    const f = frequencyHz[i]!;
    const size = Math.hypot(gamma.re[i]!, gamma.im[i]!);
    if (f < band.fromHz || f > band.toHz || !(size > worst)) continue;
    worst = size;
    worstAtHz = f;
  }
  if (!(worst > 0)) return [];
  return [
    {
      name: band.name,
      fromHz: band.fromHz,
      toHz: band.toHz,
      worstReturnLossDb: returnLossDb(worst),
      worstAtHz,
      limitDb: known(band.returnLossDb),
    },
  ];
}

function known(value: number | null): number | null {
  return value !== null && Number.isFinite(value) ? value : null;
}
