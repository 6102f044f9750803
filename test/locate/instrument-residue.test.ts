import { describe, expect, it } from 'vitest';
import {
  createResidueModel,
  RESIDUE_SIGMA,
  type ResidueFamily,
  type ResidueTerm,
  residueTerms,
} from '../../src/locate/instrument-residue.ts';
import { type ComplexArray, complexCopy, complexZeros } from '../../src/numerics/complex.ts';
import { createRandom } from '../../src/numerics/random.ts';
import { evenHz } from './drawn-line.ts';

const GRID = evenHz(600e6, 2700e6, 40);

/** Any reflection below 1. */
function drawnGamma(seed: number): ComplexArray {
  const random = createRandom(seed);
  const part = () => Float64Array.from(GRID, () => 1.3 * (random.uniform() - 0.5));
  return { re: part(), im: part() };
}

/** Terms of the model's own delays, each as large as 30 dB. */
function drawnTerms(seed: number): ResidueTerm[] {
  const random = createRandom(seed);
  return residueTerms(GRID).map((term) => ({
    ...term,
    re: 0.03 * random.normal(),
    im: 0.03 * random.normal(),
  }));
}

/** D + (1 + T)·Γ/(1 − M·Γ) at one frequency, in complex arithmetic written out. */
function reading(terms: readonly ResidueTerm[], frequencyHz: number, gRe: number, gIm: number) {
  const sum = (family: ResidueFamily): readonly [number, number] =>
    terms
      .filter((term) => term.family === family)
      .reduce<readonly [number, number]>(
        ([re, im], term) => {
          const angle = -2 * Math.PI * frequencyHz * term.delayS;
          const [c, s] = [Math.cos(angle), Math.sin(angle)];
          return [re + term.re * c - term.im * s, im + term.re * s + term.im * c];
        },
        [0, 0],
      );
  const [dRe, dIm] = sum('directivity');
  const [tRe, tIm] = sum('tracking');
  const [mRe, mIm] = sum('match');
  const top = [(1 + tRe) * gRe - tIm * gIm, (1 + tRe) * gIm + tIm * gRe] as const;
  const bottom = [1 - (mRe * gRe - mIm * gIm), -(mRe * gIm + mIm * gRe)] as const;
  const size = bottom[0] ** 2 + bottom[1] ** 2;
  return [
    dRe + (top[0] * bottom[0] + top[1] * bottom[1]) / size,
    dIm + (top[1] * bottom[0] - top[0] * bottom[1]) / size,
  ] as const;
}

describe('residueTerms', () => {
  it('stand at rest, some of each family, at short delays from 0 on', () => {
    const terms = residueTerms(GRID);
    for (const family of ['directivity', 'tracking', 'match'] as const) {
      const delays = terms.filter((term) => term.family === family).map((term) => term.delayS);
      expect(delays.length).toBeGreaterThanOrEqual(2);
      expect(delays[0]).toBe(0);
      expect(delays).toEqual([...delays].sort((a, b) => a - b));
      // Common practice: the residue of a test lead and an adaptor lies within 1.2 ns.
      expect(delays.at(-1)).toBeLessThanOrEqual(1.2e-9);
    }
    expect(terms.every((term) => term.re === 0 && term.im === 0)).toBe(true);
  });

  it('are no fewer in a wide sweep than in a narrow one', () => {
    expect(residueTerms(evenHz(2e6, 2700e6, 9)).length).toBeGreaterThanOrEqual(
      residueTerms(evenHz(824e6, 960e6, 9)).length,
    );
  });

  it('have a spread that stands for a correction made in the field', () => {
    // Each family together: references.md section 8 has residues of −40 dB, rough ones some dB more.
    const perFamily = residueTerms(GRID).length / 3;
    const levelDb = 20 * Math.log10(RESIDUE_SIGMA * Math.sqrt(2 * perFamily));
    expect(levelDb).toBeGreaterThan(-48);
    expect(levelDb).toBeLessThan(-30);
  });
});

describe('createResidueModel', () => {
  it('reads the line’s own reflection when all terms are at rest', () => {
    const gamma = drawnGamma(1);
    const read = complexCopy(gamma);
    createResidueModel(GRID).apply(residueTerms(GRID), read);
    expect(read).toEqual(gamma);
  });

  it('reads D + (1 + T)·Γ/(1 − M·Γ)', () => {
    const gamma = drawnGamma(2);
    const terms = drawnTerms(3);
    const read = complexCopy(gamma);
    createResidueModel(GRID).apply(terms, read);
    GRID.forEach((frequencyHz, i) => {
      const [re, im] = reading(terms, frequencyHz, gamma.re[i]!, gamma.im[i]!);
      expect(read.re[i]).toBeCloseTo(re, 13);
      expect(read.im[i]).toBeCloseTo(im, 13);
    });
  });

  it('sees a term that was changed in place', () => {
    const model = createResidueModel(GRID);
    const terms = drawnTerms(4);
    const gamma = drawnGamma(5);
    model.apply(terms, complexCopy(gamma));
    terms[0]!.re += 0.1;
    const read = complexCopy(gamma);
    model.apply(terms, read);
    expect(read.re[7]).toBeCloseTo(reading(terms, GRID[7]!, gamma.re[7]!, gamma.im[7]!)[0], 13);
  });

  it('carries a small change of the line to the change of the reading', () => {
    const model = createResidueModel(GRID);
    const gamma = drawnGamma(6);
    const terms = drawnTerms(7);
    const change = drawnGamma(8);
    model.apply(terms, complexCopy(gamma));
    const carried = complexCopy(change);
    model.carry(carried);
    const h = 1e-6;
    GRID.forEach((f, i) => {
      const up = reading(terms, f, gamma.re[i]! + h * change.re[i]!, gamma.im[i]! + h * change.im[i]!);
      const down = reading(terms, f, gamma.re[i]! - h * change.re[i]!, gamma.im[i]! - h * change.im[i]!);
      // Central differences: error of h² and of rounding 1e-16/h.
      expect(carried.re[i]).toBeCloseTo((up[0] - down[0]) / (2 * h), 8);
      expect(carried.im[i]).toBeCloseTo((up[1] - down[1]) / (2 * h), 8);
    });
  });

  it.each(['directivity', 'tracking', 'match'] as const)(
    'differentiates by both parts of a %s term',
    (of) => {
      const model = createResidueModel(GRID);
      const gamma = drawnGamma(9);
      const terms = drawnTerms(10);
      const term = terms.filter((t) => t.family === of)[1]!;
      model.apply(terms, complexCopy(gamma));
      const perRe = complexZeros(GRID.length);
      const perIm = complexZeros(GRID.length);
      model.derivatives(term, perRe, perIm);
      const h = 1e-6;
      for (const [part, derivative] of [
        ['re', perRe],
        ['im', perIm],
      ] as const) {
        const moved = (by: number) => terms.map((t) => (t === term ? { ...t, [part]: t[part] + by } : t));
        GRID.forEach((f, i) => {
          const up = reading(moved(h), f, gamma.re[i]!, gamma.im[i]!);
          const down = reading(moved(-h), f, gamma.re[i]!, gamma.im[i]!);
          expect(derivative.re[i]).toBeCloseTo((up[0] - down[0]) / (2 * h), 8);
          expect(derivative.im[i]).toBeCloseTo((up[1] - down[1]) / (2 * h), 8);
        });
      }
    },
  );
});
