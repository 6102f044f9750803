import { describe, expect, it } from 'vitest';
import { describedLengthM, jointName, NO_LIMITS, PLAIN_JOINT } from '../../src/line/line.ts';
import { readLine } from '../../src/line/read-line.ts';
import type { Problem } from '../../src/outcome.ts';
import { shippedTable } from './shipped-cables.ts';

const CABLES = shippedTable();

function lineOf(text: string) {
  const read = readLine(text, 'a.line.json', CABLES);
  if (!read.ok) throw new Error(JSON.stringify(read.problems, null, 2));
  return read.value;
}

function problemsOf(text: string): readonly Problem[] {
  const read = readLine(text, 'a.line.json', CABLES);
  return read.ok ? [] : read.problems;
}

const inWords = (text: string) =>
  problemsOf(text).map(({ line, what, mend }) => `${line}: ${what} | ${mend}`);

/** The example of design.md section 8. */
const RIDGE = `{ "name": "Ansel Ridge north 1", "site": "Ansel Ridge", "sections": [
    { "cable": "foam-half-extraflex", "lengthM": 2.0, "label": "bottom jumper" },
    { "cable": "foam-7-8", "lengthM": 46.0, "label": "main run" },
    { "cable": "foam-half-extraflex", "lengthM": 2.0, "label": "top jumper" } ],
  "end": "antenna", "temperatureC": 12,
  "limits": { "bands": [ { "name": "main", "fromMHz": 1710, "toMHz": 2170, "returnLossDb": 14 } ],
              "jointReturnLossDb": 28, "cableReturnLossDb": 32, "lossMarginDb": 0.5 } }`;

describe('readLine', () => {
  it('readLine reads the documented example whole', () => {
    const line = lineOf(RIDGE);
    expect(line).toMatchObject({
      name: 'Ansel Ridge north 1',
      site: 'Ansel Ridge',
      end: 'antenna',
      temperatureC: 12,
      temperatureKnown: true,
      limits: {
        bands: [{ name: 'main', fromHz: 1.71e9, toHz: 2.17e9, returnLossDb: 14 }],
        jointReturnLossDb: 28,
        cableReturnLossDb: 32,
        lossMarginDb: 0.5,
      },
    });
    expect(line.sections.map((section) => [section.type, section.label, section.lengthM])).toEqual([
      ['coax', 'bottom jumper', 2],
      ['coax', 'main run', 46],
      ['coax', 'top jumper', 2],
    ]);
    expect(describedLengthM(line)).toBe(50);
    expect(jointName(line, 3)).toBe('main run / top jumper');
  });

  it('readLine needs nothing but one section, and says what it does not know', () => {
    const line = lineOf('{ "sections": [{ "cable": "RG-213/U" }] }');
    expect(line).toEqual({
      name: '',
      site: '',
      sections: [
        {
          type: 'coax',
          cable: expect.objectContaining({ id: 'rg-213', name: 'RG-213/U', k1: 0.59912 }),
          lengthM: null,
          label: 'RG-213/U',
          jointAfter: PLAIN_JOINT,
        },
      ],
      end: 'unknown',
      temperatureC: 20,
      temperatureKnown: false,
      limits: NO_LIMITS,
    });
    // The line crosses to a worker with every solve: of the cable it takes the physics only.
    expect(line.sections[0]?.type === 'coax' && Object.keys(line.sections[0].cable)).not.toContain('sources');
  });

  it('readLine takes feet and °F', () => {
    const line = lineOf('{ "sections": [{ "cable": "rg-213", "lengthFt": 150 }], "temperatureF": 50 }');
    // 1 ft = 0.3048 m exactly; (50 − 32)/1.8 = 10.
    expect(line.sections[0]?.lengthM).toBeCloseTo(45.72, 12);
    expect(line.temperatureC).toBeCloseTo(10, 12);
    expect(line.temperatureKnown).toBe(true);
  });

  it('readLine takes a cable by its own figures', () => {
    const own = '{ "id": "own", "z0": 60, "velocityFactor": 0.8, "k1": 0.4, "k2": 0.001 }';
    expect(lineOf(`{ "sections": [{ "cable": ${own}, "lengthM": 3 }] }`).sections[0]).toMatchObject({
      label: 'own',
      cable: {
        id: 'own',
        name: 'own',
        z0Ohm: 60,
        z0ToleranceOhm: 2.4,
        velocityFactor: 0.8,
        fittedBandMHz: null,
      },
    });
  });

  it('readLine takes a device in line', () => {
    const device = `{ "device": "arrestor", "lengthFt": 0.5, "lossDb": 0.1, "returnLossDb": 26, "passbandMHz": [690, 2700],
      "jointAfter": { "name": "bulkhead" } }`;
    const line = lineOf(
      `{ "sections": [{ "cable": "rg-213", "lengthM": 3 }, ${device}, { "cable": "rg-213" }] }`,
    );
    expect(line.sections[1]).toEqual({
      type: 'device',
      device: 'arrestor',
      lengthM: expect.closeTo(0.1524, 12),
      lossDb: 0.1,
      returnLossDb: 26,
      passbandHz: [690e6, 2700e6],
      label: 'arrestor',
      jointAfter: { name: 'bulkhead', returnLossDb: null },
    });
    expect(jointName(line, 3)).toBe('bulkhead');
  });

  it('readLine takes a guide by its id or another name, and by its own figures', () => {
    const line =
      lineOf(`{ "sections": [{ "guide": "WR-137", "lengthM": 12 }, { "guide": "r 70", "lengthFt": 10, "label": "top" },
      { "guide": { "id": "own", "aMm": 30, "lossDbPer100m": 7 } }] }`);
    const table = { id: 'WR-137', name: 'WR-137 waveguide', aMm: 34.8488, bMm: 15.7988, lossDbPer100m: null };
    expect(line.sections).toMatchObject([
      { type: 'guide', guide: table, lengthM: 12, label: 'WR-137 waveguide', jointAfter: PLAIN_JOINT },
      { type: 'guide', guide: table, lengthM: expect.closeTo(3.048, 12), label: 'top' },
      {
        type: 'guide',
        guide: { id: 'own', aMm: 30, bMm: null, lossDbPer100m: 7, bandMHz: null },
        lengthM: null,
      },
    ]);
    // Like a cable, it takes the physics only to the worker.
    expect(line.sections[0]?.type === 'guide' && Object.keys(line.sections[0].guide)).not.toContain(
      'sources',
    );
  });

  it('readLine says what is wrong with a guide', () => {
    const text = `{ "sections": [
      { "cable": "WR-137", "lengthM": 1 },
      { "guide": "rg-213", "lengthM": 1 },
      { "guide": { "id": "own", "aMm": 0, "bMm": 10 }, "lengthM": 1 },
      { "guide": "WR-90" },
      { "guide": "WR-90", "device": "bend", "lengthM": 1 }] }`;
    expect(inWords(text)).toEqual([
      '2: section 1, cable names a waveguide | write "guide": "WR-137"',
      '3: section 2, guide names a guide that is not in the table: rg-213 | otherwise give the guide\'s own figures: { "id", "aMm", "lossDbPer100m" }',
      '4: section 3, guide, aMm is out of range | write the inner width in millimetres, from 0.1 to 1000, for example 34.849',
      '4: section 3, guide, lossDbPer100m is missing | write "lossDbPer100m": a loss in dB per 100 m, from 0 to 100000, for example 7.4 (dB per 100 ft × 3.2808)',
      '4: section 3, guide, bMm is not a key that is known here | remove it; the keys here are id, aMm, lossDbPer100m',
      '5: section 4 has no length | write "lengthM" (or "lengthFt"); only the last section may be of unknown length',
      '6: section 5 is more than one of cable, guide and device | make a section of each',
    ]);
  });

  it('readLine turns a VSWR limit into return loss, and names a band without a name', () => {
    const line = lineOf(`{ "sections": [{ "cable": "rg-213" }],
      "limits": { "bands": [{ "fromMHz": 144, "toMHz": 146, "vswr": 1.5 }] } }`);
    // VSWR 1.5: |Γ| = 0.2, 20·log10(5) = 13.979 dB (Pozar, Microwave Engineering, 4th ed., §2.3).
    expect(line.limits.bands).toEqual([
      { name: '144–146 MHz', fromHz: 144e6, toHz: 146e6, returnLossDb: expect.closeTo(13.9794, 4) },
    ]);
  });

  it('readLine cleans names and labels and cuts them to length', () => {
    const line = lineOf(
      `{ "name": "\\u001b]0;owned\\u0007Mast\\n7", "site": "\\u202eegdiR",
         "sections": [{ "cable": "rg-213", "label": "${'x'.repeat(5000)}" }] }`,
    );
    expect(line.name).toBe('Mast 7');
    expect(line.site).toBe('egdiR');
    expect(line.sections[0]?.label).toHaveLength(80);
    expect(problemsOf('{ "name": "\\u0007", "sections": [{ "cable": "rg-213" }] }')[0]).toMatchObject({
      code: 'empty-text',
    });
  });

  it('readLine reports every problem at once, with its line and how to mend it', () => {
    const text = `{
  "nme": "north",
  "sections": [
    { "cable": "foam-7-9", "lengthM": 46 },
    { "cable": "rg-213", "lengthM": -2, "lable": "jumper" },
    { "cable": "rg-213" },
    { "cable": "rg-213", "lengthM": 2, "lengthFt": 6 },
    { "device": "arrestor", "lossDb": 0.1, "passbandMHz": [2700, 690] },
    { "lengthM": "46m" },
    { "guide": "WR-173", "lengthM": 3 },
    { "cable": { "id": "own", "z0": 0, "vf": 0.8, "k1": 0.4, "k2": 0.001 }, "lengthM": 100001 }
  ],
  "end": "opne",
  "temperatureC": 12,
  "temperatureF": 54,
  "limits": {
    "bands": [
      { "fromMHz": 2170, "toMHz": 1710, "returnLossDb": 14, "vswr": 1.5 },
      { "fromMHz": 1, "toMHz": 2 }
    ]
  }
}`;
    const length = 'write a length in metres, above 0 and at most 100000, for example 46';
    expect(inWords(text)).toEqual([
      '2: nme is not a key that is known here | did you mean "name"?',
      expect.stringMatching(
        /^4: section 1, cable names a cable that is not in the table: foam-7-9 \| did you mean "foam-7-8"/,
      ),
      `5: section 2, lengthM is out of range | ${length}`,
      '5: section 2, lable is not a key that is known here | did you mean "label"?',
      '6: section 3 has no length | write "lengthM" (or "lengthFt"); only the last section may be of unknown length',
      '7: section 4, lengthFt stands beside lengthM, which says the same thing | keep one of the two',
      '8: section 5, returnLossDb is missing | write "returnLossDb": a return loss in dB, above 0 and at most 100, for example 28',
      '8: section 5, passbandMHz does not rise | give the lower frequency first',
      '8: section 5 has no length | write "lengthM" (or "lengthFt"); a device is never of unknown length',
      expect.stringMatching(
        /^9: section 6, cable is missing \| write "cable": a cable id such as "foam-7-8"/,
      ),
      `9: section 6, lengthM is of the wrong kind | ${length}`,
      '10: section 7, guide names a guide that is not in the table: WR-173 | did you mean "WR-137"? otherwise give the guide\'s own figures: { "id", "aMm", "lossDbPer100m" }',
      '11: section 8, cable, z0 is out of range | write an impedance in ohms from 1 to 1000, for example 50',
      '11: section 8, cable, velocityFactor is missing | write "velocityFactor": a velocity factor from 0.1 to 1, for example 0.88',
      '11: section 8, cable, vf is not a key that is known here | remove it; the keys here are id, z0, velocityFactor, k1, k2',
      `11: section 8, lengthM is out of range | ${length}`,
      '13: end is not one of the words known here | did you mean "open"? use "open", "short", "load", "antenna" or "unknown"',
      '15: temperatureF stands beside temperatureC, which says the same thing | keep one of the two',
      '18: limits, band 1, vswr stands beside returnLossDb, which says the same thing | keep one of the two',
      '18: limits, band 1 does not rise | make fromMHz lower than toMHz',
      '19: limits, band 2 sets no limit | write "returnLossDb" or "vswr"',
    ]);
    expect(new Set(problemsOf(text).map((problem) => problem.file))).toEqual(new Set(['a.line.json']));
    expect(
      problemsOf(text).find((problem) => problem.line === 9 && problem.code === 'wrong-type')?.found,
    ).toBe('"46m"');
  });

  it('readLine refuses what is not a line at all', () => {
    for (const text of ['', 'null', '[]', '7', '"line"', '{}', '{ "sections": [] }', '{ "sections": {} }']) {
      expect([text, problemsOf(text).length]).toEqual([text, 1]);
    }
    expect(inWords('[]')[0]).toMatch(/^1: the file as a whole is of the wrong kind/);
    expect(inWords('{ "sections": [] }')[0]).toMatch(/^1: sections has too few or too many entries/);
    expect(
      problemsOf(`{ "sections": [${Array(501).fill('{ "cable": "rg-213", "lengthM": 1 }')}] }`),
    ).toHaveLength(1);
  });

  it('readLine refuses a section that is cable and device at once', () => {
    expect(
      problemsOf('{ "sections": [{ "cable": "rg-213", "device": "filter", "lengthM": 1 }] }'),
    ).toMatchObject([{ code: 'unclear-section' }]);
  });

  it('readLine shows nothing harmful of a hostile file in its problems', () => {
    const hostile = '\\u001b[2J\\u202e\\u0007';
    const texts = [
      `{ "${hostile}": 1, "sections": [{ "cable": "${hostile}zz" }] }`,
      `{ "sections": [{ "cable": "rg-213" }], "end": "\u001b[2J" }`,
      `{ "sections": [{ "cable": "rg-213" }], "end": "${hostile}${'e'.repeat(100_000)}" }`,
      '{ "__proto__": { "sections": [] }, "constructor": 1, "sections": [{ "cable": "__proto__" }] }',
    ];
    for (const text of texts) {
      const problems = problemsOf(text);
      expect(problems.length).toBeGreaterThan(0);
      for (const problem of problems) {
        const shown = `${problem.what}${problem.found ?? ''}${problem.mend}`;
        expect(shown).not.toMatch(/[\u0000-\u001f\u007f-\u009f\u202a-\u202e]/);
        expect(shown.length).toBeLessThan(500);
      }
    }
    expect(problemsOf(texts[3] ?? '').map((problem) => problem.code)).toEqual([
      'unknown-key',
      'unknown-key',
      'unknown-cable',
    ]);
  });
});
