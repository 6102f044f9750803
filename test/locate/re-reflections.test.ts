import { describe, expect, it } from 'vitest';
import { createCascade, type Stage } from '../../src/line/cascade.ts';
import { coaxMedium } from '../../src/line/medium.ts';
import { strongSteps, withoutReReflections } from '../../src/locate/re-reflections.ts';
import { evenHz, FOAM, lineOf, OPEN, runOfLine, SOLID } from './drawn-line.ts';

const GRID = { fromM: -0.2, stepM: 0.01, points: 2100 };
const WIDTH_M = 0.1;

/** Reflection built up by smooth steps [distance, height]. */
function builtBy(steps: readonly (readonly [number, number])[]): Float64Array {
  return Float64Array.from({ length: GRID.points }, (_, j) => {
    const d = GRID.fromM + j * GRID.stepM;
    return steps.reduce((sum, [at, height]) => {
      const x = Math.max(-1, Math.min(1, (d - at) / (0.8 * WIDTH_M)));
      return sum + (height / 2) * (1 + Math.sin((Math.PI / 2) * x));
    }, 0);
  });
}

describe('strongSteps', () => {
  const search = { resolutionM: WIDTH_M, toM: 20, most: 10 };

  it('finds steps with their places and the reflection behind them', () => {
    const found = strongSteps(
      builtBy([
        [5, 0.2],
        [8.004, -0.192],
        [12, 0.05],
      ]),
      GRID,
      search,
    );
    expect(found.map((s) => s.distanceM)).toEqual([5, 8.004, 12].map((d) => expect.closeTo(d, 3)));
    expect(found.map((s) => s.reflection)).toEqual([0.2, 0.008, 0.058].map((r) => expect.closeTo(r, 3)));
  });

  it('takes the strongest where fewer are asked for, in order of distance', () => {
    const built = builtBy([
      [3, 0.04],
      [5, 0.1],
      [8, -0.2],
    ]);
    expect(strongSteps(built, GRID, { ...search, most: 2 }).map((s) => s.distanceM)).toEqual([
      expect.closeTo(5, 3),
      expect.closeTo(8, 3),
    ]);
  });

  it('leaves small ones, the end and what lies behind a full reflection alone', () => {
    expect(
      strongSteps(
        builtBy([
          [5, 0.02],
          [20, 0.9],
        ]),
        GRID,
        search,
      ),
    ).toEqual([]);
    expect(
      strongSteps(
        builtBy([
          [5, 0.9],
          [8, 0.2],
        ]),
        GRID,
        search,
      ),
    ).toEqual([]);
    expect(strongSteps(new Float64Array(GRID.points), GRID, search)).toEqual([]);
  });
});

describe('withoutReReflections', () => {
  it.each([
    ['low loss', FOAM],
    ['lossy', SOLID],
  ])('leaves the first-order sum of the steps and of what lies behind: %s', (_, of) => {
    const frequencyHz = evenHz(2e6, 3e8, 150);
    const medium = coaxMedium(of, frequencyHz, { temperatureC: 20 });
    const high = coaxMedium({ ...of, z0Ohm: 75 }, frequencyHz, { temperatureC: 20 });
    const stretch = (lengthM: number, through = medium): Stage => ({
      type: 'line',
      medium: through,
      lengthM,
      conductor: 0,
      dielectric: 0,
    });
    const stages: Stage[] = [
      stretch(10),
      { type: 'step', before: medium, after: high, ratio: 1 },
      stretch(2, high),
      { type: 'step', before: high, after: medium, ratio: 1 },
      stretch(8),
    ];
    const { re, im } = createCascade(frequencyHz).gamma(stages, OPEN);
    const run = runOfLine(lineOf([{ cable: of, lengthM: 20 }]), frequencyHz);
    const steps = [
      { distanceM: 10, reflection: 0.2 },
      { distanceM: 12, reflection: 0 },
    ];
    const straight = withoutReReflections({ re, im }, run, steps, 10);
    frequencyHz.forEach((_, k) => {
      const echo = (d: number, r: number): [number, number] => {
        const size = r * Math.exp(-2 * run.alpha[0]![k]! * d);
        const angle = -2 * run.beta[0]![k]! * d;
        return [size * Math.cos(angle), size * Math.sin(angle)];
      };
      const wanted = [echo(10, 0.2), echo(12, -0.2), echo(20, 1)];
      const sumRe = wanted.reduce((sum, w) => sum + w[0], 0);
      const sumIm = wanted.reduce((sum, w) => sum + w[1], 0);
      expect(Math.hypot(straight.re[k]! - sumRe, straight.im[k]! - sumIm)).toBeLessThan(1e-9);
    });
  });

  it('changes nothing without steps, and nothing where loss has the last word', () => {
    const frequencyHz = evenHz(1e8, 1e9, 20);
    const run = runOfLine(lineOf([{ cable: SOLID, lengthM: 60 }]), frequencyHz);
    const gamma = { re: frequencyHz.map(() => 0.3), im: frequencyHz.map(() => -0.1) };
    expect(withoutReReflections(gamma, run, [], 2)).toEqual(gamma);
    expect(withoutReReflections(gamma, run, [{ distanceM: 50, reflection: 0.2 }], 0.1)).toEqual(gamma);
  });
});
