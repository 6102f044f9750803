import { describe, expect, it } from 'vitest';
import { coaxMedium } from '../../src/line/medium.ts';
import { createDistanceScale } from '../../src/locate/distance-scale.ts';
import { findWater } from '../../src/locate/find-water.ts';
import type { LineModel } from '../../src/locate/line-model.ts';
import { evenHz, FOAM, lineOf, MATCHED, OPEN, SHORT, SOLID } from './drawn-line.ts';
import { modelOf } from './drawn-model.ts';

const GRID = evenHz(5e6, 2700e6, 541);
const SECTIONS = [
  { cable: SOLID, lengthM: 2 },
  { cable: FOAM, lengthM: 60 },
  { cable: SOLID, lengthM: 3 },
];
const LINE = lineOf(SECTIONS);

function waterIn(change: (model: LineModel) => void, { end = OPEN, line = LINE, faulty = false } = {}) {
  const model = modelOf({ sections: SECTIONS, end }, GRID);
  change(model);
  return findWater(line, model, createDistanceScale(LINE, model, false), faulty);
}

/** Loss of the run that grows with frequency, one way at band centre, dB. */
function dielectricDb(): number {
  const centre = Float64Array.of(GRID[270]!);
  return SECTIONS.reduce((sum, { cable, lengthM }) => {
    const { gammaPerDielectricLoss } = coaxMedium(cable, centre, { temperatureC: 20 });
    return sum + gammaPerDielectricLoss.re[0]! * lengthM * (20 / Math.LN10);
  }, 0);
}

describe('findWater', () => {
  it('finds none in a run that loses what its description says', () => {
    expect(waterIn(() => {})).toEqual([]);
  });

  it('finds none in a sample that is 3 % off as a whole, nor in one that loses less', () => {
    for (const off of [0.03, -0.03, -0.2])
      expect(
        waterIn((model) => {
          model.conductor = off;
          model.dielectric = off;
        }),
      ).toEqual([]);
  });

  it('finds water where much more is lost, the more the higher the frequency', () => {
    const [wet, ...more] = waterIn((model) => {
      model.dielectric = 3;
    });
    expect(more).toEqual([]);
    expect(wet!.kind).toBe('wet');
    expect(wet!.excessLossDb).toBeCloseTo(3 * dielectricDb(), 6);
    expect(wet!.excessLossSigmaDb).toBeGreaterThan(0);
    // Three sigma of what a dry line may show.
    expect(wet!.excessLossDb).toBeGreaterThan(3 * wet!.excessLossSigmaDb);
  });

  it('asks for more where something else is wrong with the line', () => {
    const least = (faulty: boolean): number => {
      for (let dielectric = 0; dielectric < 5; dielectric += 0.02) {
        const change = (model: LineModel): void => {
          model.dielectric = dielectric;
        };
        if (waterIn(change, { faulty }).length > 0) return dielectric;
      }
      return Number.POSITIVE_INFINITY;
    };
    expect(least(true)).toBeGreaterThan(least(false));
    expect(least(true)).toBeLessThan(5);
  });

  it('places it in the section with most cable, from joint to joint', () => {
    const [wet] = waterIn((model) => {
      model.dielectric = 3;
    });
    expect([wet!.fromM, wet!.toM]).toEqual([2, 62].map((m) => expect.closeTo(m, 9)));
  });

  it('places it in a short section whose impedance has fallen', () => {
    const [wet] = waterIn((model) => {
      model.dielectric = 3;
      model.impedanceRatio[2] = -0.04;
    });
    expect([wet!.fromM, wet!.toM]).toEqual([62, 65].map((m) => expect.closeTo(m, 9)));
  });

  it('says nothing where not everything comes back, and of a line of unknown length', () => {
    const soaked = (model: LineModel): void => {
      model.dielectric = 3;
    };
    expect(waterIn(soaked, { end: SHORT })).toHaveLength(1);
    expect(waterIn(soaked, { end: MATCHED })).toEqual([]);
    const unknown = lineOf([...SECTIONS.slice(0, 2), { cable: SOLID, lengthM: null }]);
    expect(waterIn(soaked, { line: unknown })).toEqual([]);
  });
});
