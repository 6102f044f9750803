import { describe, expect, it } from 'vitest';
import { strengthOf } from '../../src/line/discontinuity.ts';
import {
  extractEchoes,
  jointCells,
  MOST_FREE_LUMPS,
  modelSize,
  nearestBoundary,
  rankTypes,
} from '../../src/locate/extract-echoes.ts';
import { refine } from '../../src/locate/fit-cascade.ts';
import { residualVariance } from '../../src/locate/fit-context.ts';
import { addSoundJoints } from '../../src/locate/judge-joints.ts';
import { ALL_FREE, addFreeLump, type LineModel } from '../../src/locate/line-model.ts';
import { evaluateCost } from '../../src/locate/linearise.ts';
import { lumpReturnLossDb, pureTypeOf } from '../../src/locate/probe.ts';
import { evenHz, FOAM, MATCHED, OPEN, SOLID } from './drawn-line.ts';
import {
  contextOn,
  type DrawnRun,
  modelOf,
  type PutIn,
  reflectionOf,
  settingsOf,
  varianceOf,
  withNoise,
} from './drawn-model.ts';

const GRID = evenHz(5e6, 2700e6, 540);
const RUN: DrawnRun = {
  sections: [
    { cable: FOAM, lengthM: 5 },
    { cable: { ...FOAM, id: 'other' }, lengthM: 15 },
  ],
  end: MATCHED,
};

/** Searches a noisy sweep of the run with these things in it. */
function searched(put: readonly PutIn[], { run = RUN, noiseDb = -65, frequencyHz = GRID } = {}) {
  const context = contextOn(frequencyHz, withNoise(reflectionOf({ ...run, put }, frequencyHz), noiseDb, 7));
  const model = modelOf(run, frequencyHz);
  addSoundJoints(model);
  evaluateCost(context, model, ALL_FREE, 1);
  refine(context, model, ALL_FREE, { variance: residualVariance(context), maxIterations: 4 });
  const rounds: [number, number][] = [];
  const calm: boolean[] = [];
  const settings = {
    ...settingsOf(model, FOAM),
    onRound: (round: number, limit: number) => void rounds.push([round, limit]),
    onCalm: (found: boolean) => void calm.push(found),
  };
  const { verdicts } = extractEchoes(context, model, settings);
  // As the solver does with what was found.
  evaluateCost(context, model, ALL_FREE, 1);
  refine(context, model, ALL_FREE, { variance: residualVariance(context), maxIterations: 20 });
  return { context, model, settings, verdicts, rounds, calm };
}

/** Free lumps in order of distance; what returns less than −60 dB is nothing. */
function freeIn(model: LineModel) {
  return model.lumps
    .filter((lump) => lump.boundary === null && lumpReturnLossDb(GRID, lump) < 60)
    .sort((a, b) => a.offsetM - b.offsetM)
    .map(({ type, strength, offsetM }) => ({ kind: pureTypeOf(type, strength), strength, offsetM }));
}

function expectFound(model: LineModel, put: readonly PutIn[]): void {
  const found = freeIn(model);
  expect(found.map(({ kind }) => kind)).toEqual(put.map(({ kind }) => kind));
  put.forEach(({ kind, value, atM }, k) => {
    expect(Math.abs(found[k]!.offsetM - atM)).toBeLessThan(0.01);
    expect(found[k]!.strength / strengthOf(kind, value, 50).strength).toBeGreaterThan(0.85);
    expect(found[k]!.strength / strengthOf(kind, value, 50).strength).toBeLessThan(1.15);
  });
}

describe('extractEchoes', () => {
  it('finds what is there, each as what it is, and nothing else', () => {
    const put = [
      { kind: 'shunt-leakage', value: 300, atM: 7.1 },
      { kind: 'series-inductance', value: 0.8e-9, atM: 11.4 },
      { kind: 'series-resistance', value: 4, atM: 16.9 },
    ] as const;
    expectFound(searched(put).model, put);
  });

  it('finds nothing in a line that is as described', () => {
    for (const noiseDb of [-50, -65, -80]) {
      const { model, verdicts } = searched([], { noiseDb });
      expect(freeIn(model)).toEqual([]);
      expect([...verdicts.values()].every(({ state }) => state === 'sound')).toBe(true);
    }
  });

  it('finds a weak one behind strong ones, and not their ghost', () => {
    // The two strong ones bounce to 2·9.6 − 7.1 = 12.1 m, and show the weak one again at 14.2 + 2.5 m.
    const put = [
      { kind: 'series-resistance', value: 40, atM: 7.1 },
      { kind: 'shunt-leakage', value: 60, atM: 9.6 },
      { kind: 'shunt-capacitance', value: 0.3e-12, atM: 14.2 },
    ] as const;
    expectFound(searched(put).model, put);
  });

  it('takes two close together for two', () => {
    const put = [
      { kind: 'series-resistance', value: 12, atM: 11 },
      { kind: 'shunt-capacitance', value: 0.5e-12, atM: 11.05 },
    ] as const;
    expectFound(searched(put).model, put);
  });

  it('hands what stands at a joint to the joint', () => {
    const { model, verdicts } = searched([{ kind: 'series-resistance', value: 20, atM: 5 }]);
    expect(freeIn(model)).toEqual([]);
    expect(verdicts.get(1)?.state).toBe('series-resistance');
  });

  it('takes what the end leaves over for no echo', () => {
    // The end is described as an open with nothing; the true one has a fringe.
    const run: DrawnRun = { ...RUN, end: OPEN };
    const gamma = reflectionOf({ ...run, end: { type: 'open', parameters: [6e-12] } }, GRID);
    const context = contextOn(GRID, withNoise(gamma, -65, 7));
    const model = modelOf(run, GRID);
    addSoundJoints(model);
    evaluateCost(context, model, ALL_FREE, 1);
    extractEchoes(context, model, settingsOf(model, FOAM));
    expect(freeIn(model)).toEqual([]);
  });

  it('stops at a most of lumps and rounds, however much is there', () => {
    const put = Array.from({ length: 22 }, (_, i): PutIn => {
      const kind = (['series-resistance', 'shunt-capacitance'] as const)[i % 2]!;
      return { kind, value: i % 2 === 0 ? 8 : 0.4e-12, atM: 5.7 + i * 0.61 };
    });
    const { model, rounds } = searched(put);
    expect(freeIn(model).length).toBeLessThanOrEqual(MOST_FREE_LUMPS);
    expect(freeIn(model).length).toBeGreaterThan(6);
    for (const [round, limit] of rounds) expect(round).toBeLessThan(limit);
  });

  it('tells once when nothing strong is left, and whether there was something', () => {
    expect(searched([]).calm).toEqual([false]);
    expect(searched([{ kind: 'series-resistance', value: 40, atM: 9 }]).calm).toEqual([true]);
  });
});

describe('rankTypes', () => {
  it('tries every pure kind in the place of a lump, the likeliest first', () => {
    const put = [{ kind: 'series-inductance', value: 0.8e-9, atM: 11.4 }] as const;
    const context = contextOn(GRID, withNoise(reflectionOf({ ...RUN, put }, GRID), -65, 7));
    const model = modelOf(RUN, GRID);
    const lump = addFreeLump(model, { ...strengthOf('series-inductance', 0.7e-9, 50), distanceM: 11.4 });
    evaluateCost(context, model, ALL_FREE, 1);
    const ranked = rankTypes(context, model, settingsOf(model, FOAM), lump, varianceOf(-65));
    expect(ranked[0]!.lumps[0]!.type).toBe('series-inductance');
    const costs = ranked.map(({ cost }) => cost);
    expect(costs).toEqual([...costs].sort((a, b) => a - b));
  });
});

describe('jointCells and nearestBoundary', () => {
  const model = modelOf(
    {
      sections: [
        { cable: SOLID, lengthM: 3 },
        { cable: FOAM, lengthM: 60 },
        { cable: SOLID, lengthM: 3 },
      ],
      end: MATCHED,
    },
    GRID,
  );

  it('give every boundary a cell, wider where its place is less sure', () => {
    const cells = jointCells(model, 0.1);
    expect(cells).toHaveLength(4);
    expect(Math.min(...cells)).toBeGreaterThan(0.05);
    // The end is where it was found; a joint is known by its description.
    expect(cells[1]).toBeGreaterThan(cells[3]!);
    jointCells(model, 1).forEach((cell, b) => {
      expect(cell).toBeGreaterThan(cells[b]!);
    });
  });

  it('name the joint whose cell a distance lies in, the nearer of two, and none elsewhere', () => {
    const cells = [0.2, 0.3, 0.3, 0.2];
    expect(nearestBoundary(model, cells, 0.1)).toBe(0);
    expect(nearestBoundary(model, cells, 3.29)).toBe(1);
    expect(nearestBoundary(model, cells, 2.75)).toBe(1);
    expect(nearestBoundary(model, cells, 66.1)).toBe(3);
    expect(nearestBoundary(model, cells, 30)).toBeNull();
    expect(nearestBoundary(model, [5, 5, 5, 5], 1.4)).toBe(0);
    expect(nearestBoundary(model, [5, 5, 5, 5], 1.6)).toBe(1);
  });
});

describe('modelSize', () => {
  it('counts boundaries, lumps and end, and what is free in them', () => {
    const model = modelOf(RUN, GRID);
    const bare = modelSize(model);
    addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM: 9 });
    const one = modelSize(model);
    expect(one.elements - bare.elements).toBe(1);
    // Its place and its strength.
    expect(one.parameters - bare.parameters).toBe(2);
  });
});
