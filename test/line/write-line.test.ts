import { describe, expect, it } from 'vitest';
import type { Line } from '../../src/line/line.ts';
import { readLine } from '../../src/line/read-line.ts';
import { writeLine } from '../../src/line/write-line.ts';
import { shippedTable } from './shipped-cables.ts';

const CABLES = shippedTable();

function lineOf(text: string): Line {
  const read = readLine(text, 'a.line.json', CABLES);
  if (!read.ok) throw new Error(JSON.stringify(read.problems, null, 2));
  return read.value;
}

describe('writeLine', () => {
  it('writeLine writes what readLine gives back, for every kind of section and limit', () => {
    const texts = [
      '{ "sections": [{ "cable": "rg-213" }] }',
      `{ "name": "north 1", "site": "ridge", "end": "short", "temperatureF": 54, "sections": [
        { "cable": "foam-half", "lengthFt": 7, "label": "jumper", "jointAfter": { "name": "N", "returnLossDb": 30 } },
        { "device": "filter", "lengthM": 0.2, "lossDb": 0.4, "returnLossDb": 20, "passbandMHz": [1710.3, 2170] },
        { "cable": { "id": "own", "z0": 60, "velocityFactor": 0.8, "k1": 0.4, "k2": 0.001 }, "lengthM": 3 },
        { "guide": "WR-137", "lengthM": 4, "jointAfter": { "name": "flange" } },
        { "guide": { "id": "own", "aMm": 30, "lossDbPer100m": 7 }, "lengthM": 2 },
        { "cable": "foam-7-8", "jointAfter": { "returnLossDb": 31 } }],
        "limits": { "bands": [{ "fromMHz": 144.1, "toMHz": 146, "vswr": 1.5 }], "lossMarginDb": 0 } }`,
    ];
    for (const text of texts) expect(lineOf(writeLine(lineOf(text), CABLES))).toEqual(lineOf(text));
  });

  it('writeLine writes out a guide whose figures were changed, with its loss in the middle of its band', () => {
    const line = lineOf('{ "sections": [{ "guide": "R 70", "lengthM": 20 }] }');
    expect(JSON.parse(writeLine(line, CABLES)).sections[0].guide).toBe('WR-137');
    const [section] = line.sections;
    if (section?.type !== 'guide') throw new Error('no guide');
    const brass: Line = {
      ...line,
      sections: [{ ...section, guide: { ...section.guide, conductivitySPerM: 2.564e7 } }],
    };
    const written = JSON.parse(writeLine(brass, CABLES)).sections[0].guide;
    // Between 2.30 and 2.87 dB per 100 ft at the edges of the band (test/line/guide.test.ts).
    expect(written).toEqual({ id: 'WR-137', aMm: 34.8488, lossDbPer100m: expect.closeTo(8.15, 1) });
    expect(lineOf(writeLine(brass, CABLES)).sections[0]).toMatchObject({
      guide: { aMm: 34.8488, bMm: null },
    });
  });

  it('writeLine names a cable of the table by its id, and writes out one whose figures were changed', () => {
    const line = lineOf('{ "sections": [{ "cable": "RG-213/U", "lengthM": 20 }] }');
    expect(JSON.parse(writeLine(line, CABLES)).sections[0].cable).toBe('rg-213');
    const changed: Line = {
      ...line,
      sections: line.sections.map((section) =>
        section.type === 'coax' ? { ...section, cable: { ...section.cable, velocityFactor: 0.67 } } : section,
      ),
    };
    expect(JSON.parse(writeLine(changed, CABLES)).sections[0].cable).toEqual({
      id: 'rg-213',
      z0: 50,
      velocityFactor: 0.67,
      k1: 0.59912,
      k2: 0.006739,
    });
    expect(lineOf(writeLine(changed, CABLES)).sections[0]).toMatchObject({ cable: { velocityFactor: 0.67 } });
  });
});
