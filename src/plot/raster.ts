/** A grid of dots, 2 × 4 to a character cell, with one ink per cell. */
import type { Role } from './run.ts';
import { DOTS_ACROSS, DOTS_DOWN, type Scale } from './scale.ts';

/** Dots as one byte per dot (row by row), inks as one index per cell: 0 is none, else 1 + index into `roles`. */
export type Raster = {
  readonly width: number;
  readonly height: number;
  readonly dots: Uint8Array;
  readonly inks: Uint8Array;
  readonly roles: Role[];
};

/**
 * An empty raster.
 *
 * @param width In cells, at least 1.
 * @param height In cells, at least 1.
 */
export function createRaster(width: number, height: number): Raster {
  if (!(width >= 1 && height >= 1)) throw new RangeError(`a raster needs cells, got ${width} × ${height}`);
  return {
    width,
    height,
    dots: new Uint8Array(width * DOTS_ACROSS * height * DOTS_DOWN),
    inks: new Uint8Array(width * height),
    roles: [],
  };
}

/** Lights one dot; outside the grid nothing happens. The latest ink of a cell wins. */
export function lightDot(raster: Raster, column: number, row: number, role: Role): void {
  const columns = raster.width * DOTS_ACROSS;
  if (column < 0 || column >= columns || row < 0 || row >= raster.height * DOTS_DOWN) return;
  raster.dots[row * columns + column] = 1;
  const cell = Math.floor(row / DOTS_DOWN) * raster.width + Math.floor(column / DOTS_ACROSS);
  raster.inks[cell] = 1 + roleIndex(raster, role);
}

/** A dotted line across at a value of the y scale: one dot in `every`. */
export function drawLevel(raster: Raster, y: Scale, value: number, role: Role, every = 4): void {
  const row = rowOf(y, value);
  for (let column = 0; column < raster.width * DOTS_ACROSS; column += every)
    lightDot(raster, column, row, role);
}

/** A dotted line down at a value of the x scale: one dot in two. */
export function drawHair(raster: Raster, x: Scale, value: number, role: Role): void {
  const column = Math.round(x.toDot(value));
  for (let row = 0; row < raster.height * DOTS_DOWN; row += 2) lightDot(raster, column, row, role);
}

/**
 * A line through samples, drawn as what it covers in each column of dots (lowest to highest), so that a peak
 * narrower than a dot is still there at its full height.
 *
 * Neighbours are joined; a sample that is not finite breaks the line. What lies outside the scales is not drawn.
 *
 * @param samples.x Rising, in the unit of `x`.
 * @param samples.y In the unit of `y`, same length.
 * @throws RangeError When the lengths differ.
 */
export function drawSeries(
  raster: Raster,
  x: Scale,
  y: Scale,
  samples: { readonly x: Float64Array; readonly y: Float64Array },
  role: Role,
): void {
  if (samples.x.length !== samples.y.length)
    throw new RangeError(`lengths differ: ${samples.x.length} and ${samples.y.length}`);
  const envelope = columnEnvelope(x, y, samples);
  const lastRow = raster.height * DOTS_DOWN - 1;
  for (let column = 0; column < envelope.top.length; column++) {
    const top = Math.max(0, envelope.top[column]!);
    const bottom = Math.min(lastRow, envelope.bottom[column]!);
    for (let row = top; row <= bottom; row++) lightDot(raster, column, row, role);
  }
}

/** A curve as one dot in every `every` columns, at the middle of what the curve covers there. */
export function drawDottedSeries(
  raster: Raster,
  x: Scale,
  y: Scale,
  samples: { readonly x: Float64Array; readonly y: Float64Array },
  role: Role,
  every = 3,
): void {
  if (samples.x.length !== samples.y.length)
    throw new RangeError(`lengths differ: ${samples.x.length} and ${samples.y.length}`);
  const { top, bottom } = columnEnvelope(x, y, samples);
  for (let column = 0; column < top.length; column += every) {
    if (top[column]! > bottom[column]!) continue;
    lightDot(raster, column, Math.round((top[column]! + bottom[column]!) / 2), role);
  }
}

/**
 * Shades what lies between two curves: every other dot of every other column, so that a curve over it stands out.
 *
 * @param area.x Rising; `low` and `high` of the same length.
 */
export function shadeArea(
  raster: Raster,
  x: Scale,
  y: Scale,
  area: { readonly x: Float64Array; readonly low: Float64Array; readonly high: Float64Array },
  role: Role,
): void {
  const low = columnEnvelope(x, y, { x: area.x, y: area.low });
  const high = columnEnvelope(x, y, { x: area.x, y: area.high });
  const lastRow = raster.height * DOTS_DOWN - 1;
  for (let column = 0; column < high.top.length; column += 2) {
    const top = Math.max(0, high.top[column]!);
    const bottom = Math.min(lastRow, low.bottom[column]!);
    for (let row = top; row <= bottom; row++)
      if ((row + column / 2) % 2 === 0) lightDot(raster, column, row, role);
  }
}

/** Highest and lowest lit row of each dot column; top > bottom where the line does not pass. */
function columnEnvelope(
  x: Scale,
  y: Scale,
  samples: { readonly x: Float64Array; readonly y: Float64Array },
): { readonly top: Float64Array; readonly bottom: Float64Array } {
  const top = new Float64Array(x.dots).fill(Number.POSITIVE_INFINITY);
  const bottom = new Float64Array(x.dots).fill(Number.NEGATIVE_INFINITY);
  const cover = (column: number, from: number, to: number): void => {
    if (column < 0 || column >= x.dots || from > to) return;
    if (from < top[column]!) top[column] = from;
    if (to > bottom[column]!) bottom[column] = to;
  };
  let lastColumn = Number.NaN;
  let lastRow = Number.NaN;
  for (let i = 0; i < samples.x.length; i++) {
    const column = x.toDot(samples.x[i]!);
    const row = y.dots - 1 - y.toDot(samples.y[i]!);
    if (Number.isFinite(column) && Number.isFinite(row)) {
      cover(Math.round(column), Math.round(row), Math.round(row));
      if (!Number.isNaN(lastColumn)) coverSegment(lastColumn, lastRow, column, row, x.dots, cover);
      lastColumn = column;
      lastRow = row;
    } else {
      lastColumn = Number.NaN;
    }
  }
  return { top, bottom };
}

/** Covers the rows that a straight join passes in each column; whole rows only, so that lines stay thin. */
function coverSegment(
  column0: number,
  row0: number,
  column1: number,
  row1: number,
  columns: number,
  cover: (column: number, from: number, to: number) => void,
): void {
  const first = Math.max(0, Math.round(column0));
  const last = Math.min(columns - 1, Math.round(column1));
  const slope = column1 > column0 ? (row1 - row0) / (column1 - column0) : 0;
  for (let column = first; column <= last; column++) {
    const entry = column1 > column0 ? row0 + slope * (Math.max(column0, column - 0.5) - column0) : row0;
    const exit = column1 > column0 ? row0 + slope * (Math.min(column1, column + 0.5) - column0) : row1;
    cover(column, Math.ceil(Math.min(entry, exit)), Math.floor(Math.max(entry, exit)));
    if (column > column0 && column < column1) {
      const middle = Math.round(row0 + slope * (column - column0));
      cover(column, middle, middle);
    }
  }
}

/** Dot row of a value, 0 at the top. */
export function rowOf(y: Scale, value: number): number {
  return y.dots - 1 - Math.round(y.toDot(value));
}

/** Ink of a cell, or null where no dot was lit. */
export function cellInk(raster: Raster, column: number, row: number): Role | null {
  const ink = raster.inks[row * raster.width + column]!;
  return ink === 0 ? null : (raster.roles[ink - 1] ?? null);
}

function roleIndex(raster: Raster, role: Role): number {
  const known = raster.roles.indexOf(role);
  return known >= 0 ? known : raster.roles.push(role) - 1;
}
