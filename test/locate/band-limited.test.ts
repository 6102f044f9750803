import { describe, expect, it } from 'vitest';
import { pathTo, runLengthM } from '../../src/line/medium-run.ts';
import { type PointsOnPath, planBandLimited } from '../../src/locate/band-limited.ts';
import { evenHz, FOAM, lineOf, OPEN, runOfLine, SHORT, SOLID, sweepThrough } from './drawn-line.ts';

function pointsOn(of: typeof FOAM, lengthM: number, frequencyHz: Float64Array): PointsOnPath {
  const run = runOfLine(lineOf([{ cable: of, lengthM }]), frequencyHz);
  const { attenuation, phase } = pathTo(run, runLengthM(run));
  return { frequencyHz, path: { re: attenuation.map((v) => 2 * v), im: phase.map((v) => 2 * v) } };
}

const ZERO: PointsOnPath = {
  frequencyHz: new Float64Array(1),
  path: { re: new Float64Array(1), im: new Float64Array(1) },
};

describe('planBandLimited', () => {
  it.each([
    ['open', OPEN, 1, FOAM],
    ['short', SHORT, -1, FOAM],
    ['open, lossy', OPEN, 1, SOLID],
    ['short, lossy', SHORT, -1, SOLID],
  ])('finds Γ = ±1 at 0 Hz: %s', (_, end, wanted, of) => {
    // @source references.md section 6: extrapolated to 0 Hz, an open reads +1, a short −1.
    const frequencyHz = evenHz(2e6, 400e6, 200);
    const { gamma } = sweepThrough([{ cable: of, lengthM: 30 }], end, frequencyHz);
    const plan = planBandLimited(pointsOn(of, 30, frequencyHz), ZERO);
    const { re, im } = plan.fill(gamma);
    // Γ here is against the port: a lossy line's own impedance bends it near 0 Hz by a few parts in a hundred.
    expect(Math.abs(re[0]! - wanted)).toBeLessThan(of === FOAM ? 0.02 : 0.06);
    expect(im[0]).toBe(0);
  });

  it('finds values between points to its own estimate of error', () => {
    const all = evenHz(1e6, 400e6, 400);
    const even = all.filter((_, k) => k % 2 === 0);
    const odd = all.filter((_, k) => k % 2 === 1).subarray(0, -1);
    const lengthM = 40;
    const stretches = [{ cable: FOAM, lengthM }];
    const plan = planBandLimited(pointsOn(FOAM, lengthM, even), pointsOn(FOAM, lengthM, odd));
    const found = plan.fill(sweepThrough(stretches, OPEN, even).gamma);
    const wanted = sweepThrough(stretches, OPEN, odd).gamma;
    odd.forEach((_, k) => {
      const away = Math.hypot(found.re[k]! - wanted.re[k]!, found.im[k]! - wanted.im[k]!);
      expect(away).toBeLessThan(3 * plan.error[k]! + 0.003);
    });
  });

  it('is the surer the lower a sweep starts, and unsure where the line folds', () => {
    const errorOf = (firstHz: number, lengthM: number) => {
      const frequencyHz = evenHz(firstHz, firstHz + 400e6, 201);
      return planBandLimited(pointsOn(FOAM, lengthM, frequencyHz), ZERO).error[0]!;
    };
    expect(errorOf(1e6, 20)).toBeLessThan(errorOf(4e6, 20));
    expect(errorOf(4e6, 20)).toBeLessThan(errorOf(10e6, 20));
    // The end itself is still guessed by its phase, the rest of the line is not.
    expect(errorOf(100e6, 20)).toBeGreaterThan(0.06);
    expect(errorOf(2e6, 66)).toBeGreaterThan(0.06);
  });

  it('takes repeated points and as few as two', () => {
    const repeated = Float64Array.of(1e6, 1e6, 2e6, 3e6, 3e6);
    const { gamma } = sweepThrough([{ cable: FOAM, lengthM: 5 }], OPEN, repeated);
    const plan = planBandLimited(pointsOn(FOAM, 5, repeated), ZERO);
    expect(Math.abs(plan.fill(gamma).re[0]! - 1)).toBeLessThan(0.05);
    const two = planBandLimited(pointsOn(FOAM, 5, Float64Array.of(1e6, 2e6)), ZERO);
    expect(Number.isFinite(two.error[0])).toBe(true);
  });
});
