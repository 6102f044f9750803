import { describe, expect, it } from 'vitest';
import { SPEED_OF_LIGHT } from '../../src/line/constants.ts';
import { losslessRun } from '../../src/line/medium-run.ts';
import { reflectionAlong } from '../../src/locate/reflection-along.ts';
import { type WindowSpec, windowSampler } from '../../src/numerics/window.ts';

const VELOCITY = 0.88 * SPEED_OF_LIGHT;
const STEP_HZ = 2e6;
const STEPS = 1000;
const TOP_HZ = STEPS * STEP_HZ;

/** The reflection built up by lone reflectors [distance, size] on a lossless line, even steps from 0. */
function built(reflectors: readonly (readonly [number, number])[], window: WindowSpec, stepM = 0.005) {
  const frequencyHz = Float64Array.from({ length: STEPS + 1 }, (_, k) => k * STEP_HZ);
  const gamma = { re: new Float64Array(STEPS + 1), im: new Float64Array(STEPS + 1) };
  frequencyHz.forEach((f, k) => {
    for (const [d, r] of reflectors) {
      const angle = (-4 * Math.PI * f * d) / VELOCITY;
      gamma.re[k] = gamma.re[k]! + r * Math.cos(angle);
      gamma.im[k] = gamma.im[k]! + r * Math.sin(angle);
    }
  });
  const cell = (2 * Math.PI * STEP_HZ) / VELOCITY;
  const sampler = windowSampler(window);
  const grid = { fromM: -1, stepM, points: Math.round(21 / stepM) };
  const reflection = reflectionAlong({
    frequencyHz,
    gamma,
    run: losslessRun(frequencyHz, [{ lengthM: 20, velocityMPerS: VELOCITY }]),
    cells: [{ re: new Float64Array(STEPS + 1), im: frequencyHz.map((_, k) => (k === 0 ? cell / 2 : cell)) }],
    grid,
    taper: (share) => sampler(0.5 + share / 2),
    mostLossNp: 10,
  });
  return { reflection, at: (d: number) => reflection[Math.round((d + 1) / stepM)]! };
}

describe('reflectionAlong', () => {
  it('rises by the size of each reflector at its place, and stays', () => {
    const { at } = built(
      [
        [3, 0.2],
        [8, -0.192],
        [15, 0.05],
      ],
      { kind: 'kaiser', beta: 6 },
    );
    // Side lobes of the step under 0.1 % of it (references.md section 6: overshoot 0.05 %).
    for (const [d, wanted] of [
      [2, 0],
      [3, 0.1],
      [5, 0.2],
      [10, 0.008],
      [18, 0.058],
    ])
      expect(Math.abs(at(d!) - wanted!)).toBeLessThan(0.0003);
  });

  it.each([
    // @source references.md section 6: 10–90 % rise × fmax and overshoot of the low-pass step.
    ['rectangular', 0.4457, 0.0893],
    ['hann', 0.97, 0.006],
    ['hamming', 0.911, 0.002],
    ['blackman', 1.186, 0],
    ['blackman-harris', 1.4, 0],
  ] as const)('rises as fast and overshoots as far as published: %s', (kind, rise, overshoot) => {
    const { reflection } = built([[10, 1]], { kind }, 0.0005);
    const crossing = (level: number) => reflection.findIndex((value) => value >= level) * 0.0005;
    const riseS = (2 * (crossing(0.9) - crossing(0.1))) / VELOCITY;
    // One step of the distance grid is 0.0076.
    expect(Math.abs(riseS * TOP_HZ - rise)).toBeLessThan(0.008);
    const highest = reflection.reduce((most, value) => Math.max(most, value), 0);
    expect(highest - 1).toBeCloseTo(overshoot, 2);
  });

  it('stops where loss leaves no band to speak of', () => {
    const frequencyHz = Float64Array.from({ length: 201 }, (_, k) => k * STEP_HZ);
    const run = losslessRun(frequencyHz, [{ lengthM: 20, velocityMPerS: VELOCITY }]);
    const lossy = { ...run, alpha: [frequencyHz.map((f) => 0.5 * Math.sqrt(f / TOP_HZ))] };
    const reflection = reflectionAlong({
      frequencyHz,
      gamma: { re: frequencyHz.map(() => 0.1), im: frequencyHz.map(() => 0) },
      run: lossy,
      cells: [{ re: frequencyHz.map(() => 0), im: frequencyHz.map(() => 0.01) }],
      grid: { fromM: -1, stepM: 0.1, points: 400 },
      taper: () => 1,
      mostLossNp: 2,
    });
    // 60 frequencies are left up to where 118 MHz take 2 Np: α = 0.121 Np/m, 8.2 m.
    expect(reflection.length).toBeGreaterThan(85);
    expect(reflection.length).toBeLessThan(100);
  });
});
