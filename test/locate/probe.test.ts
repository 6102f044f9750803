import { describe, expect, it } from 'vitest';
import { strengthOf } from '../../src/line/discontinuity.ts';
import { residualEnergy } from '../../src/locate/fit-context.ts';
import { addFreeLump, NOTHING_FREE } from '../../src/locate/line-model.ts';
import { evaluateCost, linearise } from '../../src/locate/linearise.ts';
import {
  bestOfEach,
  lumpedTypeOf,
  lumpReturnLossDb,
  matchAt,
  PURE_TYPES,
  probeAcross,
  probeStage,
  pureTypeOf,
  putBack,
} from '../../src/locate/probe.ts';
import { evenHz, FOAM, MATCHED, SOLID } from './drawn-line.ts';
import { contextOn, type DrawnRun, EACH_KIND, modelOf, reflectionOf } from './drawn-model.ts';

const GRID = evenHz(10e6, 2700e6, 270);
const RUN: DrawnRun = { sections: [{ cable: FOAM, lengthM: 9 }], end: MATCHED };

describe('lumpedTypeOf and pureTypeOf', () => {
  it('go there and back: a series kind is positive, a shunt kind negative', () => {
    for (const kind of PURE_TYPES) {
      const { type, strength } = strengthOf(kind, kind === 'shunt-leakage' ? 100 : 1e-9, 50);
      expect(lumpedTypeOf(kind)).toBe(type);
      expect(pureTypeOf(type, strength)).toBe(kind);
    }
  });
});

describe('lumpReturnLossDb', () => {
  it('is that of 9 Ω in series and of 0.6 pF across a 50 Ω line', () => {
    // Γ = R/(R + 2·Z0) = 9/109 at all frequencies.
    const series = lumpReturnLossDb(GRID, { type: 'series-resistance', strength: 9 / 50 });
    expect(series).toBeCloseTo(-20 * Math.log10(9 / 109), 9);
    // x = ωCZ0, Γ = −jx/(2 + jx): at 1 GHz alone x = 0.1885.
    const one = Float64Array.of(1e9);
    const x = 2 * Math.PI * 1e9 * 0.6e-12 * 50;
    const shunt = lumpReturnLossDb(one, { type: 'shunt-capacitance', strength: -0.6e-12 * 50 });
    expect(shunt).toBeCloseTo(-10 * Math.log10((x * x) / (4 + x * x)), 9);
  });

  it('is the same for dual kinds of one strength, and 0 dB for what reflects everything', () => {
    expect(lumpReturnLossDb(GRID, { type: 'resistive', strength: 0.2 })).toBe(
      lumpReturnLossDb(GRID, { type: 'resistive', strength: -0.2 }),
    );
    expect(lumpReturnLossDb(GRID, { type: 'resistive', strength: 1e9 })).toBeCloseTo(0, 6);
    expect(lumpReturnLossDb(GRID, { type: 'reactive', strength: 0 })).toBeGreaterThan(200);
  });
});

describe('probeAcross', () => {
  it.each(EACH_KIND)('finds $kind where it is, as what it is and as large as it is', ({ kind, value }) => {
    const context = contextOn(GRID, reflectionOf({ ...RUN, put: [{ kind, value, atM: 4.2 }] }, GRID));
    const [best] = probeAcross(context, modelOf(RUN, GRID), 3, 6)
      .flatMap(bestOfEach)
      .sort((a, b) => b.gain - a.gain);
    expect(best!.type).toBe(kind);
    // One step of the search is a twelfth of half a wavelength at 2.7 GHz: 4 mm.
    expect(Math.abs(best!.distanceM - 4.2)).toBeLessThan(0.004);
    // The search is of first order: a reflection of 5 % is off by as much.
    expect(best!.strength / strengthOf(kind, value, 50).strength).toBeGreaterThan(0.9);
    expect(best!.strength / strengthOf(kind, value, 50).strength).toBeLessThan(1.1);
  });

  it('promises the fall of the residual’s energy that the element brings', () => {
    const put = [{ kind: 'series-inductance', value: 0.1e-9, atM: 4.2 }] as const;
    const context = contextOn(GRID, reflectionOf({ ...RUN, put }, GRID));
    const model = modelOf(RUN, GRID);
    const [best] = probeAcross(context, model, 4, 4.5)
      .flatMap(bestOfEach)
      .sort((a, b) => b.gain - a.gain);
    evaluateCost(context, model, NOTHING_FREE, 1);
    const before = residualEnergy(context);
    addFreeLump(model, {
      type: lumpedTypeOf(best!.type),
      strength: best!.strength,
      distanceM: best!.distanceM,
    });
    evaluateCost(context, model, NOTHING_FREE, 1);
    // First order again: 1 % of reflection.
    expect((before - residualEnergy(context)) / best!.gain).toBeCloseTo(1, 1);
  });

  it('covers the range in all stretches that it touches, and no more', () => {
    const model = modelOf(
      {
        sections: [
          { cable: SOLID, lengthM: 3 },
          { cable: FOAM, lengthM: 9 },
        ],
        end: MATCHED,
      },
      GRID,
    );
    const probes = probeAcross(contextOn(GRID, reflectionOf(RUN, GRID)), model, 2, 5);
    expect(probes).toHaveLength(2);
    expect(probes.map(({ fromM }) => fromM)).toEqual([2, 3]);
    for (const { fromM, stepM, points, sums } of probes) {
      expect(fromM + (points - 1) * stepM).toBeLessThanOrEqual(5);
      expect(sums).toHaveLength(4 * points);
    }
  });

  it('looks for what has been found already when told to put it back', () => {
    const put = [{ kind: 'series-resistance', value: 5, atM: 4.2 }] as const;
    const context = contextOn(GRID, reflectionOf({ ...RUN, put }, GRID));
    const model = modelOf(RUN, GRID);
    const lump = addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM: 4.2 });
    const gainOf = (without: readonly number[]): number =>
      Math.max(
        ...probeAcross(context, model, 4, 4.4, without)
          .flatMap(bestOfEach)
          .map(({ gain }) => gain),
        0,
      );
    expect(gainOf([])).toBeLessThan(1e-6 * gainOf([lump.id]));
  });
});

describe('matchAt', () => {
  it('gives nothing to a kind of the wrong sign', () => {
    const put = [{ kind: 'series-resistance', value: 5, atM: 4.2 }] as const;
    const context = contextOn(GRID, reflectionOf({ ...RUN, put }, GRID));
    const [probe] = probeAcross(context, modelOf(RUN, GRID), 4.2, 4.2);
    expect(matchAt(probe!, 'series-resistance', 0).strength).toBeGreaterThan(0);
    expect(matchAt(probe!, 'shunt-leakage', 0)).toEqual({ strength: 0, gain: 0 });
  });
});

describe('probeStage', () => {
  it('has nothing to say beyond its stretch, and none of what is no stretch', () => {
    const context = contextOn(GRID, reflectionOf(RUN, GRID));
    const { stages } = linearise(context, modelOf(RUN, GRID), NOTHING_FREE, 1).translation;
    const line = stages.findIndex(({ type }) => type === 'line');
    const beyond = { fromM: 10, toM: 12, stepM: 0.1 };
    expect(probeStage(context, stages, { stageIndex: line, stageFromM: 0 }, beyond)).toBeNull();
    const step = stages.findIndex(({ type }) => type === 'step');
    expect(() => probeStage(context, stages, { stageIndex: step, stageFromM: 0 }, beyond)).toThrow(TypeError);
  });
});

describe('putBack', () => {
  it('undoes a lump behind which nothing reflects', () => {
    const put = [{ kind: 'shunt-leakage', value: 300, atM: 4.2 }] as const;
    const context = contextOn(GRID, reflectionOf({ ...RUN, put }, GRID));
    const bare = modelOf(RUN, GRID);
    evaluateCost(context, bare, NOTHING_FREE, 1);
    const wanted = context.residual.re.slice();
    const lump = addFreeLump(bare, { type: 'resistive', strength: -50 / 300, distanceM: 4.2 });
    const { stageOfLump } = linearise(context, bare, NOTHING_FREE, 1).translation;
    putBack(context, stageOfLump.get(lump.id)!);
    // What still comes from behind is the mismatch of lossy cable and real load, −50 dB, of which 15 % is lost.
    wanted.forEach((value, k) => {
      expect(Math.abs(context.residual.re[k]! - value)).toBeLessThan(2e-3);
    });
  });
});
