/** A chart on paper: the same spec as in the terminal, with the same ticks, as shapes. */
import { type Area, type AxisSpec, type ChartLevel, type ChartSpec, ticksAcross, ticksUp } from './chart.ts';
import { curvePieces, type ToPlace } from './curve-places.ts';
import type { Role } from './run.ts';
import {
  CELL_HEIGHT,
  CELL_WIDTH,
  letters,
  lettersWidth,
  MARGIN_LEFT,
  MARGIN_RIGHT,
  type Place,
  rowsWithoutOverlap,
  type Shape,
  type Sheet,
  SIGN_ROW,
  SIGN_SIZE,
  type Stroke,
  sign,
} from './sheet.ts';

/** Size of the plot in the cells of a terminal that would show it alike. */
export type PlotSize = { readonly width: number; readonly height: number };

/** Room over the plot for signs, and under it for the ticks' texts. */
const ROOM_ABOVE = 18;
const ROOM_BELOW = 26;
const GAP = 4;

/** Widths of curves by role, so that they differ without colour; those not named are of the middle width. */
const WIDTHS: Readonly<Partial<Record<Role, number>>> = { baseline: 1, guide: 1.4, difference: 2 };
const USUAL_WIDTH = 1.5;
/** Lengths drawn and left out in a dotted curve or level. */
const DOTTED: readonly number[] = [2, 3];

/** Where the plot lies on the paper. */
type Edges = { readonly left: number; readonly right: number; readonly top: number; readonly bottom: number };

/**
 * Draws a chart.
 *
 * @throws RangeError When a domain does not rise or the size is below 1 × 1.
 */
export function chartSheet(spec: ChartSpec, size: PlotSize): Sheet {
  const signs = placeSigns(spec);
  const left = MARGIN_LEFT;
  const right = left + size.width * CELL_WIDTH;
  const rows = rowsWithoutOverlap(signs.map((one): Place => spanOf(one, left, right)));
  const top = ROOM_ABOVE + SIGN_ROW * Math.max(0, ...rows);
  const edges = { left, right, top, bottom: top + size.height * CELL_HEIGHT };
  const toPlace = placer(spec, edges);
  return {
    width: right + MARGIN_RIGHT,
    height: edges.bottom + ROOM_BELOW,
    shapes: [
      ...(spec.areas ?? []).flatMap((area) => areaShapes(area, spec, toPlace)),
      ...axisShapes(spec, size, edges, toPlace),
      ...spec.levels.flatMap((level) => levelShapes(level, spec, edges, toPlace)),
      ...spec.series.flatMap((series) =>
        curvePieces(series, spec, toPlace).map((places) =>
          curve(places, series.role, series.dotted ?? false),
        ),
      ),
      ...signs.flatMap((one, i) => signShapes(one, rows[i]!, edges, toPlace)),
    ],
  };
}

function placer({ x, y }: Pick<ChartSpec, 'x' | 'y'>, { left, right, top, bottom }: Edges): ToPlace {
  const across = spread(x, left, right);
  const up = spread(y, bottom, top);
  return (valueX, valueY) => [across(valueX), up(valueY)];
}

function spread({ domain: [start, stop] }: AxisSpec, from: number, to: number): (value: number) => number {
  if (!(Number.isFinite(start) && Number.isFinite(stop) && start < stop))
    throw new RangeError(`domain must rise, got ${start} to ${stop}`);
  const perUnit = (to - from) / (stop - start);
  return (value) => from + (value - start) * perUnit;
}

function axisShapes(spec: ChartSpec, size: PlotSize, edges: Edges, toPlace: ToPlace): Shape[] {
  const { left, right, top, bottom } = edges;
  const across = ticksAcross(spec.x, size.width);
  const xOf = (value: number): number => toPlace(value, 0)[0];
  const yOf = (value: number): number => toPlace(0, value)[1];
  const up = ticksUp(spec.y, size.height).map(({ value, text }) => ({ y: yOf(value), text }));
  return [
    ...up.map(({ y }) => grid([left, y], [right, y])),
    ...across.map(({ value }) => grid([xOf(value), top], [xOf(value), bottom])),
    stroke(
      [
        [left, top],
        [left, bottom],
        [right, bottom],
      ],
      'axis',
      1,
    ),
    ...up.map(({ y, text }) => letters(text, [left - 6, y + 4], 'end')),
    letters(spec.y.unit, [left - 6, top - 8], 'end'),
    ...across.map(({ value, text }, i) =>
      letters(i === across.length - 1 ? `${text} ${spec.x.unit}` : text, [xOf(value), bottom + 16]),
    ),
  ];
}

function levelShapes(
  { y, label }: ChartLevel,
  { y: axis }: ChartSpec,
  edges: Edges,
  toPlace: ToPlace,
): Shape[] {
  if (y < axis.domain[0] || y > axis.domain[1]) return [];
  const at = toPlace(0, y)[1];
  const line = curve(
    [
      [edges.left, at],
      [edges.right, at],
    ],
    'guide',
    true,
  );
  return label === undefined ? [line] : [line, letters(label, [edges.right - GAP, at - GAP], 'end')];
}

/** What lies between two curves: along the upper one and back along the lower one. */
function areaShapes({ x, low, high, role }: Area, spec: ChartSpec, toPlace: ToPlace): Shape[] {
  const uppers = curvePieces({ x, y: high }, spec, toPlace);
  const lowers = curvePieces({ x, y: low }, spec, toPlace);
  return uppers.flatMap((upper, i): Shape[] => {
    const lower = lowers[i];
    return lower ? [{ shape: 'patch', places: [...upper, ...[...lower].reverse()], role }] : [];
  });
}

/** A sign with the place that it names. */
type Sign = {
  readonly text: string;
  readonly role: Role;
  /** Share of the x axis. */
  readonly share: number;
  readonly x: number;
  readonly y: number;
};

/** A sign stands over what the curve does within this share of the axis. */
const NEARBY = 1 / 200;

function placeSigns(spec: ChartSpec): readonly Sign[] {
  const [from, to] = spec.x.domain;
  const [low, high] = spec.y.domain;
  return spec.marks.flatMap(({ x, y, glyph, label, role }) => {
    const value = y ?? highestNear(spec, x, (to - from) * NEARBY);
    if (value === null || x < from || x > to) return [];
    const inside = Math.min(high, Math.max(low, value));
    return [{ text: label ?? glyph, role, share: (x - from) / (to - from), x, y: inside }];
  });
}

function spanOf({ text, share }: Sign, left: number, right: number): Place {
  const at = left + share * (right - left);
  const half = lettersWidth(text, SIGN_SIZE) / 2 + 1;
  return [at - half, at + half];
}

/** A sign over the curve; where it stands in a further row, with a stem down to it. */
function signShapes(
  { text, role, x, y }: Sign,
  row: number,
  { left, right }: Edges,
  toPlace: ToPlace,
): Shape[] {
  const [at, foot] = toPlace(x, y);
  const half = lettersWidth(text, SIGN_SIZE) / 2;
  const base = foot - GAP - SIGN_ROW * row;
  const shown = sign(text, [Math.min(right - half, Math.max(left + half, at)), base], role);
  return row === 0
    ? [shown]
    : [
        stroke(
          [
            [at, base + 2],
            [at, foot],
          ],
          role,
          0.6,
        ),
        shown,
      ];
}

/** Highest value of any measured curve within a reach of a place. */
function highestNear({ series }: ChartSpec, at: number, reach: number): number | null {
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

function grid(from: Place, to: Place): Stroke {
  return stroke([from, to], 'dim', 0.5);
}

function stroke(places: readonly Place[], role: Role, width: number): Stroke {
  return { shape: 'stroke', places, role, width };
}

function curve(places: readonly Place[], role: Role, dotted: boolean): Stroke {
  const plain = stroke(places, role, WIDTHS[role] ?? USUAL_WIDTH);
  return dotted ? { ...plain, dash: DOTTED } : plain;
}
