/** The line itself on paper: the same spec as the strip in the terminal, standing over the plot below it. */
import {
  CELL_WIDTH,
  type Sheet,
  lettersWidth,
  MARGIN_LEFT,
  MARGIN_RIGHT,
  type Place,
  rowsWithoutOverlap,
  type Shape,
  TEXT_SIZE,
} from './sheet.ts';
import { type LineStripSpec, SEVERITY_GLYPHS, type StripMark, type StripSection } from './line-strip.ts';

/** Height of the cable and of a joint that closes it. */
const CABLE = 7;
const JOINT = 17;
/** Height of a row of signs over the line, and of the texts under it. */
const SIGN_ROW = 15;
const UNDER_LINE = 16;
const TEXT_ROW = 14;
const SMALL_TEXT = 11;

/** Draws the line over a plot `width` cells wide: signs of what was found over it, joints counted under it, then names. */
export function lineSheet(spec: LineStripSpec, width: number): Sheet {
  const left = MARGIN_LEFT;
  const right = left + width * CELL_WIDTH;
  const [from, to] = spec.domainM;
  const x = (m: number): number => left + ((m - from) / (to - from)) * (right - left);
  const marks = spec.marks.filter(({ distanceM }) => distanceM >= from && distanceM <= to);
  const rows = rowsWithoutOverlap(
    marks.map((mark): Place => {
      const half = lettersWidth(signOf(mark)) / 2;
      return [x(mark.distanceM) - half, x(mark.distanceM) + half];
    }),
  );
  const above = SIGN_ROW * (1 + Math.max(0, ...rows));
  const middle = above + 4 + JOINT / 2;
  const shapes: Shape[] = [
    ...spec.sections.flatMap((section) => sectionShapes(section, x, middle)),
    ...jointShapes(spec.sections, x, middle),
    ...endShapes(spec, x, middle, right),
    ...spec.sections.flatMap((section) => nameShapes(section, x, middle + UNDER_LINE + TEXT_ROW)),
    ...marks.flatMap((mark, i): Shape[] => {
      const at = x(mark.distanceM);
      const base = above - 3 - SIGN_ROW * rows[i]!;
      return [
        {
          shape: 'stroke',
          places: [
            [at, base + 2],
            [at, middle],
          ],
          role: mark.severity,
          width: 0.8,
        },
        {
          shape: 'letters',
          at: [at, base],
          text: signOf(mark),
          role: mark.severity,
          anchor: 'middle',
          size: TEXT_SIZE,
          strong: true,
        },
      ];
    }),
  ];
  return { width: right + MARGIN_RIGHT, height: middle + UNDER_LINE + TEXT_ROW + 6, shapes };
}

function signOf({ severity, label }: StripMark): string {
  return label ?? SEVERITY_GLYPHS[severity];
}

/** Cable as a tube, a device as a box with a bar across. */
function sectionShapes(
  { fromM, toM, look }: StripSection,
  x: (m: number) => number,
  middle: number,
): Shape[] {
  const half = look === 'device' ? JOINT / 2 : CABLE / 2;
  const a: Place = [x(fromM), middle - half];
  const b: Place = [x(toM), middle + half];
  const outline: Place[] = [a, [b[0], a[1]], b, [a[0], b[1]], a];
  return [
    { shape: 'box', from: a, to: b, role: 'dim' },
    { shape: 'stroke', places: outline, role: 'line', width: 1 },
    ...(look === 'device' ? [{ shape: 'stroke', places: [a, b], role: 'line', width: 0.8 } as const] : []),
  ];
}

/** A bar at each joint, counted from the port; a number that would lie over the one before is left out. */
function jointShapes(sections: readonly StripSection[], x: (m: number) => number, middle: number): Shape[] {
  const places = [...sections.map(({ fromM }) => fromM), ...sections.slice(-1).map(({ toM }) => toM)];
  let lastTo = Number.NEGATIVE_INFINITY;
  return places.flatMap((m, i): Shape[] => {
    const at = x(m);
    const half = lettersWidth(String(i + 1), SMALL_TEXT) / 2;
    const bar: Shape = {
      shape: 'stroke',
      places: [
        [at, middle - JOINT / 2],
        [at, middle + JOINT / 2],
      ],
      role: 'line',
      width: 2,
    };
    if (at - half < lastTo + 2) return [bar];
    lastTo = at + half;
    return [
      bar,
      {
        shape: 'letters',
        at: [at, middle + UNDER_LINE + 4],
        text: String(i + 1),
        role: 'plain',
        anchor: 'middle',
        size: SMALL_TEXT,
      },
    ];
  });
}

/** What terminates the line, right of its end. */
function endShapes(
  { sections, endText }: LineStripSpec,
  x: (m: number) => number,
  middle: number,
  right: number,
): Shape[] {
  const end = sections.at(-1);
  if (!end || x(end.toM) + 6 + lettersWidth(endText, SMALL_TEXT) > right + MARGIN_RIGHT) return [];
  return [
    {
      shape: 'letters',
      at: [x(end.toM) + 6, middle + 4],
      text: endText,
      role: 'plain',
      anchor: 'start',
      size: SMALL_TEXT,
    },
  ];
}

/** The longest of a section's texts that fits under it. */
function nameShapes({ fromM, toM, texts }: StripSection, x: (m: number) => number, base: number): Shape[] {
  const room = x(toM) - x(fromM) - 4;
  const text = texts.find((one) => lettersWidth(one, SMALL_TEXT) <= room);
  if (text === undefined) return [];
  return [
    {
      shape: 'letters',
      at: [(x(fromM) + x(toM)) / 2, base],
      text,
      role: 'plain',
      anchor: 'middle',
      size: SMALL_TEXT,
    },
  ];
}
