/** A chart on paper: the same spec as in the terminal, with the same ticks, as shapes. */
import { type AxisSpec, type ChartMark, type ChartSpec, type Series, ticksAcross, ticksUp } from './chart.ts';
import {
  CELL_HEIGHT,
  CELL_WIDTH,
  type Sheet,
  lettersWidth,
  MARGIN_LEFT,
  MARGIN_RIGHT,
  type Place,
  rowsWithoutOverlap,
  type Shape,
  type Stroke,
  TEXT_SIZE,
} from './sheet.ts';
import type { Role } from './run.ts';

/** Size of the plot in the cells of a terminal that would show it alike. */
export type PaperSize = { readonly width: number; readonly height: number };

/** Room over the plot for signs, and under it for the ticks' texts. */
const ROOM_ABOVE = 18;
const ROOM_BELOW = 26;
/** Height of a row of signs that stand over each other. */
const SIGN_ROW = 15;
const GAP = 4;
const SMALL_TEXT = 11;

/** How each role of a curve is drawn, so that curves differ without colour. */
const CURVES: Readonly<Partial<Record<Role, Pick<Stroke, 'width' | 'dash'>>>> = {
  baseline: { width: 1.2, dash: [5, 3] },
  guide: { width: 1.4, dash: [2, 3] },
  dim: { width: 1, dash: [1, 3] },
};
const PLAIN_CURVE: Pick<Stroke, 'width'> = { width: 1.5 };

/** From a value to a place along one side of the plot. */
type Along = (value: number) => number;

/**
 * Draws a chart.
 *
 * @throws RangeError When a domain does not rise or the size is below 1 × 1.
 */
export function chartSheet(spec: ChartSpec, size: PaperSize): Sheet {
  const left = MARGIN_LEFT;
  const right = left + size.width * CELL_WIDTH;
  const x = along(spec.x, left, right);
  const marks = placeMarks(spec, x);
  const top = ROOM_ABOVE + SIGN_ROW * Math.max(0, ...marks.map(({ row }) => row));
  const bottom = top + size.height * CELL_HEIGHT;
  const y = along(spec.y, bottom, top);
  const up = ticksUp(spec.y, size.height);
  const across = ticksAcross(spec.x, size.width);
  const shapes: Shape[] = [
    ...up.map((tick) => gridLine([left, y(tick.value)], [right, y(tick.value)])),
    ...across.map((tick) => gridLine([x(tick.value), top], [x(tick.value), bottom])),
    {
      shape: 'stroke',
      places: [
        [left, top],
        [left, bottom],
        [right, bottom],
      ],
      role: 'axis',
      width: 1,
    },
    ...up.map(
      (tick): Shape => ({
        shape: 'letters',
        at: [left - 6, y(tick.value) + 4],
        text: tick.text,
        role: 'plain',
        anchor: 'end',
        size: SMALL_TEXT,
      }),
    ),
    {
      shape: 'letters',
      at: [left - 6, top - 6],
      text: spec.y.unit,
      role: 'plain',
      anchor: 'end',
      size: SMALL_TEXT,
    },
    ...across.map(
      (tick, i): Shape => ({
        shape: 'letters',
        at: [x(tick.value), bottom + 16],
        text: i === across.length - 1 ? `${tick.text} ${spec.x.unit}` : tick.text,
        role: 'plain',
        anchor: 'middle',
        size: SMALL_TEXT,
      }),
    ),
    ...spec.levels.flatMap((level): Shape[] => {
      if (level.y < Math.min(...spec.y.domain) || level.y > Math.max(...spec.y.domain)) return [];
      const line = curveStroke(
        [
          [left, y(level.y)],
          [right, y(level.y)],
        ],
        'guide',
      );
      return level.label === undefined
        ? [line]
        : [
            line,
            {
              shape: 'letters',
              at: [right - GAP, y(level.y) - GAP],
              text: level.label,
              role: 'plain',
              anchor: 'end',
              size: SMALL_TEXT,
            },
          ];
    }),
    ...spec.series.flatMap((series) =>
      curvePieces(series, spec, x, y).map((places) => curveStroke(places, series.role)),
    ),
    ...markShapes(marks, (value) => y(Math.min(spec.y.domain[1], Math.max(spec.y.domain[0], value))), {
      left,
      right,
      top,
    }),
  ];
  return { width: right + MARGIN_RIGHT, height: bottom + ROOM_BELOW, shapes };
}

function along({ domain: [start, stop] }: AxisSpec, from: number, to: number): Along {
  if (!(Number.isFinite(start) && Number.isFinite(stop) && start < stop))
    throw new RangeError(`domain must rise, got ${start} to ${stop}`);
  const perUnit = (to - from) / (stop - start);
  return (value) => from + (value - start) * perUnit;
}

function gridLine(from: Place, to: Place): Stroke {
  return { shape: 'stroke', places: [from, to], role: 'dim', width: 0.5 };
}

function curveStroke(places: readonly Place[], role: Role): Stroke {
  return { shape: 'stroke', places, role, ...(CURVES[role] ?? PLAIN_CURVE) };
}

/** Columns a unit of paper is parted into: finer is not seen in print. */
const COLUMNS_PER_UNIT = 2;

/**
 * A curve as lines through places: in each narrow column the first, lowest, highest and last sample, so that no peak
 * is lost and a sweep of many points makes no larger picture. A gap parts it; what lies outside the axes is clipped.
 */
function curvePieces(series: Series, spec: ChartSpec, x: Along, y: Along): Place[][] {
  const [xFrom, xTo] = spec.x.domain;
  const [yFrom, yTo] = spec.y.domain;
  const pieces: Place[][] = [];
  let piece: Place[] = [];
  let column: Place[] = [];
  let columnAt = Number.NaN;
  const flushColumn = (): void => {
    piece.push(...fewest(column));
    column = [];
  };
  const flushPiece = (): void => {
    flushColumn();
    if (piece.length > 1) pieces.push(piece);
    piece = [];
    columnAt = Number.NaN;
  };
  for (let i = 0; i < series.x.length; i++) {
    const valueX = series.x[i]!;
    const valueY = series.y[i]!;
    if (Number.isNaN(valueY) || valueX < xFrom || valueX > xTo) {
      flushPiece();
      continue;
    }
    const place: Place = [x(valueX), y(Math.min(yTo, Math.max(yFrom, valueY)))];
    const at = Math.floor(place[0] * COLUMNS_PER_UNIT);
    if (at !== columnAt) flushColumn();
    columnAt = at;
    column.push(place);
  }
  flushPiece();
  return pieces;
}

/** First, highest, lowest and last of a column, in their order. */
function fewest(column: readonly Place[]): readonly Place[] {
  if (column.length <= 4) return column;
  let high = 0;
  let low = 0;
  for (let i = 1; i < column.length; i++) {
    if (column[i]![1] < column[high]![1]) high = i;
    if (column[i]![1] > column[low]![1]) low = i;
  }
  return [...new Set([0, high, low, column.length - 1])].sort((a, b) => a - b).map((i) => column[i]!);
}

/** A sign that lies within the axes, with the row it stands in over the others. */
type PlacedMark = {
  readonly mark: ChartMark;
  readonly text: string;
  readonly at: number;
  readonly value: number;
  readonly half: number;
  readonly row: number;
};

function placeMarks(spec: ChartSpec, x: Along): readonly PlacedMark[] {
  const [from, to] = spec.x.domain;
  const drawn = spec.marks.flatMap((mark) => {
    const value = mark.y ?? highestNear(spec.series, mark.x, (to - from) / NEARBY);
    if (value === null || mark.x < from || mark.x > to) return [];
    const text = mark.label ?? mark.glyph;
    return [{ mark, text, at: x(mark.x), value, half: lettersWidth(text) / 2 + 1 }];
  });
  const rows = rowsWithoutOverlap(drawn.map(({ at, half }): Place => [at - half, at + half]));
  return drawn.map((placed, i) => ({ ...placed, row: rows[i]! }));
}

/** A sign stands over what the curve does within this share of the axis. */
const NEARBY = 200;

/** Signs over the curve; those that would cover each other stand in rows, with a stem down to it. */
function markShapes(
  marks: readonly PlacedMark[],
  y: (value: number) => number,
  edges: { readonly left: number; readonly right: number; readonly top: number },
): Shape[] {
  return marks.flatMap(({ mark, text, at, value, half, row }): Shape[] => {
    const foot = Math.max(edges.top, y(value));
    const base = foot - GAP - SIGN_ROW * row;
    return [
      ...(row > 0 ? [stemOf(mark, [at, base + 2], [at, foot])] : []),
      {
        shape: 'letters',
        at: [Math.min(edges.right - half, Math.max(edges.left + half, at)), base],
        text,
        role: mark.role,
        anchor: 'middle',
        size: TEXT_SIZE,
        strong: true,
      },
    ];
  });
}

function stemOf(mark: ChartMark, from: Place, to: Place): Stroke {
  return { shape: 'stroke', places: [from, to], role: mark.role, width: 0.6 };
}

/** Highest value of any curve within a reach of a place. */
function highestNear(series: readonly Series[], at: number, reach: number): number | null {
  let highest: number | null = null;
  for (const { x, y, role } of series) {
    if (role === 'guide') continue;
    for (let i = 0; i < x.length; i++) {
      if (Math.abs(x[i]! - at) > reach || !Number.isFinite(y[i]!)) continue;
      if (highest === null || y[i]! > highest) highest = y[i]!;
    }
  }
  return highest;
}
