import { describe, expect, it } from 'vitest';
import { CABLE_FIGURES } from './cable-figures.ts';
import { coaxMedium } from './coax-medium.ts';
import { NO_CONNECTOR } from './connector.ts';
import { seededDraws } from './draws.ts';
import { chainToPort, reflectionAgainst } from './ladder.ts';
import { drawSlabs, RIPPLE_BAND_HZ, type RippleMeasure } from './ripple.ts';
import { layRun, type TrueRun } from './run.ts';

/** Structural return loss of a bare cable by the whole chain, against the cable's own impedance at both ends. */
function structuralReturnLossDb(seed: number, returnLossDb: number, measure: RippleMeasure): number {
  const figures = CABLE_FIGURES['foam-half'];
  const run: TrueRun = {
    sections: [
      { cable: 'foam-half', label: 'run', figures, lengthM: 40, describedLengthM: 40, inline: false },
    ],
    joints: [NO_CONNECTOR, NO_CONNECTOR],
    faults: [],
    stretches: [],
    temperatureC: 20,
    end: { kind: 'open', fringeF: 0 },
  };
  const { elements } = layRun(run, RIPPLE_BAND_HZ, { returnLossDb, measure }, seededDraws('ripple', seed));
  const medium = coaxMedium(figures, 20, RIPPLE_BAND_HZ);
  const impedance = { re: medium.impedanceRe, im: medium.impedanceIm };
  const one = { re: new Float64Array(RIPPLE_BAND_HZ.length).fill(1), im: new Float64Array(521) };
  const port = chainToPort(elements, { voltage: impedance, current: one }, RIPPLE_BAND_HZ);
  const gamma = reflectionAgainst(port, impedance);
  const power = gamma.re.map((re, k) => re * re + gamma.im[k]! ** 2);
  const figure = measure === 'worst' ? Math.max(...power) : power.reduce((a, b) => a + b, 0) / power.length;
  return -10 * Math.log10(figure);
}

describe('rippleScale', () => {
  it.each([35, 40, 45])(
    'gives a cable the promised %d dB of structural return loss, by the whole chain',
    (wanted) => {
      // The scale is first order in steps below 1 %: the whole chain may differ by a few tenths of a dB.
      for (let seed = 1; seed <= 4; seed++) {
        expect(Math.abs(structuralReturnLossDb(seed, wanted, 'worst') - wanted)).toBeLessThan(0.3);
        expect(Math.abs(structuralReturnLossDb(seed, wanted, 'rms') - wanted)).toBeLessThan(0.3);
      }
    },
  );
});

describe('drawSlabs', () => {
  it('cuts a length into slabs of 5–25 cm (the last up to 30) that sum to it', () => {
    const slabs = drawSlabs(46, seededDraws('slabs'));
    const total = slabs.reduce((sum, slab) => sum + slab.lengthM, 0);
    // Rounding of some three hundred sums.
    expect(total).toBeCloseTo(46, 9);
    for (const { lengthM } of slabs) {
      expect(lengthM).toBeGreaterThanOrEqual(0.05 - 1e-12);
      expect(lengthM).toBeLessThanOrEqual(0.3);
    }
  });

  it('ripples sparsely with heavy tails: few slabs hold most of the energy', () => {
    const energies = drawSlabs(2000, seededDraws('tails'))
      .map((slab) => slab.shape ** 2)
      .sort((a, b) => b - a);
    const total = energies.reduce((sum, e) => sum + e, 0);
    const top = energies.slice(0, Math.round(energies.length / 10)).reduce((sum, e) => sum + e, 0);
    expect(top / total).toBeGreaterThan(0.6);
  });
});
