/** Curves as lines through few places: no peak is lost, and a sweep of many points makes no larger picture. */
import type { ChartSpec } from './chart.ts';
import type { Place } from './sheet.ts';

/** From values to a place on the paper. */
export type ToPlace = (x: number, y: number) => Place;

/** Columns that a unit of paper is parted into: finer is not seen in print. */
const COLUMNS_PER_UNIT = 2;

/**
 * The pieces of a curve: in each narrow column its first, lowest, highest and last sample. A gap parts it; what lies
 * outside the axes is clipped.
 */
export function curvePieces(
  curve: { readonly x: Float64Array; readonly y: Float64Array },
  { x: xAxis, y: yAxis }: Pick<ChartSpec, 'x' | 'y'>,
  toPlace: ToPlace,
): readonly (readonly Place[])[] {
  const pieces: Place[][] = [];
  let piece: Place[] = [];
  let column: Place[] = [];
  let columnAt = Number.NaN;
  const endColumn = (): void => {
    piece.push(...fewest(column));
    column = [];
  };
  const endPiece = (): void => {
    endColumn();
    if (piece.length > 1) pieces.push(piece);
    piece = [];
    columnAt = Number.NaN;
  };
  for (let i = 0; i < curve.x.length; i++) {
    const x = curve.x[i]!;
    const y = curve.y[i]!;
    if (Number.isNaN(y) || x < xAxis.domain[0] || x > xAxis.domain[1]) {
      endPiece();
      continue;
    }
    const place = toPlace(x, Math.min(yAxis.domain[1], Math.max(yAxis.domain[0], y)));
    const at = Math.floor(place[0] * COLUMNS_PER_UNIT);
    if (at !== columnAt) endColumn();
    columnAt = at;
    column.push(place);
  }
  endPiece();
  return pieces;
}

/** First, highest, lowest and last of a column, in their order. */
function fewest(column: readonly Place[]): readonly Place[] {
  if (column.length <= 2) return column;
  let high = 0;
  let low = 0;
  for (let i = 1; i < column.length; i++) {
    if (column[i]![1] < column[high]![1]) high = i;
    if (column[i]![1] > column[low]![1]) low = i;
  }
  return [...new Set([0, high, low, column.length - 1])].sort((a, b) => a - b).map((i) => column[i]!);
}
