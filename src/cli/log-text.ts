/** Entries of the logbook as text: the list, and one of them with what was concluded. */

import { verdictWords, worstOf } from '../assess/verdict.ts';
import { type EchoFigures, type Entry, type EntrySummary, shortKey } from '../logbook/entry.ts';
import { fullName } from '../logbook/stored-lines.ts';
import type { Verification } from '../logbook/verify.ts';
import { cutText, wrapText } from '../plot/cells.ts';
import { SEVERITY_GLYPHS } from '../plot/line-strip.ts';
import {
  decibelText,
  fixedText,
  frequencySpanText,
  frequencyText,
  lengthText,
  lengthWithSigmaText,
  temperatureText,
  type Units,
} from '../plot/quantity-text.ts';
import type { Paint } from './paint.ts';
import { tableLines } from './table-lines.ts';

export type LogTextOptions = { readonly columns: number; readonly units: Units; readonly paint: Paint };

/** Wall time with a blank in place of the T. */
export function whenText(takenAt: string): string {
  return takenAt.replace('T', ' ');
}

/** What an echo is and where: an end and an ordinary joint say both at once. */
export function echoLabel({ kind, words, place }: EchoFigures): string {
  if (words.startsWith('end: ')) return words;
  return kind === 'joint' ? place.replace(/^at /u, '') : `${words}, ${place}`;
}

/** A table of entries, one line each, and how many there are. */
export function listText(
  entries: readonly EntrySummary[],
  logbook: string,
  { columns, paint }: LogTextOptions,
): string {
  const rows = tableLines(
    ['entry', 'taken', 'found', 'line'],
    entries.map((entry) => [
      shortKey(entry.key),
      entry.takenAt.slice(0, 10),
      verdictWords(entry),
      [fullName(entry.line), ...(entry.baseline ? ['baseline'] : []), entry.who, entry.note]
        .filter((text) => text !== '')
        .join(' · '),
    ]),
  );
  const lines = new Set(entries.map(({ lineId }) => lineId)).size;
  const count = `${entries.length} entr${entries.length === 1 ? 'y' : 'ies'} of ${lines} line${lines === 1 ? '' : 's'}`;
  return [
    ...(entries.length > 0 ? [paint('dim', cutText(`  ${rows[0]}`, columns))] : []),
    ...entries.map((entry, i) => {
      const severity = worstOf(entry);
      const line = cutText(`${SEVERITY_GLYPHS[severity]} ${rows[i + 1]}`, columns);
      return severity === 'sound' ? line : paint(severity, line);
    }),
    paint('dim', cutText(`${count} in ${logbook}`, columns)),
    '',
  ].join('\n');
}

/** One entry: what it is, what was said about it, and what was concluded then. */
export function entryText(entry: Entry, { columns, units, paint }: LogTextOptions): string {
  const { figures } = entry;
  const severity = worstOf(entry);
  const row = (label: string, text: string): string[] =>
    text === ''
      ? []
      : wrapText(text, columns - 12).map(
          (line, i) => `${i === 0 ? label.padEnd(12) : ' '.repeat(12)}${line}`,
        );
  const end = figures.end === 'unknown' ? 'end' : figures.end;
  const echoes = tableLines(
    ['distance', 'seen dB', 'corrected', 'what'],
    figures.echoes.map((echo) => [
      lengthWithSigmaText(echo.distanceM, echo.distanceSigmaM, units),
      fixedText(-echo.returnLossDb, 1),
      fixedText(-echo.correctedReturnLossDb, 1),
      echoLabel(echo),
    ]),
  );
  const head = `${SEVERITY_GLYPHS[severity]} ${fullName(entry.line)}, ${whenText(entry.takenAt)}: ${verdictWords(entry)}`;
  return [
    ...wrapText(head, columns).map((line) => paint(severity, line)),
    ...row('entry', `${shortKey(entry.key)}${entry.baseline ? ', the baseline of this line' : ''}`),
    ...row(
      'sweep',
      `${entry.file}, ${frequencySpanText(figures.startHz, figures.stopHz)}, ${figures.points} points`,
    ),
    ...row('SHA-256', entry.hash),
    ...row('by', entry.who),
    ...row('instrument', entry.instrument),
    ...row('weather', entry.weather),
    ...row('note', entry.note),
    ...row('logged', `${entry.addedAt.slice(0, 16).replace('T', ' ')} UTC, with ${entry.tool}`),
    ...row('temperature', figures.temperatureC === null ? '' : temperatureText(figures.temperatureC, units)),
    ...row(
      'end',
      `${end} at ${
        figures.lengthSigmaM === null
          ? lengthText(figures.lengthM, units)
          : lengthWithSigmaText(figures.lengthM, figures.lengthSigmaM, units)
      }`,
    ),
    ...row(
      'loss',
      figures.lossDb === null || figures.lossAtHz === null
        ? ''
        : `${fixedText(figures.lossDb, 2)} dB one way at ${frequencyText(figures.lossAtHz)}, as solved`,
    ),
    ...figures.bands.flatMap((band) =>
      row(
        'match',
        `${band.name}: worst ${decibelText(band.worstReturnLossDb)} return loss, at ${frequencyText(band.worstAtHz)}` +
          (band.limitDb === null ? '' : ` (limit ${decibelText(band.limitDb)})`),
      ),
    ),
    '',
    paint('dim', cutText(`  ${echoes[0]}`, columns)),
    ...figures.echoes.map((echo, i) => {
      const line = cutText(`${SEVERITY_GLYPHS[echo.severity]} ${echoes[i + 1]}`, columns);
      return echo.severity === 'sound' ? line : paint(echo.severity, line);
    }),
    '',
  ].join('\n');
}

/** What `check` found. */
export function checkText(found: Verification, logbook: string, { columns, paint }: LogTextOptions): string {
  const whole = found.damaged.length === 0 && found.structure.length === 0;
  const verdict = whole
    ? `● every entry is what was saved: ${found.entries} entr${found.entries === 1 ? 'y' : 'ies'}, ${found.originals} originals`
    : `× ${found.damaged.length} of ${found.entries} entries are damaged`;
  return [
    ...wrapText(`${verdict}, in ${logbook}`, columns).map((line) => paint(whole ? 'sound' : 'fault', line)),
    ...found.damaged.flatMap(({ key, line, what }) =>
      wrapText(`${shortKey(key)} ${fullName(line)}: ${what}`, columns - 2).map((text) => `  ${text}`),
    ),
    ...found.structure.flatMap((text) =>
      wrapText(`the file itself: ${text}`, columns - 2).map((one) => `  ${one}`),
    ),
    '',
  ].join('\n');
}
