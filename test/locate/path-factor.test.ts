import { describe, expect, it } from 'vitest';
import { losslessRun, pathTo } from '../../src/line/medium-run.ts';
import { factorAt, piecesOf, signOf } from '../../src/locate/path-factor.ts';
import { evenHz, FOAM, lineOf, runOfLine, SOLID } from './drawn-line.ts';

const GRID = evenHz(1e8, 1e9, 10);
const RUN = runOfLine(
  lineOf([
    { cable: SOLID, lengthM: 2 },
    { cable: FOAM, lengthM: 3 },
  ]),
  GRID,
);

describe('piecesOf', () => {
  it('cuts the distances at the boundaries of sections, the first and last going on outside the line', () => {
    expect(piecesOf(RUN, { fromM: -0.5, stepM: 0.5, points: 14 })).toEqual([
      { section: 0, first: 0, count: 5 },
      { section: 1, first: 5, count: 9 },
    ]);
  });

  it('counts a boundary to the section behind it, and leaves out sections without a distance', () => {
    const three = losslessRun(GRID, [
      { lengthM: 1, velocityMPerS: 2e8 },
      { lengthM: 0.1, velocityMPerS: 2e8 },
      { lengthM: 1, velocityMPerS: 2e8 },
    ]);
    expect(piecesOf(three, { fromM: 0, stepM: 0.5, points: 4 })).toEqual([
      { section: 0, first: 0, count: 2 },
      { section: 1, first: 2, count: 1 },
      { section: 2, first: 3, count: 1 },
    ]);
    expect(piecesOf(three, { fromM: 0.2, stepM: 0.7, points: 3 }).map((p) => p.section)).toEqual([0, 2]);
  });
});

describe('factorAt', () => {
  it.each([
    ['leave', 0],
    ['weigh', -1],
    ['undo', 1],
  ] as const)('is e^{2s·A + 2jB} on the way there: %s, s = %d', (loss, sign) => {
    expect(signOf(loss)).toBe(sign);
    const { attenuation, phase } = pathTo(RUN, 4.2);
    const { re, im } = factorAt(RUN, 4.2, loss);
    for (const k of GRID.keys()) {
      const size = Math.exp(2 * sign * attenuation[k]!);
      expect(re[k]).toBeCloseTo(size * Math.cos(2 * phase[k]!), 9);
      expect(im[k]).toBeCloseTo(size * Math.sin(2 * phase[k]!), 9);
    }
  });
});
