import { describe, expect, it } from 'vitest';
import { createCascade, type Stage } from '../../src/line/cascade.ts';
import { strengthOf } from '../../src/line/discontinuity.ts';
import { coaxMedium } from '../../src/line/medium.ts';
import type { MediumRun } from '../../src/line/medium-run.ts';
import {
  type Discontinuity,
  nameSteps,
  reflectionOfSteps,
  shareBehind,
  strongSteps,
  withoutReReflections,
} from '../../src/locate/re-reflections.ts';
import { evenHz, FOAM, lineOf, OPEN, runOfLine, SOLID } from './drawn-line.ts';

const GRID = { fromM: -0.2, stepM: 0.01, points: 2100 };
const WIDTH_M = 0.1;

/** Reflection built up by smooth steps [distance, height]. */
function builtBy(steps: readonly (readonly [number, number])[]): Float64Array {
  return Float64Array.from({ length: GRID.points }, (_, j) => {
    const d = GRID.fromM + j * GRID.stepM;
    return steps.reduce((sum, [at, height]) => {
      const x = Math.max(-1, Math.min(1, (d - at) / (0.8 * WIDTH_M)));
      return sum + (height / 2) * (1 + Math.sin((Math.PI / 2) * x));
    }, 0);
  });
}

describe('strongSteps', () => {
  const search = { resolutionM: WIDTH_M, toM: 20, most: 10 };

  it('finds steps with their places and changes', () => {
    const found = strongSteps(
      builtBy([
        [5, 0.2],
        [8.004, -0.192],
        [12, 0.05],
      ]),
      GRID,
      search,
    );
    expect(found.map((s) => s.distanceM)).toEqual([5, 8.004, 12].map((d) => expect.closeTo(d, 3)));
    expect(found.map((s) => s.change)).toEqual([0.2, -0.192, 0.05].map((r) => expect.closeTo(r, 3)));
  });

  it('takes the strongest where fewer are asked for, in order of distance', () => {
    const built = builtBy([
      [3, 0.04],
      [5, 0.1],
      [8, -0.2],
    ]);
    expect(strongSteps(built, GRID, { ...search, most: 2 }).map((s) => s.distanceM)).toEqual([
      expect.closeTo(5, 3),
      expect.closeTo(8, 3),
    ]);
  });

  it('leaves small ones, the end and what lies behind a full reflection alone', () => {
    expect(
      strongSteps(
        builtBy([
          [5, 0.02],
          [20, 0.9],
        ]),
        GRID,
        search,
      ),
    ).toEqual([]);
    expect(
      strongSteps(
        builtBy([
          [5, 0.9],
          [8, 0.2],
        ]),
        GRID,
        search,
      ),
    ).toEqual([]);
    expect(strongSteps(new Float64Array(GRID.points), GRID, search)).toEqual([]);
  });
});

const FREQUENCIES = evenHz(2e6, 3e8, 150);
const STRETCH_M = 20;

/** Γ of an open run with something at 10 m and, where it is an impedance, its end at 12 m. */
function seenPast(of: typeof FOAM, what: 'section' | 'series' | 'shunt') {
  const medium = coaxMedium(of, FREQUENCIES, { temperatureC: 20 });
  const high = coaxMedium({ ...of, z0Ohm: 75 }, FREQUENCIES, { temperatureC: 20 });
  const stretch = (lengthM: number, through = medium): Stage => ({
    type: 'line',
    medium: through,
    lengthM,
    conductor: 0,
    dielectric: 0,
  });
  const lump =
    what === 'series' ? strengthOf('series-resistance', 25, 50) : strengthOf('shunt-leakage', 100, 50);
  const stages: Stage[] =
    what === 'section'
      ? [
          stretch(10),
          { type: 'step', before: medium, after: high, ratio: 1 },
          stretch(2, high),
          { type: 'step', before: high, after: medium, ratio: 1 },
          stretch(8),
        ]
      : [stretch(10), { ...lump, medium: LOSSLESS }, stretch(10)];
  const { re, im } = createCascade(FREQUENCIES).gamma(stages, OPEN);
  return { gamma: { re, im }, run: runOfLine(lineOf([{ cable: of, lengthM: STRETCH_M }]), FREQUENCIES) };
}

/** What a real lump is normalised to: the plain 50 Ω. */
const LOSSLESS = coaxMedium({ ...FOAM, k1: 0, k2: 0 }, FREQUENCIES, { temperatureC: 20 });

/** Largest difference from the first-order sum of echoes [distance, size]. */
function worstAgainst(
  found: { readonly re: Float64Array; readonly im: Float64Array },
  run: MediumRun,
  echoes: readonly (readonly [number, number])[],
): number {
  const wanted = reflectionOfSteps(
    run,
    echoes.map(([distanceM, change]) => ({ distanceM, change })),
  );
  return found.re.reduce(
    (worst, re, k) => Math.max(worst, Math.hypot(re - wanted.re[k]!, found.im[k]! - wanted.im[k]!)),
    0,
  );
}

const SECTION: readonly Discontinuity[] = [
  { distanceM: 10, change: 0.2, kind: 'impedance' },
  { distanceM: 12, change: -0.2, kind: 'impedance' },
];

describe('withoutReReflections', () => {
  it.each([
    ['low loss', FOAM],
    ['lossy', SOLID],
  ])('leaves the first-order sum of a section’s edges and of what lies behind: %s', (_, of) => {
    const { gamma, run } = seenPast(of, 'section');
    const straight = withoutReReflections(gamma, run, SECTION, 10);
    const echoes = [
      [10, 0.2],
      [12, -0.2],
      [STRETCH_M, 1],
    ] as const;
    expect(worstAgainst(straight, run, echoes)).toBeLessThan(1e-9);
    // As seen, the end shows with 0.96² of its size, and bounces of 4 and 20 % with it.
    expect(worstAgainst(gamma, run, echoes)).toBeGreaterThan(0.1);
  });

  it.each([
    // w = r/(2 + r): 25 Ω in series 0.2, 100 Ω across the line −0.2 (references.md section 5.2); through (1 − 0.2)².
    ['in series', 'series', 0.2],
    ['across the line', 'shunt', -0.2],
  ] as const)('leaves the first-order sum of a lump and of what lies behind: %s', (_, what, change) => {
    // A lump’s S-parameters are real in a line without loss only.
    const { gamma, run } = seenPast({ ...FOAM, k1: 0, k2: 0 }, what);
    const lump: Discontinuity = { distanceM: 10, change, kind: 'lump' };
    const straight = withoutReReflections(gamma, run, [lump], 10);
    expect(
      worstAgainst(straight, run, [
        [10, change],
        [STRETCH_M, 0.64],
      ]),
    ).toBeLessThan(1e-9);
    expect(shareBehind([lump], run)).toBeCloseTo(0.64, 12);
  });

  it('changes nothing without steps, and nothing where loss has the last word', () => {
    const { gamma, run } = seenPast(SOLID, 'section');
    expect(withoutReReflections(gamma, run, [], 2)).toEqual(gamma);
    expect(withoutReReflections(gamma, run, SECTION, 1e-3)).toEqual(gamma);
  });
});

describe('nameSteps', () => {
  it('names each step by what leaves the least unexplained', () => {
    for (const [what, kind] of [
      ['section', 'impedance'],
      ['series', 'lump'],
    ] as const) {
      const { gamma, run } = seenPast({ ...FOAM, k1: 0, k2: 0 }, what);
      const steps = what === 'section' ? SECTION : [{ distanceM: 10, change: 0.2 }];
      const named = nameSteps(steps, (tried) => {
        const straight = withoutReReflections(gamma, run, tried, 10);
        const echoes = [...tried.map((step) => [step.distanceM, step.change] as const)];
        const share = shareBehind(tried, run);
        return worstAgainst(straight, run, [...echoes, [STRETCH_M, share]]) / share;
      });
      expect(named.map((step) => step.kind)).toEqual(steps.map(() => kind));
    }
  });

  it('has nothing to say of no steps', () => {
    expect(nameSteps([], () => 0)).toEqual([]);
  });
});
