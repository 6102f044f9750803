/** The guides of the table as text and JSON. */

import { TABLE_TEMPERATURE_C } from '../line/constants.ts';
import { type GuideEntry, guideCutoffHz, guideLossDbPer100m, guideNextModeHz } from '../line/guide.ts';
import type { Problem } from '../outcome.ts';
import { digitsText, fixedText, lengthPerMetre, type Units } from '../plot/quantity-text.ts';
import { labelledRows } from './labelled-rows.ts';
import { type Question, runFigures, runLines } from './run-figures.ts';
import { tableLines } from './table-lines.ts';

/** Guides a line each: size, cut-off, band, and the loss at both ends of it. */
export function guideTableLines(guides: readonly GuideEntry[], units: Units): string[] {
  const head = ['id', 'a × b mm', 'cut-off', 'band MHz', 'loss', 'name'];
  return tableLines(
    head,
    guides.map((guide) => [
      guide.id,
      sizeText(guide),
      megahertzText(guideCutoffHz(guide)),
      guide.bandMHz === null ? '' : guide.bandMHz.join('–'),
      guide.bandMHz === null ? '' : guide.bandMHz.map((mhz) => lossText(guide, mhz * 1e6, units)).join('–'),
      guide.name,
    ]),
  );
}

/** One guide with its figures, their sources, and what a run of it does. */
export function oneGuideText(guide: GuideEntry, question: Question, units: Units, columns: number): string {
  const row = labelledRows(columns);
  const run = runFigures(guide, question);
  const { sources } = guide;
  const lines = [
    `${guide.id}: ${guide.name}`,
    '',
    ...(run === null ? [] : [...runLines(run, units, row), '']),
    ...(guide.aliases.length > 0 ? row('also', guide.aliases.join(', ')) : []),
    ...row('family', guide.family),
    ...row('width a', `${guide.aMm} ±${digitsText(guide.aToleranceMm, 2)} mm`, sources.aMm),
    ...(guide.bMm === null ? [] : row('height b', `${guide.bMm} mm`, sources.bMm)),
    ...row('cut-off', `${megahertzText(guideCutoffHz(guide))} MHz (TE10)`),
    ...row('next mode', `${megahertzText(guideNextModeHz(guide))} MHz`),
    ...(guide.bandMHz === null ? [] : row('band', `${guide.bandMHz.join('–')} MHz`, sources.bandMHz)),
    ...(guide.conductivitySPerM === null
      ? []
      : row('walls', `${guide.conductivitySPerM / 1e6} MS/m`, sources.conductivitySPerM)),
    ...(guide.lossDbPer100m === null
      ? []
      : row('loss', `${guide.lossDbPer100m} dB/100 m, taken as constant`, sources.lossDbPer100m)),
    ...(guide.note === null ? [] : row('note', guide.note)),
  ];
  return `${lines.join('\n')}\n\nThe letters are explained in cables/SOURCES.md.\n`;
}

/** A guide as the JSON array has it: what only a cable has is null. */
export function jsonGuide(guide: GuideEntry, question: Question): Record<string, unknown> {
  const { id, name, ...others } = guide;
  const run = runFigures(guide, question);
  return {
    id,
    name,
    type: 'guide',
    z0: null,
    velocityFactor: null,
    k1: null,
    k2: null,
    ...others,
    cutoffMHz: guideCutoffHz(guide) / 1e6,
    nextModeMHz: guideNextModeHz(guide) / 1e6,
    ...(run === null ? {} : { run }),
  };
}

/** Says so when a frequency cannot travel in a guide; null when it can. */
export function belowCutoff(guide: GuideEntry, frequencyHz: number | null): Problem | null {
  const cutoffHz = guideCutoffHz(guide);
  if (frequencyHz === null || frequencyHz > cutoffHz) return null;
  return {
    code: 'guide-cutoff',
    what: `nothing travels in ${guide.name} at or below its cut-off, ${megahertzText(cutoffHz)} MHz`,
    found: `--at ${megahertzText(frequencyHz)}MHz`,
    mend: `ask about a frequency above it${guide.bandMHz === null ? '' : `, for example --at ${guide.bandMHz[0]}MHz`}`,
  };
}

function sizeText(guide: GuideEntry): string {
  return guide.bMm === null ? `${guide.aMm}` : `${guide.aMm} × ${guide.bMm}`;
}

function lossText(guide: GuideEntry, frequencyHz: number, units: Units): string {
  return fixedText(guideLossDbPer100m(guide, frequencyHz, TABLE_TEMPERATURE_C) / lengthPerMetre(units), 2);
}

/** In MHz to a tenth. */
function megahertzText(frequencyHz: number): string {
  return fixedText(frequencyHz / 1e6, 1);
}
