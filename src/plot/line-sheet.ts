/** The line itself on paper: the same spec as the strip in the terminal, standing over the plot below it. */
import { type LineStripSpec, SEVERITY_GLYPHS, type StripMark, type StripSection } from './line-strip.ts';
import type { Role } from './run.ts';
import {
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

/** Height of a cable, and of a joint and a device on it. */
const CABLE = 7;
const JOINT = 17;
/** From the middle of the line down to the joints' numbers, and from there to the sections' names. */
const TO_NUMBERS = 21;
const TO_NAMES = 14;
const GAP = 6;

type Across = (distanceM: number) => number;

/** Draws the line over a plot `width` cells wide: signs of what was found over it, joints counted and names under it. */
export function lineSheet(spec: LineStripSpec, width: number): Sheet {
  const left = MARGIN_LEFT;
  const right = left + width * CELL_WIDTH;
  const [from, to] = spec.domainM;
  const x: Across = (m) => left + ((m - from) / (to - from)) * (right - left);
  const marks = spec.marks.filter(({ distanceM }) => distanceM >= from && distanceM <= to);
  const rows = rowsWithoutOverlap(
    marks.map((mark): Place => {
      const half = lettersWidth(signOf(mark), SIGN_SIZE) / 2;
      return [x(mark.distanceM) - half, x(mark.distanceM) + half];
    }),
  );
  const above = SIGN_ROW * (1 + Math.max(0, ...rows));
  const middle = above + 4 + JOINT / 2;
  const numbers = middle + TO_NUMBERS;
  return {
    width: right + MARGIN_RIGHT,
    height: numbers + TO_NAMES + GAP,
    shapes: [
      ...spec.sections.flatMap((section) => sectionShapes(section, x, middle)),
      ...jointShapes(spec.sections, x, middle, numbers),
      ...endShapes(spec, x, middle, right),
      ...spec.sections.flatMap((section) => nameShapes(section, x, numbers + TO_NAMES)),
      ...marks.flatMap((mark, i) =>
        markShapes(mark, x(mark.distanceM), above - 3 - SIGN_ROW * rows[i]!, middle),
      ),
    ],
  };
}

function signOf({ severity, label }: StripMark): string {
  return label ?? SEVERITY_GLYPHS[severity];
}

function markShapes(mark: StripMark, at: number, base: number, middle: number): Shape[] {
  return [
    stroke(
      [
        [at, base + 2],
        [at, middle],
      ],
      mark.severity,
      0.8,
    ),
    sign(signOf(mark), [at, base], mark.severity),
  ];
}

/** Cable as a tube, a device as a box with a bar across. */
function sectionShapes({ fromM, toM, look }: StripSection, x: Across, middle: number): Shape[] {
  const half = look === 'device' ? JOINT / 2 : CABLE / 2;
  const a: Place = [x(fromM), middle - half];
  const b: Place = [x(toM), middle + half];
  const outline: Place[] = [a, [b[0], a[1]], b, [a[0], b[1]], a];
  return [
    { shape: 'patch', places: outline, role: 'line' },
    stroke(outline, 'line', 1),
    ...(look === 'device' ? [stroke([a, b], 'line', 0.8)] : []),
  ];
}

/** A bar at each joint, counted from the port; a number that would lie over the one before is left out. */
function jointShapes(sections: readonly StripSection[], x: Across, middle: number, numbers: number): Shape[] {
  const places = [...sections.map(({ fromM }) => fromM), ...sections.slice(-1).map(({ toM }) => toM)];
  let lastTo = Number.NEGATIVE_INFINITY;
  return places.flatMap((m, i): Shape[] => {
    const at = x(m);
    const half = lettersWidth(String(i + 1)) / 2;
    const bar = stroke(
      [
        [at, middle - JOINT / 2],
        [at, middle + JOINT / 2],
      ],
      'line',
      2,
    );
    if (at - half < lastTo + 2) return [bar];
    lastTo = at + half;
    return [bar, letters(String(i + 1), [at, numbers])];
  });
}

/** What terminates the line, right of its end. */
function endShapes({ sections, endText }: LineStripSpec, x: Across, middle: number, right: number): Shape[] {
  const end = sections.at(-1);
  if (!end || x(end.toM) + GAP + lettersWidth(endText) > right + MARGIN_RIGHT) return [];
  return [letters(endText, [x(end.toM) + GAP, middle + 4], 'start')];
}

/** The longest of a section's texts that fits under it. */
function nameShapes({ fromM, toM, texts }: StripSection, x: Across, base: number): Shape[] {
  const room = x(toM) - x(fromM) - 4;
  const text = texts.find((one) => lettersWidth(one) <= room);
  return text === undefined ? [] : [letters(text, [(x(fromM) + x(toM)) / 2, base])];
}

function stroke(places: readonly Place[], role: Role, width: number): Stroke {
  return { shape: 'stroke', places, role, width };
}
