import { describe, expect, it } from 'vitest';
import {
  gammaOfReturnLoss,
  gammaOfVswr,
  impedanceOfGamma,
  mismatchLossDb,
  returnLossDb,
  vswr,
} from '../../src/line/reflection.ts';

/** VSWR, Γ, return loss dB, mismatch loss dB. @source references.md section 5.1, first table. */
const BY_VSWR = [
  [1.02, 0.0099, 40.086, 0.0004],
  [1.05, 0.02439, 32.256, 0.0026],
  [1.1, 0.04762, 26.444, 0.0099],
  [1.15, 0.06977, 23.127, 0.0212],
  [1.2, 0.09091, 20.828, 0.036],
  [1.25, 0.11111, 19.085, 0.054],
  [1.3, 0.13043, 17.692, 0.0745],
  [1.4, 0.16667, 15.563, 0.1223],
  [1.43258, 0.17783, 15.0, 0.1396],
  [1.5, 0.2, 13.979, 0.1773],
  [1.6, 0.23077, 12.736, 0.2377],
  [1.8, 0.28571, 10.881, 0.3698],
  [1.92495, 0.31623, 10.0, 0.4576],
  [2, 0.33333, 9.542, 0.5115],
  [2.5, 0.42857, 7.36, 0.8814],
  [3, 0.5, 6.021, 1.2494],
  [5, 0.66667, 3.522, 2.5527],
  [10, 0.81818, 1.743, 4.8073],
] as const;

/** Return loss dB, Γ, VSWR, mismatch loss dB. @source references.md section 5.1, second table. */
const BY_RETURN_LOSS = [
  [1, 0.89125, 17.39096, 6.86825],
  [3, 0.70795, 5.84804, 3.02062],
  [6, 0.50119, 3.00952, 1.25628],
  [10, 0.31623, 1.92495, 0.45757],
  [14, 0.19953, 1.49852, 0.17643],
  [18, 0.12589, 1.28805, 0.06938],
  [20, 0.1, 1.22222, 0.04365],
  [26, 0.05012, 1.10553, 0.01092],
  [30, 0.03162, 1.06531, 0.00435],
  [40, 0.01, 1.0202, 0.00043],
  [60, 0.001, 1.002, 0],
] as const;

describe('gammaOfVswr', () => {
  it.each(BY_VSWR)(
    'gammaOfVswr of %d leads to the printed Γ, return loss and mismatch loss',
    (ratio, ...printed) => {
      const gamma = gammaOfVswr(ratio);
      expect(gamma).toBeCloseTo(printed[0], 5);
      expect(returnLossDb(gamma)).toBeCloseTo(printed[1], 3);
      expect(mismatchLossDb(gamma)).toBeCloseTo(printed[2], 4);
      expect(vswr(gamma)).toBeCloseTo(ratio, 12);
    },
  );

  it('gammaOfVswr takes no ratio below 1 and knows the endless one', () => {
    expect(gammaOfVswr(1)).toBe(0);
    expect(gammaOfVswr(Number.POSITIVE_INFINITY)).toBe(1);
    for (const ratio of [0.99, 0, -2, Number.NaN]) expect(() => gammaOfVswr(ratio)).toThrow(RangeError);
  });
});

describe('gammaOfReturnLoss', () => {
  it.each(BY_RETURN_LOSS)(
    'gammaOfReturnLoss of %d dB leads to the printed Γ, VSWR and mismatch loss',
    (loss, ...printed) => {
      const gamma = gammaOfReturnLoss(loss);
      expect(gamma).toBeCloseTo(printed[0], 5);
      expect(vswr(gamma)).toBeCloseTo(printed[1], 4);
      expect(mismatchLossDb(gamma)).toBeCloseTo(printed[2], 5);
      expect(returnLossDb(gamma)).toBeCloseTo(loss, 12);
    },
  );
});

describe('returnLossDb, vswr and mismatchLossDb', () => {
  it('know no reflection and all of it', () => {
    expect([returnLossDb(0), vswr(0), mismatchLossDb(0)]).toEqual([Number.POSITIVE_INFINITY, 1, -0]);
    expect([returnLossDb(1), vswr(1), mismatchLossDb(1)]).toEqual([
      -0,
      Number.POSITIVE_INFINITY,
      Number.POSITIVE_INFINITY,
    ]);
  });

  it('give a negative return loss and an endless VSWR where more comes back than was sent', () => {
    expect(returnLossDb(2)).toBeCloseTo(-6.0206, 4);
    expect([vswr(1.5), mismatchLossDb(1.5)]).toEqual([Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY]);
  });
});

describe('impedanceOfGamma', () => {
  it.each([
    // @source references.md section 5.2, steps from 50 Ω.
    [0.2, 75],
    [-0.2, 33.333],
    [0.180328, 72],
    [0.300699, 93],
    [1 / 3, 100],
    [-1 / 3, 25],
    [0.019608, 52],
    [-0.020408, 48],
    [-0.052632, 45],
    [0, 50],
  ])('impedanceOfGamma of %d in 50 Ω is %d Ω', (gamma, ohm) => {
    expect(impedanceOfGamma(gamma, 50)).toBeCloseTo(ohm, 2);
  });
});
