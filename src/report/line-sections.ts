/** The described line as the strip draws it. */
import type { Line, Section } from '../line/line.ts';
import type { Solution } from '../locate/solution.ts';
import { assertNever } from '../outcome.ts';
import type { StripSection } from '../plot/line-strip.ts';
import { lengthText, type Units } from '../plot/quantity-text.ts';
import type { Domain } from '../plot/scale.ts';

/** Room before the port and behind the end of the whole line, as shares of its length. */
const ROOM_BEFORE = 0.02;
const ROOM_BEHIND = 0.13;

/** From a little before the port to a little behind the end of a line. */
export function lineSpan(lengthM: number): Domain {
  return [-ROOM_BEFORE * lengthM, (1 + ROOM_BEHIND) * lengthM];
}

/**
 * Sections from the port, with ways to write them.
 *
 * @param lengthM Where the line ends if the description leaves its last length open; null when that is unknown too:
 *   the last section is then left out.
 */
export function stripSections(line: Line, lengthM: number | null, units: Units): readonly StripSection[] {
  const sections: StripSection[] = [];
  let fromM = 0;
  for (const section of line.sections) {
    const ownM = section.lengthM ?? (lengthM === null ? null : lengthM - fromM);
    if (ownM === null || !(ownM > 0)) break;
    const length = lengthText(ownM, units, 1);
    const kind = sectionKind(section);
    sections.push({
      fromM,
      toM: fromM + ownM,
      texts: [
        ...(kind === section.label ? [] : [`${section.label} ${length} · ${kind}`]),
        `${section.label} ${length}`,
        section.label,
        length,
        length.replace(/ .*/u, ''),
      ],
      look: section.type === 'device' ? 'device' : 'cable',
    });
    fromM += ownM;
  }
  return sections;
}

/** What terminates the line: what was found when the description does not say. */
export function endText({ line, solution }: { readonly line: Line; readonly solution: Solution }): string {
  const end = line.end === 'unknown' ? solution.end : line.end;
  return end === 'unknown' ? 'end' : end;
}

/** What a section is made of, in a word or two. */
function sectionKind(section: Section): string {
  switch (section.type) {
    case 'coax':
      return section.cable.name;
    case 'guide':
      return section.guide.id;
    case 'device':
      return section.device;
    default:
      return assertNever(section);
  }
}
