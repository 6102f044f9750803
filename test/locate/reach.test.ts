import { describe, expect, it } from 'vitest';
import { SPEED_OF_LIGHT } from '../../src/line/constants.ts';
import { losslessRun } from '../../src/line/medium-run.ts';
import { noisePerPoint, reachOf } from '../../src/locate/reach.ts';
import type { WindowSpec } from '../../src/numerics/window.ts';
import { evenHz, FOAM, lineOf, MATCHED, OPEN, runOfLine, SHORT, SOLID, sweepThrough } from './drawn-line.ts';

const HANN: WindowSpec = { kind: 'hann' };

/** Reach of an open line of one cable. */
function reachOn(of: typeof FOAM, lengthM: number, frequencyHz: Float64Array, noise = 1e-3) {
  const sections = [{ cable: of, lengthM }];
  const sweep = sweepThrough(sections, OPEN, frequencyHz, { noise });
  return reachOf({ sweep, run: runOfLine(lineOf(sections), frequencyHz), window: HANN });
}

describe('reachOf', () => {
  it.each([
    // @source references.md section 6: range (N − 1)·c·VF/(2B); 6 dB width of a Hann window 2.00 bins.
    [1e9, 2e9, 1001, 0.88, 131.909, 0.131909],
    [1e9, 2e9, 401, 0.88, 52.763, 0.131909],
    [1e9, 2e9, 201, 0.66, 19.786, 0.098932],
    [1e9, 1.2e9, 401, 0.88, 263.817, 0.659545],
  ])('gives range and resolution as published: %d to %d Hz in %d points, velocity factor %d', (...row) => {
    const [startHz, stopHz, points, velocityFactor, rangeM, binM] = row;
    const frequencyHz = evenHz(startHz, stopHz, points);
    const run = losslessRun(frequencyHz, [{ lengthM: 10, velocityMPerS: velocityFactor * SPEED_OF_LIGHT }]);
    const sweep = sweepThrough([{ cable: FOAM, lengthM: 10 }], OPEN, frequencyHz, { noise: 1e-3 });
    const reach = reachOf({ sweep, run, window: HANN });
    expect(reach.unambiguousM).toBeCloseTo(rangeM, 2);
    expect(reach.resolutionM / binM).toBeCloseTo(2, 2);
  });

  it('uses up the delay of unlike sections one after another', () => {
    const frequencyHz = evenHz(1e9, 2e9, 1001);
    const run = losslessRun(frequencyHz, [
      { lengthM: 10, velocityMPerS: 0.66 * SPEED_OF_LIGHT },
      { lengthM: 10, velocityMPerS: 0.88 * SPEED_OF_LIGHT },
    ]);
    const sweep = sweepThrough([{ cable: FOAM, lengthM: 10 }], OPEN, frequencyHz, { noise: 1e-3 });
    // 1 µs there and back: 10 m at 0.66 take 101.08 ns of it.
    const left = (0.5e-6 - 10 / (0.66 * SPEED_OF_LIGHT)) * 0.88 * SPEED_OF_LIGHT;
    expect(reachOf({ sweep, run, window: HANN }).unambiguousM).toBeCloseTo(10 + left, 6);
  });

  it('gives the weakest echo at the end as an echo that is indeed just seen there', () => {
    // 30 m of a lossless line: noise −60 dB over 1001 points with a Hann window (1.5 bins of noise) is
    // −60 − 10·log10(1001/1.5) = −88.2 dB in the trace; 12 dB above it is −76.2 dB.
    const frequencyHz = evenHz(1e9, 2e9, 1001);
    const run = losslessRun(frequencyHz, [{ lengthM: 30, velocityMPerS: 0.89 * SPEED_OF_LIGHT }]);
    const sweep = sweepThrough([{ cable: FOAM, lengthM: 30 }], MATCHED, frequencyHz, { noise: 1e-3 });
    expect(reachOf({ sweep, run, window: HANN }).weakestReturnLossDb).toBeCloseTo(76.2, -0.5);
  });

  it('sees less at the end of a lossier and of a noisier line', () => {
    const frequencyHz = evenHz(2e6, 2.4e9, 1200);
    const good = reachOn(FOAM, 20, frequencyHz).weakestReturnLossDb;
    expect(reachOn(SOLID, 20, frequencyHz).weakestReturnLossDb).toBeLessThan(good - 5);
    expect(reachOn(FOAM, 20, frequencyHz, 1e-2).weakestReturnLossDb).toBeLessThan(good - 17);
  });

  it.each([
    ['harmonic from the first step', evenHz(2e6, 2.7e9, 1350), 45, 'measured'],
    ['from a fraction of a step', evenHz(3e5, 3e9, 1601), 45, 'measured'],
    ['from the second step, line at a third of the range', evenHz(4e6, 2e9, 999), 20, 'measured'],
    ['from the second step, line over most of the range', evenHz(4e6, 2e9, 999), 45, 'modelled'],
    ['harmonic but far above 0', evenHz(700e6, 1000e6, 301), 45, 'modelled'],
    ['narrow', evenHz(1710e6, 2170e6, 461), 45, 'modelled'],
    ['low start, line longer than the range', evenHz(2e6, 2.7e9, 1350), 80, 'modelled'],
    ['a band so narrow that the line is one cell', evenHz(1e6, 2e6, 201), 10, 'no'],
  ])('says where ohms come from: %s', (_, frequencyHz, lengthM, wanted) => {
    expect(reachOn(FOAM, lengthM, frequencyHz).impedanceProfile).toBe(wanted);
  });

  it('says it for an uneven sweep too', () => {
    const log = Float64Array.from({ length: 1200 }, (_, k) => 1e6 * 1.00577 ** k);
    expect(reachOn(FOAM, 10, log).impedanceProfile).toBe('measured');
    expect(
      reachOn(
        FOAM,
        10,
        log.map((f) => f + 200e6),
      ).impedanceProfile,
    ).toBe('modelled');
  });
});

describe('noisePerPoint', () => {
  it.each([1e-2, 1e-3, 1e-4])('finds noise of %d beside the echoes of a line', (noise) => {
    const frequencyHz = evenHz(2e6, 2.7e9, 1350);
    const sections = [{ cable: FOAM, lengthM: 20 }];
    const run = runOfLine(lineOf(sections), frequencyHz);
    const sweep = sweepThrough(sections, SHORT, frequencyHz, { noise });
    const reach = reachOf({ sweep, run, window: HANN });
    // 1 dB: the median of some 600 independent cells scatters by 0.25 dB, ghosts add a little.
    expect(Math.abs(20 * Math.log10(noisePerPoint(sweep, run, reach) / noise))).toBeLessThan(1);
  });
});
