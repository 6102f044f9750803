import { describe, expect, it } from 'vitest';
import { NOTHING_FREE } from '../../src/locate/line-model.ts';
import { evaluateCost } from '../../src/locate/linearise.ts';
import { bestPlaceOf, expectBoundary, placeJoints } from '../../src/locate/place-joints.ts';
import { PURE_TYPES, probeAcross } from '../../src/locate/probe.ts';
import { cable, evenHz, FOAM, MATCHED } from './drawn-line.ts';
import { contextOn, type DrawnRun, modelOf, reflectionOf, withNoise } from './drawn-model.ts';

const GRID = evenHz(5e6, 2700e6, 540);
/** As fast as the main run, or nearly: a joint elsewhere leaves the way to it as long as it was. */
const JUMPER = { ...cable({ z0Ohm: 50, velocityFactor: 0.88, k1: 0.21009, k2: 0.000705 }), id: 'jumper' };
const DESCRIBED: DrawnRun = {
  sections: [
    { cable: JUMPER, lengthM: 3 },
    { cable: FOAM, lengthM: 20 },
    { cable: JUMPER, lengthM: 4 },
  ],
  end: MATCHED,
};

/** The run with its joints elsewhere, a capacitance at each that is named. */
function truth(joint1M: number, joint2M: number, seen: readonly (1 | 2)[] = [1, 2]): DrawnRun {
  return {
    ...DESCRIBED,
    sections: [
      { cable: JUMPER, lengthM: joint1M },
      { cable: FOAM, lengthM: joint2M - joint1M },
      { cable: JUMPER, lengthM: 27 - joint2M },
    ],
    put: seen.map((joint) => ({
      kind: 'shunt-capacitance',
      value: 0.3e-12,
      atM: joint === 1 ? joint1M : joint2M,
    })),
  };
}

/** Joints' places after the search in a sweep of that run, noise −65 dB. */
function placed(run: DrawnRun, known: ReadonlySet<number> = new Set()): number[] {
  const context = contextOn(GRID, withNoise(reflectionOf(run, GRID), -65, 3));
  const model = modelOf(DESCRIBED, GRID);
  evaluateCost(context, model, NOTHING_FREE, 1);
  placeJoints(context, model, known);
  return model.boundaryM;
}

describe('expectBoundary', () => {
  it('is the description where nothing else is known', () => {
    const model = modelOf(DESCRIBED, GRID);
    const { meanM, sigmaM } = expectBoundary(model, new Set(), 1);
    expect(meanM).toBe(23);
    expect(sigmaM).toBeCloseTo(Math.sqrt(model.priors.boundaryCovariance[4]!), 12);
  });

  it('is the conditional mean and spread of a Gaussian, given another boundary', () => {
    const model = modelOf(DESCRIBED, GRID);
    const c = model.priors.boundaryCovariance;
    model.boundaryM[2] = 27.2;
    const { meanM, sigmaM } = expectBoundary(model, new Set([2]), 0);
    const [own, cross, other] = [c[0]!, c[2]!, c[8]!];
    // A hair is added to the known one's variance against singular matrices: 1e-10 m².
    expect(meanM).toBeCloseTo(3 + (cross / other) * 0.2, 7);
    expect(sigmaM ** 2).toBeCloseTo(own - cross ** 2 / other, 8);
  });

  it('is the surer, the more is known, and does not count a boundary as evidence of itself', () => {
    const model = modelOf(DESCRIBED, GRID);
    const sigma = (known: readonly number[]) => expectBoundary(model, new Set(known), 1).sigmaM;
    expect(sigma([2])).toBeLessThan(sigma([]));
    expect(sigma([0, 2])).toBeLessThan(sigma([2]));
    expect(sigma([0, 1, 2])).toBe(sigma([0, 2]));
  });
});

describe('placeJoints', () => {
  it('finds joints many half waves from where the description has them', () => {
    // Half a wave is 50 mm at 2.7 GHz; one sigma of the description is some 50 and 300 mm.
    const [joint1M, joint2M, endM] = placed(truth(3.05, 22.9));
    expect(Math.abs(joint1M! - 3.05)).toBeLessThan(0.01);
    expect(Math.abs(joint2M! - 22.9)).toBeLessThan(0.01);
    expect(endM).toBe(27);
  });

  it('leaves joints in peace that can’t be seen', () => {
    const places = placed({ ...truth(3, 23, []), sections: [{ cable: FOAM, lengthM: 27 }] });
    // Both ways the cables’ own losses make a step of −60 dB at most.
    expect(Math.abs(places[0]! - 3)).toBeLessThan(0.05);
    expect(Math.abs(places[1]! - 23)).toBeLessThan(0.4);
  });

  it('moves a joint that can’t be seen along with the others', () => {
    const model = modelOf(DESCRIBED, GRID);
    model.boundaryM[2] = 27.3;
    const context = contextOn(GRID, reflectionOf(DESCRIBED, GRID));
    context.weight.fill(0);
    placeJoints(context, model);
    expect(model.boundaryM[1]).toBeGreaterThan(23.1);
    expect(model.boundaryM[1]).toBeLessThan(23.3);
  });

  it('does not touch joints that are known, nor the end', () => {
    const [joint1M, joint2M, endM] = placed(truth(3.05, 22.9), new Set([2]));
    expect(joint2M).toBe(23);
    expect(endM).toBe(27);
    expect(Math.abs(joint1M! - 3.05)).toBeLessThan(0.01);
  });

  it('keeps joints in order', () => {
    for (const run of [truth(3.05, 22.9), truth(3, 23, [])]) {
      const places = placed(run);
      expect(places).toEqual([...places].sort((a, b) => a - b));
      expect(places[0]).toBeGreaterThan(0);
    }
  });
});

describe('bestPlaceOf', () => {
  it('finds nothing where nothing was searched', () => {
    expect(bestPlaceOf([], PURE_TYPES, { meanM: 3, sigmaM: 1 }, 1)).toBeNull();
  });

  it('weighs what the sweep shows against what is expected', () => {
    const context = contextOn(GRID, reflectionOf(truth(3.05, 22.9, [2]), GRID));
    const model = modelOf(DESCRIBED, GRID);
    evaluateCost(context, model, NOTHING_FREE, 1);
    const probes = probeAcross(context, model, 22.5, 23.5);
    const open = bestPlaceOf(probes, PURE_TYPES, { meanM: 23, sigmaM: 0.3 }, 1e-6)!;
    const held = bestPlaceOf(probes, PURE_TYPES, { meanM: 23.2, sigmaM: 1e-4 }, 1e-6)!;
    expect(Math.abs(open.distanceM - 22.9)).toBeLessThan(0.01);
    expect(open.reactive).toBeLessThan(0);
    expect(Math.abs(held.distanceM - 23.2)).toBeLessThan(0.005);
    expect(held.score).toBeLessThan(open.score);
  });
});
