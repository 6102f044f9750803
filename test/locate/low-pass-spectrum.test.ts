import { describe, expect, it } from 'vitest';
import { coaxMedium, portMedium } from '../../src/line/medium.ts';
import {
  againstMedium,
  lowPassNodes,
  planLowPassSpectrum,
  reachesZero,
} from '../../src/locate/low-pass-spectrum.ts';
import { evenHz, FOAM, lineOf, OPEN, runOfLine, SOLID, sweepThrough } from './drawn-line.ts';

const LINE = lineOf([{ cable: FOAM, lengthM: 40 }]);

describe('lowPassNodes', () => {
  it.each([
    ['harmonic', evenHz(2e6, 1e9, 500)],
    ['from a fraction of a step', evenHz(3e5, 1e9, 501)],
    ['from the fourth step', evenHz(8e6, 1e9, 497)],
    ['logarithmic', Float64Array.from({ length: 500 }, (_, k) => 1e6 * 1.0139 ** k)],
  ])('stand for every frequency once, from 0 to the top: %s', (_, frequencyHz) => {
    const nodes = lowPassNodes(frequencyHz, runOfLine(LINE, frequencyHz), Number.POSITIVE_INFINITY);
    expect(nodes.frequencyHz[0]).toBe(0);
    // Integral of f over what the nodes stand for: top²/2, cells at both ends are half a step of doubt.
    let sum = 0;
    let moment = 0;
    nodes.frequencyHz.forEach((hz, k) => {
      const width = nodes.share[k]! * (nodes.toHz[k]! - nodes.fromHz[k]!);
      sum += width;
      moment += hz * width;
    });
    const topHz = frequencyHz[frequencyHz.length - 1]!;
    expect(sum / topHz).toBeCloseTo(1, 1.5);
    expect(moment / (topHz * topHz)).toBeCloseTo(0.5, 1.5);
  });

  it('use every measured point of a tight sweep, and leave some out where there are points to spare', () => {
    const used = (lengthM: number) => {
      const frequencyHz = evenHz(2e6, 1e9, 500);
      const run = runOfLine(lineOf([{ cable: FOAM, lengthM }]), frequencyHz);
      return lowPassNodes(frequencyHz, run, 1e9).measured.filter((k) => k >= 0).length;
    };
    // The lowest point has no share: the finer row has all of it.
    expect(used(40)).toBe(499);
    expect(used(5)).toBeLessThan(130);
  });

  it('end at the top that is asked for', () => {
    const frequencyHz = evenHz(2e6, 1e9, 500);
    const nodes = lowPassNodes(frequencyHz, runOfLine(LINE, frequencyHz), 0.5e9);
    expect(nodes.frequencyHz.at(-1)).toBe(0.5e9);
  });
});

describe('planLowPassSpectrum', () => {
  it('uses measured points as they are and fills in the rest as a finer sweep would have them', () => {
    const frequencyHz = evenHz(3e5, 1e9, 501);
    const run = runOfLine(LINE, frequencyHz);
    const nodes = lowPassNodes(frequencyHz, run, 1e9);
    const above = nodes.frequencyHz.subarray(1);
    const fine = sweepThrough([{ cable: FOAM, lengthM: 40 }], OPEN, above);
    const fineRun = runOfLine(LINE, above);
    const withZero = (values: Float64Array) => Float64Array.of(0, ...values);
    const nodesRun = { ...fineRun, alpha: fineRun.alpha.map(withZero), beta: fineRun.beta.map(withZero) };
    const medium = (at: Float64Array) => coaxMedium(FOAM, at, { temperatureC: 20 });
    const { gamma } = sweepThrough([{ cable: FOAM, lengthM: 40 }], OPEN, frequencyHz);
    const own = againstMedium(gamma, 50, medium(frequencyHz));
    const wanted = againstMedium(fine.gamma, 50, medium(above));
    const found = planLowPassSpectrum(frequencyHz, run, nodes, nodesRun).spectrum(own);
    expect([found.re[0]! - 1, found.im[0]].map((v) => Math.abs(v!) < 0.01)).toEqual([true, true]);
    nodes.measured.forEach((k, i) => {
      if (i === 0) return;
      // The imaginary residue of a sweep without any is next to nothing.
      if (k >= 0) expect(Math.hypot(found.re[i]! - own.re[k]!, found.im[i]! - own.im[k]!)).toBeLessThan(1e-3);
      else
        expect(Math.hypot(found.re[i]! - wanted.re[i - 1]!, found.im[i]! - wanted.im[i - 1]!)).toBeLessThan(
          0.01,
        );
    });
  });
});

describe('planLowPassSpectrum on an instrument with a residue', () => {
  it('takes off what is imaginary at the low end, which no line can have there', () => {
    const frequencyHz = evenHz(2e6, 1e9, 500);
    const run = runOfLine(LINE, frequencyHz);
    const nodes = lowPassNodes(frequencyHz, run, 1e9);
    const above = nodes.frequencyHz.subarray(1);
    const fineRun = runOfLine(LINE, above);
    const withZero = (values: Float64Array) => Float64Array.of(0, ...values);
    const nodesRun = { ...fineRun, alpha: fineRun.alpha.map(withZero), beta: fineRun.beta.map(withZero) };
    const plan = planLowPassSpectrum(frequencyHz, run, nodes, nodesRun);
    const { gamma } = sweepThrough([{ cable: FOAM, lengthM: 40 }], OPEN, frequencyHz);
    const clean = plan.spectrum(gamma);
    const bent = plan.spectrum({ re: gamma.re, im: gamma.im.map((v) => v + 0.01) });
    const change = nodes.measured.indexOf(10);
    expect(Math.abs(bent.im[change]! - clean.im[change]!)).toBeLessThan(0.004);
    expect(Math.abs(bent.re[0]! - clean.re[0]!)).toBeLessThan(0.01);
    expect(bent.im.at(-1)! - clean.im.at(-1)!).toBeCloseTo(0.01, 6);
    expect(plan.misfit({ re: gamma.re, im: gamma.im.map((v, k) => v + 0.1 * (k % 3)) })).toBeGreaterThan(
      10 * plan.misfit(gamma),
    );
  });
});

describe('againstMedium', () => {
  it('sees nothing in an endless line of the medium itself', () => {
    const frequencyHz = evenHz(1e6, 1e9, 50);
    const medium = coaxMedium(SOLID, frequencyHz, { temperatureC: 20 });
    // 50 km of lossy line do not return.
    const { gamma } = sweepThrough([{ cable: SOLID, lengthM: 50_000 }], OPEN, frequencyHz);
    const own = againstMedium(gamma, 50, medium);
    for (const k of frequencyHz.keys()) expect(Math.hypot(own.re[k]!, own.im[k]!)).toBeLessThan(1e-12);
  });

  it('changes nothing against the port itself, and turns 75 Ω from 50 Ω into 0 from 75 Ω', () => {
    const gamma = { re: Float64Array.of(0.2), im: Float64Array.of(0.1) };
    expect(againstMedium(gamma, 50, portMedium(50, 1))).toEqual(gamma);
    const real = againstMedium({ re: Float64Array.of(0.2), im: Float64Array.of(0) }, 50, portMedium(75, 1));
    expect(real.re[0]).toBeCloseTo(0, 15);
  });
});

describe('reachesZero', () => {
  it('asks for a start below about the inverse of the line’s own delay, and steps finer than it', () => {
    const reaches = (firstHz: number, stepHz: number, lengthM: number) => {
      const frequencyHz = evenHz(firstHz, firstHz + 500 * stepHz, 501);
      return reachesZero(frequencyHz, runOfLine(lineOf([{ cable: FOAM, lengthM }]), frequencyHz));
    };
    expect(reaches(2e6, 2e6, 50)).toBe(true);
    expect(reaches(2e6, 2e6, 60)).toBe(false);
    expect(reaches(6e6, 2e6, 15)).toBe(true);
    expect(reaches(6e6, 2e6, 50)).toBe(false);
    expect(reaches(700e6, 1e6, 5)).toBe(false);
    // A line of a few resolutions must be seen from still lower.
    expect(reaches(30e6, 2e6, 2)).toBe(true);
    expect(reaches(50e6, 2e6, 2)).toBe(false);
  });
});
