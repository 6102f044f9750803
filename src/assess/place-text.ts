/** Where something lies, in words that someone on a ladder can follow. */
import { describedLengthM, jointName, type Line } from '../line/line.ts';

/** A place along the line, in distances as they are reported. */
export type Place = {
  readonly distanceM: number;
  /** Joint it sits at, counted from 1 (the port); null when it lies inside a section. */
  readonly jointIndex: number | null;
  /** Section it lies in, counted from 0. */
  readonly section: number;
};

/**
 * "at joint 3, main run to top jumper"; "in the main run, 3.4 m from joint 2 toward the end"; "at the end".
 *
 * @param line The line as described. @param endsEarly True when the line was found to stop before its description does.
 */
export function placeText(line: Line, place: Place, endsEarly: boolean): string {
  const last = line.sections.length + 1;
  const { jointIndex } = place;
  if (jointIndex === last && !endsEarly) return 'at the end';
  if (jointIndex === 1) return 'at joint 1, the port';
  if (jointIndex !== null && jointIndex < last)
    return `at joint ${jointIndex}, ${jointName(line, jointIndex).replace(' / ', ' to ')}`;
  return inSection(line, place);
}

function inSection(line: Line, { section, distanceM }: Place): string {
  const label = line.sections[section]?.label ?? 'line';
  const starts = startsM(line);
  const fromStartM = distanceM - (starts[section] ?? 0);
  const described = describedLengthM(line);
  const endM = starts[section + 1] ?? null;
  const toEndM = described === null || endM === null ? Number.POSITIVE_INFINITY : endM - distanceM;
  if (toEndM < fromStartM) {
    const joint = section + 2 > line.sections.length ? 'the end' : `joint ${section + 2}`;
    return `in the ${label}, ${metres(toEndM)} before ${joint}`;
  }
  return `in the ${label}, ${metres(fromStartM)} from joint ${section + 1} toward the end`;
}

/** Where each section starts, m, and where the last one ends when that is known. */
function startsM(line: Line): number[] {
  const starts = [0];
  for (const { lengthM } of line.sections) {
    if (lengthM === null) break;
    starts.push(starts.at(-1)! + lengthM);
  }
  return starts;
}

function metres(value: number): string {
  return `${Math.max(0, value).toFixed(1)} m`;
}
