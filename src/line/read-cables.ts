/** Table files: the program's own cables and guides in cables/, and a user's datasheets in the same form. */
import * as v from 'valibot';
import { fail, type Notice, type Outcome, type Problem, succeed } from '../outcome.ts';
import {
  type AttenuationPoint,
  CABLE_FIGURES,
  type CableEntry,
  FIGURE_STATUSES,
  USUAL_VELOCITY_FACTOR_TOLERANCE,
  USUAL_Z0_TOLERANCE,
} from './cable.ts';
import type { TableEntry } from './cable-table.ts';
import {
  advice,
  closedObject,
  type FileWords,
  has,
  isObject,
  numberAbove,
  numberWithin,
  readCheckedJson,
  visibleText,
} from './checked-json.ts';
import { fitAttenuation, worstResidual } from './fit-attenuation.ts';
import { GUIDE_TABLE_HINTS, guideEntryOf, guideList } from './guide-file.ts';
import { distinctNames, namedText, source, sourcesFound, sourcesOfFigures, status } from './table-schema.ts';

/** k1 and k2 that miss the points of their own entry by more than this are doubted aloud. */
const DOUBTFUL_RESIDUAL = 0.15;

const frequencyMHz = numberWithin(0.001, 1e6);

const point = closedObject({
  frequencyMHz,
  dbPer100m: numberWithin(0.001, 1e5),
  source: v.optional(source),
  status: v.optional(status),
});

const bandMHz = v.pipe(
  v.strictTuple([frequencyMHz, frequencyMHz]),
  v.check(
    ([low, high]) => low <= high,
    advice('band-order', 'ends below its start', 'give the lower frequency first'),
  ),
);

const cable = v.pipe(
  closedObject({
    id: namedText(),
    name: v.optional(visibleText()),
    aliases: v.optional(v.array(namedText())),
    z0Ohm: numberWithin(1, 1000),
    z0ToleranceOhm: v.optional(numberWithin(0, 500)),
    velocityFactor: numberWithin(0.1, 1),
    velocityFactorTolerance: v.optional(numberWithin(0, 0.5)),
    attenuation: v.optional(v.array(point)),
    k1: v.optional(numberWithin(0, 1000)),
    k2: v.optional(numberWithin(0, 1000)),
    fittedBandMHz: v.optional(bandMHz),
    worstResidual: v.optional(numberWithin(-1, 1000)),
    outerDiameterMm: v.optional(numberAbove(0, 1000)),
    bendRadiusOnceMm: v.optional(numberAbove(0, 100_000)),
    bendRadiusRepeatedMm: v.optional(numberAbove(0, 100_000)),
    highestFrequencyMHz: v.optional(frequencyMHz),
    note: v.optional(visibleText(400)),
    sources: v.optional(sourcesOfFigures(CABLE_FIGURES)),
  }),
  v.rawCheck(({ dataset, addIssue }) => {
    const given: unknown = dataset.value;
    if (!isObject(given)) return;
    const { attenuation } = given;
    if (has(given, 'k1') !== has(given, 'k2')) {
      const one = has(given, 'k1') ? 'k1' : 'k2';
      addIssue({ message: advice('half-a-loss', `has ${one} alone`, 'give k1 and k2 together, or neither') });
    } else if (!has(given, 'k1') && !(Array.isArray(attenuation) && attenuation.length >= 2)) {
      const mend = 'give "attenuation" with two points or more, or "k1" and "k2"';
      addIssue({ message: advice('no-loss', 'says nothing of its loss', mend) });
    }
  }),
);

type GivenCable = v.InferOutput<typeof cable>;

const familyName = v.optional(visibleText());
const cableList = v.pipe(v.array(cable), v.minLength(1), distinctNames<GivenCable>('cable'));
const cableFile = closedObject({ family: familyName, cables: cableList, guides: v.optional(guideList) });
const guideFile = closedObject({ family: familyName, cables: v.optional(cableList), guides: guideList });
/** A file holds cables, guides or both; one that names neither is asked for cables. */
const tableFile = v.lazy((input) => (has(input, 'guides') ? guideFile : cableFile));

const WORDS: FileWords = {
  items: { cables: 'cable', guides: 'guide', attenuation: 'attenuation point', aliases: 'alias' },
  hints: {
    ...GUIDE_TABLE_HINTS,
    family: 'a name for this family of cables, in quotes',
    cables:
      'a list of one cable or more, each { "id": …, "z0Ohm": …, "velocityFactor": …, "attenuation": … }',
    id: 'a short name in quotes, for example "rg-213"',
    name: 'a name in quotes',
    aliases: 'a list of other names, for example ["RG-213/U"]',
    z0Ohm: 'an impedance in ohms from 1 to 1000, for example 50',
    z0ToleranceOhm: 'a tolerance in ohms from 0 to 500, for example 2',
    velocityFactor: 'a velocity factor from 0.1 to 1, for example 0.88',
    velocityFactorTolerance: 'a tolerance of the velocity factor from 0 to 0.5, for example 0.01',
    attenuation: 'a list of points, each { "frequencyMHz": 100, "dbPer100m": 6.6 }',
    'cables[]': '{ "id": …, "z0Ohm": …, "velocityFactor": …, "attenuation": … }',
    'aliases[]': 'a name in quotes',
    'attenuation[]': '{ "frequencyMHz": 100, "dbPer100m": 6.6 }',
    frequencyMHz: 'a frequency in MHz, 0.001 or more, for example 900',
    dbPer100m: 'an attenuation at 20 °C in dB per 100 m, 0.001 or more (dB per 100 ft × 3.2808)',
    k1: 'a conductor loss in dB per 100 m per √MHz, 0 or more, for example 0.6',
    k2: 'a dielectric loss in dB per 100 m per MHz, 0 or more, for example 0.007',
    fittedBandMHz: 'two frequencies in MHz, low then high, for example [10, 1000]',
    worstResidual: 'the worst fit ÷ point − 1, for example 0.03',
    outerDiameterMm: 'a diameter in millimetres, above 0',
    bendRadiusOnceMm: 'a radius in millimetres, above 0',
    bendRadiusRepeatedMm: 'a radius in millimetres, above 0',
    highestFrequencyMHz: 'a frequency in MHz, 0.001 or more',
    note: 'a sentence in quotes',
    source: 'where the figure was read, in quotes',
    status: `one of ${FIGURE_STATUSES.map((word) => `"${word}"`).join(', ')}`,
    sources:
      'the source of each figure, for example { "z0Ohm": { "source": "datasheet", "status": "confirmed" } }',
    ...Object.fromEntries(
      CABLE_FIGURES.map((figure) => [`sources.${figure}`, '{ "source": …, "status": … }']),
    ),
  },
};

/**
 * Reads a table file: `{ "family", "cables": [ … ], "guides": [ … ] }`, either list or both.
 *
 * A cable needs `id`, `z0Ohm`, `velocityFactor`, and its loss: either `attenuation` points, which are fitted here, or
 * `k1` and `k2`. A guide needs `id`, `aMm`, and its loss: `bMm` with `conductivitySPerM`, or `lossDbPer100m`. What is left out is filled with what is usual, and marked so in `sources`.
 *
 * @param text Contents of the file, JSON.
 * @param file Name of the file, for problems and as the source of figures that give none.
 * @returns The cables in the order of the file, then the guides, or every problem found.
 */
export function readCables(text: string, file: string): Outcome<TableEntry[]> {
  const read = readCheckedJson(text, file, tableFile, WORDS);
  if (!read.ok) return read;
  const entries: TableEntry[] = [];
  const notices: Notice[] = [];
  const problems: Problem[] = [];
  const family = read.value.family ?? '';
  for (const given of read.value.cables ?? []) {
    const points = pointsOf(given, file);
    const fitted = pointsWithin(points, given.fittedBandMHz);
    if (given.k1 === undefined && fitted.length < 2) {
      problems.push({
        code: 'no-loss',
        file,
        what: `cable "${given.id}" has fewer than two attenuation points within its fittedBandMHz`,
        mend: 'widen the band, leave it out, or give k1 and k2',
      });
      continue;
    }
    const entry = entryOf(given, points, fitted, family, file);
    entries.push(entry);
    if (Math.abs(entry.worstResidual ?? 0) > DOUBTFUL_RESIDUAL) {
      notices.push({
        code: 'cable-fit',
        what: `${entry.name}: k1 and k2 miss its own attenuation points by up to ${Math.round(
          100 * Math.abs(entry.worstResidual ?? 0),
        )} %; check that the points are in dB per 100 m`,
      });
    }
  }
  for (const given of read.value.guides ?? []) entries.push(guideEntryOf(given, family, file));
  return problems.length > 0 ? fail(...problems) : succeed(entries, notices);
}

function pointsOf(given: GivenCable, file: string): CableEntry['attenuation'] {
  const points = (given.attenuation ?? []).map((one) => ({
    frequencyMHz: one.frequencyMHz,
    dbPer100m: one.dbPer100m,
    source: one.source ?? file,
    status: one.status ?? ('as given' as const),
  }));
  return points.sort((a, b) => a.frequencyMHz - b.frequencyMHz);
}

function pointsWithin<Point extends AttenuationPoint>(
  points: readonly Point[],
  band: readonly [number, number] | undefined,
): readonly Point[] {
  if (band === undefined) return points;
  return points.filter((one) => one.frequencyMHz >= band[0] && one.frequencyMHz <= band[1]);
}

function entryOf(
  given: GivenCable,
  points: CableEntry['attenuation'],
  fitted: CableEntry['attenuation'],
  family: string,
  file: string,
): CableEntry {
  const fit = fitted.length > 0 ? fitAttenuation(fitted) : null;
  const k1 = given.k1 ?? fit?.k1 ?? 0;
  const k2 = given.k2 ?? fit?.k2 ?? 0;
  const figures = {
    z0Ohm: given.z0Ohm,
    z0ToleranceOhm: given.z0ToleranceOhm ?? USUAL_Z0_TOLERANCE * given.z0Ohm,
    velocityFactor: given.velocityFactor,
    velocityFactorTolerance:
      given.velocityFactorTolerance ?? USUAL_VELOCITY_FACTOR_TOLERANCE * given.velocityFactor,
    k1,
    k2,
    fittedBandMHz: given.fittedBandMHz ?? fit?.bandMHz ?? null,
    worstResidual: fit === null ? (given.worstResidual ?? null) : worstResidual(fitted, k1, k2),
    outerDiameterMm: given.outerDiameterMm ?? null,
    bendRadiusOnceMm: given.bendRadiusOnceMm ?? null,
    bendRadiusRepeatedMm: given.bendRadiusRepeatedMm ?? null,
    highestFrequencyMHz: given.highestFrequencyMHz ?? null,
  };
  const entry = {
    id: given.id,
    name: given.name ?? given.id,
    aliases: given.aliases ?? [],
    family,
    file,
    attenuation: points,
    note: given.note ?? null,
    ...figures,
  };
  return {
    ...entry,
    sources: sourcesFound(CABLE_FIGURES, given, figures, file, (figure) =>
      figure === 'z0ToleranceOhm' || figure === 'velocityFactorTolerance'
        ? { source: 'usual for described cables', status: 'common practice' }
        : { source: 'fit to the points', status: 'computed' },
    ),
  };
}
