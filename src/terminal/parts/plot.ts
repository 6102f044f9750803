/** The plot with its axes, or words in its place. */
import { cellWidth, fitRuns, fitText, wrapText } from '../../plot/cells.ts';
import { axisText, type ChartSpec, drawChart } from '../../plot/chart.ts';
import { type Role, type Run, run } from '../../plot/run.ts';
import { GUTTER, type Layout } from '../layout.ts';

/** Cells of a label beside the plot. */
const LABEL_WIDTH = 4;

/** Longest line of words in place of the plot: longer ones are hard to read. */
const MEASURE = 76;

/** The chart with its labels: `plotRows` rows, then the axis row. */
export function plotRows(chart: ChartSpec, layout: Layout): readonly (readonly Run[])[] {
  const { columns, plotWidth, plotRows: height } = layout;
  const frame = drawChart(chart, { width: plotWidth, height });
  const rows = frame.rows.map((row, i) =>
    fitRuns([run(` ${fitText(frame.yLabels[i] ?? '', LABEL_WIDTH, 'right')} ┤`, 'axis'), ...row], columns),
  );
  const unit = fitText(chart.y.unit, LABEL_WIDTH, 'right');
  const axis = `${fitText(` ${unit}`, GUTTER)}${axisText(frame.xLabels, plotWidth)}`;
  return [...rows, fitRuns([run(axis, 'axis')], columns)];
}

/** Words in the place of the plot: a text is broken into lines, runs are a line as they are. */
export type Words = string | { readonly text: string; readonly role: Role } | readonly Run[];

/** Paragraphs in the place of the plot, centred in `height` rows; by default as many as it and its axis have. */
export function wordsInPlaceOfPlot(
  paragraphs: readonly Words[],
  layout: Layout,
  height = layout.plotRows + 1,
): readonly (readonly Run[])[] {
  const width = Math.min(MEASURE, layout.columns - GUTTER - 1);
  const lines = paragraphs.flatMap((paragraph): readonly (readonly Run[])[] => {
    if (typeof paragraph === 'string') return wrapText(paragraph, width).map((line) => [run(line)]);
    if ('role' in paragraph)
      return wrapText(paragraph.text, width).map((line) => [run(line, paragraph.role)]);
    return [paragraph];
  });
  if (lines.length > height) lines.splice(height - 1, lines.length, [run('…')]);
  const above = Math.max(0, Math.floor((height - lines.length) / 2));
  return Array.from({ length: height }, (_, i) =>
    fitRuns([run(' '.repeat(GUTTER)), ...(lines[i - above] ?? [])], layout.columns),
  );
}

/** A bar of progress with its figure: "━━━━━━──────  42 %". */
export function progressRuns(fraction: number, width: number): readonly Run[] {
  const share = Math.max(0, Math.min(1, fraction));
  const figure = ` ${Math.round(share * 100)} %`;
  const room = Math.max(1, width - cellWidth(figure));
  const done = Math.round(share * room);
  return [run('━'.repeat(done), 'strong'), run('─'.repeat(room - done), 'dim'), run(figure)];
}
