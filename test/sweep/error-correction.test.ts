import { describe, expect, it } from 'vitest';
import { createRandom } from '../../src/numerics/random.ts';
import { correctSweep, type StandardDefinitions, type Standards } from '../../src/sweep/error-correction.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';
import { drawnSweep, evenHz, sweepFrom } from './drawn-sweep.ts';

const GRID = evenHz(1e6, 2e9, 201);
const LINE = drawnSweep(GRID, [
  { delayS: 5e-9, gamma: 0.1 },
  { delayS: 60e-9, gamma: 0.7 },
]);

/** Ideal reflections of the standards at the plane, with their one-way delays and the load's resistance. */
function truthOf(frequencyHz: Float64Array, definitions: StandardDefinitions, portOhm = 50): Standards {
  const loadOhm = definitions.loadOhm ?? portOhm;
  const of = (gamma: number, delayS = 0) => {
    const { gamma: values } = drawnSweep(frequencyHz, [{ delayS: 2 * delayS, gamma }]);
    return sweepFrom(frequencyHz, values, portOhm);
  };
  return {
    open: of(1, definitions.openDelayS),
    short: of(-1, definitions.shortDelayS),
    load: of((loadOhm - portOhm) / (loadOhm + portOhm), definitions.loadDelayS),
  };
}

/** What an instrument with directivity, source match and tracking reads: M = e00 + t·Γ/(1 − e11·Γ). */
function raw(sweep: Sweep, seed: number): Sweep {
  const random = createRandom(seed);
  const draw = (size: number) => ({
    size: size * (1 + 0.3 * random.normal()),
    delayS: 1e-9 * random.uniform(),
  });
  const directivity = draw(0.1);
  const match = draw(0.15);
  const tracking = draw(0.8);
  const gamma = {
    re: new Float64Array(sweep.frequencyHz.length),
    im: new Float64Array(sweep.frequencyHz.length),
  };
  sweep.frequencyHz.forEach((f, k) => {
    const at = ({ size, delayS }: { size: number; delayS: number }) =>
      [size * Math.cos(2 * Math.PI * f * delayS), -size * Math.sin(2 * Math.PI * f * delayS)] as const;
    const [gRe, gIm] = [sweep.gamma.re[k]!, sweep.gamma.im[k]!];
    const [dRe, dIm] = at(directivity);
    const [mRe, mIm] = at(match);
    const [tRe, tIm] = at(tracking);
    const bottomRe = 1 - (mRe * gRe - mIm * gIm);
    const bottomIm = -(mRe * gIm + mIm * gRe);
    const topRe = tRe * gRe - tIm * gIm;
    const topIm = tRe * gIm + tIm * gRe;
    const size = bottomRe ** 2 + bottomIm ** 2;
    gamma.re[k] = dRe + (topRe * bottomRe + topIm * bottomIm) / size;
    gamma.im[k] = dIm + (topIm * bottomRe - topRe * bottomIm) / size;
  });
  return { ...sweep, gamma };
}

function rawStandards(standards: Standards, seed: number): Standards {
  return {
    open: raw(standards.open, seed),
    short: raw(standards.short, seed),
    load: raw(standards.load, seed),
  };
}

function worstDifference(a: Sweep, b: Sweep): number {
  return a.gamma.re.reduce(
    (worst, re, k) => Math.max(worst, Math.hypot(re - b.gamma.re[k]!, a.gamma.im[k]! - b.gamma.im[k]!)),
    0,
  );
}

function corrected(...of: Parameters<typeof correctSweep>): Sweep {
  const outcome = correctSweep(...of);
  if (!outcome.ok) throw new Error(outcome.problems.map((p) => p.what).join('; '));
  return outcome.value;
}

function problemOf(...of: Parameters<typeof correctSweep>) {
  const outcome = correctSweep(...of);
  if (outcome.ok) throw new Error('it was corrected');
  return outcome.problems[0]!;
}

describe('correctSweep', () => {
  it('changes nothing where the standards read as they are', () => {
    expect(worstDifference(corrected(LINE, truthOf(GRID, {})), LINE)).toBeLessThan(1e-14);
  });

  it.each([1, 2, 3])('takes three error terms out to 1e-12 (instrument %d)', (seed) => {
    const result = corrected(raw(LINE, seed), rawStandards(truthOf(GRID, {}), seed));
    expect(worstDifference(result, LINE)).toBeLessThan(1e-12);
  });

  it('knows standards by their delays and the load by its resistance', () => {
    const definitions = { openDelayS: 25e-12, shortDelayS: 31e-12, loadDelayS: 12e-12, loadOhm: 52 };
    const standards = rawStandards(truthOf(GRID, definitions), 7);
    expect(worstDifference(corrected(raw(LINE, 7), standards, definitions), LINE)).toBeLessThan(1e-12);
    // Taken for ideal they leave an error of their delay: 4π·2 GHz·30 ps is 43°.
    expect(worstDifference(corrected(raw(LINE, 7), standards), LINE)).toBeGreaterThan(0.1);
  });

  it('counts the load from the reference of the sweep', () => {
    const line = sweepFrom(GRID, LINE.gamma, 75);
    const standards = rawStandards(truthOf(GRID, {}, 75), 4);
    expect(worstDifference(corrected(raw(line, 4), standards), line)).toBeLessThan(1e-12);
  });

  it('takes standards swept at more frequencies, and interpolates none', () => {
    const fine = evenHz(1e6, 2e9, 401);
    const standards = rawStandards(truthOf(fine, {}), 5);
    expect(worstDifference(corrected(raw(LINE, 5), standards), LINE)).toBeLessThan(1e-12);
    const coarse = rawStandards(truthOf(evenHz(1e6, 2e9, 101), {}), 5);
    expect(problemOf(raw(LINE, 5), coarse)).toMatchObject({
      code: 'standard-grid',
      what: expect.stringMatching(/open standard was swept 1 MHz to 2 GHz in 101 points/),
    });
  });

  it('keeps frequencies, reference, port and comments, and drops the transmission, aloud', () => {
    const two = { ...LINE, ports: 2, transmission: LINE.gamma, comments: ['north'] };
    const outcome = correctSweep(two, truthOf(GRID, {}));
    expect(outcome.ok && [outcome.value.transmission, outcome.value.comments]).toEqual([
      undefined,
      ['north'],
    ]);
    expect(outcome.ok && outcome.notices.map((n) => n.code)).toEqual(['correction-transmission']);
  });

  it('tells standards that read the same', () => {
    const { open, short, load } = rawStandards(truthOf(GRID, {}), 6);
    expect(problemOf(raw(LINE, 6), { open, short: open, load })).toMatchObject({
      code: 'standard-alike',
      what: expect.stringMatching(/the open and the short standard read the same at 1 MHz/),
    });
    expect(problemOf(raw(LINE, 6), { open: load, short, load }).code).toBe('standard-alike');
  });

  it('tells delays by which two standards would be the same', () => {
    // A short a quarter wave long is an open: 4π·f·τ = π at 1 GHz for 250 ps.
    const grid = Float64Array.of(0.5e9, 1e9);
    const line = drawnSweep(grid, [{ delayS: 1e-9, gamma: 0.3 }]);
    const standards = truthOf(grid, {});
    expect(problemOf(line, standards, { shortDelayS: 250e-12 })).toMatchObject({
      code: 'standard-definition',
      what: expect.stringContaining('at 1 GHz'),
    });
  });

  it('tells a standard relative to another reference, every one of them', () => {
    const outcome = correctSweep(LINE, truthOf(GRID, {}, 75));
    expect(!outcome.ok && outcome.problems.map((p) => p.code)).toEqual(Array(3).fill('standard-reference'));
  });

  it('tells a result without bound', () => {
    // Source match 0.5: M = Γ/(1 − Γ/2), so M = −2 asks for an endless Γ.
    const reading = (value: number) => sweepFrom(GRID, { re: GRID.map(() => value), im: GRID.map(() => 0) });
    const standards = { open: reading(2), short: reading(-2 / 3), load: reading(0) };
    expect(corrected(reading(2 / 3), standards).gamma.re[0]).toBeCloseTo(0.5, 12);
    expect(problemOf(reading(-2), standards)).toMatchObject({
      code: 'correction-unbounded',
      what: expect.stringContaining('at 1 MHz'),
    });
  });
});
