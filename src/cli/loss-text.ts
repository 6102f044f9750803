/** A loss check as text: the verdict first, then the figures it rests on. */
import type { Analysis } from '../app/analysis.ts';
import { spokenFile } from '../app/standard-input.ts';
import type { BandLoss } from '../assess/loss-bands.ts';
import type { LossCheck } from '../assess/loss-check.ts';
import type { Excess } from '../assess/loss-excess.ts';
import { wrapText } from '../plot/cells.ts';
import { fixedText, frequencyText, lengthText, temperatureText } from '../plot/quantity-text.ts';
import { CAUTIONS } from '../report/cautions.ts';
import { LOSS_METHODS, lossVerdictWords, whyNoLoss } from '../report/loss-words.ts';
import type { TextOptions } from './locate-text.ts';
import { tableLines } from './table-lines.ts';

/** How many frequencies of the curve the table shows. */
const CURVE_ROWS = 9;

/** Writes it all; every line at most `columns` wide. */
export function lossText(analysis: Analysis, check: LossCheck, options: TextOptions): string {
  const { columns, paint, units } = options;
  const { line, sweep, solution } = analysis;
  const severity = check.pass === false ? 'fault' : check.pass === null ? 'watch' : 'sound';
  const mark = { fault: '×', watch: '▲', sound: '●' }[severity];
  const name = line.name || spokenFile(sweep.file);
  const rows = (label: string, text: string): string[] => hanging(label, text, columns);
  const temperature = temperatureText(line.temperatureC, units);
  const notices = [...options.notices, ...analysis.notices, ...check.notices];
  return [
    ...wrapText(`${mark} ${name}: ${lossVerdictWords(solution, check)}`, columns).map((text) =>
      severity === 'sound' ? text : paint(severity, text),
    ),
    ...rows('line   ', `${lengthText(solution.lengthM, units)} to the end (${solution.end}), ${temperature}`),
    ...rows('read   ', LOSS_METHODS[check.method]),
    ...rows(
      'limit  ',
      `table at ${line.temperatureKnown ? temperature : `${temperature}, for none was given`}, ` +
        `${check.joints} joints (${fixedText(check.jointsDb, 2)} dB at ${frequencyText(check.atHz)}, common practice), ` +
        `and ${fixedText(check.allowedDb, 2)} dB over them${check.allowedIsDefault ? ' (common practice)' : ''}`,
    ),
    '',
    ...tableLines(
      ['band', 'at', 'loss dB', '±', 'table', 'limit', 'margin', ''],
      check.bands.map((band) => bandRow(band, check)),
    ).map((text) => text.trimEnd()),
    ...(check.lossDb === null ? [] : ['', ...curveLines(check)]),
    ...(check.excess.length === 0 ? [] : ['', ...check.excess.flatMap((one) => excessLines(one, columns))]),
    ...(check.lossDb === null ? ['', ...wrapText(whyNoLoss(solution), columns)] : []),
    ...(notices.length > 0 ? ['', ...notices.flatMap(({ what }) => rows('note   ', what))] : []),
    '',
    ...wrapText(CAUTIONS.short, columns).map((text) => paint('dim', text)),
    '',
  ].join('\n');
}

function bandRow(band: BandLoss, check: LossCheck): string[] {
  const db = (value: number | null): string => (value === null ? '–' : fixedText(value, 2));
  const word = band.pass === null ? '' : band.pass ? 'passes' : 'fails';
  const faults = band.faultsDb > 0.005 ? `, ${fixedText(band.faultsDb, 2)} dB more at faults` : '';
  return [
    band.name,
    frequencyText(band.atHz),
    band.lossDb === null && check.atMostDb !== null
      ? `≤ ${db(check.atMostDb[check.frequencyHz.indexOf(band.atHz)] ?? null)}`
      : db(band.lossDb),
    db(band.sigmaDb),
    db(band.tableLossDb),
    db(band.limitDb),
    db(band.marginDb),
    `${word}${faults}`,
  ];
}

/** The curve at a few frequencies, evenly spread over the sweep. */
function curveLines({ frequencyHz, lossDb, sigmaDb, tableLossDb }: LossCheck): string[] {
  const last = frequencyHz.length - 1;
  const shown = Array.from({ length: CURVE_ROWS }, (_, i) => Math.round((i * last) / (CURVE_ROWS - 1)));
  const rows = [...new Set(shown)].map((i) => [
    frequencyText(frequencyHz[i]!),
    fixedText(lossDb![i]!, 3),
    fixedText(sigmaDb![i]!, 3),
    fixedText(tableLossDb[i]!, 3),
    fixedText(lossDb![i]! - tableLossDb[i]!, 3),
  ]);
  return tableLines(['one way', 'loss dB', '±', 'table', 'over it'], rows);
}

function excessLines({ where, what, lossDb, sigmaDb }: Excess, columns: number): string[] {
  const size = `${fixedText(lossDb, 2)}${sigmaDb === null ? '' : ` ± ${fixedText(sigmaDb, 2)}`} dB`;
  return hanging('more   ', `${where}: ${what}, ${size}`, columns);
}

function hanging(label: string, text: string, columns: number): string[] {
  return wrapText(text, columns - label.length).map(
    (line, i) => `${i === 0 ? label : ' '.repeat(label.length)}${line}`,
  );
}
