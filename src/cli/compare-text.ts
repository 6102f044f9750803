/** A comparison as text for a terminal or a pipe: the verdict first, then each change, then what else differs. */

import type { ComparedSweeps } from '../app/compare.ts';
import { spokenFile } from '../app/standard-input.ts';
import type { Change, Comparison } from '../assess/comparison.ts';
import type { Notice } from '../outcome.ts';
import { cutText, wrapText } from '../plot/cells.ts';
import { frequencySpanText, lengthWithSigmaText, levelText, type Units } from '../plot/quantity-text.ts';
import { CAUTIONS } from '../report/cautions.ts';
import {
  bandChangeWords,
  changeVerdictWords,
  changeWords,
  endChangeWords,
  lossChangeWords,
  stretchWords,
} from '../report/change-words.ts';
import type { Sweep } from '../sweep/sweep.ts';
import type { Paint } from './paint.ts';

export type CompareTextOptions = {
  readonly columns: number;
  readonly units: Units;
  readonly paint: Paint;
  /** What the reading of files had to say. */
  readonly notices: readonly Notice[];
};

/** Writes it all; every line at most `columns` wide. */
export function compareText(compared: ComparedSweeps, options: CompareTextOptions): string {
  const { comparison } = compared;
  const { columns, paint } = options;
  const changes = comparison.changes.flatMap((change) => ['', ...changeLines(change, options)]);
  const notices = [...options.notices, ...comparison.notices].flatMap(({ what }) =>
    hanging('note    ', what, columns),
  );
  return [
    verdictLine(compared, options),
    ...hanging('before  ', sweepText(compared.before.sweep), columns),
    ...hanging('after   ', sweepText(compared.after.sweep), columns),
    ...differenceLines(comparison, options),
    ...changes,
    ...(notices.length > 0 ? ['', ...notices] : []),
    '',
    ...wrapText(CAUTIONS.short, columns).map((line) => paint('dim', line)),
    '',
  ].join('\n');
}

function verdictLine({ before, comparison }: ComparedSweeps, { columns, paint }: CompareTextOptions): string {
  const verdict = changeVerdictWords(comparison);
  const name = cutText(before.line.name || spokenFile(before.sweep.file), columns - verdict.length - 4);
  return comparison.verdict === 'unchanged'
    ? paint('sound', `● ${name}: ${verdict}`)
    : paint('fault', `× ${name}: ${verdict}`);
}

function sweepText(sweep: Sweep): string {
  const { frequencyHz, file } = sweep;
  const span = frequencySpanText(frequencyHz[0] ?? 0, frequencyHz.at(-1) ?? 0);
  return `${spokenFile(file)}, ${span}, ${frequencyHz.length} points`;
}

function differenceLines(comparison: Comparison, { columns, units }: CompareTextOptions): string[] {
  return [
    ...hanging('length  ', stretchWords(comparison), columns),
    ...hanging('loss    ', lossChangeWords(comparison), columns),
    ...hanging('end     ', endChangeWords(comparison, units), columns),
    ...comparison.bands.flatMap((band) => hanging('match   ', bandChangeWords(band), columns)),
  ];
}

function changeLines(change: Change, { columns, units, paint }: CompareTextOptions): string[] {
  const head = `× change ${change.place}, ${lengthWithSigmaText(change.distanceM, change.distanceSigmaM, units)}`;
  return [
    ...wrapText(head, columns).map((line) => paint('fault', line)),
    ...hanging('  ', `${changeWords(change)}, ${levelText(-change.levelDb)} as seen from the port`, columns),
  ];
}

/** A label with its text beside it, further lines indented under the text. */
function hanging(label: string, text: string, columns: number): string[] {
  return wrapText(text, columns - label.length).map(
    (line, i) => `${i === 0 ? label : ' '.repeat(label.length)}${line}`,
  );
}
