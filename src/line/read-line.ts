/** Line files: the described run from the reference plane to the end. */
import { type Outcome, succeed } from '../outcome.ts';
import { type Cable, USUAL_VELOCITY_FACTOR_TOLERANCE, USUAL_Z0_TOLERANCE } from './cable.ts';
import { type CableTable, cableOf, guideOf } from './cable-table.ts';
import { readCheckedJson } from './checked-json.ts';
import { METRES_PER_FOOT, TABLE_TEMPERATURE_C } from './constants.ts';
import type { GuideEntry } from './guide.ts';
import { type InlineGuide, inlineGuide } from './guide-file.ts';
import {
  type BandLimit,
  type JointDescription,
  type Limits,
  type Line,
  NO_LIMITS,
  PLAIN_JOINT,
  type Section,
} from './line.ts';
import { type GivenLine, type GivenSection, LINE_WORDS, lineFile } from './line-file.ts';
import { gammaOfVswr, returnLossDb } from './reflection.ts';

/** Figures of a cable as a line file gives them in place of an id. */
export type InlineCable = {
  readonly id: string;
  readonly z0: number;
  readonly velocityFactor: number;
  readonly k1: number;
  readonly k2: number;
};

/**
 * Reads a line file. Only `sections` is required; an end, a temperature and limits that are not given are
 * unknown, 20 °C (and said to be not known) and none.
 *
 * @param text Contents of the file, JSON.
 * @param file Name of the file, for problems.
 * @param cables Table in which cable ids are looked up.
 * @returns The line, its names cleaned and its units metres, hertz and °C; or every problem found.
 */
export function readLine(text: string, file: string, cables: CableTable): Outcome<Line> {
  const read = readCheckedJson(text, file, lineFile(cables), LINE_WORDS);
  if (!read.ok) return read;
  const given = read.value;
  const temperatureC =
    given.temperatureF === undefined ? given.temperatureC : (given.temperatureF - 32) / 1.8;
  return succeed({
    name: given.name ?? '',
    site: given.site ?? '',
    sections: given.sections.map(sectionOf),
    end: given.end ?? 'unknown',
    temperatureC: temperatureC ?? TABLE_TEMPERATURE_C,
    temperatureKnown: temperatureC !== undefined,
    limits: limitsOf(given.limits),
  });
}

/** A cable from a user's own figures, with the tolerances usual for a described cable. */
export function inlineCable(given: InlineCable): Cable {
  return {
    id: given.id,
    name: given.id,
    z0Ohm: given.z0,
    z0ToleranceOhm: USUAL_Z0_TOLERANCE * given.z0,
    velocityFactor: given.velocityFactor,
    velocityFactorTolerance: USUAL_VELOCITY_FACTOR_TOLERANCE * given.velocityFactor,
    k1: given.k1,
    k2: given.k2,
    fittedBandMHz: null,
    highestFrequencyMHz: null,
  };
}

function sectionOf(given: GivenSection): Section {
  const lengthM = given.lengthFt === undefined ? given.lengthM : given.lengthFt * METRES_PER_FOOT;
  const jointAfter = jointOf(given.jointAfter);
  if ('device' in given) {
    // The reader has refused a device without a length.
    if (lengthM === undefined) throw new TypeError('a device section came through without a length');
    const [lowMHz, highMHz] = given.passbandMHz;
    return {
      type: 'device',
      device: given.device,
      lengthM,
      lossDb: given.lossDb,
      returnLossDb: given.returnLossDb,
      passbandHz: [lowMHz * 1e6, highMHz * 1e6],
      label: given.label ?? given.device,
      jointAfter,
    };
  }
  if ('guide' in given) {
    const guide = isGuideEntry(given.guide) ? guideOf(given.guide) : inlineGuide(given.guide);
    return { type: 'guide', guide, lengthM: lengthM ?? null, label: given.label ?? guide.name, jointAfter };
  }
  const cable = 'z0' in given.cable ? inlineCable(given.cable) : cableOf(given.cable);
  return { type: 'coax', cable, lengthM: lengthM ?? null, label: given.label ?? cable.name, jointAfter };
}

function isGuideEntry(given: GuideEntry | InlineGuide): given is GuideEntry {
  return 'sources' in given;
}

function jointOf(given: GivenSection['jointAfter']): JointDescription {
  if (given === undefined) return PLAIN_JOINT;
  return { name: given.name ?? null, returnLossDb: given.returnLossDb ?? null };
}

function limitsOf(given: GivenLine['limits']): Limits {
  if (given === undefined) return NO_LIMITS;
  return {
    bands: (given.bands ?? []).map(bandOf),
    jointReturnLossDb: given.jointReturnLossDb ?? null,
    cableReturnLossDb: given.cableReturnLossDb ?? null,
    lossMarginDb: given.lossMarginDb ?? null,
  };
}

function bandOf(given: NonNullable<NonNullable<GivenLine['limits']>['bands']>[number]): BandLimit {
  return {
    name: given.name ?? `${given.fromMHz}–${given.toMHz} MHz`,
    fromHz: given.fromMHz * 1e6,
    toHz: given.toMHz * 1e6,
    // One of the two is there: the reader has refused a band with none.
    returnLossDb: given.returnLossDb ?? returnLossDb(gammaOfVswr(given.vswr ?? 1)),
  };
}
