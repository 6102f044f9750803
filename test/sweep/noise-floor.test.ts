import { describe, expect, it } from 'vitest';
import { LOWEST_LEVEL_DB, noiseFloorDb } from '../../src/sweep/noise-floor.ts';
import { drawnSweep, evenHz } from './drawn-sweep.ts';

const LINE = [
  { delayS: 1e-9, gamma: 0.03 },
  { delayS: 380e-9, gamma: 0.9 },
];

describe('noiseFloorDb', () => {
  it.each([-40, -60, -80])('finds noise of %d dB under the echoes of a line, even steps', (noiseDb) => {
    for (const seed of [1, 2, 3]) {
      const { frequencyHz, gamma } = drawnSweep(evenHz(2e6, 2.7e9, 1350), LINE, { noiseDb, seed });
      // Some 1350/8 values: ±0.5 dB one sigma, the least of eight corrected for.
      expect(Math.abs(noiseFloorDb(frequencyHz, gamma) - noiseDb)).toBeLessThan(1.5);
    }
  });

  it('finds the noise of a sweep made of two segments', () => {
    const frequencyHz = Float64Array.from([...evenHz(1e6, 2e8, 400), ...evenHz(2.01e8, 1e9, 801)]);
    const { gamma } = drawnSweep(frequencyHz, LINE, { noiseDb: -60 });
    expect(Math.abs(noiseFloorDb(frequencyHz, gamma) + 60)).toBeLessThan(2);
  });

  it('judges an uneven sweep by its neighbours: close where the phase turns slowly', () => {
    const frequencyHz = Float64Array.from({ length: 801 }, (_, k) => 1e6 * 1.008 ** k);
    const { gamma } = drawnSweep(frequencyHz, [{ delayS: 2e-9, gamma: 0.5 }], { noiseDb: -50 });
    expect(Math.abs(noiseFloorDb(frequencyHz, gamma) + 50)).toBeLessThan(2);
  });

  it('finds next to nothing in a formula, and nothing in zeros and in four points', () => {
    const formula = drawnSweep(evenHz(2e6, 2.7e9, 1350), LINE);
    // The side lobes of its window at −125 dB and falling.
    expect(noiseFloorDb(formula.frequencyHz, formula.gamma)).toBeLessThan(-120);
    const zeros = drawnSweep(evenHz(1e6, 1e9, 201), []);
    expect(noiseFloorDb(zeros.frequencyHz, zeros.gamma)).toBe(LOWEST_LEVEL_DB);
    const four = drawnSweep(evenHz(1e6, 1e9, 4), [], { noiseDb: -20 });
    expect(noiseFloorDb(four.frequencyHz, four.gamma)).toBe(LOWEST_LEVEL_DB);
  });
});
