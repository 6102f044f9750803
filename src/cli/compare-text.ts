/** A comparison as text for a terminal or a pipe: the verdict first, then each change, then what else differs. */

import type { ComparedSweeps } from '../app/compare.ts';
import { spokenFile } from '../app/standard-input.ts';
import type { BandChange, Change, ChangeKind, Comparison } from '../assess/comparison.ts';
import { KIND_WORDS } from '../assess/size-text.ts';
import type { Notice } from '../outcome.ts';
import { cutText, wrapText } from '../plot/cells.ts';
import {
  decibelText,
  fixedText,
  frequencySpanText,
  lengthText,
  lengthWithSigmaText,
  levelText,
  type Units,
} from '../plot/quantity-text.ts';
import { CAUTIONS } from '../report/cautions.ts';
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
  const count = comparison.changes.length;
  const verdict = count === 0 ? 'unchanged' : `changed at ${count === 1 ? 'one place' : `${count} places`}`;
  const name = cutText(before.line.name || spokenFile(before.sweep.file), columns - verdict.length - 4);
  return count === 0 ? paint('sound', `● ${name}: ${verdict}`) : paint('fault', `× ${name}: ${verdict}`);
}

function sweepText(sweep: Sweep): string {
  const { frequencyHz, file } = sweep;
  const span = frequencySpanText(frequencyHz[0] ?? 0, frequencyHz.at(-1) ?? 0);
  return `${spokenFile(file)}, ${span}, ${frequencyHz.length} points`;
}

function differenceLines(comparison: Comparison, { columns, units }: CompareTextOptions): string[] {
  const { stretchPpm, stretchSigmaPpm, lossChangeDb, lossChangeSigmaDb, end, bands } = comparison;
  const longer = `${fixedText(Math.abs(stretchPpm), 0)} ±${fixedText(stretchSigmaPpm, 0)} ppm`;
  const loss = `${fixedText(Math.abs(lossChangeDb), 2)} ±${fixedText(lossChangeSigmaDb, 2)} dB`;
  return [
    ...hanging('length  ', `${longer} ${stretchPpm < 0 ? 'shorter' : 'longer'} than before`, columns),
    ...hanging(
      'loss    ',
      `${loss} ${lossChangeDb < 0 ? 'less' : 'more'} than before, one way at mid-band`,
      columns,
    ),
    ...hanging(
      'end     ',
      end.before === end.after
        ? `${end.after}, as before`
        : `${end.before} at ${lengthText(end.lengthBeforeM, units)} before, ${end.after} at ` +
            `${lengthText(end.lengthAfterM, units)} after`,
      columns,
    ),
    ...bands.flatMap((band) => hanging('match   ', bandText(band), columns)),
  ];
}

function bandText(band: BandChange): string {
  const name = `${band.name}, ${frequencySpanText(band.fromHz, band.toHz)}: worst `;
  const side = (worstDb: number | null): string => (worstDb === null ? 'not swept' : decibelText(worstDb));
  const { beforeDb, afterDb } = band;
  const by =
    beforeDb === null || afterDb === null
      ? ''
      : `, ${decibelText(Math.abs(afterDb - beforeDb))} ${afterDb < beforeDb ? 'worse' : 'better'}`;
  return `${name}return loss ${side(beforeDb)} before, ${side(afterDb)} after${by}`;
}

function changeLines(change: Change, { columns, units, paint }: CompareTextOptions): string[] {
  const head = `× change ${change.place}, ${lengthWithSigmaText(change.distanceM, change.distanceSigmaM, units)}`;
  return [
    ...wrapText(head, columns).map((line) => paint('fault', line)),
    ...hanging(
      '  ',
      `${kindWords(change.kind)}${change.gone ? ' gone' : ''}, ${levelText(-change.levelDb)} as seen from the port`,
      columns,
    ),
  ];
}

function kindWords(kind: ChangeKind): string {
  return kind === 'unresolved' ? 'of unresolved kind' : KIND_WORDS[kind];
}

/** A label with its text beside it, further lines indented under the text. */
function hanging(label: string, text: string, columns: number): string[] {
  return wrapText(text, columns - label.length).map(
    (line, i) => `${i === 0 ? label : ' '.repeat(label.length)}${line}`,
  );
}
