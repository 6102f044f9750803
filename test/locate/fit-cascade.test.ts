import { describe, expect, it } from 'vitest';
import { strengthOf } from '../../src/line/discontinuity.ts';
import { refine } from '../../src/locate/fit-cascade.ts';
import { createFitContext, residualEnergy, residualVariance } from '../../src/locate/fit-context.ts';
import {
  ALL_FREE,
  addFreeLump,
  addLump,
  cloneModel,
  type Freedom,
  type LineModel,
  NOTHING_FREE,
} from '../../src/locate/line-model.ts';
import { evaluateCost, fitCovariance, linearise } from '../../src/locate/linearise.ts';
import { translate } from '../../src/locate/translate-model.ts';
import { createRandom } from '../../src/numerics/random.ts';
import { evenHz, FOAM, MATCHED, OPEN, SOLID } from './drawn-line.ts';
import { contextOn, type DrawnRun, modelOf, reflectionOf, varianceOf, withNoise } from './drawn-model.ts';

const GRID = evenHz(5e6, 1500e6, 300);
const LEAK = { kind: 'shunt-leakage', value: 250, atM: 7.3 } as const;
const RUN: DrawnRun = {
  sections: [
    { cable: SOLID, lengthM: 3 },
    { cable: FOAM, lengthM: 12 },
  ],
  put: [LEAK],
  end: { type: 'load', parameters: [1.3, 2e-12] },
};

/** The run's own model, with its leak where it is and a joint's small reactance. */
function knowing(run: DrawnRun = RUN): LineModel {
  const model = modelOf(run, GRID);
  addFreeLump(model, { ...strengthOf(LEAK.kind, LEAK.value, 50), distanceM: LEAK.atM });
  addLump(model, {
    type: 'reactive',
    strength: 0,
    strengthSigma: 4e-12,
    section: 1,
    boundary: 1,
    offsetM: 0.02,
    offsetSigmaM: 0.01,
    offsetMeanM: 0.02,
  });
  return model;
}

/** Moves every parameter off by a few thousandths of what it may move, so that no prior is at rest. */
function unsettle(model: LineModel, seed: number): LineModel {
  const random = createRandom(seed);
  for (const p of translate(model, ALL_FREE).parameters)
    p.set(p.get() + (p.sigma ?? naturalStep(p.name)) * 0.3 * random.normal());
  return model;
}

/** A small step of a parameter without a prior. */
function naturalStep(name: string): number {
  return name.startsWith('strength') ? 0.01 : 0.002;
}

describe('linearise', () => {
  it('gives the slope of the cost by every parameter, priors of all kinds included', () => {
    const context = contextOn(GRID, withNoise(reflectionOf(RUN, GRID), -60, 1));
    const variance = varianceOf(-60);
    const model = unsettle(knowing(), 2);
    const { translation, gradient, cost } = linearise(context, model, ALL_FREE, variance);
    expect(cost).toBeCloseTo(evaluateCost(context, model, ALL_FREE, variance), 6);
    const slopes = translation.parameters.map((p) => {
      const here = p.get();
      const h = (p.sigma ?? naturalStep(p.name)) * 1e-4;
      p.set(here + h);
      const up = evaluateCost(context, model, ALL_FREE, variance);
      p.set(here - h);
      const down = evaluateCost(context, model, ALL_FREE, variance);
      p.set(here);
      return { name: p.name, slope: (up - down) / (2 * h), scale: cost / h };
    });
    slopes.forEach(({ name, slope, scale }, k) => {
      // The gradient points downhill, half the cost's slope; central differences are good to h² and 1e-12 of cost/h.
      const tolerance = 1e-5 * Math.abs(slope) + 1e-10 * scale;
      expect(Math.abs(-2 * gradient[k]! - slope), name).toBeLessThan(tolerance);
    });
  });

  it('gives a symmetric curvature without a downward direction', () => {
    const context = contextOn(GRID, reflectionOf(RUN, GRID));
    const { curvature, gradient } = linearise(context, knowing(), ALL_FREE, varianceOf(-60));
    const p = gradient.length;
    for (let a = 0; a < p; a++) {
      expect(curvature[a * p + a]).toBeGreaterThan(0);
      for (let b = 0; b < a; b++) expect(curvature[a * p + b]).toBe(curvature[b * p + a]);
    }
  });

  it('has no slope where model and sweep agree and every prior rests', () => {
    const context = contextOn(GRID, reflectionOf(RUN, GRID));
    const { gradient, translation } = linearise(context, knowing(), ALL_FREE, 1);
    translation.parameters.forEach((p, k) => {
      // The end's own parameters stand off the mean of their priors, and are the only ones that do.
      if (p.name.startsWith('end')) return;
      expect(Math.abs(gradient[k]! * (p.sigma ?? naturalStep(p.name))), p.name).toBeLessThan(1e-10);
    });
    expect(residualEnergy(context)).toBeLessThan(1e-20);
  });
});

describe('refine', () => {
  it('finds a lump, the loss and the end of a sweep without noise', () => {
    const truth = { ...RUN, conductor: 0.02 };
    const context = contextOn(GRID, reflectionOf(truth, GRID));
    const model = knowing();
    const leak = model.lumps[0]!;
    leak.strength *= 0.6;
    leak.offsetM += 0.01;
    model.end = { type: 'load', parameters: [1.2, 1e-12] };
    const freedom: Freedom = { ...NOTHING_FREE, loss: true, end: true, lumps: new Set([leak.id]) };
    // So small a variance that the priors have no say.
    const fit = refine(context, model, freedom, { variance: 1e-14, maxIterations: 60, tolerance: 1e-9 });
    expect(fit.settled).toBe(true);
    expect(residualEnergy(context)).toBeLessThan(1e-14);
    expect(leak.strength).toBeCloseTo(-50 / 250, 6);
    expect(leak.offsetM).toBeCloseTo(7.3, 6);
    expect(model.conductor).toBeCloseTo(0.02, 5);
    expect(model.end.parameters[0]).toBeCloseTo(1.3, 6);
  });

  it('never ends higher than it began, wherever it begins', () => {
    const variance = varianceOf(-50);
    for (let seed = 1; seed <= 5; seed++) {
      const context = contextOn(GRID, withNoise(reflectionOf(RUN, GRID), -50, seed));
      const model = unsettle(knowing(), 10 + seed);
      const before = evaluateCost(context, model, ALL_FREE, variance);
      const fit = refine(context, model, ALL_FREE, { variance, maxIterations: 4 });
      expect(fit.cost).toBeLessThanOrEqual(before);
      // What it reports is the cost of the model that it leaves.
      expect(evaluateCost(context, model, ALL_FREE, variance)).toBeCloseTo(fit.cost, 6);
    }
  });

  it('leaves the residual of its answer in the context', () => {
    const gamma = withNoise(reflectionOf(RUN, GRID), -50, 3);
    const context = contextOn(GRID, gamma);
    const model = unsettle(knowing(), 4);
    refine(context, model, ALL_FREE, { variance: varianceOf(-50), maxIterations: 8 });
    const left = context.residual.re.slice();
    evaluateCost(context, model, NOTHING_FREE, 1);
    left.forEach((value, k) => {
      expect(value).toBeCloseTo(context.residual.re[k]!, 12);
      expect(context.modelled.re[k]! + value).toBeCloseTo(gamma.re[k]!, 12);
    });
  });

  it('is done at once where nothing may move', () => {
    const context = contextOn(GRID, withNoise(reflectionOf(RUN, GRID), -50, 3));
    const model = knowing();
    const fit = refine(context, model, NOTHING_FREE, { variance: 1, maxIterations: 10 });
    expect(fit).toMatchObject({ iterations: 0, settled: true });
    expect(model).toEqual(knowing());
  });

  it('does not look at points of weight 0', () => {
    const clean = withNoise(reflectionOf(RUN, GRID), -60, 5);
    const hit = { re: clean.re.slice(), im: clean.im.slice() };
    const weight = new Float64Array(GRID.length).fill(1);
    for (const k of [40, 41, 200]) {
      weight[k] = 0;
      hit.re[k] = 3;
      hit.im[k] = -2;
    }
    const [a, b] = [clean, hit].map((gamma) => {
      const context = createFitContext(GRID, gamma, weight.slice());
      const model = unsettle(knowing(), 6);
      refine(context, model, ALL_FREE, { variance: varianceOf(-60), maxIterations: 6 });
      return model;
    });
    expect(b).toEqual(a);
  });

  it('stays within bounds when the sweep pulls beyond them', () => {
    // A gain of 3 can’t be had from any line: loss is pulled far below what may be.
    const seen = reflectionOf({ ...RUN, put: [], end: OPEN }, GRID);
    const gamma = { re: seen.re.map((v) => 3 * v), im: seen.im.map((v) => 3 * v) };
    const context = contextOn(GRID, gamma);
    const model = modelOf({ ...RUN, end: OPEN }, GRID);
    refine(context, model, ALL_FREE, { variance: 1e-6, maxIterations: 25 });
    for (const p of translate(model, ALL_FREE).parameters) {
      expect(p.get(), p.name).toBeGreaterThanOrEqual(p.minimum);
      expect(p.get(), p.name).toBeLessThanOrEqual(p.maximum);
    }
  });

  it('falls back to what is expected when no point counts', () => {
    const context = createFitContext(GRID, reflectionOf(RUN, GRID), new Float64Array(GRID.length));
    const model = modelOf(RUN, GRID);
    model.conductor = 0.05;
    model.boundaryM[0] = 3.05;
    model.impedanceRatio[1] = 0.01;
    refine(context, model, ALL_FREE, { variance: 1e-6, maxIterations: 50, tolerance: 1e-12 });
    expect(model.conductor).toBeCloseTo(0, 4);
    expect(model.boundaryM[0]).toBeCloseTo(3, 4);
    expect(model.impedanceRatio[1]).toBeCloseTo(0, 4);
  });

  it('holds a section to its tolerance the harder, the farther it is off', () => {
    // What pulls a parameter by u standard deviations costs u² at least, and more beyond what is usual.
    const context = createFitContext(GRID, reflectionOf(RUN, GRID), new Float64Array(GRID.length));
    const costAt = (sigmas: number): number => {
      const model = modelOf({ ...RUN, end: MATCHED }, GRID);
      model.impedanceRatio[0] = sigmas * model.priors.impedanceSigma[0]!;
      return evaluateCost(context, model, ALL_FREE, 1);
    };
    expect(costAt(0)).toBeCloseTo(0, 12);
    expect(costAt(1)).toBeGreaterThanOrEqual(1);
    expect(costAt(1)).toBeLessThan(1.5);
    expect(costAt(5) / 25).toBeGreaterThan(costAt(1));
  });
});

const LUMP_ALONE: Freedom = { ...NOTHING_FREE, lumps: null };

describe('fitCovariance', () => {
  it('is that of the description where the sweep says nothing', () => {
    const context = createFitContext(GRID, reflectionOf(RUN, GRID), new Float64Array(GRID.length));
    const model = modelOf(RUN, GRID);
    const freedom: Freedom = { ...NOTHING_FREE, boundaries: null };
    const covariance = fitCovariance(linearise(context, model, freedom, 1))!;
    model.priors.boundaryCovariance.forEach((value, k) => {
      expect(covariance[k]! / value).toBeCloseTo(1, 6);
    });
  });

  it('grows with the variance of the noise', () => {
    const context = contextOn(GRID, reflectionOf(RUN, GRID));
    const model = modelOf(RUN, GRID);
    addFreeLump(model, { ...strengthOf(LEAK.kind, LEAK.value, 50), distanceM: LEAK.atM });
    const [once, fourfold] = [1e-6, 4e-6].map(
      (v) => fitCovariance(linearise(context, model, LUMP_ALONE, v))!,
    );
    once!.forEach((value, k) => {
      expect(fourfold![k]! / value).toBeCloseTo(4, 9);
    });
  });

  it('is null where something is not determined', () => {
    const context = createFitContext(GRID, reflectionOf(RUN, GRID), new Float64Array(GRID.length));
    const model = modelOf(RUN, GRID);
    addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM: 7 });
    expect(fitCovariance(linearise(context, model, LUMP_ALONE, 1e-6))).toBeNull();
  });

  it('is how estimates scatter over noise', () => {
    const clean = reflectionOf(RUN, GRID);
    const noiseDb = -50;
    const variance = varianceOf(noiseDb);
    const trials = 60;
    const freedom: Freedom = { ...NOTHING_FREE, lumps: null, loss: true };
    const start = modelOf(RUN, GRID, { lossSigma: 10 });
    const lump = addFreeLump(start, { ...strengthOf(LEAK.kind, LEAK.value, 50), distanceM: LEAK.atM });
    const promised = fitCovariance(linearise(contextOn(GRID, clean), start, freedom, variance))!;
    const names = translate(start, freedom).parameters.map(({ name }) => name);
    let squares = 0;
    for (let seed = 1; seed <= trials; seed++) {
      const context = contextOn(GRID, withNoise(clean, noiseDb, seed));
      const model = cloneModel(start);
      refine(context, model, freedom, { variance, maxIterations: 10, tolerance: 1e-8 });
      const place = names.indexOf(`place of lump ${lump.id}`);
      const strength = names.indexOf(`strength of lump ${lump.id}`);
      const [fitted] = model.lumps;
      squares += (fitted!.offsetM - LEAK.atM) ** 2 / promised[place * names.length + place]!;
      squares += (fitted!.strength + 0.2) ** 2 / promised[strength * names.length + strength]!;
    }
    // Chi-squared of 120: 1 ± 0.13; three of that.
    expect(squares / (2 * trials)).toBeGreaterThan(0.61);
    expect(squares / (2 * trials)).toBeLessThan(1.39);
  });
});

describe('residualVariance', () => {
  it('is that of the noise per real component when the model is the line', () => {
    const context = contextOn(GRID, withNoise(reflectionOf(RUN, GRID), -50, 8));
    evaluateCost(context, knowing(), NOTHING_FREE, 1);
    // 600 squares: ±6 %, three of that.
    expect(residualVariance(context) / varianceOf(-50)).toBeGreaterThan(0.82);
    expect(residualVariance(context) / varianceOf(-50)).toBeLessThan(1.18);
  });

  it('is above 0 even where nothing is left, and counts only points with weight', () => {
    const clean = reflectionOf(RUN, GRID);
    const context = contextOn(GRID, clean);
    evaluateCost(context, knowing(), NOTHING_FREE, 1);
    expect(residualVariance(context)).toBeGreaterThan(0);
    const shifted = { re: clean.re.map((v) => v + 0.01), im: clean.im };
    const half = createFitContext(
      GRID,
      shifted,
      GRID.map((_, k) => k % 2),
    );
    evaluateCost(half, knowing(), NOTHING_FREE, 1);
    // 0.01 in one of two components.
    expect(residualVariance(half)).toBeCloseTo(1e-4 / 2, 10);
  });
});
