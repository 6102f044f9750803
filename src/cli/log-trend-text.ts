/** A line over the years as text: a chart of its echoes, then each echo, loss, match and length from first to last. */
import { type StoredLine, shortKey } from '../logbook/entry.ts';
import { fullName } from '../logbook/stored-lines.ts';
import { type Course, dayOf, type EchoTrend, type LineTrend } from '../logbook/trend.ts';
import { cutText, fitText, wrapText } from '../plot/cells.ts';
import { drawChart } from '../plot/chart.ts';
import { SEVERITY_GLYPHS } from '../plot/line-strip.ts';
import { fixedText, frequencyText, lengthText } from '../plot/quantity-text.ts';
import { runsText } from '../plot/run.ts';
import { echoLabel, type LogTextOptions, whenText } from './log-text.ts';
import { tableLines } from './table-lines.ts';

const CHART_ROWS = 10;
const LABEL_COLUMNS = 6;
/** Echoes that the chart can tell apart by a letter; the rest stand in the table alone. */
const LETTERS = 'abcdefghijklmnopqrstuvwxyz';
/** Least height of the chart, dB: smaller changes are not worth a picture. */
const LEAST_SPAN_DB = 10;

/** Writes it all; every line at most `columns` wide. */
export function trendText(line: StoredLine, trend: LineTrend, options: LogTextOptions): string {
  const { columns, paint } = options;
  const { moments } = trend;
  const first = moments[0];
  const last = moments.at(-1);
  const name = fullName(line);
  if (!first || !last) return `${wrapText(`${name}: no sweep is logged yet`, columns).join('\n')}\n`;
  const span =
    moments.length === 1
      ? `1 sweep, ${whenText(first.takenAt)}`
      : `${moments.length} sweeps, ${whenText(first.takenAt)} to ${whenText(last.takenAt)}`;
  const base = line.baseline === null ? '' : `, baseline ${shortKey(line.baseline)}`;
  return [
    ...wrapText(`${name}: ${span}${base}`, columns).map((text) => paint('strong', text)),
    '',
    ...chartLines(trend, options),
    ...echoLines(trend, options),
    '',
    ...courseLines(trend, options),
    '',
  ].join('\n');
}

/** Level against time; each curve ends in its letter. */
function chartLines(trend: LineTrend, { columns, paint }: LogTextOptions): string[] {
  const days = trend.moments.map(({ takenAt }) => dayOf(takenAt));
  const from = days[0]!;
  const to = days.at(-1)!;
  const shown = trend.echoes.slice(0, LETTERS.length);
  const levels = shown.flatMap(({ levelDb }) => levelDb.points.map(({ value }) => value));
  if (!(to > from) || levels.length === 0) return [];
  const top = Math.ceil((Math.max(...levels) + 1) / 10) * 10;
  const bottom = Math.min(top - LEAST_SPAN_DB, Math.floor((Math.min(...levels) - 1) / 10) * 10);
  const width = columns - LABEL_COLUMNS - 2;
  // Room at the right for the letters.
  const domain = [from, to + ((to - from) * 2) / width] as const;
  const frame = drawChart(
    {
      x: { domain, unit: '' },
      y: { domain: [bottom, top], unit: 'dB' },
      series: shown.map(({ levelDb }) => ({
        x: Float64Array.from(levelDb.points, ({ at }) => days[at]!),
        y: Float64Array.from(levelDb.points, ({ value }) => value),
        role: 'trace',
      })),
      levels: [],
      marks: shown.map(({ levelDb }, i) => {
        const { at, value } = levelDb.points.at(-1)!;
        return { x: days[at]! + (to - from) / width, y: value, glyph: LETTERS[i]!, role: 'strong' };
      }),
      cursor: null,
    },
    { width, height: CHART_ROWS },
  );
  const firstDate = trend.moments[0]!.takenAt.slice(0, 10);
  const lastDate = trend.moments.at(-1)!.takenAt.slice(0, 10);
  return [
    paint('dim', 'level of each echo, dB, line loss undone'),
    ...frame.rows.map((row, i) =>
      `${fitText(frame.yLabels[i] ?? '', LABEL_COLUMNS, 'right')} ┤${runsText(row)}`.trimEnd(),
    ),
    paint(
      'dim',
      `${' '.repeat(LABEL_COLUMNS + 2)}${firstDate}${lastDate.padStart(width - firstDate.length)}`,
    ),
    '',
  ];
}

function echoLines(trend: LineTrend, { columns, units, paint }: LogTextOptions): string[] {
  const rows = tableLines(
    ['', 'distance', 'first', 'last dB', 'change', 'a year', 'what, when last seen'],
    trend.echoes.map((echo, i) => {
      const last = echo.echoes.at(-1)!;
      return [
        LETTERS[i] ?? '',
        lengthText(last.echo.distanceM, units),
        fixedText(echo.levelDb.points[0]!.value, 1),
        fixedText(echo.levelDb.points.at(-1)!.value, 1),
        signed(echo.levelDb.change, 1),
        signed(echo.levelDb.perYear, 1),
        `${echoLabel(last.echo)}${seenWords(echo, trend)}`,
      ];
    }),
  );
  return rows.map((row, i) => {
    if (i === 0) return paint('dim', cutText(`  ${row}`, columns));
    const severity = trend.echoes[i - 1]!.echoes.at(-1)!.echo.severity;
    const text = cutText(`${SEVERITY_GLYPHS[severity]} ${row}`, columns);
    return severity === 'sound' ? text : paint(severity, text);
  });
}

/** Says so when an echo came or went within the history. */
function seenWords(echo: EchoTrend, { moments }: LineTrend): string {
  const firstAt = echo.echoes[0]!.at;
  const came = firstAt > 0 ? ` (since ${moments[firstAt]!.takenAt.slice(0, 10)})` : '';
  const went =
    echo.lastAt < moments.length - 1 ? ` (last ${moments[echo.lastAt]!.takenAt.slice(0, 10)})` : '';
  return came + went;
}

function courseLines(trend: LineTrend, { columns, units }: LogTextOptions): string[] {
  const row = (
    label: string,
    course: Course,
    text: (value: number) => string,
    change: (by: number) => string,
  ) => {
    const first = course.points[0];
    const last = course.points.at(-1);
    if (!first || !last) return [];
    const moved = course.change === null ? '' : ` → ${text(last.value)}, ${change(course.change)}`;
    const yearly = course.perYear === null ? '' : ` (${change(course.perYear)} a year)`;
    return wrapText(`${label}: ${text(first.value)}${moved}${yearly}`, columns);
  };
  const decibel =
    (decimals: number) =>
    (value: number): string =>
      `${fixedText(value, decimals)} dB`;
  const change =
    (decimals: number, unit: string) =>
    (by: number): string =>
      `${signed(by, decimals)} ${unit}`;
  const lossAt = trend.lossAtHz === null ? '' : ` at ${frequencyText(trend.lossAtHz)}`;
  const perMetre = units === 'ft' ? 1 / 0.3048 : 1;
  return [
    ...row(`loss one way${lossAt}, as solved`, trend.lossDb, decibel(2), change(2, 'dB')),
    ...trend.match.flatMap(({ band, returnLossDb }) =>
      row(`match, worst return loss, ${band}`, returnLossDb, decibel(1), change(1, 'dB')),
    ),
    ...row(
      'distance to the end',
      trend.lengthM,
      (value) => lengthText(value, units),
      (by) => `${signed(by * perMetre, 2)} ${units}`,
    ),
  ];
}

function signed(value: number | null, decimals: number): string {
  if (value === null) return '–';
  const text = fixedText(value, decimals);
  return value > 0 && Number(text) !== 0 ? `+${text}` : text;
}
