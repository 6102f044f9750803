/** Another cable in place of the longest section's. */
import type { Cable } from '../line/cable.ts';
import type { CoaxSection, Line } from '../line/line.ts';

/** The coax section that counts as the longest; one of unknown length counts as longer than any. */
export function longestCoax(line: Line): CoaxSection | null {
  let longest: CoaxSection | null = null;
  for (const section of line.sections) {
    if (section.type !== 'coax') continue;
    if (longest === null || lengthOf(section) > lengthOf(longest)) longest = section;
  }
  return longest;
}

/**
 * The line with another cable in its longest coax section.
 *
 * A label that only repeats the old cable's name follows the change.
 *
 * @returns Null when the line has no coax section.
 */
export function withCable(line: Line, cable: Cable): Line | null {
  const longest = longestCoax(line);
  if (!longest) return null;
  const label =
    longest.label === longest.cable.name || longest.label === longest.cable.id ? cable.name : longest.label;
  return {
    ...line,
    sections: line.sections.map((section) => (section === longest ? { ...longest, cable, label } : section)),
  };
}

function lengthOf(section: CoaxSection): number {
  return section.lengthM ?? Number.POSITIVE_INFINITY;
}
