import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { writeTouchstone } from '../../src/sweep/write-touchstone.ts';
import { sweepAndNotices } from './read-text.ts';

const SWEEP = {
  frequencyHz: Float64Array.of(0, 1.5e6, 2.7e9),
  gamma: { re: Float64Array.of(0.1, -1 / 3, 1e-300), im: Float64Array.of(0, 2 / 3, -1) },
  portOhm: 75,
};

describe('writeTouchstone', () => {
  it('writes comments, the option line and one row a frequency', () => {
    expect(writeTouchstone(SWEEP, ['invented', 'Z = 75 Ω ± 1 °C\nsecond'])).toBe(
      `! invented
! Z = 75 ohm +/- 1 degC second
# Hz S RI R 75
0 0.1 0
1500000 -0.3333333333333333 0.6666666666666666
2700000000 1e-300 -1
`,
    );
  });

  it('writes what reads back to the very same numbers, without a notice', () => {
    const { sweep, notices } = sweepAndNotices(writeTouchstone(SWEEP, ['a']));
    expect({ frequencyHz: sweep.frequencyHz, gamma: sweep.gamma, portOhm: sweep.portOhm }).toEqual(SWEEP);
    expect([sweep.comments, notices]).toEqual([['a'], []]);
  });

  it('reads back for any finite values', () => {
    const value = fc.double({ min: -1e6, max: 1e6, noNaN: true });
    const point = fc.tuple(fc.double({ min: 1e-3, max: 1e9, noNaN: true }), value, value);
    fc.assert(
      fc.property(
        fc.array(point, { minLength: 2, maxLength: 20 }),
        fc.double({ min: 1e-3, max: 1e4, noNaN: true }),
        (points, ohm) => {
          let hz = 0;
          const frequencyHz = Float64Array.from(points, ([step]) => {
            hz += step;
            return hz;
          });
          const gamma = {
            re: Float64Array.from(points, (p) => p[1]),
            im: Float64Array.from(points, (p) => p[2]),
          };
          fc.pre(frequencyHz.every((f, i) => i === 0 || f > frequencyHz[i - 1]!));
          const { sweep } = sweepAndNotices(writeTouchstone({ frequencyHz, gamma, portOhm: ohm }, []));
          // −0 is written as 0.
          const same = (a: Float64Array, b: Float64Array) => a.every((v, i) => v === b[i]);
          expect(same(sweep.frequencyHz, frequencyHz)).toBe(true);
          expect(same(sweep.gamma.re, gamma.re) && same(sweep.gamma.im, gamma.im)).toBe(true);
          expect(sweep.portOhm).toBe(ohm);
        },
      ),
      { seed: 3, numRuns: 200 },
    );
  });

  it.each([
    ['one point', { ...SWEEP, frequencyHz: SWEEP.frequencyHz.subarray(0, 1) }],
    ['lengths that differ', { ...SWEEP, frequencyHz: SWEEP.frequencyHz.subarray(0, 2) }],
    ['frequencies that repeat', { ...SWEEP, frequencyHz: Float64Array.of(1, 1, 2) }],
    ['a frequency below 0', { ...SWEEP, frequencyHz: Float64Array.of(-1, 1, 2) }],
    [
      'a value that is no number',
      { ...SWEEP, gamma: { re: Float64Array.of(0, Number.NaN, 0), im: SWEEP.gamma.im } },
    ],
    ['no reference', { ...SWEEP, portOhm: 0 }],
  ])('throws on %s', (_, sweep) => {
    expect(() => writeTouchstone(sweep, [])).toThrow(RangeError);
  });
});
