import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { refine } from '../../src/locate/fit-cascade.ts';
import {
  addFreeLump,
  addLump,
  createLineModel,
  type Freedom,
  NOTHING_FREE,
} from '../../src/locate/line-model.ts';
import { fitCovariance, linearise } from '../../src/locate/linearise.ts';
import { cable, lineOf } from './drawn-line.ts';
import { contextOn, varianceOf } from './drawn-model.ts';

type Figures = { z0Ohm: number; velocityFactor: number; k1: number; k2: number };
type Reference = {
  frequencyHz: number[];
  re: number[];
  im: number[];
  noiseDb: number;
  first: Figures;
  second: Figures;
  firstLengthM: number;
  start: number[];
  parameters: string[];
  fitted: number[];
  covariance: number[][];
  cost: number;
};

/** One noisy sweep, fitted by scipy 1.17 to a forward model of chain matrices in numpy: cascade-fit-make.py. */
const REFERENCE: Reference = JSON.parse(
  readFileSync(new URL('../reference/cascade-fit.json', import.meta.url), 'utf8'),
);

/** The same sweep fitted here from the same start, priors so wide that they have no say. */
function fittedHere() {
  const { first, second, firstLengthM, start, noiseDb } = REFERENCE;
  const [seriesOhm, seriesAtM, jointHenry, conductor, dielectric, endM, loadRatio, loadS] = start;
  const frequencyHz = Float64Array.from(REFERENCE.frequencyHz);
  const lengths = [firstLengthM, endM! - firstLengthM];
  const line = lineOf([
    { cable: cable(first), lengthM: lengths[0]! },
    { cable: { ...cable(second), id: 'second' }, lengthM: lengths[1]! },
  ]);
  const model = createLineModel(line, frequencyHz, 50, lengths, { lossSigma: 1e4, lengthSigmaM: 1e4 });
  const resistance = addFreeLump(model, {
    type: 'resistive',
    strength: seriesOhm! / 50,
    distanceM: seriesAtM!,
  });
  const inductance = addLump(model, {
    type: 'reactive',
    strength: jointHenry! / 50,
    strengthSigma: null,
    section: 1,
    boundary: 1,
    offsetM: 0,
    offsetSigmaM: 0,
    offsetMeanM: 0,
  });
  model.conductor = conductor!;
  model.dielectric = dielectric!;
  model.end = { type: 'load', parameters: [loadRatio!, loadS!] };
  const freedom: Freedom = { ...NOTHING_FREE, loss: true, end: true, lumps: null, boundaries: new Set([1]) };
  const context = contextOn(frequencyHz, {
    re: Float64Array.from(REFERENCE.re),
    im: Float64Array.from(REFERENCE.im),
  });
  const variance = varianceOf(noiseDb);
  const fit = refine(context, model, freedom, { variance, maxIterations: 100, tolerance: 1e-12 });
  const linear = linearise(context, model, freedom, variance);
  const { parameters: free } = linear.translation;
  /** The numbers that scipy fitted, as the model has them. */
  const readOff = (): number[] => [
    resistance.strength * 50,
    resistance.offsetM,
    inductance.strength * 50,
    model.conductor,
    model.dielectric,
    model.boundaryM[1]!,
    ...model.end.parameters,
  ];
  const values = readOff();
  const per = free.map((parameter) => {
    const here = parameter.get();
    const h = 1e-6 * (Math.abs(here) || 1);
    parameter.set(here + h);
    const moved = readOff();
    parameter.set(here);
    return moved.map((value, k) => (value - values[k]!) / h);
  });
  const own = fitCovariance(linear)!;
  return {
    fit,
    free: free.length,
    values,
    /** Covariance of two of those numbers: that of the free parameters, carried over. */
    covariance(i: number, j: number): number {
      let sum = 0;
      for (let a = 0; a < free.length; a++)
        for (let b = 0; b < free.length; b++) sum += per[a]![i]! * own[a * free.length + b]! * per[b]![j]!;
      return sum;
    },
  };
}

describe('refine and fitCovariance', () => {
  const here = fittedHere();
  const { parameters, fitted, covariance } = REFERENCE;
  const sigmaOf = (k: number): number => Math.sqrt(covariance[k]![k]!);

  it('free the same numbers as the fit by scipy', () => {
    expect(here.free).toBe(parameters.length);
  });

  it.each(parameters.map((name, k) => ({ name, k })))('find the same $name', ({ k }) => {
    // The load’s reactance has a prior of 30 ps on each side of 0, whose pull on it (and what goes along with it) is
    // 8.6 · 1.04²/30² = 0.01 ps, a hundredth of its sigma; both optimizers stop nearer than that.
    expect(Math.abs(here.values[k]! - fitted[k]!) / sigmaOf(k)).toBeLessThan(0.03);
  });

  it('find the same misfit', () => {
    // The priors’ own share, 0.3 of the load’s ratio and its reactance, is in the cost here: (1.4 − 1)² + (8.6/30)².
    expect(here.fit.cost - REFERENCE.cost).toBeGreaterThan(0);
    expect(here.fit.cost - REFERENCE.cost).toBeLessThan(0.3);
  });

  it('find the same covariance', () => {
    parameters.forEach((a, i) => {
      parameters.forEach((b, j) => {
        const scale = sigmaOf(i) * sigmaOf(j);
        // The reactance’s prior takes (1.04/30)² = 0.1 % off its variance; differences are good to six digits.
        expect(Math.abs(here.covariance(i, j) - covariance[i]![j]!) / scale, `${a} ${b}`).toBeLessThan(0.005);
      });
    });
  });
});
