/** The form of a line file (`*.line.json`), and the words for what is wrong with one. */
import * as v from 'valibot';
import type { CableTable } from './cable-table.ts';
import {
  advice,
  closedObject,
  type FileWords,
  has,
  isObject,
  notBoth,
  numberAbove,
  numberWithin,
  oneOf,
  visibleText,
} from './checked-json.ts';
import { cleanName } from './clean-name.ts';
import { METRES_PER_FOOT } from './constants.ts';
import { GUIDE_HINTS, inlineGuideFile } from './guide-file.ts';
import type { EndKind } from './line.ts';
import { orList } from './nearest-word.ts';

/** Longest section, m. */
export const LONGEST_SECTION_M = 100_000;
/** Sections of one line; a run of more is a slip, and the cascade would crawl. */
const MOST_SECTIONS = 500;
/** Temperatures that a line may have, °C: beyond any climate, and cable still works there. */
const COLDEST_C = -80;
const HOTTEST_C = 150;

const END_KINDS = ['open', 'short', 'load', 'antenna', 'unknown'] as const satisfies readonly EndKind[];

const name = visibleText();
const lengthM = numberAbove(0, LONGEST_SECTION_M);
const lengthFt = numberAbove(0, LONGEST_SECTION_M / METRES_PER_FOOT);
const returnLossDb = numberAbove(0, 100);
const frequencyMHz = numberWithin(0, 1e6);

const jointAfter = closedObject({ name: v.optional(name), returnLossDb: v.optional(returnLossDb) });

const inlineCable = closedObject({
  id: name,
  z0: numberWithin(1, 1000),
  velocityFactor: numberWithin(0.1, 1),
  k1: numberWithin(0, 1000),
  k2: numberWithin(0, 1000),
});

const deviceSection = v.pipe(
  closedObject({
    device: name,
    lengthM: v.optional(lengthM),
    lengthFt: v.optional(lengthFt),
    lossDb: numberWithin(0, 100),
    returnLossDb,
    passbandMHz: v.pipe(
      v.strictTuple([frequencyMHz, frequencyMHz]),
      v.check(
        ([low, high]) => low < high,
        advice('band-order', 'does not rise', 'give the lower frequency first'),
      ),
    ),
    label: v.optional(name),
    jointAfter: v.optional(jointAfter),
  }),
  notBoth('lengthM', 'lengthFt'),
);

const unclearSection = v.custom<never>(
  () => false,
  advice('unclear-section', 'is more than one of cable, guide and device', 'make a section of each'),
);

const band = v.pipe(
  closedObject({
    name: v.optional(name),
    fromMHz: frequencyMHz,
    toMHz: frequencyMHz,
    returnLossDb: v.optional(returnLossDb),
    vswr: v.optional(numberWithin(1.001, 1000)),
  }),
  notBoth('returnLossDb', 'vswr'),
  v.rawCheck(({ dataset, addIssue }) => {
    const given: unknown = dataset.value;
    if (!isObject(given)) return;
    if (!has(given, 'returnLossDb') && !has(given, 'vswr')) {
      addIssue({ message: advice('no-limit', 'sets no limit', 'write "returnLossDb" or "vswr"') });
    }
    const { fromMHz, toMHz } = given;
    if (typeof fromMHz === 'number' && typeof toMHz === 'number' && fromMHz >= toMHz) {
      addIssue({ message: advice('band-order', 'does not rise', 'make fromMHz lower than toMHz') });
    }
  }),
);

/**
 * What a line file may hold; checked as far as a file can be checked at once.
 *
 * @param cables Table in which cable ids are looked up.
 */
export function lineFile(cables: CableTable) {
  const tableCable = v.pipe(
    v.string(),
    v.rawTransform(({ dataset, addIssue, NEVER }) => {
      const entry = cables.find(dataset.value);
      if (entry !== undefined) return entry;
      addIssue({ message: unknownCable(dataset.value, cables) });
      return NEVER;
    }),
  );
  const coaxSection = v.pipe(
    closedObject({
      cable: v.lazy((input) => (isObject(input) ? inlineCable : tableCable)),
      lengthM: v.optional(lengthM),
      lengthFt: v.optional(lengthFt),
      label: v.optional(name),
      jointAfter: v.optional(jointAfter),
    }),
    notBoth('lengthM', 'lengthFt'),
  );
  const tableGuide = v.pipe(
    v.string(),
    v.rawTransform(({ dataset, addIssue, NEVER }) => {
      const entry = cables.findGuide(dataset.value);
      if (entry !== undefined) return entry;
      addIssue({ message: unknownGuide(dataset.value, cables) });
      return NEVER;
    }),
  );
  const guideSection = v.pipe(
    closedObject({
      guide: v.lazy((input) => (isObject(input) ? inlineGuideFile : tableGuide)),
      lengthM: v.optional(lengthM),
      lengthFt: v.optional(lengthFt),
      label: v.optional(name),
      jointAfter: v.optional(jointAfter),
    }),
    notBoth('lengthM', 'lengthFt'),
  );
  const section = v.lazy((input) => {
    const kinds = ['cable', 'guide', 'device'].filter((key) => has(input, key));
    if (kinds.length > 1) return unclearSection;
    if (kinds[0] === 'guide') return guideSection;
    return kinds[0] === 'device' ? deviceSection : coaxSection;
  });
  return v.pipe(
    closedObject({
      name: v.optional(name),
      site: v.optional(name),
      sections: v.pipe(
        v.array(section),
        v.minLength(1),
        v.maxLength(MOST_SECTIONS),
        v.rawCheck(({ dataset, addIssue }) => {
          const sections: unknown = dataset.value;
          if (!Array.isArray(sections)) return;
          sections.forEach((one: unknown, index) => {
            if (!isObject(one) || has(one, 'lengthM') || has(one, 'lengthFt')) return;
            const device = has(one, 'device');
            if (!device && index === sections.length - 1) return;
            const mend = device
              ? 'write "lengthM" (or "lengthFt"); a device is never of unknown length'
              : 'write "lengthM" (or "lengthFt"); only the last section may be of unknown length';
            addIssue({
              message: advice('no-length', 'has no length', mend),
              path: [{ type: 'array', origin: 'value', input: sections, key: index, value: one }],
            });
          });
        }),
      ),
      end: v.optional(oneOf(END_KINDS)),
      temperatureC: v.optional(numberWithin(COLDEST_C, HOTTEST_C)),
      temperatureF: v.optional(numberWithin(fahrenheit(COLDEST_C), fahrenheit(HOTTEST_C))),
      limits: v.optional(
        closedObject({
          bands: v.optional(v.array(band)),
          jointReturnLossDb: v.optional(returnLossDb),
          cableReturnLossDb: v.optional(returnLossDb),
          lossMarginDb: v.optional(numberWithin(0, 100)),
        }),
      ),
    }),
    notBoth('temperatureC', 'temperatureF'),
  );
}

/** A line file that passed: cables found, one of each pair of keys. */
export type GivenLine = v.InferOutput<ReturnType<typeof lineFile>>;

/** One of its sections. */
export type GivenSection = GivenLine['sections'][number];

function unknownCable(id: string, cables: CableTable): string {
  const guide = cables.findGuide(id);
  if (guide !== undefined)
    return advice('unknown-cable', 'names a waveguide', `write "guide": "${cleanName(guide.id)}"`);
  const near = cables.nearest(id);
  const meant = near.length === 0 ? '' : `did you mean ${orList(near)}? `;
  return advice(
    'unknown-cable',
    `names a cable that is not in the table: ${cleanName(id)}`,
    `${meant}otherwise give the cable's own figures: { "id", "z0", "velocityFactor", "k1", "k2" }`,
  );
}

function unknownGuide(id: string, cables: CableTable): string {
  const near = cables.nearestGuide(id);
  const meant = near.length === 0 ? '' : `did you mean ${orList(near)}? `;
  return advice(
    'unknown-guide',
    `names a guide that is not in the table: ${cleanName(id)}`,
    `${meant}otherwise give the guide's own figures: { "id", "aMm", "lossDbPer100m" }`,
  );
}

function fahrenheit(temperatureC: number): number {
  return temperatureC * 1.8 + 32;
}

const LENGTH_FT = Math.floor(LONGEST_SECTION_M / METRES_PER_FOOT);
const TEMPERATURE_F = `${fahrenheit(COLDEST_C)} to ${fahrenheit(HOTTEST_C)}`;
const RETURN_LOSS = 'a return loss in dB, above 0 and at most 100, for example 28';

/** How a line file speaks of its keys. */
export const LINE_WORDS: FileWords = {
  items: { sections: 'section', bands: 'band' },
  hints: {
    name: 'a name in quotes',
    site: 'a name in quotes',
    sections: `a list of 1 to ${MOST_SECTIONS} sections, for example [{ "cable": "foam-7-8", "lengthM": 46 }]`,
    'sections[]': '{ "cable": "foam-7-8", "lengthM": 46 }',
    'bands[]': '{ "name": "main", "fromMHz": 1710, "toMHz": 2170, "returnLossDb": 14 }',
    'passbandMHz[]': 'a frequency in MHz, from 0 to 1000000',
    cable: 'a cable id such as "foam-7-8", or { "id", "z0", "velocityFactor", "k1", "k2" }',
    guide: 'a guide id such as "WR-137", or { "id", "aMm", "lossDbPer100m" }',
    ...GUIDE_HINTS,
    device: 'what it is, in quotes, for example "arrestor"',
    lengthM: `a length in metres, above 0 and at most ${LONGEST_SECTION_M}, for example 46`,
    lengthFt: `a length in feet, above 0 and at most ${LENGTH_FT}, for example 150`,
    label: 'a name in quotes, for example "main run"',
    jointAfter: 'what closes the section, for example { "name": "N at the bulkhead", "returnLossDb": 30 }',
    end: `one of ${END_KINDS.map((kind) => `"${kind}"`).join(', ')}`,
    temperatureC: `a temperature in °C from ${COLDEST_C} to ${HOTTEST_C}, for example 12`,
    temperatureF: `a temperature in °F from ${TEMPERATURE_F}, for example 54`,
    limits: 'the limits of the handover, for example { "jointReturnLossDb": 28 }',
    bands: 'a list, for example [{ "name": "main", "fromMHz": 1710, "toMHz": 2170, "returnLossDb": 14 }]',
    fromMHz: 'a frequency in MHz, from 0 to 1000000',
    toMHz: 'a frequency in MHz, from 0 to 1000000',
    returnLossDb: RETURN_LOSS,
    vswr: 'a VSWR from 1.001 to 1000, for example 1.5',
    jointReturnLossDb: RETURN_LOSS,
    cableReturnLossDb: RETURN_LOSS,
    lossMarginDb: 'a loss in dB from 0 to 100, for example 0.5',
    id: 'a short name in quotes',
    z0: 'an impedance in ohms from 1 to 1000, for example 50',
    velocityFactor: 'a velocity factor from 0.1 to 1, for example 0.88',
    k1: 'a conductor loss in dB per 100 m per √MHz, from 0 to 1000, for example 0.6',
    k2: 'a dielectric loss in dB per 100 m per MHz, from 0 to 1000, for example 0.007',
    lossDb: 'a loss in dB from 0 to 100, for example 0.1',
    passbandMHz: 'two frequencies in MHz, low then high, for example [690, 2700]',
  },
};
