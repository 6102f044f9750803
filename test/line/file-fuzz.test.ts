/** Random damage to cable and line files: a value within its bounds or problems with a mend, never a crash. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { isCable } from '../../src/line/cable-table.ts';
import { readCables } from '../../src/line/read-cables.ts';
import { readLine } from '../../src/line/read-line.ts';
import type { Outcome } from '../../src/outcome.ts';
import { shippedTable } from './shipped-cables.ts';

const CABLES = shippedTable();

const CABLE_FILE = `{ "family": "own", "cables": [
  { "id": "a", "name": "A", "aliases": ["aa", "a/1"], "z0Ohm": 50, "z0ToleranceOhm": 1, "velocityFactor": 0.88,
    "attenuation": [{ "frequencyMHz": 100, "dbPer100m": 4.1, "source": "sheet", "status": "confirmed" },
                    { "frequencyMHz": 900, "dbPer100m": 12.9 }], "fittedBandMHz": [100, 900],
    "sources": { "z0Ohm": { "source": "sheet", "status": "from memory" } } },
  { "id": "b", "z0Ohm": 75, "velocityFactor": 0.66, "k1": 1.2, "k2": 0.01, "highestFrequencyMHz": 1000 } ],
  "guides": [
  { "id": "g", "aMm": 30, "bMm": 15, "conductivitySPerM": 5.8e7, "bandMHz": [6000, 9000], "aliases": ["G 1"] },
  { "id": "h", "aMm": 20, "lossDbPer100m": 9 } ] }`;

const LINE_FILE = `{ "name": "n", "site": "s", "end": "antenna", "temperatureC": 12, "sections": [
  { "cable": "foam-half", "lengthM": 2, "label": "l", "jointAfter": { "name": "N", "returnLossDb": 30 } },
  { "device": "filter", "lengthFt": 1, "lossDb": 0.4, "returnLossDb": 20, "passbandMHz": [1710, 2170] },
  { "cable": { "id": "own", "z0": 60, "velocityFactor": 0.8, "k1": 0.4, "k2": 0.001 }, "lengthM": 3 },
  { "guide": "WR-137", "lengthM": 4 }, { "guide": { "id": "own", "aMm": 30, "lossDbPer100m": 7 }, "lengthFt": 9 },
  { "cable": "rg-213" }],
  "limits": { "bands": [{ "name": "b", "fromMHz": 144, "toMHz": 146, "vswr": 1.5 }], "jointReturnLossDb": 28 } }`;

/** Pieces that tend to upset readers of numbers, names and structure. */
const NASTY = [
  ...[
    'null',
    '-1',
    '0',
    '1e999',
    '-0',
    '1e-320',
    '0.1e',
    'NaN',
    '"46m"',
    '""',
    '{}',
    '[]',
    '[[[[',
    '}}',
    'true',
  ],
  ...[
    '"\\u001b[2J"',
    '\u001b[2J',
    '\u0000',
    '\ud800',
    '"\\ud800"',
    '\u202e',
    '/*',
    '//',
    '\n',
    ',',
    ':',
    '"',
    '\\',
  ],
  ...['"__proto__": 1,', '"lengthM": 7,', '"cable": "rg-213",', '"guide": 1,', '"k1": 2,', '"device": "x",'],
];

/** A text with up to six cuts, each replaced by something. */
function damaged(text: string): fc.Arbitrary<string> {
  const value = fc.oneof(
    fc.constantFrom('', ...NASTY),
    fc.json({ maxDepth: 2 }),
    fc.string({ unit: 'binary', maxLength: 8 }),
  );
  const cut = fc.tuple(fc.nat(text.length), fc.nat(24), value);
  return fc
    .array(cut, { minLength: 1, maxLength: 6 })
    .map((cuts) =>
      cuts.reduce((now, [at, length, put]) => now.slice(0, at) + put + now.slice(at + length), text),
    );
}

/** The file with one of its values (a number, a text, a list, ...) replaced by another: JSON that parses. */
function replaced(text: string): fc.Arbitrary<string> {
  const places = [
    ...text.matchAll(/(?<=[:[,]\s*)(?:"[^"]*"(?!\s*:)|-?\d+(?:\.\d+)?|\[[^[\]]*\]|\{[^{}]*\})/gu),
  ];
  const harmless = fc.oneof(
    fc.double({ min: 0, max: 200, noNaN: true }).map((x) => JSON.stringify(x)),
    fc.string({ minLength: 1 }).map((word) => JSON.stringify(word)),
  );
  const value = fc.oneof(harmless, harmless, fc.json({ maxDepth: 1 }), fc.constantFrom(...NASTY));
  return fc.tuple(fc.constantFrom(...places), value).map(([place, put]) => {
    return text.slice(0, place.index) + put + text.slice(place.index + place[0].length);
  });
}

function expectWords(outcome: Outcome<unknown>, lines: number): void {
  if (outcome.ok) return;
  expect(outcome.problems.length).toBeGreaterThan(0);
  for (const { file, line, code, what, found = '', mend } of outcome.problems) {
    expect([file, code !== '', what !== '', mend !== '']).toEqual(['fuzz.json', true, true, true]);
    expect(`${what}${found}${mend}`).not.toMatch(
      /[\u0000-\u001f\u007f-\u009f\u202a-\u202e]|undefined|\[object/u,
    );
    if (line !== undefined) expect(line >= 1 && line <= lines).toBe(true);
  }
}

/** Every number of a value, however deep. */
function numbersOf(value: unknown): number[] {
  if (typeof value === 'number') return [value];
  if (typeof value !== 'object' || value === null) return [];
  return Object.values(value).flatMap(numbersOf);
}

const lineCount = (text: string) => text.split(/\r\n|\r|\n/u).length;
const RUNS = { seed: 20, numRuns: 1500 };

describe('readCables and readLine on damaged files', () => {
  it('readCables gives cables within bounds, or problems that say how to mend them', () => {
    let read = 0;
    fc.assert(
      fc.property(fc.oneof(damaged(CABLE_FILE), replaced(CABLE_FILE)), (text) => {
        const outcome = readCables(text, 'fuzz.json');
        expectWords(outcome, lineCount(text));
        if (!outcome.ok) return;
        read++;
        for (const cable of outcome.value) {
          expect(numbersOf(cable).every(Number.isFinite)).toBe(true);
          expect(cable.id).not.toBe('');
          if (!isCable(cable)) {
            expect(cable.aMm >= 0.1 && cable.aMm <= 1000 && cable.aMm >= (cable.bMm ?? 0)).toBe(true);
            expect(
              cable.lossDbPer100m !== null || (cable.bMm ?? 0) * (cable.conductivitySPerM ?? 0) > 0,
            ).toBe(true);
            continue;
          }
          expect(cable.z0Ohm >= 1 && cable.z0Ohm <= 1000).toBe(true);
          expect(cable.velocityFactor >= 0.1 && cable.velocityFactor <= 1).toBe(true);
          expect(cable.k1 >= 0 && cable.k2 >= 0).toBe(true);
        }
      }),
      RUNS,
    );
    // The damage must leave some files readable, or the bounds were never looked at.
    expect(read).toBeGreaterThan(20);
  });

  it('readLine gives a line within bounds, or problems that say how to mend it', () => {
    let read = 0;
    fc.assert(
      fc.property(fc.oneof(damaged(LINE_FILE), replaced(LINE_FILE)), (text) => {
        const outcome = readLine(text, 'fuzz.json', CABLES);
        expectWords(outcome, lineCount(text));
        if (!outcome.ok) return;
        read++;
        const { sections, temperatureC, limits } = outcome.value;
        expect(numbersOf(outcome.value).every(Number.isFinite)).toBe(true);
        expect(temperatureC >= -80 && temperatureC <= 150.000001).toBe(true);
        expect(sections.length).toBeGreaterThan(0);
        sections.forEach((section, index) => {
          if (section.lengthM === null) expect(index).toBe(sections.length - 1);
          else expect(section.lengthM > 0 && section.lengthM < 100_001).toBe(true);
          expect(section.label).not.toBe('');
        });
        for (const band of limits.bands) expect(band.fromHz < band.toHz && band.returnLossDb > 0).toBe(true);
      }),
      RUNS,
    );
    expect(read).toBeGreaterThan(20);
  });

  it('readLine and readCables never crash on text that was never JSON', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary', maxLength: 200 }), (text) => {
        expectWords(readCables(text, 'fuzz.json'), lineCount(text));
        expectWords(readLine(text, 'fuzz.json', CABLES), lineCount(text));
      }),
      { seed: 21, numRuns: 500 },
    );
  });
});
