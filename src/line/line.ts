/** The described run from the reference plane to the end. Joint 1 sits at the port, joint n+1 closes section n. */
import { assertNever } from '../outcome.ts';
import type { Cable } from './cable.ts';
import type { Guide } from './guide.ts';

/** What the description says of the joint that closes a section. */
export type JointDescription = {
  readonly name: string | null;
  /** Return loss that this joint is known to have when sound, dB. */
  readonly returnLossDb: number | null;
};

/** A stretch of one coax cable. */
export type CoaxSection = {
  readonly type: 'coax';
  readonly cable: Cable;
  /** Metres; null only on the last section: length unknown. */
  readonly lengthM: number | null;
  readonly label: string;
  readonly jointAfter: JointDescription;
};

/** A stretch of one rectangular waveguide. */
export type GuideSection = {
  readonly type: 'guide';
  readonly guide: Guide;
  /** Metres; null only on the last section: length unknown. */
  readonly lengthM: number | null;
  readonly label: string;
  readonly jointAfter: JointDescription;
};

/** A device in line: arrestor, filter, diplexer, amplifier, bias tee. */
export type DeviceSection = {
  readonly type: 'device';
  readonly device: string;
  readonly lengthM: number;
  readonly lossDb: number;
  readonly returnLossDb: number;
  readonly passbandHz: readonly [number, number];
  readonly label: string;
  readonly jointAfter: JointDescription;
};

/** One stretch of the run. */
export type Section = CoaxSection | GuideSection | DeviceSection;

export type EndKind = 'open' | 'short' | 'load' | 'antenna' | 'unknown';

/** Acceptance figure over a named band. */
export type BandLimit = {
  readonly name: string;
  readonly fromHz: number;
  readonly toHz: number;
  readonly returnLossDb: number;
};

/** Acceptance figures for a handover; null where the line file gives none. */
export type Limits = {
  readonly bands: readonly BandLimit[];
  readonly jointReturnLossDb: number | null;
  readonly cableReturnLossDb: number | null;
  readonly lossMarginDb: number | null;
};

export type Line = {
  readonly name: string;
  readonly site: string;
  readonly sections: readonly Section[];
  readonly end: EndKind;
  /** Temperature of the line, °C; 20 when not given. */
  readonly temperatureC: number;
  /** False when the description did not give a temperature. */
  readonly temperatureKnown: boolean;
  readonly limits: Limits;
};

/** Limits of a line file that names none. */
export const NO_LIMITS: Limits = {
  bands: [],
  jointReturnLossDb: null,
  cableReturnLossDb: null,
  lossMarginDb: null,
};

/** Joint that the description does not speak of. */
export const PLAIN_JOINT: JointDescription = { name: null, returnLossDb: null };

/** Sum of the described lengths, m; null when the last section's length is unknown. */
export function describedLengthM(line: Line): number | null {
  let sum = 0;
  for (const section of line.sections) {
    if (section.lengthM === null) return null;
    sum += section.lengthM;
  }
  return sum;
}

/** Name of joint `index` (1 = at the port): its own, else "section before / section after". */
export function jointName(line: Line, index: number): string {
  const before = line.sections[index - 2];
  const after = line.sections[index - 1];
  if (before?.jointAfter.name) return before.jointAfter.name;
  if (!before) return after ? `port / ${after.label}` : 'port';
  return after ? `${before.label} / ${after.label}` : `${before.label} / end`;
}

/** True for a line with a waveguide in it: along that there are no ohms to speak of. */
export function hasGuide(line: Line): boolean {
  return line.sections.some((section) => section.type === 'guide');
}

/** What a section is made of, in a few words: the cable's or guide's name, or what the device is. */
export function sectionKind(section: Section): string {
  switch (section.type) {
    case 'coax':
      return section.cable.name;
    case 'guide':
      return section.guide.name;
    case 'device':
      return section.device;
    default:
      return assertNever(section);
  }
}

/**
 * Impedance that devices and guides of a line are matched to, Ω: that of its first cable, else the port's.
 *
 * A guide's own wave impedance is a matter of definition; what joins it to a cable, a device or the port is built to
 * match, and is taken to.
 */
export function referenceOhm(line: Line, portOhm: number): number {
  const first = line.sections.find((section) => section.type === 'coax');
  return first?.type === 'coax' ? first.cable.z0Ohm : portOhm;
}
