import { describe, expect, it } from 'vitest';
import { type EndModel, writeEnd } from '../../src/line/end.ts';
import { fitAntenna } from '../../src/locate/fit-antenna.ts';
import { residualEnergy, residualVariance } from '../../src/locate/fit-context.ts';
import { type Freedom, type LineModel, NOTHING_FREE } from '../../src/locate/line-model.ts';
import { evaluateCost } from '../../src/locate/linearise.ts';
import { complexZeros } from '../../src/numerics/complex.ts';
import { evenHz, FOAM } from './drawn-line.ts';
import { contextOn, type DrawnRun, modelOf, reflectionOf, varianceOf, withNoise } from './drawn-model.ts';

const GRID = evenHz(600e6, 2700e6, 500);
const NOISE_DB = -60;
const END_ALONE: Freedom = { ...NOTHING_FREE, end: true };
const NOT_YET: EndModel = { type: 'antenna', parameters: [0, 0] };

/** A load behind one tuned circuit, 50 Ω at its centre: −1 + 2/(1 + jQ(f/f0 − f0/f))·½, matched there. */
const ONE_BAND: EndModel = { type: 'antenna', parameters: [-1, 0, 1, 0, 8, 1850e6] };
const TWO_BANDS: EndModel = { type: 'antenna', parameters: [-1, 0, 1, 0, 12, 880e6, 0.95, 0.05, 9, 2100e6] };

function runTo(end: EndModel): DrawnRun {
  return { sections: [{ cable: FOAM, lengthM: 12 }], end };
}

/** Fits an antenna to a noisy sweep of that end. */
function fitted(end: EndModel, noiseDb = NOISE_DB): { model: LineModel; variance: number } {
  const context = contextOn(GRID, withNoise(reflectionOf(runTo(end), GRID), noiseDb, 5));
  const model = modelOf(runTo(NOT_YET), GRID);
  evaluateCost(context, model, END_ALONE, 1);
  fitAntenna(context, model, END_ALONE);
  // What the last evaluation left is that of the model that was kept.
  const left = residualEnergy(context);
  evaluateCost(context, model, END_ALONE, 1);
  expect(left).toBeCloseTo(residualEnergy(context), 12);
  return { model, variance: residualVariance(context) };
}

function gammaOf(end: EndModel) {
  const gamma = complexZeros(GRID.length);
  writeEnd(end, GRID, gamma, null);
  return gamma;
}

describe('fitAntenna', () => {
  it.each([
    ['one band', ONE_BAND],
    ['two bands', TWO_BANDS],
  ])('explains an antenna of %s down to the noise', (_, end) => {
    const { model, variance } = fitted(end);
    expect(model.end.type).toBe('antenna');
    // 1000 numbers, a dozen of them fitted: 1 ± 5 %, three of that; a resonance that is not worth it may be left.
    expect(variance / varianceOf(NOISE_DB)).toBeLessThan(1.3);
    const [seen, true_] = [gammaOf(model.end), gammaOf(end)];
    for (let i = 0; i < GRID.length; i++)
      expect(Math.hypot(seen.re[i]! - true_.re[i]!, seen.im[i]! - true_.im[i]!)).toBeLessThan(0.01);
  });

  it('finds where the band is', () => {
    const { model } = fitted(ONE_BAND);
    const seen = gammaOf(model.end);
    const size = seen.re.map((re, i) => Math.hypot(re, seen.im[i]!));
    // Matched at 1850 MHz; 1/200 of that in Q = 8 returns −22 dB still.
    expect(Math.abs(GRID[size.indexOf(Math.min(...size))]! / 1850e6 - 1)).toBeLessThan(0.005);
  });

  it('adds no resonance to what has none', () => {
    const flat = fitted({ type: 'antenna', parameters: [0.2, 0] }).model.end.parameters;
    expect(flat).toHaveLength(2);
    expect(flat[0]).toBeCloseTo(0.2, 3);
  });

  it('adds as many as are worth it, and no more than noise allows', () => {
    const quiet = fitted(TWO_BANDS).model.end.parameters.length;
    const loud = fitted(TWO_BANDS, -6).model.end.parameters.length;
    expect(quiet).toBeGreaterThanOrEqual(10);
    expect(loud).toBeLessThanOrEqual(quiet);
  });

  it('stops at the number of resonances that it is given', () => {
    const context = contextOn(GRID, reflectionOf(runTo(TWO_BANDS), GRID));
    const model = modelOf(runTo(NOT_YET), GRID);
    fitAntenna(context, model, END_ALONE, 1);
    expect(model.end.parameters.length).toBeLessThanOrEqual(6);
  });

  it('leaves no more over than a bare constant does', () => {
    const context = contextOn(GRID, reflectionOf(runTo(TWO_BANDS), GRID));
    const model = modelOf(runTo({ type: 'antenna', parameters: [-0.4, 0] }), GRID);
    evaluateCost(context, model, END_ALONE, 1);
    const before = residualEnergy(context);
    fitAntenna(context, model, END_ALONE);
    expect(residualEnergy(context)).toBeLessThan(before);
  });
});
