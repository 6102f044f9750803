/** From curves in their own units to rows of text: scales, then dots, then marks. */
import { brailleGlyph, type CellGlyph, rasterRows } from './braille.ts';
import { cellWidth } from './cells.ts';
import {
  createRaster,
  drawDottedSeries,
  drawHair,
  drawLevel,
  drawSeries,
  rowOf,
  shadeArea,
} from './raster.ts';
import { mergeRuns, type Role, type Run, run } from './run.ts';
import { cellOf, cellScale, DOTS_DOWN, type Domain, linearScale, type Scale } from './scale.ts';
import { axisTicks, type Tick } from './ticks.ts';

/** One axis: what it spans and how its ticks read. */
export type AxisSpec = {
  readonly domain: Domain;
  /** Written once, beside the last tick. */
  readonly unit: string;
  /**
   * Shown units per unit of the domain (default 1), for example 1/0.3048 for feet on an axis in metres; −1 shows a
   * level below 0 dB as a positive return loss.
   */
  readonly perUnit?: number;
};

/** A curve. Values that are not finite leave a gap. */
export type Series = {
  /** Rising, in the unit of the x axis. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly role: Role;
  /** Dots with gaps between them instead of a line: what is told, not measured. */
  readonly dotted?: boolean;
};

/** What lies between two curves, shaded: a doubt. Values that are not finite leave a gap. */
export type Area = {
  /** Rising, in the unit of the x axis. */
  readonly x: Float64Array;
  readonly low: Float64Array;
  readonly high: Float64Array;
  readonly role: Role;
};

/** A one-cell sign set over the dots; `y` null puts it on top of whatever is drawn in its column. */
export type ChartMark = {
  readonly x: number;
  readonly y: number | null;
  readonly glyph: string;
  readonly role: Role;
  /** What is written instead where there is room for more than a cell: "×1". */
  readonly label?: string;
};

/** A dotted line across; its label is written on it where a drawing has room. */
export type ChartLevel = { readonly y: number; readonly role: Role; readonly label?: string };

/** A picture in units. Later series and marks lie over earlier ones. */
export type ChartSpec = {
  readonly x: AxisSpec;
  readonly y: AxisSpec;
  readonly series: readonly Series[];
  /** Drawn under everything else. */
  readonly areas?: readonly Area[];
  /** Dotted lines across: limits, noise floor, a reference impedance. */
  readonly levels: readonly ChartLevel[];
  readonly marks: readonly ChartMark[];
  /** Where the dotted hair stands; null for none. */
  readonly cursor: number | null;
};

/** A text at a column of the axis row. */
export type PlacedText = { readonly column: number; readonly text: string };

/** The drawn picture: `rows` are exactly as wide as asked, the labels stand beside and below. */
export type ChartFrame = {
  readonly rows: readonly (readonly Run[])[];
  /** One per row, '' where no tick stands. */
  readonly yLabels: readonly string[];
  /** In order, never overlapping, inside the width. */
  readonly xLabels: readonly PlacedText[];
};

/** Size of the drawing area in cells, and the glyphs to draw it with. */
export type ChartSize = {
  readonly width: number;
  readonly height: number;
  /** Default braille. */
  readonly glyph?: CellGlyph;
};

/**
 * Draws a chart.
 *
 * @throws RangeError When a domain does not rise or the size is below 1 × 1.
 */
export function drawChart(spec: ChartSpec, size: ChartSize): ChartFrame {
  const x = cellScale(spec.x.domain, size.width);
  const y = linearScale(spec.y.domain, size.height * DOTS_DOWN);
  const raster = createRaster(size.width, size.height);
  for (const area of spec.areas ?? []) shadeArea(raster, x, y, area, area.role);
  for (const level of spec.levels) drawLevel(raster, y, level.y, level.role);
  if (spec.cursor !== null) drawHair(raster, x, spec.cursor, 'cursor');
  for (const series of spec.series) {
    if (series.dotted) drawDottedSeries(raster, x, y, series, series.role);
    else drawSeries(raster, x, y, series, series.role);
  }
  const rows = rasterRows(raster, size.glyph ?? brailleGlyph).map((row) => [...row]);
  for (const mark of spec.marks) placeMark(rows, mark, spec, x, y);
  return {
    rows: rows.map(mergeRuns),
    yLabels: yLabels(spec.y, size.height),
    xLabels: placedTicks(spec.x, x, size.width).labels,
  };
}

/** The axis row of a frame as text of exactly `width` cells. */
export function axisText(labels: readonly PlacedText[], width: number): string {
  let text = '';
  for (const label of labels) text += ' '.repeat(Math.max(0, label.column - cellWidth(text))) + label.text;
  return text + ' '.repeat(Math.max(0, width - cellWidth(text)));
}

function placeMark(rows: Run[][], mark: ChartMark, spec: ChartSpec, x: Scale, y: Scale): void {
  const column = cellOf(x, mark.x);
  if (column < 0 || column * 2 >= x.dots) return;
  const value = mark.y ?? highestNear(spec.series, x, mark.x);
  if (value === null) return;
  // One row above the value, so that the sign does not hide the peak it names.
  const row = Math.floor(rowOf(y, value) / DOTS_DOWN) - (mark.y === null ? 1 : 0);
  const target = rows[Math.min(rows.length - 1, Math.max(0, row))];
  if (target) replaceCell(target, column, run(mark.glyph, mark.role));
}

/** Highest value of any series within a cell to either side of x. */
function highestNear(series: readonly Series[], x: Scale, at: number): number | null {
  const reach = Math.abs(x.toValue(2) - x.toValue(0));
  let highest: number | null = null;
  for (const { x: places, y: values } of series) {
    for (let i = 0; i < places.length; i++) {
      if (Math.abs(places[i]! - at) > reach || !Number.isFinite(values[i]!)) continue;
      if (highest === null || values[i]! > highest) highest = values[i]!;
    }
  }
  return highest;
}

/** Puts a one-cell run in place of one cell of a row whose other characters are one cell wide each. */
function replaceCell(row: Run[], column: number, cell: Run): void {
  let start = 0;
  for (let i = 0; i < row.length; i++) {
    const piece = row[i]!;
    if (column < start + piece.text.length) {
      const before = run(piece.text.slice(0, column - start), piece.role);
      const after = run(piece.text.slice(column - start + 1), piece.role);
      row.splice(i, 1, ...[before, cell, after].filter((r) => r.text !== ''));
      return;
    }
    start += piece.text.length;
  }
}

/** Ticks up the side of a plot `rows` cells high: one in two cells, each in a row of its own, none outside. */
export function ticksUp(axis: AxisSpec, rows: number): readonly (Tick & { readonly row: number })[] {
  const y = linearScale(axis.domain, rows * DOTS_DOWN);
  const taken = new Set<number>();
  return axisTicks(axis.domain, Math.max(2, Math.floor(rows / 2)), axis.perUnit).flatMap((tick) => {
    const row = Math.floor(rowOf(y, tick.value) / DOTS_DOWN);
    if (row < 0 || row >= rows || taken.has(row)) return [];
    taken.add(row);
    return [{ ...tick, row }];
  });
}

/** Ticks along the foot of a plot `width` cells wide: about ten cells apart, at least three blanks between them. */
export function ticksAcross(axis: AxisSpec, width: number): readonly Tick[] {
  return placedTicks(axis, cellScale(axis.domain, width), width).ticks;
}

function yLabels(axis: AxisSpec, height: number): readonly string[] {
  const labels: string[] = Array.from({ length: height }, () => '');
  for (const { row, text } of ticksUp(axis, height)) labels[row] = text;
  return labels;
}

/** The last label carries the unit. */
function placedTicks(
  axis: AxisSpec,
  x: Scale,
  width: number,
): { readonly ticks: readonly Tick[]; readonly labels: readonly PlacedText[] } {
  for (let count = Math.max(2, Math.floor(width / 10)); count >= 1; count--) {
    const ticks = axisTicks(axis.domain, count, axis.perUnit);
    const labels = ticks.map((tick, i) => placeLabel(tick, axis.unit, x, width, i === ticks.length - 1));
    const clear = labels.every((label, i) => i === 0 || endOf(labels[i - 1]!) + 3 <= label.column);
    if (clear && labels.length > 0) return { ticks, labels };
  }
  return { ticks: [], labels: [] };
}

function placeLabel(tick: Tick, unit: string, x: Scale, width: number, last: boolean): PlacedText {
  const text = last ? `${tick.text} ${unit}` : tick.text;
  const centred = cellOf(x, tick.value) - Math.floor(cellWidth(tick.text) / 2);
  return { column: Math.max(0, Math.min(width - cellWidth(text), centred)), text };
}

function endOf(label: PlacedText): number {
  return label.column + cellWidth(label.text);
}
