/** The engine of the traces: block sums against the plain sum, the plain sum against its definition. */
import { describe, expect, it } from 'vitest';
import { pathTo } from '../../src/line/medium-run.ts';
import type { LossHandling } from '../../src/locate/path-factor.ts';
import { createRunTransform } from '../../src/locate/run-transform.ts';
import { complexZeros } from '../../src/numerics/complex.ts';
import { createRandom } from '../../src/numerics/random.ts';
import { evenHz, FOAM, lineOf, runOfLine, SOLID, THIN } from './drawn-line.ts';

const GRID = evenHz(1e6, 2.4e9, 601);
const LINE = lineOf([
  { cable: THIN, lengthM: 3 },
  { cable: FOAM, lengthM: 20 },
  { cable: SOLID, lengthM: 4 },
]);
const RUN = runOfLine(LINE, GRID);
const DISTANCES = { fromM: -0.5, stepM: 0.05, points: 600 };

function transformed(loss: LossHandling, method: 'fast' | 'exact', points = DISTANCES.points) {
  const random = createRandom(2);
  const input = complexZeros(GRID.length);
  for (let k = 0; k < GRID.length; k++) {
    input.re[k] = random.normal();
    input.im[k] = random.normal();
  }
  const output = complexZeros(points);
  const grid = { ...DISTANCES, points };
  createRunTransform({ run: RUN, grid, loss, method }).transform(() => input, output);
  return { input, output };
}

describe('createRunTransform', () => {
  it.each(['leave', 'weigh', 'undo'] as const)('is the sum of its definition: %s', (loss) => {
    const { input, output } = transformed(loss, 'exact');
    const sign = { leave: 0, weigh: -1, undo: 1 }[loss];
    for (const j of [0, 60, 75, 300, 599]) {
      const { attenuation, phase } = pathTo(RUN, DISTANCES.fromM + j * DISTANCES.stepM);
      let re = 0;
      let im = 0;
      let scale = 0;
      for (let k = 0; k < GRID.length; k++) {
        const size = Math.exp(2 * sign * attenuation[k]!);
        const [cosine, sine] = [size * Math.cos(2 * phase[k]!), size * Math.sin(2 * phase[k]!)];
        re += input.re[k]! * cosine - input.im[k]! * sine;
        im += input.re[k]! * sine + input.im[k]! * cosine;
        scale += size;
      }
      // 600 complex products one after another: rounding grows to some 1e-12.
      expect(Math.hypot(output.re[j]! - re, output.im[j]! - im) / scale).toBeLessThan(1e-11);
    }
  });

  it.each(['leave', 'weigh'] as const)(
    'fast agrees with exact to −80 dB of the highest value: %s',
    (loss) => {
      const exact = transformed(loss, 'exact').output;
      const fast = transformed(loss, 'fast').output;
      const highest = exact.re.reduce((most, re, j) => Math.max(most, Math.hypot(re, exact.im[j]!)), 0);
      exact.re.forEach((re, j) => {
        expect(Math.hypot(re - fast.re[j]!, exact.im[j]! - fast.im[j]!) / highest).toBeLessThan(1e-4);
      });
    },
  );

  it('takes the input of the section that a distance lies in', () => {
    const output = complexZeros(DISTANCES.points);
    const transform = createRunTransform({ run: RUN, grid: DISTANCES, loss: 'leave', method: 'exact' });
    const only = (section: number) => {
      const input = complexZeros(GRID.length);
      if (section === 1) input.re.fill(1);
      return input;
    };
    transform.transform(only, output);
    const at = (distanceM: number) =>
      Math.hypot(
        output.re[Math.round((distanceM + 0.5) / 0.05)]!,
        output.im[Math.round((distanceM + 0.5) / 0.05)]!,
      );
    expect([at(1), at(2.9), at(24)]).toEqual([0, 0, 0]);
    expect(at(3.1)).toBeGreaterThan(0);
  });

  it('takes one distance, and refuses none or a step that does not rise', () => {
    expect(transformed('leave', 'fast', 1).output.re.length).toBe(1);
    for (const grid of [
      { fromM: 0, stepM: 1, points: 0 },
      { fromM: 0, stepM: 0, points: 5 },
      { fromM: Number.NaN, stepM: 1, points: 5 },
    ])
      expect(() => createRunTransform({ run: RUN, grid, loss: 'leave', method: 'fast' })).toThrow(RangeError);
  });
});
