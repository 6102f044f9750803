import { describe, expect, it } from 'vitest';
import { hasGuide, type Line, referenceOhm, sectionKind } from '../../src/line/line.ts';
import { readLine } from '../../src/line/read-line.ts';
import { shippedTable } from './shipped-cables.ts';

const COAX_75 = '{ "cable": "rg-59b", "lengthM": 3, "label": "drop" }';
const COAX_50 = '{ "cable": "rg-213", "lengthM": 3 }';
const GUIDE = '{ "guide": "WR-90", "lengthM": 3, "label": "tube" }';
const DEVICE =
  '{ "device": "arrestor", "lengthM": 0.1, "lossDb": 0.1, "returnLossDb": 26, "passbandMHz": [690, 2700], "label": "box" }';

function line(...sections: readonly string[]): Line {
  const read = readLine(`{ "sections": [${sections.join(', ')}] }`, 'a.line.json', shippedTable());
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  return read.value;
}

describe('referenceOhm', () => {
  it('is the impedance of the first cable, else that of the port', () => {
    expect(referenceOhm(line(DEVICE, GUIDE, COAX_75, COAX_50), 50)).toBe(75);
    expect(referenceOhm(line(GUIDE, DEVICE), 60)).toBe(60);
  });
});

describe('sectionKind', () => {
  it('names what a section is made of, whatever it is called', () => {
    expect(line(COAX_50, GUIDE, DEVICE).sections.map(sectionKind)).toEqual([
      'RG-213/U',
      'WR-90 waveguide',
      'arrestor',
    ]);
  });
});

describe('hasGuide', () => {
  it('is true of a line with a guide anywhere', () => {
    expect([hasGuide(line(COAX_50, GUIDE)), hasGuide(line(COAX_50, DEVICE))]).toEqual([true, false]);
  });
});
