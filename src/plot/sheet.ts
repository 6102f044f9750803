/** A picture as shapes on paper: what charts and lines become before they are SVG or PDF. */
import type { Role } from './run.ts';

/** A place on the paper, in units of which 16 make the height of a line of text; y grows downward. */
export type Place = readonly [x: number, y: number];

/** A line through places, joined straight. */
export type Stroke = {
  readonly shape: 'stroke';
  readonly places: readonly Place[];
  readonly role: Role;
  readonly width: number;
  /** Lengths drawn and left out, in turn; solid when not given. */
  readonly dash?: readonly number[];
};

/** What lies within the places, filled. */
export type Patch = {
  readonly shape: 'patch';
  readonly places: readonly Place[];
  readonly role: Role;
};

/** A line of text; `at` is on its base line. */
export type Letters = {
  readonly shape: 'letters';
  readonly at: Place;
  readonly text: string;
  readonly role: Role;
  readonly anchor: 'start' | 'middle' | 'end';
  readonly size: number;
  readonly strong?: true;
};

export type Shape = Stroke | Patch | Letters;

/** Later shapes lie over earlier ones. */
export type Sheet = {
  readonly width: number;
  readonly height: number;
  readonly shapes: readonly Shape[];
};

/** Units of a character cell: a chart of 80 × 16 cells is drawn on 640 × 256. */
export const CELL_WIDTH = 8;
export const CELL_HEIGHT = 16;

/** Sizes of signs, and of the text on axes and under lines. */
export const SIGN_SIZE = 12;
export const TEXT_SIZE = 11;

/** Height of a row of signs that stand over each other. */
export const SIGN_ROW = 15;

/** Units left and right of the plot; every picture leaves the same, so that those on one axis stand over each other. */
export const MARGIN_LEFT = 48;
export const MARGIN_RIGHT = 16;

/** Plain text of the usual size. */
export function letters(text: string, at: Place, anchor: Letters['anchor'] = 'middle'): Letters {
  return { shape: 'letters', at, text, role: 'plain', anchor, size: TEXT_SIZE };
}

/** A sign of something found. */
export function sign(text: string, at: Place, role: Role): Letters {
  return { shape: 'letters', at, text, role, anchor: 'middle', size: SIGN_SIZE, strong: true };
}

/** About how wide a text of this size is; no usual font is wider by much. */
export function lettersWidth(text: string, size: number = TEXT_SIZE): number {
  return [...text].length * size * 0.58;
}

/**
 * Rows for texts that would lie over each other: each takes the lowest row (0) that is free at its place.
 *
 * @param spans From and to of each text, in order of precedence.
 */
export function rowsWithoutOverlap(spans: readonly Place[]): readonly number[] {
  const rows: Place[][] = [];
  return spans.map((span) => {
    let row = rows.findIndex((taken) => taken.every(([from, to]) => span[1] < from || span[0] > to));
    if (row < 0) row = rows.push([]) - 1;
    rows[row]!.push(span);
    return row;
  });
}
