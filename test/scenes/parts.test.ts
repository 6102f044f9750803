import { describe, expect, it } from 'vitest';
import { drawConnector, worstReturnLossDb } from './connector.ts';
import { seededDraws } from './draws.ts';
import { apparentReturnLossDb, faultOfLevel, LUMPED_KINDS } from './fault.ts';
import { addNoise, addResidue, drawResidue, NO_RESIDUE, sumTerms } from './instrument.ts';
import { emptySpectrum, reflectionAtPort } from './ladder.ts';
import { evenGrid } from './sweep-plan.ts';
import { drawEnd, terminate } from './termination.ts';

const WIDE = evenGrid('wide', 1350);

describe('seededDraws', () => {
  it('repeats for the same words, and only for them', () => {
    const take = (...words: (string | number)[]) => {
      const draws = seededDraws(...words);
      return Array.from({ length: 5 }, () => draws.uniform(0, 1));
    };
    expect(take('a', 1)).toEqual(take('a', 1));
    expect(take('a', 1)).not.toEqual(take('a', 2));
    expect(take('a', 12)).not.toEqual(take('a1', 2));
  });

  it('spreads evenly and normally', () => {
    const draws = seededDraws('spread');
    const n = 20_000;
    const even = Array.from({ length: n }, () => draws.uniform(0, 1));
    const normal = Array.from({ length: n }, () => draws.normal());
    const mean = (values: number[]) => values.reduce((a, b) => a + b, 0) / n;
    // Four standard errors of each mean: 0.289/√n, 1/√n, √2/√n.
    expect(Math.abs(mean(even) - 0.5)).toBeLessThan(0.0082);
    expect(Math.abs(mean(normal))).toBeLessThan(0.029);
    expect(Math.abs(mean(normal.map((v) => v * v)) - 1)).toBeLessThan(0.041);
  });
});

describe('drawConnector', () => {
  it('meets its worst return loss over the band', () => {
    for (const wanted of [28, 36, 45]) {
      const connector = drawConnector(seededDraws('connector', wanted), wanted, WIDE);
      // The draw looks at 64 points of the band.
      expect(Math.abs(worstReturnLossDb(connector, WIDE) - wanted)).toBeLessThan(0.1);
    }
  });
});

describe('faultOfLevel', () => {
  it.each(LUMPED_KINDS)('finds the size of %s that looks as large as asked', (kind) => {
    const lossNp = new Float64Array(WIDE.length).fill(0.1);
    for (const wanted of [14, 26, 40]) {
      const fault = faultOfLevel(kind, wanted, WIDE, lossNp);
      // Values are rounded to four digits.
      expect(apparentReturnLossDb(fault, WIDE, lossNp)).toBeCloseTo(wanted, 1);
    }
  });

  it('gives 10 Ω for 20.828 dB without loss', () => {
    // @source references.md section 5.2.
    expect(faultOfLevel('series-resistance', 20.828, WIDE, new Float64Array(1350)).value).toBeCloseTo(10, 2);
  });
});

describe('terminate', () => {
  it('gives ends that are passive, and an antenna that is matched in a band and reflects outside', () => {
    for (let seed = 0; seed < 30; seed++) {
      for (const kind of ['open', 'short', 'load', 'antenna'] as const) {
        const end = terminate(drawEnd(kind, seededDraws(kind, seed), WIDE), WIDE);
        const gamma = reflectionAtPort(end, 50);
        const sizes = gamma.re.map((re, k) => Math.hypot(re, gamma.im[k]!));
        expect(Math.max(...sizes)).toBeLessThanOrEqual(1 + 1e-12);
        if (kind === 'antenna') {
          expect(Math.min(...sizes)).toBeLessThan(0.32);
          expect(Math.max(...sizes)).toBeGreaterThan(0.9);
        }
        if (kind === 'open') expect(gamma.re[0]).toBeCloseTo(1, 3);
        if (kind === 'short') expect(gamma.re[0]).toBeCloseTo(-1, 3);
      }
    }
  });

  it('gives loads whose RMS return loss lies between 14 and 37 dB', () => {
    // Drawn within 15–35 dB; the share of L or C is set for a band from zero and shifts it a little.
    for (let seed = 0; seed < 60; seed++) {
      const gamma = reflectionAtPort(terminate(drawEnd('load', seededDraws('load', seed), WIDE), WIDE), 50);
      const power = gamma.re.reduce((sum, re, k) => sum + re * re + gamma.im[k]! ** 2, 0) / WIDE.length;
      expect(-10 * Math.log10(power)).toBeGreaterThan(14);
      expect(-10 * Math.log10(power)).toBeLessThan(37);
    }
  });
});

describe('addResidue', () => {
  it('adds directivity of −40 to −46 dB RMS to a matched port, delayed by at most 1.2 ns', () => {
    for (let seed = 0; seed < 20; seed++) {
      const residue = drawResidue(seededDraws('residue', seed));
      const measured = addResidue(emptySpectrum(WIDE.length), residue, WIDE);
      const power = measured.re.reduce((sum, re, k) => sum + re * re + measured.im[k]! ** 2, 0) / WIDE.length;
      // Terms closer in delay than 1/B beat, which moves the RMS by up to 3 dB either way, more where they cancel.
      expect(10 * Math.log10(power)).toBeLessThan(-36);
      expect(10 * Math.log10(power)).toBeGreaterThan(-54);
      for (const { delayS } of residue.directivity) expect(delayS).toBeLessThanOrEqual(1.2e-9);
    }
  });

  it('moves a full reflection by the printed amounts: 40 dB directivity on 20 dB reads 19.172–20.915', () => {
    // @source references.md section 5.3, directivity error only.
    const directivity = [{ size: 0.01, phase: 0, delayS: 0 }];
    const one = Float64Array.of(1e9);
    const read = (sign: number) => {
      const gamma = { re: Float64Array.of(0.1 * sign), im: Float64Array.of(0) };
      const measured = addResidue(gamma, { ...NO_RESIDUE, directivity }, one);
      return -20 * Math.log10(Math.hypot(measured.re[0]!, measured.im[0]!));
    };
    expect(read(1)).toBeCloseTo(19.172, 3);
    expect(read(-1)).toBeCloseTo(20.915, 3);
  });

  it('puts source match into the loop: Γ/(1 − M·Γ)', () => {
    const sourceMatch = [{ size: 0.1, phase: 0, delayS: 0 }];
    const gamma = { re: Float64Array.of(0.5), im: Float64Array.of(0) };
    const measured = addResidue(gamma, { ...NO_RESIDUE, sourceMatch }, Float64Array.of(1e9));
    expect(measured.re[0]).toBeCloseTo(0.5 / 0.95, 12);
  });

  it('turns each term by its delay', () => {
    const sum = sumTerms([{ size: 2, phase: 0, delayS: 0.25e-9 }], Float64Array.of(1e9));
    expect(sum.re[0]).toBeCloseTo(0, 12);
    expect(sum.im[0]).toBeCloseTo(-2, 12);
  });
});

describe('addNoise', () => {
  it('adds noise of the given complex RMS', () => {
    const gamma = emptySpectrum(20_000);
    addNoise(gamma, -60, seededDraws('noise'));
    const power = gamma.re.reduce((sum, re, k) => sum + re * re + gamma.im[k]! ** 2, 0) / 20_000;
    // Four standard errors of the power: 4/√20000, 0.12 dB.
    expect(Math.abs(10 * Math.log10(power) + 60)).toBeLessThan(0.13);
  });
});
