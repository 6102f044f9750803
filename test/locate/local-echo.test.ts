import { describe, expect, it } from 'vitest';
import { createCascade, type Stage } from '../../src/line/cascade.ts';
import { coaxMedium } from '../../src/line/medium.ts';
import { addFreeLump } from '../../src/locate/line-model.ts';
import {
  fitLocal,
  fitTables,
  type LocalEcho,
  type LocalPart,
  localEcho,
  matchTables,
  reflectionDb,
  writeLocalReflection,
} from '../../src/locate/local-echo.ts';
import { lumpReturnLossDb } from '../../src/locate/probe.ts';
import { evenHz, FOAM, MATCHED } from './drawn-line.ts';
import { contextOn, type DrawnRun, modelOf, reflectionOf } from './drawn-model.ts';

const GRID = evenHz(20e6, 2700e6, 600);
const LOSSLESS = { ...FOAM, k1: 0, k2: 0 };
const RUN: DrawnRun = { sections: [{ cable: LOSSLESS, lengthM: 9 }], end: MATCHED };
const HERE = { lumps: [], boundary: null };

/** A place at which these parts stand, as if the sweep had shown it: one value a block. */
function placeWith(parts: readonly LocalPart[], blocks = 90): LocalEcho {
  const frequencyHz = evenHz(30e6, 2690e6, blocks);
  const { gamma } = coaxMedium(LOSSLESS, frequencyHz, { temperatureC: 20 });
  const echo = {
    planeM: 5,
    omega: frequencyHz.map((f) => 2 * Math.PI * f),
    beta: gamma.im.slice(),
    re: new Float64Array(blocks),
    im: new Float64Array(blocks),
    weight: new Float64Array(blocks).fill(6),
  };
  writeLocalReflection(echo, parts, echo);
  return echo;
}

describe('writeLocalReflection', () => {
  it('is the cascade’s Γ of parts close together, bounces and all, before and behind the plane', () => {
    const parts: LocalPart[] = [
      { type: 'resistive', strength: 0.4, offsetM: -0.05 },
      { type: 'reactive', strength: -20e-12, offsetM: -0.01 },
      { type: 'step', strength: 0.3, offsetM: 0.02 },
      { type: 'reactive', strength: 15e-12, offsetM: 0.04 },
      { type: 'resistive', strength: -0.5, offsetM: 0.07 },
    ];
    const echo = placeWith(parts);
    const frequencyHz = echo.omega.map((w) => w / (2 * Math.PI));
    const near = coaxMedium(LOSSLESS, frequencyHz, { temperatureC: 20 });
    const stretch = (lengthM: number): Stage => ({
      type: 'line',
      medium: near,
      lengthM,
      conductor: 0,
      dielectric: 0,
    });
    const stages: Stage[] = [];
    // From 0.1 m before the plane; what is behind the last part is matched to it.
    let atM = -0.1;
    for (const part of parts) {
      stages.push(stretch(part.offsetM - atM));
      atM = part.offsetM;
      if (part.type === 'step')
        stages.push({ type: 'step', before: near, after: near, ratio: Math.exp(part.strength) });
      else stages.push({ type: part.type, medium: near, strength: part.strength });
    }
    const { re, im } = createCascade(frequencyHz).gamma(stages, MATCHED);
    frequencyHz.forEach((_, b) => {
      const turn = 2 * echo.beta[b]! * 0.1;
      expect(re[b]! * Math.cos(turn) - im[b]! * Math.sin(turn)).toBeCloseTo(echo.re[b]!, 10);
      expect(re[b]! * Math.sin(turn) + im[b]! * Math.cos(turn)).toBeCloseTo(echo.im[b]!, 10);
    });
  });

  it('is nothing for no parts', () => {
    const { re, im } = placeWith([]);
    expect(Math.max(...re.map(Math.abs), ...im.map(Math.abs))).toBe(0);
  });
});

describe('reflectionDb', () => {
  it('is the return loss of a single part wherever it stands', () => {
    for (const offsetM of [0, 0.3]) {
      const parts = [{ type: 'resistive', strength: 0.18, offsetM }] as const;
      // 9 Ω in 50: Γ = 9/109. A 1e-12 in the logarithm keeps it finite.
      expect(reflectionDb(placeWith([]), parts)).toBeCloseTo(-20 * Math.log10(9 / 109), 8);
    }
  });
});

describe('localEcho', () => {
  it('shows nothing at a place that is explained, and how much the sweep knows of it', () => {
    const echo = localEcho(contextOn(GRID, reflectionOf(RUN, GRID)), modelOf(RUN, GRID), 4, HERE);
    expect(Math.max(...echo.re.map(Math.abs), ...echo.im.map(Math.abs))).toBeLessThan(1e-12);
    // Without loss or mismatch on the way every point counts once.
    expect(echo.weight.reduce((sum, w) => sum + w, 0)).toBeCloseTo(GRID.length, 6);
    expect(echo.planeM).toBe(4);
  });

  it('shows a lump as it is by itself, the way there and back undone', () => {
    const lossy: DrawnRun = { sections: [{ cable: FOAM, lengthM: 9 }], end: MATCHED };
    const put = [{ kind: 'series-resistance', value: 6, atM: 4 }] as const;
    const context = contextOn(GRID, reflectionOf({ ...lossy, put }, GRID));
    const echo = localEcho(context, modelOf(lossy, GRID), 4, HERE);
    // Γ = 6/106 at all frequencies; what the lump takes from the mismatch of lossy cable and load is −60 dB.
    echo.re.forEach((re, b) => {
      expect(Math.abs(re - 6 / 106)).toBeLessThan(2e-3);
      expect(Math.abs(echo.im[b]!)).toBeLessThan(2e-3);
    });
  });

  it('gives back what was found there already', () => {
    const put = [{ kind: 'shunt-capacitance', value: 0.3e-12, atM: 4 }] as const;
    const context = contextOn(GRID, reflectionOf({ ...RUN, put }, GRID));
    const unknown = localEcho(context, modelOf(RUN, GRID), 4, HERE);
    const model = modelOf(RUN, GRID);
    const lump = addFreeLump(model, { type: 'reactive', strength: -50 * 0.3e-12, distanceM: 4 });
    const known = localEcho(context, model, 4, { lumps: [lump.id], boundary: null });
    unknown.re.forEach((re, b) => {
      expect(known.re[b]).toBeCloseTo(re, 6);
      expect(known.im[b]).toBeCloseTo(unknown.im[b]!, 6);
    });
  });

  it('leaves out points of weight 0', () => {
    const put = [{ kind: 'series-resistance', value: 6, atM: 4 }] as const;
    const context = contextOn(GRID, reflectionOf({ ...RUN, put }, GRID));
    context.measured.re[300] = 40;
    context.weight[300] = 0;
    const echo = localEcho(context, modelOf(RUN, GRID), 4, HERE);
    expect(Math.max(...echo.re)).toBeCloseTo(6 / 106, 4);
    expect(echo.weight.reduce((sum, w) => sum + w, 0)).toBeCloseTo(GRID.length - 1, 6);
  });

  it('takes a sweep of fewer points than it has blocks', () => {
    const few = evenHz(20e6, 2700e6, 12);
    const put = [{ kind: 'series-resistance', value: 6, atM: 4 }] as const;
    const context = contextOn(few, reflectionOf({ ...RUN, put }, few));
    const echo = localEcho(context, modelOf(RUN, few), 4, HERE);
    expect(echo.weight.every((w) => w > 0)).toBe(true);
    expect(echo.re[5]).toBeCloseTo(6 / 106, 4);
  });
});

describe('matchTables and fitTables', () => {
  const gridM = 0.004;
  const small: LocalPart[] = [
    { type: 'reactive', strength: 1e-13, offsetM: -3 * gridM },
    { type: 'resistive', strength: 2e-3, offsetM: 5 * gridM },
  ];
  const columns = [
    { reactive: true, at: -3, sigma: Number.POSITIVE_INFINITY },
    { reactive: false, at: 5, sigma: Number.POSITIVE_INFINITY },
  ];

  it('hold the sums of the linear fit: small parts come out as they were put in', () => {
    const fit = fitTables(matchTables(placeWith(small), 0, gridM, 10, 12), columns, 1e-8)!;
    // Of first order: what is left out is the product of the two, a thousandth.
    expect(fit.strengths[0]! / 1e-13).toBeCloseTo(1, 2);
    expect(fit.strengths[1]! / 2e-3).toBeCloseTo(1, 2);
  });

  it('promise as gain what the parts explain of the weighted energy', () => {
    const echo = placeWith(small);
    const energy = echo.re.reduce((sum, re, b) => sum + 6 * (re * re + echo.im[b]! ** 2), 0);
    const { gain } = fitTables(matchTables(echo, 0, gridM, 10, 12), columns, 1e-8)!;
    expect(gain / (energy / 1e-8)).toBeCloseTo(1, 3);
  });

  it('take a known step off first', () => {
    const step = { type: 'step', strength: 0.02, offsetM: 0 } as const;
    const echo = placeWith([step, { type: 'resistive', strength: 2e-3, offsetM: 5 * gridM }]);
    const fit = fitTables(matchTables(echo, 0.02, gridM, 10, 12), [columns[1]!], 1e-8)!;
    expect(fit.strengths[0]! / 2e-3).toBeCloseTo(1, 2);
  });

  it('hold a part to its prior: one of no spread has no strength', () => {
    const tables = matchTables(placeWith(small), 0, gridM, 10, 12);
    const held = fitTables(tables, [{ reactive: false, at: 5, sigma: 1e-9 }], 1e-8)!;
    expect(Math.abs(held.strengths[0]!)).toBeLessThan(1e-6);
    const free = fitTables(tables, [{ reactive: false, at: 5, sigma: 1 }], 1e-8)!;
    expect(held.gain).toBeLessThan(free.gain);
  });

  it('explain no less with one more part', () => {
    const tables = matchTables(placeWith(small), 0, gridM, 10, 12);
    const one = fitTables(tables, [columns[1]!], 1e-8)!;
    const two = fitTables(tables, columns, 1e-8)!;
    expect(two.gain).toBeGreaterThanOrEqual(one.gain);
  });
});

describe('fitLocal', () => {
  const hypothesis = (sigma: number) => ({
    start: [0.1, 0.001],
    steps: [1e-6, 1e-6],
    parts: (p: Float64Array): LocalPart[] => [{ type: 'resistive', strength: p[0]!, offsetM: p[1]! }],
    priors: (p: Float64Array) => [p[1]! / sigma],
  });

  it('finds strength and place of what stands there, at no cost', () => {
    const echo = placeWith([{ type: 'resistive', strength: 0.3, offsetM: 0.007 }]);
    const fit = fitLocal(echo, hypothesis(1e3), 1e-6);
    expect(fit.parameters[0]).toBeCloseTo(0.3, 5);
    expect(fit.parameters[1]).toBeCloseTo(0.007, 5);
    expect(fit.cost).toBeLessThan(1e-3);
  });

  it('counts priors: what is expected elsewhere costs the square of its deviations', () => {
    const echo = placeWith([{ type: 'resistive', strength: 0.3, offsetM: 0.007 }]);
    // So good a sweep that the place is where it is: 7 mm at 2 mm each.
    expect(fitLocal(echo, hypothesis(0.002), 1e-10).cost).toBeCloseTo(3.5 ** 2, 2);
  });

  it('weighs by the noise: half the deviation, a quarter of the cost', () => {
    const echo = placeWith([{ type: 'reactive', strength: 1e-11, offsetM: 0 }]);
    const [once, twice] = [1e-4, 4e-4].map((variance) => fitLocal(echo, hypothesis(1e6), variance).cost);
    expect(once! / twice!).toBeCloseTo(4, 3);
  });

  it('agrees with the return loss of a lump of the same strength', () => {
    const echo = placeWith([]);
    const frequencyHz = echo.omega.map((w) => w / (2 * Math.PI));
    const lump = { type: 'reactive', strength: -12e-12 } as const;
    expect(reflectionDb(echo, [{ ...lump, offsetM: 0.1 }])).toBeCloseTo(
      lumpReturnLossDb(frequencyHz, lump),
      8,
    );
  });
});
