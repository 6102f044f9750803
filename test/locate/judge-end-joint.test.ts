import { describe, expect, it } from 'vitest';
import type { LumpedKind } from '../../src/line/discontinuity.ts';
import type { EndModel } from '../../src/line/end.ts';
import { refine } from '../../src/locate/fit-cascade.ts';
import { residualVariance } from '../../src/locate/fit-context.ts';
import { judgeEndJoint } from '../../src/locate/judge-end-joint.ts';
import { ALL_FREE, cloneModel } from '../../src/locate/line-model.ts';
import { evaluateCost } from '../../src/locate/linearise.ts';
import { evenHz, FOAM, MATCHED, OPEN } from './drawn-line.ts';
import {
  contextOn,
  type DrawnRun,
  modelOf,
  type PutIn,
  reflectionOf,
  settingsOf,
  withNoise,
} from './drawn-model.ts';

const GRID = evenHz(5e6, 2700e6, 540);
const END_M = 14;

function runTo(end: EndModel, put: readonly PutIn[] = []): DrawnRun {
  return { sections: [{ cable: FOAM, lengthM: END_M }], put, end };
}

/** The verdict on the last joint of a run, its model fitted with what the end itself can be. */
function verdictOn(run: DrawnRun, known: EndModel = MATCHED) {
  const context = contextOn(GRID, withNoise(reflectionOf(run, GRID), -65, 6));
  const model = modelOf(runTo(known), GRID);
  evaluateCost(context, model, ALL_FREE, 1);
  refine(context, model, ALL_FREE, { variance: residualVariance(context), maxIterations: 10 });
  const before = cloneModel(model);
  const verdict = judgeEndJoint(context, model, settingsOf(model, FOAM));
  expect(model).toEqual(before);
  return verdict;
}

const BAD: readonly { readonly kind: LumpedKind; readonly value: number }[] = [
  { kind: 'series-resistance', value: 60 },
  { kind: 'shunt-leakage', value: 40 },
  { kind: 'series-inductance', value: 9e-9 },
  { kind: 'shunt-capacitance', value: 3.6e-12 },
];

describe('judgeEndJoint', () => {
  it.each(BAD)('names $kind before a load, as large as it is', ({ kind, value }) => {
    const verdict = verdictOn(runTo(MATCHED, [{ kind, value, atM: END_M - 0.01 }]))!;
    expect(verdict.state).toBe(kind);
    expect(verdict.odds).toBeGreaterThanOrEqual(9);
    const strength = {
      'series-resistance': value / 50,
      'shunt-leakage': -50 / value,
      'series-inductance': value / 50,
      'shunt-capacitance': -value * 50,
    }[kind];
    // What load and fault have of a resistance can’t be parted: a load’s own tolerance is a fifth.
    expect(verdict.strength / strength).toBeGreaterThan(0.75);
    expect(verdict.strength / strength).toBeLessThan(1.3);
  });

  it.each([1, 0.9, 1.12])('has nothing to say of a load of %s times 50 Ω', (ratio) => {
    expect(verdictOn(runTo({ type: 'load', parameters: [ratio, 0] }))).toBeNull();
  });

  it('has nothing to say of a load with a little reactance of its own', () => {
    // 20 dB at the top of the band.
    expect(verdictOn(runTo({ type: 'load', parameters: [1.05, 1.2e-11] }))).toBeNull();
  });

  it('has nothing to say of another end than a load', () => {
    const put = [{ kind: 'series-resistance', value: 20, atM: END_M - 0.01 }] as const;
    expect(verdictOn(runTo(OPEN, put), OPEN)).toBeNull();
  });
});
