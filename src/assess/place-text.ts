/** Where something lies, in words that someone on a ladder can follow. */
import { jointName, type Line } from '../line/line.ts';

/** A place along the line, in distances as they are reported. */
export type Place = {
  readonly distanceM: number;
  /** Joint it sits at, counted from 1 (the port); null when it lies inside a section. */
  readonly jointIndex: number | null;
  /** Section it lies in, counted from 0. */
  readonly section: number;
};

/** How lengths are written in words: `3.4 m`, or the same in feet. */
export type LengthWords = (lengthM: number) => string;

/** Lengths in metres to a decimetre, as results keep them. */
export const inMetres: LengthWords = (lengthM) => `${lengthM.toFixed(1)} m`;

/**
 * "at joint 3, main run to top jumper"; "in the main run, 3.4 m from joint 2 toward the end"; "at the end".
 *
 * @param line The line as described.
 */
export function placeText(line: Line, place: Place, lengthWords: LengthWords = inMetres): string {
  const last = line.sections.length + 1;
  const { jointIndex } = place;
  if (jointIndex === null) return inSection(line, place, lengthWords);
  if (jointIndex === last) return 'at the end';
  if (jointIndex === 1) return 'at joint 1, the port';
  return `at joint ${jointIndex}, ${jointName(line, jointIndex).replace(' / ', ' to ')}`;
}

/** "in the top jumper, from 41.0 m to 44.0 m"; both sections are named where a stretch reaches over a joint. */
export function stretchPlaceText(
  line: Line,
  stretch: { readonly fromM: number; readonly toM: number },
  lengthWords: LengthWords = inMetres,
): string {
  const { fromM, toM } = stretch;
  // An edge is known to a little less than a joint's place: what just touches a section does not lie in it.
  const slackM = Math.min(EDGE_SLACK_M, (toM - fromM) / 4);
  const first = labelAt(line, fromM + slackM);
  const last = labelAt(line, toM - slackM);
  const where = first === last ? `in the ${first}` : `from the ${first} into the ${last}`;
  return `${where}, from ${lengthWords(fromM)} to ${lengthWords(toM)}`;
}

/** How far a stretch may reach over a joint without being said to, m. */
const EDGE_SLACK_M = 0.3;

function inSection(line: Line, { section, distanceM }: Place, lengthWords: LengthWords): string {
  const starts = startsM(line);
  const fromStartM = Math.max(0, distanceM - (starts[section] ?? 0));
  const toEndM = (starts[section + 1] ?? Number.POSITIVE_INFINITY) - distanceM;
  const label = labelOf(line, section);
  if (toEndM < fromStartM) {
    const joint = section + 2 > line.sections.length ? 'the end' : `joint ${section + 2}`;
    return `in the ${label}, ${lengthWords(Math.max(0, toEndM))} before ${joint}`;
  }
  return `in the ${label}, ${lengthWords(fromStartM)} from joint ${section + 1} toward the end`;
}

function labelAt(line: Line, distanceM: number): string {
  const starts = startsM(line);
  const beyond = starts.findIndex((startM) => startM > distanceM);
  const section = beyond < 0 ? line.sections.length - 1 : beyond - 1;
  return labelOf(line, Math.max(0, section));
}

function labelOf(line: Line, section: number): string {
  return line.sections[section]?.label ?? 'line';
}

/** Where each section starts, m, as described, and where the last one ends when that is known. */
export function startsM(line: Line): number[] {
  const starts = [0];
  for (const { lengthM } of line.sections) {
    if (lengthM === null) break;
    starts.push(starts.at(-1)! + lengthM);
  }
  return starts;
}
