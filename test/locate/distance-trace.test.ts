import { describe, expect, it } from 'vitest';
import { SPEED_OF_LIGHT } from '../../src/line/constants.ts';
import { losslessRun } from '../../src/line/medium-run.ts';
import {
  type DistanceTrace,
  planApparentTrace,
  planCorrectedTrace,
} from '../../src/locate/distance-trace.ts';
import type { WindowSpec } from '../../src/numerics/window.ts';
import {
  cable,
  evenHz,
  FOAM,
  lineOf,
  MATCHED,
  OPEN,
  runOfLine,
  SOLID,
  sweepThrough,
  THIN,
} from './drawn-line.ts';

const HANN: WindowSpec = { kind: 'hann' };

function sizes({ value }: DistanceTrace): Float64Array {
  return value.re.map((re, j) => Math.hypot(re, value.im[j]!));
}

function highest(trace: DistanceTrace): { readonly distanceM: number; readonly level: number } {
  const levels = sizes(trace);
  const level = levels.reduce((most, v) => Math.max(most, v), 0);
  return { distanceM: trace.distanceM[levels.indexOf(level)]!, level };
}

/** A short at the end of one cable, and the plan's options over it. */
function shorted(of: typeof FOAM, lengthM: number, frequencyHz: Float64Array) {
  const line = lineOf([{ cable: of, lengthM }]);
  const sweep = sweepThrough([{ cable: of, lengthM }], { type: 'short', parameters: [0] }, frequencyHz);
  const options = {
    frequencyHz,
    run: runOfLine(line, frequencyHz),
    window: HANN,
    fromM: 0,
    toM: 1.2 * lengthM,
  };
  return { sweep, options };
}

describe('planApparentTrace', () => {
  it.each(['rectangular', 'hann', 'hamming', 'blackman', 'blackman-harris'] as const)(
    'reads 0 dB for a full reflection at its distance, whatever the window: %s',
    (kind) => {
      const frequencyHz = evenHz(1e9, 2e9, 401);
      const velocityMPerS = 0.88 * SPEED_OF_LIGHT;
      const run = losslessRun(frequencyHz, [{ lengthM: 20, velocityMPerS }]);
      const angle = frequencyHz.map((f) => (-4 * Math.PI * f * 12.3) / velocityMPerS);
      const plan = planApparentTrace({
        frequencyHz,
        run,
        window: { kind },
        fromM: 0,
        toM: 24.6,
        points: 2001,
      });
      const found = highest(plan.trace({ re: angle.map(Math.cos), im: angle.map(Math.sin) }));
      expect(found.distanceM).toBeCloseTo(12.3, 9);
      expect(found.level).toBeCloseTo(1, 9);
    },
  );

  it.each([
    ['rectangular', 0.159],
    ['hann', 0.264],
    ['hamming', 0.239],
    ['blackman', 0.303],
    ['blackman-harris', 0.352],
  ] as const)(
    'shows an echo as wide as published, 1 GHz and velocity factor 0.88: %s %d m',
    (kind, widthM) => {
      // @source references.md section 6, 6 dB width.
      const frequencyHz = evenHz(1e9, 2e9, 1001);
      const velocityMPerS = 0.88 * SPEED_OF_LIGHT;
      const run = losslessRun(frequencyHz, [{ lengthM: 20, velocityMPerS }]);
      const angle = frequencyHz.map((f) => (-4 * Math.PI * f * 10) / velocityMPerS);
      const plan = planApparentTrace({
        frequencyHz,
        run,
        window: { kind },
        fromM: 9.5,
        toM: 10.5,
        points: 10_001,
      });
      const levels = sizes(plan.trace({ re: angle.map(Math.cos), im: angle.map(Math.sin) }));
      const wide = levels.reduce((count, level) => count + (level >= 0.5 ? 1 : 0), 0) * 1e-4;
      // Half a digit of the table, and the band of n cells is 0.1 % wider than that of n − 1 steps.
      expect(Math.abs(wide - widthM)).toBeLessThan(0.001);
    },
  );

  it('reads the loss of a line twice at its end: 4.2 dB for 30 m of 7 dB/100 m', () => {
    // @source references.md section 5.3. A loss that does not depend on frequency: a narrow band.
    const frequencyHz = evenHz(0.999e9, 1.001e9, 51);
    const lossy = cable({ z0Ohm: 50, velocityFactor: 0.88, k1: 0, k2: 0.007 });
    const { sweep, options } = shorted(lossy, 30, frequencyHz);
    const plan = planApparentTrace({ ...options, toM: 60, points: 3001 });
    expect(-20 * Math.log10(highest(plan.trace(sweep.gamma)).level)).toBeCloseTo(4.2, 1);
  });

  it('folds what lies beyond the unambiguous distance: 150 m shows at 18.091 m', () => {
    // @source references.md section 6: span 1 GHz, 1001 points, velocity factor 0.88.
    const frequencyHz = evenHz(1e9, 2e9, 1001);
    const velocityMPerS = 0.88 * SPEED_OF_LIGHT;
    const run = losslessRun(frequencyHz, [{ lengthM: 200, velocityMPerS }]);
    const angle = frequencyHz.map((f) => (-4 * Math.PI * f * 150) / velocityMPerS);
    const plan = planApparentTrace({ frequencyHz, run, window: HANN, fromM: 10, toM: 30, points: 20_001 });
    expect(highest(plan.trace({ re: angle.map(Math.cos), im: angle.map(Math.sin) })).distanceM).toBeCloseTo(
      18.091,
      3,
    );
  });

  it('refuses fewer than two distances, and distances that do not rise', () => {
    const { options } = shorted(FOAM, 10, evenHz(1e6, 1e9, 101));
    expect(() => planApparentTrace({ ...options, points: 1 })).toThrow(RangeError);
    expect(() => planApparentTrace({ ...options, fromM: 5, toM: 5, points: 10 })).toThrow(RangeError);
    expect(() => planApparentTrace({ ...options, toM: Number.POSITIVE_INFINITY, points: 10 })).toThrow(
      RangeError,
    );
  });

  it('refuses a sweep of another length than planned', () => {
    const { options } = shorted(FOAM, 10, evenHz(1e6, 1e9, 101));
    const plan = planApparentTrace({ ...options, points: 10 });
    expect(() => plan.trace({ re: new Float64Array(100), im: new Float64Array(100) })).toThrow(RangeError);
  });
});

describe('planCorrectedTrace', () => {
  it.each([
    ['low loss', FOAM, 40],
    ['lossy', SOLID, 30],
    ['the lossiest cable', THIN, 12],
  ])('reads 0 dB for the short at the end, at its true distance: %s', (_, of, lengthM) => {
    const { sweep, options } = shorted(of, lengthM, evenHz(2e6, 2.4e9, 1200));
    const found = highest(planCorrectedTrace({ ...options, points: 6001 }).trace(sweep.gamma));
    // Half a step of the distance grid.
    expect(Math.abs(found.distanceM - lengthM)).toBeLessThanOrEqual(0.1e-3 * lengthM + 1e-9);
    expect(20 * Math.log10(found.level)).toBeCloseTo(0, 1);
  });

  it('agrees with the direct sum to −80 dB of its highest value in the lossiest cable', () => {
    const { sweep, options } = shorted(THIN, 15, evenHz(2e6, 2.7e9, 1350));
    const fast = planCorrectedTrace({ ...options, points: 2048 }).trace(sweep.gamma);
    const exact = planCorrectedTrace({ ...options, points: 2048, method: 'exact' }).trace(sweep.gamma);
    const most = highest(exact).level;
    exact.value.re.forEach((re, j) => {
      const away = Math.hypot(re - fast.value.re[j]!, exact.value.im[j]! - fast.value.im[j]!);
      expect(away / most).toBeLessThan(1e-4);
    });
  });

  it('agrees with the direct sum over a line of unlike sections, and over an uneven sweep', () => {
    const sections = [
      { cable: THIN, lengthM: 3 },
      { cable: FOAM, lengthM: 30 },
      { cable: SOLID, lengthM: 5 },
    ];
    const log = Float64Array.from({ length: 900 }, (_, k) => 2e6 * 1.0075 ** k);
    for (const frequencyHz of [evenHz(2e6, 2.4e9, 1200), log]) {
      const sweep = sweepThrough(sections, OPEN, frequencyHz);
      const run = runOfLine(lineOf(sections), frequencyHz);
      const options = { frequencyHz, run, window: HANN, fromM: 0, toM: 42, points: 1500 };
      const fast = planCorrectedTrace(options).trace(sweep.gamma);
      const exact = planCorrectedTrace({ ...options, method: 'exact' }).trace(sweep.gamma);
      const most = highest(exact).level;
      exact.value.re.forEach((re, j) => {
        expect(
          Math.hypot(re - fast.value.re[j]!, exact.value.im[j]! - fast.value.im[j]!) / most,
        ).toBeLessThan(1e-4);
      });
    }
  });

  it('is the least-squares size of a lone reflector, by the definition', () => {
    const frequencyHz = evenHz(2e6, 1e9, 60);
    const line = lineOf([{ cable: SOLID, lengthM: 20 }]);
    const run = runOfLine(line, frequencyHz);
    const { gamma } = sweepThrough([{ cable: SOLID, lengthM: 20 }], OPEN, frequencyHz, { noise: 0.1 });
    const options = {
      frequencyHz,
      run,
      window: { kind: 'rectangular' } as const,
      fromM: 0,
      toM: 22,
      points: 23,
    };
    const { value } = planCorrectedTrace(options).trace(gamma);
    for (const d of [0, 7, 20]) {
      let top = 0;
      let bottom = 0;
      for (let k = 0; k < 60; k++) {
        const [a, b] = [run.alpha[0]![k]! * d, run.beta[0]![k]! * d];
        const size = Math.exp(-2 * a);
        // Real part of Γ·conj(template)
        top += size * (gamma.re[k]! * Math.cos(2 * b) - gamma.im[k]! * Math.sin(2 * b));
        bottom += size * size;
      }
      expect(value.re[d]).toBeCloseTo(top / bottom, 6);
    }
  });

  it('keeps echo and level on uneven and repeated frequencies', () => {
    const even = evenHz(2e6, 2.4e9, 1200);
    const grids = {
      uneven: even.map((f, k) => f + 4e5 * Math.sin(k)),
      repeated: Float64Array.from([...even.subarray(0, 500), ...even.subarray(499)]),
      segments: Float64Array.from([...evenHz(2e6, 6e8, 500), ...evenHz(6.02e8, 2.4e9, 900)]),
    };
    for (const frequencyHz of Object.values(grids)) {
      const { sweep, options } = shorted(FOAM, 30, frequencyHz);
      const found = highest(planCorrectedTrace({ ...options, points: 3601 }).trace(sweep.gamma));
      expect(found.distanceM).toBeCloseTo(30, 2);
      expect(20 * Math.log10(found.level)).toBeCloseTo(0, 1);
    }
  });

  it('shows no amplified noise where the line is opaque', () => {
    // 60 m of thin cable take 150 dB there and back at 100 MHz and 540 dB at 1 GHz.
    const frequencyHz = evenHz(1e8, 1e9, 901);
    const sections = [{ cable: THIN, lengthM: 60 }];
    const { gamma } = sweepThrough(sections, MATCHED, frequencyHz, { noise: 1e-3 });
    const run = runOfLine(lineOf(sections), frequencyHz);
    const options = { frequencyHz, run, window: HANN, fromM: 0, toM: 60, points: 2000 };
    const levels = sizes(planCorrectedTrace(options).trace(gamma));
    expect(levels.every(Number.isFinite)).toBe(true);
    expect(levels.reduce((most, v) => Math.max(most, v), 0)).toBeLessThan(1);
  });
});
