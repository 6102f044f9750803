import { describe, expect, it } from 'vitest';
import { type LumpedKind, strengthOf } from '../../src/line/discontinuity.ts';
import { refine } from '../../src/locate/fit-cascade.ts';
import { residualVariance } from '../../src/locate/fit-context.ts';
import { ALL_FREE, addFreeLump, cloneModel, type LineModel } from '../../src/locate/line-model.ts';
import { evaluateCost } from '../../src/locate/linearise.ts';
import { pureTypeOf } from '../../src/locate/probe.ts';
import { resolvePair } from '../../src/locate/resolve-pair.ts';
import { evenHz, FOAM, MATCHED } from './drawn-line.ts';
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
const RUN: DrawnRun = { sections: [{ cable: FOAM, lengthM: 14 }], end: MATCHED };

/** A sweep of what stands there, and a model that has one lump in its place. */
function oneFor(put: readonly PutIn[], kind: LumpedKind, value: number, atM: number) {
  const context = contextOn(GRID, withNoise(reflectionOf({ ...RUN, put }, GRID), -65, 4));
  const model = modelOf(RUN, GRID);
  addFreeLump(model, { ...strengthOf(kind, value, 50), distanceM: atM });
  evaluateCost(context, model, ALL_FREE, 1);
  refine(context, model, ALL_FREE, { variance: residualVariance(context), maxIterations: 8 });
  return { context, model, settings: settingsOf(model, FOAM) };
}

function kindsIn(model: LineModel): string[] {
  return [...model.lumps]
    .sort((a, b) => a.offsetM - b.offsetM)
    .map(({ type, strength }) => pureTypeOf(type, strength));
}

describe('resolvePair', () => {
  // The 6 dB width of an echo here is 0.09 m.
  it.each([
    ['series-resistance', 12, 'shunt-capacitance', 0.5e-12],
    ['shunt-leakage', 200, 'series-inductance', 1.2e-9],
    ['series-resistance', 12, 'series-resistance', 10],
  ] as const)('puts %s of %s and %s of %s, 5 cm apart, in the place of one lump', (kindA, a, kindB, b) => {
    const put = [
      { kind: kindA, value: a, atM: 6.2 },
      { kind: kindB, value: b, atM: 6.25 },
    ];
    const { context, model, settings } = oneFor(put, kindA, a, 6.21);
    expect(resolvePair(context, model, settings, 6.22)).toBe(true);
    expect(kindsIn(model)).toEqual([kindA, kindB]);
    const places = model.lumps.map((lump) => lump.offsetM).sort((m, n) => m - n);
    expect(Math.abs(places[0]! - 6.2)).toBeLessThan(0.005);
    expect(Math.abs(places[1]! - 6.25)).toBeLessThan(0.005);
  });

  it.each([
    ['series-resistance', 12],
    ['shunt-leakage', 200],
    ['series-inductance', 1.2e-9],
    ['shunt-capacitance', 0.5e-12],
  ] as const)('leaves a lone %s alone, and the model as it was', (kind, value) => {
    const { context, model, settings } = oneFor([{ kind, value, atM: 6.2 }], kind, value, 6.2);
    const before = cloneModel(model);
    expect(resolvePair(context, model, settings, 6.2)).toBe(false);
    expect(model).toEqual(before);
  });

  it('has nothing to resolve where no lump stands', () => {
    const { context, model, settings } = oneFor(
      [{ kind: 'series-resistance', value: 12, atM: 6.2 }],
      'series-resistance',
      12,
      6.2,
    );
    const before = cloneModel(model);
    expect(resolvePair(context, model, settings, 9)).toBe(false);
    expect(model).toEqual(before);
  });

  it('leaves what stands elsewhere where it is', () => {
    const far = { kind: 'shunt-leakage', value: 300, atM: 10 } as const;
    const put = [
      { kind: 'series-resistance', value: 12, atM: 6.2 },
      { kind: 'shunt-capacitance', value: 0.5e-12, atM: 6.25 },
      far,
    ] as const;
    const { context, model, settings } = oneFor(put, 'series-resistance', 12, 6.21);
    const other = addFreeLump(model, { ...strengthOf(far.kind, far.value, 50), distanceM: 10 });
    evaluateCost(context, model, ALL_FREE, 1);
    expect(resolvePair(context, model, settings, 6.22)).toBe(true);
    expect(model.lumps).toHaveLength(3);
    expect(model.lumps.find(({ id }) => id === other.id)!.offsetM).toBeCloseTo(10, 2);
  });
});
