import { describe, expect, it } from 'vitest';
import { strengthOf } from '../../src/line/discontinuity.ts';
import type { Echo } from '../../src/locate/echo.ts';
import { findGhosts } from '../../src/locate/find-ghosts.ts';
import { addFreeLump, NOTHING_FREE } from '../../src/locate/line-model.ts';
import { evaluateCost } from '../../src/locate/linearise.ts';
import { lumpReturnLossDb } from '../../src/locate/probe.ts';
import { makeEcho } from '../assess/made-line.ts';
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
const CABLE = { ...FOAM, k1: 0.02, k2: 1e-5 };
const RUN: DrawnRun = { sections: [{ cable: CABLE, lengthM: 20 }], end: MATCHED };

/** Ghosts of a run that its model explains but for the noise. */
function ghostsOf(put: readonly PutIn[], { noiseDb = -70, scale = 1 } = {}) {
  const context = contextOn(GRID, withNoise(reflectionOf({ ...RUN, put }, GRID), noiseDb, 3));
  const model = modelOf(RUN, GRID);
  const echoes: Echo[] = put.map(({ kind, value, atM }) => {
    const lump = strengthOf(kind, value, 50);
    addFreeLump(model, { ...lump, distanceM: atM });
    const levelDb = lumpReturnLossDb(GRID, lump);
    return makeEcho({
      kind,
      distanceM: atM * scale,
      returnLossDb: levelDb,
      correctedReturnLossDb: levelDb,
      section: 0,
    });
  });
  evaluateCost(context, model, NOTHING_FREE, 1);
  return findGhosts(context, model, settingsOf(model, FOAM), echoes, scale);
}

const STRONG = [
  { kind: 'series-resistance', value: 30, atM: 6 },
  { kind: 'shunt-leakage', value: 80, atM: 9 },
] as const;

describe('findGhosts', () => {
  it('tells where the bounce between two strong echoes stands, how large, and between which', () => {
    const [ghost, ...more] = ghostsOf(STRONG);
    expect(more).toEqual([]);
    // 2·9 − 6; the trace goes in quarters of a resolution.
    expect(Math.abs(ghost!.distanceM - 12)).toBeLessThan(0.03);
    expect(ghost!.betweenM).toEqual([6, 9]);
    // Γ1 = 30/130, Γ2 = −50/210, through the first (1 − Γ1)² there and back: Γ1·Γ2²·0.592, −42.2 dB.
    const level = -20 * Math.log10((30 / 130) * (50 / 210) ** 2 * (100 / 130) ** 2);
    expect(Math.abs(ghost!.returnLossDb - level)).toBeLessThan(1);
  });

  it('tells it on the scale of the echoes', () => {
    const [ghost] = ghostsOf(STRONG, { scale: 1.01 });
    expect(Math.abs(ghost!.distanceM - 12.12)).toBeLessThan(0.03);
    expect(ghost!.betweenM).toEqual([6.06, 9.09].map((m) => expect.closeTo(m, 9)));
  });

  it('tells none of weak echoes, and none of one', () => {
    expect(ghostsOf(STRONG.map((p) => ({ ...p, value: p.kind === 'shunt-leakage' ? 800 : 3 })))).toEqual([]);
    expect(ghostsOf(STRONG.slice(0, 1))).toEqual([]);
    expect(ghostsOf([])).toEqual([]);
  });

  it('tells none behind the end', () => {
    const late = STRONG.map((p) => ({ ...p, atM: p.atM + 8 + (p.kind === 'shunt-leakage' ? 2 : 0) }));
    // 2·19 − 14 = 24 m.
    expect(ghostsOf(late)).toEqual([]);
  });

  it('tells none that noise would hide', () => {
    expect(ghostsOf(STRONG, { noiseDb: -10 })).toEqual([]);
  });

  it('lists several by distance', () => {
    const ghosts = ghostsOf([...STRONG, { kind: 'series-resistance', value: 40, atM: 13.4 }]);
    const distances = ghosts.map(({ distanceM }) => distanceM);
    expect(ghosts.length).toBeGreaterThan(1);
    expect(distances).toEqual([...distances].sort((a, b) => a - b));
  });
});
