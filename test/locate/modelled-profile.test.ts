import { describe, expect, it } from 'vitest';
import type { Line } from '../../src/line/line.ts';
import { PLAIN_JOINT } from '../../src/line/line.ts';
import type { Echo } from '../../src/locate/echo.ts';
import { modelledProfile } from '../../src/locate/modelled-profile.ts';
import { FOAM, lineOf } from './drawn-line.ts';

function echo(fields: Partial<Echo>): Echo {
  return {
    distanceM: 0,
    distanceSigmaM: 0.01,
    returnLossDb: 30,
    correctedReturnLossDb: 30,
    kind: 'joint',
    confidence: 0.9,
    value: null,
    joint: null,
    section: 0,
    ...fields,
  };
}

/** The profile as corners [distance, ohms]. */
function cornersOf(line: Line, echoes: readonly Echo[], lengthM: number): number[][] {
  const profile = modelledProfile({ line, solution: { echoes, lengthM }, portOhm: 50 });
  expect(profile.origin).toBe('modelled');
  return Array.from(profile.distanceM, (d, i) => [d, profile.impedanceOhm[i]!]);
}

const TWO = lineOf([
  { cable: FOAM, lengthM: 10 },
  { cable: { ...FOAM, z0Ohm: 75 }, lengthM: 5 },
]);

describe('modelledProfile', () => {
  it('draws the described impedances, a step as two values at one distance', () => {
    expect(cornersOf(TWO, [], 15)).toEqual([
      [0, 50],
      [10, 50],
      [10, 75],
      [15, 75],
    ]);
  });

  it('puts a joint where it was found', () => {
    const found = echo({ distanceM: 10.2, joint: { index: 2, name: 'a / b' } });
    expect(cornersOf(TWO, [found], 15.2)[1]).toEqual([10.2, 50]);
  });

  it('draws the steps that were found, up to the next one or the next section, and invents none', () => {
    const step = (distanceM: number, ohm: number) =>
      echo({
        distanceM,
        kind: 'impedance-step',
        value: { quantity: 'impedance', value: ohm, sigma: 1, unit: 'ohm' },
      });
    const lump = echo({
      distanceM: 4,
      kind: 'series-resistance',
      value: { quantity: 'resistance', value: 9, sigma: 1, unit: 'ohm' },
    });
    expect(cornersOf(lineOf([{ cable: FOAM, lengthM: 10 }]), [step(3, 72), lump, step(5, 50)], 10)).toEqual([
      [0, 50],
      [3, 50],
      [3, 72],
      [5, 72],
      [5, 50],
      [10, 50],
    ]);
    expect(cornersOf(TWO, [step(8, 60)], 15).slice(2)).toEqual([
      [8, 60],
      [10, 60],
      [10, 75],
      [15, 75],
    ]);
  });

  it('ends where the line was found to end', () => {
    expect(cornersOf(TWO, [], 7)).toEqual([
      [0, 50],
      [7, 50],
    ]);
    expect(cornersOf(lineOf([{ cable: FOAM, lengthM: null }]), [], 12)).toEqual([
      [0, 50],
      [12, 50],
    ]);
  });

  it('draws a device by its ordinary reflection', () => {
    const device: Line = {
      ...TWO,
      sections: [
        {
          type: 'device',
          device: 'arrestor',
          lengthM: 0.2,
          lossDb: 0.1,
          returnLossDb: 20,
          passbandHz: [0, 3e9],
          label: 'arrestor',
          jointAfter: PLAIN_JOINT,
        },
        ...TWO.sections,
      ],
    };
    // 20 dB above 50 Ω: 50·1.1/0.9
    expect(cornersOf(device, [], 15.2)[0]![1]).toBeCloseTo(61.11, 2);
  });
});
