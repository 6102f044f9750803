/** An analysis as text for a terminal or a pipe: the verdict first, then what it rests on. */
import type { Analysis } from '../app/analysis.ts';
import { analysisInUnits } from '../app/analysis-in-units.ts';
import { analysisNotices } from '../app/analysis-notices.ts';
import { limitsVerdictOf } from '../app/limits-verdict.ts';
import { spokenFile } from '../app/standard-input.ts';
import type { Finding } from '../assess/finding.ts';
import { verdictOf, verdictWords, worstOf } from '../assess/verdict.ts';
import { describedLengthM } from '../line/line.ts';
import type { Echo } from '../locate/echo.ts';
import type { Ghost } from '../locate/solution.ts';
import type { Notice } from '../outcome.ts';
import { cellWidth, cutText, fitText, wrapText } from '../plot/cells.ts';
import { SEVERITY_GLYPHS } from '../plot/line-strip.ts';
import {
  decibelText,
  fixedText,
  frequencySpanText,
  lengthText,
  lengthWithSigmaText,
  levelText,
  sureText,
  temperatureText,
  type Units,
} from '../plot/quantity-text.ts';
import { CAUTIONS } from '../report/cautions.ts';
import { echoWords } from '../report/echo-words.ts';
import { limitsLines } from './limits-text.ts';
import type { Paint } from './paint.ts';

export type TextOptions = {
  readonly columns: number;
  readonly units: Units;
  readonly paint: Paint;
  /** What the reading of files had to say. */
  readonly notices: readonly Notice[];
};

/** Columns of the table of echoes; the last one takes what is left. */
const TABLE_HEAD = ['', 'distance', 'seen dB', 'corrected', 'what', 'sure', 'place'] as const;
const TABLE_RIGHT: ReadonlySet<string> = new Set(['seen dB', 'corrected', 'sure']);
const GAP = '  ';

/** Writes it all; every line at most `columns` wide. */
export function locateText(inMetres: Analysis, options: TextOptions): string {
  const { columns, paint, units } = options;
  const analysis = analysisInUnits(inMetres, units);
  const findings = analysis.findings.flatMap((finding) => ['', ...findingLines(finding, options)]);
  const ghosts = analysis.solution.ghosts.flatMap((ghost) => ghostLines(ghost, options));
  const notices = [...options.notices, ...analysisNotices(analysis)].flatMap(({ what }) =>
    hanging('note  ', what, columns),
  );
  const limits = limitsLines(limitsVerdictOf(analysis), columns, paint);
  return [
    ...verdictLines(analysis, options),
    ...summaryLines(analysis, options),
    '',
    ...echoTable(analysis, options),
    ...findings,
    ...(limits.length > 0 ? ['', ...limits] : []),
    ...(ghosts.length > 0 ? ['', ...ghosts] : []),
    ...(notices.length > 0 ? ['', ...notices] : []),
    '',
    ...wrapText(CAUTIONS.short, columns).map((line) => paint('dim', line)),
    '',
  ].join('\n');
}

function verdictLines(analysis: Analysis, { paint, columns }: TextOptions): string[] {
  const verdict = verdictOf(analysis);
  const worst = worstOf(verdict);
  const words = verdictWords(verdict);
  const name = cutText(analysis.line.name || spokenFile(analysis.sweep.file), columns - words.length - 4);
  return [`${paint(worst, `${SEVERITY_GLYPHS[worst]} ${name}: ${words}`)}`];
}

function summaryLines(analysis: Analysis, { units, columns }: TextOptions): string[] {
  const { sweep, line, reach, solution } = analysis;
  const last = sweep.frequencyHz.at(-1) ?? 0;
  const described = describedLengthM(line);
  const port = sweep.ports > 1 ? `, port ${sweep.port} of ${sweep.ports}` : '';
  const end = solution.end === 'unknown' ? 'end' : solution.end;
  return [
    ...hanging(
      'sweep ',
      `${spokenFile(sweep.file)}, ${frequencySpanText(sweep.frequencyHz[0] ?? 0, last)}, ${sweep.frequencyHz.length} points${port}`,
      columns,
    ),
    ...hanging(
      'line  ',
      `${line.sections.map((section) => section.label).join(' + ')}` +
        `${described === null ? '' : `, ${lengthText(described, units)} described`}` +
        `${line.temperatureKnown ? `, ${temperatureText(line.temperatureC, units)}` : ''}`,
      columns,
    ),
    ...hanging(
      'end   ',
      `${end} at ${lengthWithSigmaText(solution.lengthM, solution.lengthSigmaM, units)}, distances scaled to ` +
        (solution.scaledTo === 'description' ? 'the described length' : 'the velocity factor'),
      columns,
    ),
    ...hanging(
      'reach ',
      `resolution ${lengthText(reach.resolutionM, units)}, unambiguous to ${lengthText(reach.unambiguousM, units, 1)}, ` +
        `at the end echoes down to ${levelText(reach.weakestReturnLossDb)}`,
      columns,
    ),
    ...hanging('fit   ', `${solution.elements} elements leave ${decibelText(solution.residualDb)}`, columns),
  ];
}

function echoTable(analysis: Analysis, { columns, units, paint }: TextOptions): string[] {
  const rows = analysis.solution.echoes.map((echo, i) => [
    SEVERITY_GLYPHS[analysis.severities[i] ?? 'sound'],
    lengthWithSigmaText(echo.distanceM, echo.distanceSigmaM, units),
    fixedText(-echo.returnLossDb, 1),
    fixedText(-echo.correctedReturnLossDb, 1),
    echoWords(analysis, echo),
    sureText(echo.confidence),
    shortPlace(analysis, echo),
  ]);
  const widths = TABLE_HEAD.map((title, column) =>
    Math.max(cellWidth(title), ...rows.map((row) => cellWidth(row[column] ?? ''))),
  );
  const line = (row: readonly string[]): string => {
    const cells = row.map((cell, column) =>
      fitText(cell, widths[column] ?? 0, TABLE_RIGHT.has(TABLE_HEAD[column] ?? '') ? 'right' : 'left'),
    );
    const [mark = '', ...others] = cells;
    return cutText(`${mark} ${others.join(GAP)}`.trimEnd(), columns);
  };
  return [
    paint('dim', line(TABLE_HEAD)),
    ...rows.map((row, i) => {
      const severity = analysis.severities[i] ?? 'sound';
      return severity === 'sound' ? line(row) : paint(severity, line(row));
    }),
  ];
}

function shortPlace(analysis: Analysis, echo: Echo): string {
  if (echo.joint) return `joint ${echo.joint.index}`;
  return analysis.line.sections[echo.section]?.label ?? '';
}

function findingLines(finding: Finding, { columns, units, paint }: TextOptions): string[] {
  const head =
    `${SEVERITY_GLYPHS[finding.severity]} ${finding.severity} ${finding.where}, ` +
    `${lengthWithSigmaText(finding.distanceM, finding.distanceSigmaM, units)}`;
  return [
    ...wrapText(head, columns).map((line) => paint(finding.severity, line)),
    ...hanging('  ', `${finding.what}, ${sureText(finding.confidence)} sure`, columns),
    ...listed('  likely       ', finding.causes, columns),
    ...listed('  check first  ', finding.checks, columns),
    ...listed('  bring        ', finding.bring, columns),
  ];
}

/** A re-reflection that a reader of the plain trace could take for a fault. */
function ghostLines(ghost: Ghost, { columns, units }: TextOptions): string[] {
  const between = ghost.betweenM.map((m) => lengthText(m, units)).join(' and ');
  return hanging(
    'ghost ',
    `${lengthText(ghost.distanceM, units)}, ${levelText(ghost.returnLossDb)}: a bounce between ${between}, not a fault`,
    columns,
  );
}

function listed(label: string, items: readonly string[], columns: number): string[] {
  return items.length === 0 ? [] : hanging(label, items.join('; '), columns);
}

/** A label with its text beside it, further lines indented under the text. */
function hanging(label: string, text: string, columns: number): string[] {
  return wrapText(text, columns - label.length).map(
    (line, i) => `${i === 0 ? label : ' '.repeat(label.length)}${line}`,
  );
}
