/** The inverse of reading a line file. */
import { assertNever } from '../outcome.ts';
import type { Cable } from './cable.ts';
import { type CableTable, cableOf, guideOf } from './cable-table.ts';
import { TABLE_TEMPERATURE_C } from './constants.ts';
import { type Guide, guideCutoffHz, guideLossDbPer100m } from './guide.ts';
import type { Line, Section } from './line.ts';

/**
 * Writes a line as the text of a line file, in metres and °C; reading it gives the line back.
 *
 * A cable is named by its id where the table has it with the same figures; otherwise (given inline, or one of
 * its figures changed since) its own figures are written. Tolerances, which a line file cannot hold, then
 * become the usual ones. A guide likewise; where its loss follows from its walls, that in the middle of its band is
 * written.
 *
 * @param cables Table that the file will be read with.
 */
export function writeLine(line: Line, cables: CableTable): string {
  const { jointReturnLossDb, cableReturnLossDb, lossMarginDb } = line.limits;
  const limits = {
    ...(line.limits.bands.length === 0
      ? {}
      : {
          bands: line.limits.bands.map((band) => ({
            name: band.name,
            fromMHz: mega(band.fromHz),
            toMHz: mega(band.toHz),
            returnLossDb: band.returnLossDb,
          })),
        }),
    ...known({ jointReturnLossDb, cableReturnLossDb, lossMarginDb }),
  };
  const file = {
    ...(line.name === '' ? {} : { name: line.name }),
    ...(line.site === '' ? {} : { site: line.site }),
    sections: line.sections.map((section) => writtenSection(section, cables)),
    end: line.end,
    ...(line.temperatureKnown ? { temperatureC: line.temperatureC } : {}),
    ...(Object.keys(limits).length === 0 ? {} : { limits }),
  };
  return `${JSON.stringify(file, null, 2)}\n`;
}

function writtenSection(section: Section, cables: CableTable): Record<string, unknown> {
  const what = writtenKind(section, cables);
  const joint = known(section.jointAfter);
  return { ...what, label: section.label, ...(Object.keys(joint).length === 0 ? {} : { jointAfter: joint }) };
}

function writtenKind(section: Section, cables: CableTable): Record<string, unknown> {
  switch (section.type) {
    case 'coax':
      return { cable: writtenCable(section.cable, cables), ...known({ lengthM: section.lengthM }) };
    case 'guide':
      return { guide: writtenGuide(section.guide, cables), ...known({ lengthM: section.lengthM }) };
    case 'device':
      return {
        device: section.device,
        lengthM: section.lengthM,
        lossDb: section.lossDb,
        returnLossDb: section.returnLossDb,
        passbandMHz: section.passbandHz.map(mega),
      };
    default:
      return assertNever(section);
  }
}

function writtenCable(cable: Cable, cables: CableTable): unknown {
  const entry = cables.find(cable.id);
  if (entry !== undefined && JSON.stringify(cableOf(entry)) === JSON.stringify(cable)) return cable.id;
  const { id, z0Ohm, velocityFactor, k1, k2 } = cable;
  return { id, z0: z0Ohm, velocityFactor, k1, k2 };
}

function writtenGuide(guide: Guide, cables: CableTable): unknown {
  const entry = cables.findGuide(guide.id);
  if (entry !== undefined && JSON.stringify(guideOf(entry)) === JSON.stringify(guide)) return guide.id;
  const { id, aMm } = guide;
  return { id, aMm, lossDbPer100m: guide.lossDbPer100m ?? lossInMidBand(guide) };
}

/** Middle of the recommended band, relative to the cut-off, of a guide that names none. Common practice: 1.25 to 1.9. */
const MID_BAND = 1.5;

function lossInMidBand(guide: Guide): number {
  const middleHz =
    guide.bandMHz === null
      ? MID_BAND * guideCutoffHz(guide)
      : ((guide.bandMHz[0] + guide.bandMHz[1]) / 2) * 1e6;
  return guideLossDbPer100m(guide, middleHz, TABLE_TEMPERATURE_C);
}

/** What is left without the figures that are null. */
function known(figures: Readonly<Record<string, unknown>>): Record<string, unknown> {
  return Object.fromEntries(Object.entries(figures).filter(([, value]) => value !== null));
}

/** Hertz in MHz, without the dust that division leaves behind whole hertz. */
function mega(frequencyHz: number): number {
  return Number((frequencyHz / 1e6).toPrecision(15));
}
