/** Guides as a table file holds them, and inline as a line file does. */
import * as v from 'valibot';
import {
  advice,
  closedObject,
  has,
  isObject,
  numberAbove,
  numberWithin,
  visibleText,
} from './checked-json.ts';
import { GUIDE_FIGURES, type Guide, type GuideEntry, guideCutoffHz, USUAL_WIDTH_TOLERANCE } from './guide.ts';
import { distinctNames, namedText, sourcesFound, sourcesOfFigures } from './table-schema.ts';

/** Widths of guides, mm: from above 1 THz down to below 200 MHz. */
const NARROWEST_MM = 0.1;
const WIDEST_MM = 1000;
/** Conductivity, S/m: from poor alloys up to a little beyond silver. */
const conductivitySPerM = numberWithin(1e5, 1e8);

const sizeMm = numberWithin(NARROWEST_MM, WIDEST_MM);
const lossDbPer100m = numberWithin(0, 1e5);
const frequencyMHz = numberWithin(0.001, 1e7);

const guide = v.pipe(
  closedObject({
    id: namedText(),
    name: v.optional(visibleText()),
    aliases: v.optional(v.array(namedText())),
    aMm: sizeMm,
    aToleranceMm: v.optional(numberAbove(0, 100)),
    bMm: v.optional(sizeMm),
    conductivitySPerM: v.optional(conductivitySPerM),
    lossDbPer100m: v.optional(lossDbPer100m),
    bandMHz: v.optional(
      v.pipe(
        v.strictTuple([frequencyMHz, frequencyMHz]),
        v.check(
          ([low, high]) => low < high,
          advice('band-order', 'does not rise', 'give the lower frequency first'),
        ),
      ),
    ),
    note: v.optional(visibleText(400)),
    sources: v.optional(sourcesOfFigures(GUIDE_FIGURES)),
  }),
  v.rawCheck(({ dataset, addIssue }) => {
    const given: unknown = dataset.value;
    if (!isObject(given)) return;
    const { aMm, bMm } = given;
    if (typeof aMm === 'number' && typeof bMm === 'number' && bMm > aMm)
      addIssue({ message: advice('guide-size', 'is higher than wide', 'make aMm the larger side') });
    const low: unknown = Array.isArray(given['bandMHz']) ? given['bandMHz'][0] : null;
    if (typeof aMm === 'number' && typeof low === 'number' && low * 1e6 <= guideCutoffHz({ aMm }))
      addIssue({
        message: advice(
          'guide-band',
          'has a band that starts at or below its cut-off',
          'raise the start of bandMHz',
        ),
      });
    if (has(given, 'lossDbPer100m') || (has(given, 'bMm') && has(given, 'conductivitySPerM'))) return;
    const mend = 'give "bMm" and "conductivitySPerM", or "lossDbPer100m"';
    addIssue({ message: advice('no-loss', 'says nothing of its loss', mend) });
  }),
);

type GivenGuide = v.InferOutput<typeof guide>;

/** `guides` of a table file. */
export const guideList = v.pipe(v.array(guide), v.minLength(1), distinctNames<GivenGuide>('guide'));

/** The figures of a guide in place of its id, in a line file. */
export const inlineGuideFile = closedObject({ id: visibleText(), aMm: sizeMm, lossDbPer100m });

/** How table and line files speak of a guide's keys. */
export const GUIDE_HINTS = {
  aMm: `the inner width in millimetres, from ${NARROWEST_MM} to ${WIDEST_MM}, for example 34.849`,
  lossDbPer100m: 'a loss in dB per 100 m, from 0 to 100000, for example 7.4 (dB per 100 ft × 3.2808)',
} as const;

/** How a table file speaks of the keys that only it has. */
export const GUIDE_TABLE_HINTS = {
  ...GUIDE_HINTS,
  guides: 'a list of one guide or more, each { "id": …, "aMm": …, "bMm": …, "conductivitySPerM": … }',
  'guides[]': '{ "id": …, "aMm": …, "bMm": …, "conductivitySPerM": … }',
  aToleranceMm: 'a tolerance of the width in millimetres, above 0',
  bMm: `the inner height in millimetres, from ${NARROWEST_MM} to ${WIDEST_MM}, for example 15.799`,
  conductivitySPerM: 'the conductivity of the walls in S/m, from 1e5 to 1e8, for example 5.8e7 for copper',
  bandMHz: 'two frequencies in MHz, low then high, for example [5850, 8200]',
  ...Object.fromEntries(GUIDE_FIGURES.map((one) => [`sources.${one}`, '{ "source": …, "status": … }'])),
};

/** An entry of the table from what its file gives. */
export function guideEntryOf(given: GivenGuide, family: string, file: string): GuideEntry {
  const figures = {
    aMm: given.aMm,
    aToleranceMm: given.aToleranceMm ?? USUAL_WIDTH_TOLERANCE * given.aMm,
    bMm: given.bMm ?? null,
    conductivitySPerM: given.conductivitySPerM ?? null,
    lossDbPer100m: given.lossDbPer100m ?? null,
    bandMHz: given.bandMHz ?? null,
  };
  return {
    id: given.id,
    name: given.name ?? given.id,
    aliases: given.aliases ?? [],
    family,
    file,
    note: given.note ?? null,
    ...figures,
    sources: sourcesFound(GUIDE_FIGURES, given, figures, file, () => ({
      source: 'usual for drawn guide',
      status: 'common practice',
    })),
  };
}

/** Figures of a guide as a line file gives them in place of an id. */
export type InlineGuide = { readonly id: string; readonly aMm: number; readonly lossDbPer100m: number };

/** A guide from a user's own figures, with the width tolerance that is usual. */
export function inlineGuide(given: InlineGuide): Guide {
  return {
    id: given.id,
    name: given.id,
    aMm: given.aMm,
    aToleranceMm: USUAL_WIDTH_TOLERANCE * given.aMm,
    bMm: null,
    conductivitySPerM: null,
    lossDbPer100m: given.lossDbPer100m,
    bandMHz: null,
  };
}
