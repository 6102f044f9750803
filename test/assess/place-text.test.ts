import { describe, expect, it } from 'vitest';
import { placeText, startsM, stretchPlaceText } from '../../src/assess/place-text.ts';
import { makeLine } from './made-line.ts';

const line = makeLine();
const inFeet = (lengthM: number): string => `${(lengthM / 0.3048).toFixed(0)} ft`;

describe('placeText', () => {
  it.each([
    [{ distanceM: 0, jointIndex: 1, section: 0 }, 'at joint 1, the port'],
    [{ distanceM: 48, jointIndex: 3, section: 1 }, 'at joint 3, main run to top jumper'],
    [{ distanceM: 50, jointIndex: 4, section: 2 }, 'at the end'],
  ] as const)('names the joint: %j', (place, words) => {
    expect(placeText(line, place)).toBe(words);
  });

  it.each([
    // The nearer joint is named: 31.4 − 2 = 29.4 m from joint 2, 48 − 31.4 = 16.6 m before joint 3.
    [31.4, 1, 'in the main run, 16.6 m before joint 3'],
    [5.4, 1, 'in the main run, 3.4 m from joint 2 toward the end'],
    [0.4, 0, 'in the bottom jumper, 0.4 m from joint 1 toward the end'],
    [49.7, 2, 'in the top jumper, 0.3 m before the end'],
  ] as const)('measures %d m from the nearer joint', (distanceM, section, words) => {
    expect(placeText(line, { distanceM, jointIndex: null, section })).toBe(words);
  });

  it('never counts backwards where an echo lies just outside its section by description', () => {
    expect(placeText(line, { distanceM: 1.9, jointIndex: null, section: 1 })).toBe(
      'in the main run, 0.0 m from joint 2 toward the end',
    );
    expect(placeText(line, { distanceM: 48.1, jointIndex: null, section: 1 })).toBe(
      'in the main run, 0.0 m before joint 3',
    );
  });

  it('measures from the joint before in a section of unknown length', () => {
    const [first, second] = line.sections;
    const open = makeLine({ sections: [first!, { ...second!, lengthM: null } as typeof second & object] });
    expect(placeText(open, { distanceM: 30, jointIndex: null, section: 1 })).toBe(
      'in the main run, 28.0 m from joint 2 toward the end',
    );
  });

  it("takes a joint's own name where the line file gives one", () => {
    const [first, ...others] = line.sections;
    const named = makeLine({
      sections: [{ ...first!, jointAfter: { name: 'N at the bulkhead', returnLossDb: null } }, ...others],
    });
    expect(placeText(named, { distanceM: 2, jointIndex: 2, section: 0 })).toBe(
      'at joint 2, N at the bulkhead',
    );
  });

  it('writes lengths in the words it is given', () => {
    expect(placeText(line, { distanceM: 32.48, jointIndex: null, section: 1 }, inFeet)).toBe(
      'in the main run, 51 ft before joint 3',
    );
  });
});

describe('stretchPlaceText', () => {
  it('names the section and both edges', () => {
    expect(stretchPlaceText(line, { fromM: 20, toM: 28 })).toBe('in the main run, from 20.0 m to 28.0 m');
  });

  it('names both sections where a stretch reaches over a joint', () => {
    expect(stretchPlaceText(line, { fromM: 44, toM: 49 })).toBe(
      'from the main run into the top jumper, from 44.0 m to 49.0 m',
    );
  });

  it('does not count an edge that touches the next section by the doubt of its place', () => {
    expect(stretchPlaceText(line, { fromM: 47.9, toM: 50.1 })).toBe(
      'in the top jumper, from 47.9 m to 50.1 m',
    );
  });

  it('writes lengths in the words it is given', () => {
    expect(stretchPlaceText(line, { fromM: 20, toM: 28 }, inFeet)).toContain('from 66 ft to 92 ft');
  });
});

describe('startsM', () => {
  it('gives the place of every joint of known place', () => {
    expect(startsM(line)).toEqual([0, 2, 48, 50]);
  });
});
