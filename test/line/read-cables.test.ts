import { describe, expect, it } from 'vitest';
import { isCable } from '../../src/line/cable-table.ts';
import { readCables } from '../../src/line/read-cables.ts';
import type { Problem } from '../../src/outcome.ts';
import { shippedFiles } from './shipped-cables.ts';

function problemsOf(text: string): readonly Problem[] {
  const read = readCables(text, 'own.json');
  return read.ok ? [] : read.problems;
}

const REEL = `{
  "cables": [
    {
      "id": "own-reel",
      "z0Ohm": 50,
      "velocityFactor": 0.85,
      "attenuation": [
        { "frequencyMHz": 900, "dbPer100m": 12.9 },
        { "frequencyMHz": 100, "dbPer100m": 4.1 }
      ]
    }
  ]
}`;

describe('readCables', () => {
  it('readCables fits the points of a datasheet and fills in what is usual', () => {
    const read = readCables(REEL, 'own.json');
    if (!read.ok) throw new Error(JSON.stringify(read.problems));
    const [reel] = read.value.filter(isCable);
    // Two points are met exactly: k1·10 + k2·100 = 4.1 and k1·30 + k2·900 = 12.9.
    expect(reel?.k1).toBeCloseTo(0.4, 9);
    expect(reel?.k2).toBeCloseTo(0.001, 9);
    expect(reel).toMatchObject({
      name: 'own-reel',
      aliases: [],
      file: 'own.json',
      z0ToleranceOhm: 2,
      fittedBandMHz: [100, 900],
      bendRadiusOnceMm: null,
      highestFrequencyMHz: null,
      sources: {
        z0Ohm: { source: 'own.json', status: 'as given' },
        z0ToleranceOhm: { status: 'common practice' },
        k1: { source: 'fit to the points', status: 'computed' },
      },
    });
    expect(reel?.velocityFactorTolerance).toBeCloseTo(0.0085, 12);
    expect(reel?.attenuation.map((point) => point.frequencyMHz)).toEqual([100, 900]);
    expect(reel?.sources.bendRadiusOnceMm).toBeUndefined();
  });

  it('readCables takes k1 and k2 alone, and then claims no band', () => {
    const text = '{ "cables": [{ "id": "a", "z0Ohm": 75, "velocityFactor": 0.83, "k1": 0.68, "k2": 0 }] }';
    expect(readCables(text, 'own.json')).toMatchObject({
      ok: true,
      value: [{ k1: 0.68, k2: 0, fittedBandMHz: null, worstResidual: null, z0ToleranceOhm: 3 }],
    });
  });

  it('readCables forgives a byte order mark and cleans names', () => {
    const text = REEL.replace('"own-reel"', '"own-reel", "name": "\\u001b[31mreel\\u202e 7"');
    expect(readCables(`\ufeff${text}`, 'own.json')).toMatchObject({ ok: true, value: [{ name: 'reel 7' }] });
  });

  it('readCables names line, find and mend of a syntax error', () => {
    expect(problemsOf('{\n  "cables": [\n    { "id": "a", }\n  ]\n}')).toEqual([
      {
        code: 'json-syntax',
        file: 'own.json',
        line: 3,
        what: 'a key in double quotes should stand here',
        found: '}',
        mend: 'remove a comma before }, or quote the key',
      },
    ]);
    expect(problemsOf(REEL.slice(0, 120))[0]).toMatchObject({
      code: 'json-syntax',
      found: 'the end of the file',
    });
    expect(problemsOf(' \n')[0]).toMatchObject({ code: 'json-empty' });
    expect(problemsOf('// mine\n{}')[0]).toMatchObject({
      code: 'json-syntax',
      what: 'comments are not allowed',
    });
    expect(problemsOf('\u0000\u0001PNG\u001b[2J')[0]).toMatchObject({ code: 'json-syntax', line: 1 });
  });

  it('readCables refuses text nested or long beyond reason without following it', () => {
    expect(problemsOf('['.repeat(200_000))[0]).toMatchObject({ code: 'json-depth' });
    expect(problemsOf(`/* " */ ${'{"a":'.repeat(200_000)}`)[0]).toMatchObject({ code: 'json-depth' });
    expect(problemsOf(' '.repeat(5_000_000).concat('{}'))[0]).toMatchObject({ code: 'json-size' });
  });

  it('readCables reports all problems at once, in the order of the file, each with its line', () => {
    const text = `{
  "famly": "mine",
  "cables": [
    {
      "id": "a",
      "z0Ohm": "50",
      "velocityFactor": 88,
      "k1": -1,
      "k2": 0,
      "constructor": 1
    },
    {
      "id": "b",
      "z0Ohm": 50,
      "velocityFactor": 0.8,
      "velocityFactor": 0.9,
      "attenuation": [{ "frequencyMhz": 100, "dbPer100m": 4 }, 7]
    }
  ]
}`;
    expect(problemsOf(text).map(({ line, what, mend }) => `${line}: ${what} | ${mend}`)).toEqual([
      '2: famly is not a key that is known here | did you mean "family"?',
      '6: cable 1, z0Ohm is of the wrong kind | write an impedance in ohms from 1 to 1000, for example 50',
      '7: cable 1, velocityFactor is out of range | write a velocity factor from 0.1 to 1, for example 0.88',
      '8: cable 1, k1 is out of range | write a conductor loss in dB per 100 m per √MHz, 0 or more, for example 0.6',
      '10: the key "constructor" means nothing here | remove it',
      '16: the key "velocityFactor" is given twice | keep one of them',
      '17: cable 2, attenuation point 1, frequencyMHz is missing | write "frequencyMHz": a frequency in MHz, 0.001 or more, for example 900',
      '17: cable 2, attenuation point 1, frequencyMhz is not a key that is known here | did you mean "frequencyMHz"?',
      '17: cable 2, attenuation point 2 is of the wrong kind | write { "frequencyMHz": 100, "dbPer100m": 6.6 }',
    ]);
  });

  it('readCables asks for a loss, and for both of its figures', () => {
    const start = '{ "cables": [{ "id": "a", "z0Ohm": 50, "velocityFactor": 0.8';
    expect(problemsOf(`${start} }] }`)[0]).toMatchObject({ code: 'no-loss' });
    expect(problemsOf(`${start}, "k2": 0.001 }] }`)[0]).toMatchObject({
      code: 'half-a-loss',
      what: 'cable 1 has k2 alone',
    });
    const outside = `${start}, "fittedBandMHz": [1, 2], "attenuation": [
      { "frequencyMHz": 100, "dbPer100m": 4 }, { "frequencyMHz": 200, "dbPer100m": 6 }] }] }`;
    expect(problemsOf(outside)[0]).toMatchObject({ code: 'no-loss', file: 'own.json' });
  });

  it('readCables refuses two cables under one name', () => {
    const cable = (id: string, alias: string) =>
      `{ "id": "${id}", "aliases": ["${alias}"], "z0Ohm": 50, "velocityFactor": 0.8, "k1": 1, "k2": 0 }`;
    expect(problemsOf(`{ "cables": [\n${cable('a-1', 'x')},\n${cable('b', 'A1')}\n] }`)).toMatchObject([
      { code: 'cable-twice', line: 3, what: 'cable 2 answers to a name of cable 1 too' },
    ]);
  });

  it('readCables refuses figures that no number can hold', () => {
    expect(problemsOf(REEL.replace('12.9', '1e999'))[0]).toMatchObject({ code: 'out-of-range', line: 8 });
    expect(problemsOf(REEL.replace('12.9', '1e-300'))[0]).toMatchObject({ code: 'out-of-range' });
  });

  it('readCables doubts k1 and k2 that miss the points of their own entry', () => {
    // The slip of giving points in dB per 100 ft: a factor of 3.28.
    const read = readCables(REEL.replace('"z0Ohm"', '"k1": 1.31, "k2": 0.0033, "z0Ohm"'), 'own.json');
    expect(read).toMatchObject({ ok: true, notices: [{ code: 'cable-fit' }] });
  });

  it('readCables lists fifty problems and counts the rest', () => {
    const problems = problemsOf(`{ "cables": [${Array(80).fill('7').join(',')}] }`);
    expect(problems).toHaveLength(51);
    expect(problems[50]?.what).toBe('and 30 more problems');
  });

  it('readCables reads guides, alone or beside cables, and fills in what is usual', () => {
    const guides =
      '"guides": [{ "id": "G 1", "aMm": 30, "bMm": 15, "conductivitySPerM": 5.8e7, "bandMHz": [6000, 9000] }]';
    const read = readCables(`{ "family": "mine", ${guides} }`, 'own.json');
    expect(read).toMatchObject({
      ok: true,
      value: [
        {
          id: 'G 1',
          name: 'G 1',
          family: 'mine',
          // 0.3 % of the width.
          aToleranceMm: expect.closeTo(0.09, 12),
          lossDbPer100m: null,
          sources: {
            aMm: { source: 'own.json', status: 'as given' },
            aToleranceMm: { status: 'common practice' },
          },
        },
      ],
    });
    const both = readCables(REEL.replace('"cables"', `${guides}, "cables"`), 'own.json');
    expect(both.ok && both.value.map((entry) => entry.id)).toEqual(['own-reel', 'G 1']);
  });

  it('readCables says what is wrong with a guide', () => {
    const text = `{ "guides": [
      { "id": "a", "aMm": 30, "bMm": 15 },
      { "id": "b", "aMm": 10, "bMm": 15, "lossDbPer100m": 3 },
      { "id": "c", "aMm": 30, "lossDbPer100m": 3, "bandMHz": [4000, 9000] },
      { "id": "A", "lossDbPer100m": 3, "aMm": 20 },
      7] }`;
    expect(problemsOf(text).map(({ line, what, mend }) => `${line}: ${what} | ${mend}`)).toEqual([
      '2: guide 1 says nothing of its loss | give "bMm" and "conductivitySPerM", or "lossDbPer100m"',
      '3: guide 2 is higher than wide | make aMm the larger side',
      // c/2a of 30 mm: 4997 MHz.
      '4: guide 3 has a band that starts at or below its cut-off | raise the start of bandMHz',
      '6: guide 5 is of the wrong kind | write { "id": …, "aMm": …, "bMm": …, "conductivitySPerM": … }',
    ]);
    const twice =
      '{ "guides": [{ "id": "a", "aMm": 9, "lossDbPer100m": 3 }, { "id": "A", "aMm": 8, "lossDbPer100m": 3 }] }';
    expect(problemsOf(twice)).toMatchObject([{ code: 'guide-twice', mend: 'give each guide its own id' }]);
    expect(problemsOf('{ "guides": [] }')).toMatchObject([{ code: 'list-length' }]);
  });

  it("readCables reads the program's own files", () => {
    for (const { file, text } of shippedFiles())
      expect([file, readCables(text, file).ok]).toEqual([file, true]);
  });
});
