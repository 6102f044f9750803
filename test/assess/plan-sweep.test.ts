import { describe, expect, it } from 'vitest';
import { type PlanQuestion, planSweep, type SweepPlan } from '../../src/assess/plan-sweep.ts';
import { harmonicRange, roundStepHz } from '../../src/assess/sweep-steps.ts';
import { NO_LIMITS } from '../../src/line/line.ts';
import { makeLine } from './made-line.ts';

function plan(more: Partial<PlanQuestion> = {}): SweepPlan {
  const outcome = planSweep({
    line: makeLine(),
    bandHz: null,
    window: { kind: 'kaiser', beta: 6 },
    ...more,
  });
  if (!outcome.ok) throw new Error(outcome.problems[0]?.what);
  return outcome.value;
}

describe('roundStepHz', () => {
  it('takes the next lower of 1, 2 and 5 times a power of ten', () => {
    expect([1, 1.99e6, 2e6, 4.9e6, 5e6, 9.9e6].map(roundStepHz)).toEqual([1, 1e6, 2e6, 2e6, 5e6, 5e6]);
  });
});

describe('harmonicRange', () => {
  it('starts and stops on whole steps within the band', () => {
    expect(harmonicRange(0, 2.7e9, 2e6)).toEqual({ startHz: 2e6, stopHz: 2.7e9, points: 1350 });
    expect(harmonicRange(1.701e9, 2.2e9, 2e6)).toEqual({ startHz: 1.702e9, stopHz: 2.2e9, points: 250 });
  });
});

describe('planSweep', () => {
  it('tells the whole line apart with room, starts at its first step, and allows ohms', () => {
    const made = plan();
    // c·vf/2 = 131.9 MHz·m; 50 m with 1.3 × room need 2.03 MHz or less.
    expect(made.stepHz).toBe(2e6);
    expect(made.range.startHz).toBe(2e6);
    expect(made.unambiguousM).toBeGreaterThan(1.2 * 50);
    expect(made.ohms).toBe(true);
    // 0.1 m is what it aims at.
    expect(made.resolutionM).toBeGreaterThan(0.09);
    expect(made.resolutionM).toBeLessThan(0.11);
    expect(made.sweeps.map(({ end }) => end)).toEqual(['short', 'load', 'antenna']);
    expect(made.remarks).toEqual([]);
  });

  it('keeps to the band that is allowed, and says what that costs', () => {
    const made = plan({ bandHz: [1.7e9, 2.2e9] });
    expect(made.range).toEqual({ startHz: 1.7e9, stopHz: 2.2e9, points: 251 });
    expect(made.ohms).toBe(false);
    expect(made.remarks.join()).toContain('start at the first step, 2 MHz');
    // Five times narrower, five times coarser.
    expect(made.resolutionM / plan().resolutionM).toBeCloseTo((plan().range.stopHz - 2e6) / 500e6, 1);
  });

  it('covers the bands of the line, and says where it cannot', () => {
    const limits = { ...NO_LIMITS, bands: [{ name: 'high', fromHz: 3.4e9, toHz: 3.8e9, returnLossDb: 14 }] };
    const line = makeLine({ limits });
    expect(plan({ line }).range.stopHz).toBeGreaterThanOrEqual(3.8e9);
    expect(plan({ line, bandHz: [1e6, 3.5e9] }).remarks.join()).toContain('band high');
  });

  it('does not go where a lossy line swallows the sweep', () => {
    const [section] = makeLine().sections;
    const line = makeLine({ sections: [{ ...section!, lengthM: 2000 }] });
    expect(plan({ line }).lossDb[1]).toBeLessThan(20.5);
    expect(plan({ line }).unambiguousM).toBeGreaterThan(2000);
  });

  it('refuses a band that nothing of the line carries', () => {
    const [section] = makeLine().sections;
    const device = {
      type: 'device' as const,
      device: 'filter',
      lengthM: 0.1,
      lossDb: 0.2,
      returnLossDb: 20,
      passbandHz: [1e9, 2e9] as const,
      label: 'filter',
      jointAfter: section!.jointAfter,
    };
    const line = makeLine({ sections: [section!, device, section!] });
    const outcome = planSweep({ line, bandHz: [3e9, 4e9], window: { kind: 'hann' } });
    expect(outcome.ok).toBe(false);
    expect(plan({ line }).range.startHz).toBeGreaterThanOrEqual(1e9);
  });
});
