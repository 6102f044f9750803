/** What a run of one cable or guide does at one frequency: loss, delay, and what to doubt of them. */
import type { CableEntry } from '../line/cable.ts';
import { isGuide, type TableEntry } from '../line/cable-table.ts';
import {
  type GuideEntry,
  guideGroupDelaySPerM,
  guideLossDbPer100m,
  guideWavelengthM,
  outsideGuideBand,
} from '../line/guide.ts';
import { aboveHighestFrequency, attenuationDbPer100m, outsideFittedBand } from '../line/loss.ts';
import { coaxMedium } from '../line/medium.ts';
import type { Notice } from '../outcome.ts';
import {
  decibelText,
  fixedText,
  frequencyText,
  lengthPerMetre,
  lengthText,
  temperatureText,
  type Units,
} from '../plot/quantity-text.ts';
import type { LabelledRow } from './labelled-rows.ts';

/** What is asked of a run; null where not given. */
export type Question = {
  readonly frequencyHz: number | null;
  readonly lengthM: number | null;
  readonly temperatureC: number;
};

export type RunFigures = {
  readonly frequencyHz: number;
  readonly lengthM: number | null;
  readonly temperatureC: number;
  readonly lossDbPer100m: number;
  /** One way. */
  readonly lossDb: number | null;
  /** Group delay, one way. */
  readonly delayNs: number | null;
  /** Wavelength along a guide; absent for a cable. */
  readonly guideWavelengthM?: number;
  readonly notices: readonly Notice[];
};

/** Length of line over which loss is given. */
export const PER_100_M = 100;
/** Step of the central difference that gives a cable's group delay, relative to the frequency. */
const DELAY_STEP = 1e-4;

/**
 * Loss by the table's law, delay by the model; null when no frequency was asked for.
 *
 * @param question For a guide, a frequency above its cut-off.
 */
export function runFigures(entry: TableEntry, question: Question): RunFigures | null {
  const { frequencyHz, lengthM, temperatureC } = question;
  if (frequencyHz === null) return null;
  const { lossDbPer100m, delaySPerM, notices, ...more } = isGuide(entry)
    ? guideFigures(entry, frequencyHz, temperatureC)
    : cableFigures(entry, frequencyHz, temperatureC);
  return {
    frequencyHz,
    lengthM,
    temperatureC,
    lossDbPer100m,
    lossDb: lengthM === null ? null : (lossDbPer100m * lengthM) / PER_100_M,
    delayNs: lengthM === null ? null : delaySPerM * lengthM * 1e9,
    ...more,
    notices: notices.filter((notice) => notice !== null),
  };
}

function cableFigures(entry: CableEntry, frequencyHz: number, temperatureC: number) {
  const step = frequencyHz * DELAY_STEP;
  const around = Float64Array.of(frequencyHz - step, frequencyHz + step);
  const { gamma } = coaxMedium(entry, around, { temperatureC });
  return {
    lossDbPer100m: attenuationDbPer100m(entry, frequencyHz, temperatureC),
    delaySPerM: (gamma.im[1]! - gamma.im[0]!) / (2 * Math.PI * 2 * step),
    notices: [outsideFittedBand(entry, frequencyHz, frequencyHz), aboveHighestFrequency(entry, frequencyHz)],
  };
}

function guideFigures(entry: GuideEntry, frequencyHz: number, temperatureC: number) {
  return {
    lossDbPer100m: guideLossDbPer100m(entry, frequencyHz, temperatureC),
    delaySPerM: guideGroupDelaySPerM(entry, frequencyHz),
    guideWavelengthM: guideWavelengthM(entry, frequencyHz),
    notices: [outsideGuideBand(entry, frequencyHz, frequencyHz)],
  };
}

/** The figures as rows of a page. */
export function runLines(run: RunFigures, units: Units, row: LabelledRow): string[] {
  const at = `at ${frequencyText(run.frequencyHz)}, ${temperatureText(run.temperatureC, units)}`;
  const per = units === 'ft' ? '100 ft' : '100 m';
  const guided = run.guideWavelengthM !== undefined;
  const notes = [
    ...(run.guideWavelengthM === undefined
      ? []
      : row('wavelength', `${fixedText(run.guideWavelengthM * 1e3, 2)} mm along the guide`)),
    ...run.notices.flatMap((notice) => row('note', notice.what)),
  ];
  if (run.lossDb === null || run.delayNs === null || run.lengthM === null)
    return [
      ...row('loss', `${fixedText(run.lossDbPer100m / lengthPerMetre(units), 2)} dB/${per} ${at}`),
      ...notes,
    ];
  const delay = (ns: number): string => `${fixedText(ns, 2)} ns`;
  return [
    ...row('loss one way', `${fixedText(run.lossDb, 2)} dB for ${lengthText(run.lengthM, units)} ${at}`),
    ...row(
      'return loss',
      `${decibelText(2 * run.lossDb)} with the far end ${guided ? 'shorted' : 'open or shorted'}`,
    ),
    ...row('delay', `${delay(run.delayNs)} one way, ${delay(2 * run.delayNs)} there and back`),
    ...notes,
  ];
}
