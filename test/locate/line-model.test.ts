import { describe, expect, it } from 'vitest';
import { createCascade } from '../../src/line/cascade.ts';
import { strengthOf } from '../../src/line/discontinuity.ts';
import {
  ALL_FREE,
  addFreeLump,
  addLump,
  around,
  boundaryAt,
  cloneModel,
  createLineModel,
  type LineModel,
  lumpDistanceM,
  NOTHING_FREE,
  removeLump,
  restoreModel,
  sectionAt,
} from '../../src/locate/line-model.ts';
import { translate } from '../../src/locate/translate-model.ts';
import { evenHz, FOAM, lineOf, MATCHED, OPEN, SOLID, THIN } from './drawn-line.ts';
import { type DrawnRun, modelOf, reflectionOf } from './drawn-model.ts';

const GRID = evenHz(2e6, 2700e6, 60);
const SECTIONS = [
  { cable: SOLID, lengthM: 2 },
  { cable: FOAM, lengthM: 30 },
  { cable: SOLID, lengthM: 3 },
];
const RUN: DrawnRun = { sections: SECTIONS, end: OPEN };

function covarianceAt(model: LineModel, i: number, j: number): number {
  return model.priors.boundaryCovariance[i * model.boundaryM.length + j]!;
}

/** A model with one of everything in it. */
function furnished(): LineModel {
  const model = modelOf(RUN, GRID);
  addFreeLump(model, { type: 'resistive', strength: 0.2, distanceM: 11 });
  addLump(model, {
    type: 'reactive',
    strength: 3e-12,
    strengthSigma: 2e-12,
    section: 0,
    boundary: 1,
    offsetM: -0.02,
    offsetSigmaM: 0,
    offsetMeanM: -0.02,
  });
  model.conductor = 0.05;
  model.dielectric = -0.1;
  model.impedanceRatio[1] = 0.02;
  model.residue[0]!.re = 0.004;
  return model;
}

describe('createLineModel', () => {
  it('puts each boundary where the described lengths add up to', () => {
    const model = modelOf(RUN, GRID);
    expect(model.boundaryM).toEqual([2, 32, 35]);
    expect(model.priors.boundaryMeanM).toEqual([2, 32, 35]);
    expect([0, 1, 2, 3].map((i) => boundaryAt(model, i))).toEqual([0, 2, 32, 35]);
  });

  it('has a precision of the boundaries that is the inverse of their covariance', () => {
    const { boundaryCovariance: c, boundaryPrecision: p } = modelOf(RUN, GRID).priors;
    for (let i = 0; i < 3; i++) {
      for (let j = 0; j < 3; j++) {
        let sum = 0;
        for (let k = 0; k < 3; k++) sum += c[i * 3 + k]! * p[k * 3 + j]!;
        expect(sum).toBeCloseTo(i === j ? 1 : 0, 8);
        expect(c[i * 3 + j]).toBeCloseTo(c[j * 3 + i]!, 14);
      }
    }
  });

  it('trusts a place the less, the longer the way to it, and never more than its cable’s velocity', () => {
    const model = modelOf(RUN, GRID);
    const sigmas = [0, 1, 2].map((i) => Math.sqrt(covarianceAt(model, i, i)));
    expect(sigmas).toEqual([...sigmas].sort((a, b) => a - b));
    // 1 % of 0.89 on 30 m alone.
    expect(sigmas[1]).toBeGreaterThan((30 * 0.01) / 0.89);
  });

  it('takes sections of one cable to be off in the same way, more than those of different cables', () => {
    const between = (second: typeof FOAM): number => {
      const run = {
        sections: [
          { cable: FOAM, lengthM: 10 },
          { cable: second, lengthM: 10 },
        ],
        end: OPEN,
      };
      const model = modelOf(run, GRID);
      // Covariance of the two lengths: cov(b1, b2 − b1).
      return covarianceAt(model, 0, 1) - covarianceAt(model, 0, 0);
    };
    expect(between(FOAM)).toBeGreaterThan(between({ ...FOAM, id: 'another' }));
    expect(between({ ...FOAM, id: 'another' })).toBeGreaterThan(0);
  });

  it('adds what is said of the length to the end alone', () => {
    const known = modelOf(RUN, GRID);
    const loose = createLineModel(lineOf(SECTIONS), GRID, 50, [2, 30, 3], {
      lossSigma: 0.03,
      lengthSigmaM: 7,
    });
    for (let i = 0; i < 3; i++)
      for (let j = 0; j < 3; j++)
        expect(covarianceAt(loose, i, j) - covarianceAt(known, i, j)).toBeCloseTo(
          i === 2 && j === 2 ? 49 : 0,
          9,
        );
  });
});

describe('translate', () => {
  it('gives the stages of the run: Γ as of the same run put together by hand', () => {
    const model = modelOf(RUN, GRID);
    const put = [
      { kind: 'series-resistance', value: 9, atM: 11 },
      { kind: 'shunt-capacitance', value: 0.5e-12, atM: 31.9 },
      { kind: 'series-inductance', value: 1e-9, atM: 33 },
    ] as const;
    for (const { kind, value, atM } of [put[2], put[0]])
      addFreeLump(model, { ...strengthOf(kind, value, 50), distanceM: atM });
    addLump(model, {
      ...strengthOf(put[1].kind, put[1].value, 50),
      strengthSigma: null,
      section: 1,
      boundary: 2,
      offsetM: -0.1,
      offsetSigmaM: 0,
      offsetMeanM: -0.1,
    });
    model.conductor = 0.07;
    model.dielectric = -0.2;
    const gamma = createCascade(GRID).gamma(translate(model, NOTHING_FREE).stages, model.end);
    const wanted = reflectionOf({ ...RUN, put, conductor: 0.07, dielectric: -0.2 }, GRID);
    GRID.forEach((_, k) => {
      expect(gamma.re[k]).toBeCloseTo(wanted.re[k]!, 11);
      expect(gamma.im[k]).toBeCloseTo(wanted.im[k]!, 11);
    });
  });

  it('has a step at every boundary before the end, and names the stages of boundaries and lumps', () => {
    const model = furnished();
    const { stages, stageOfBoundary, stageOfLump } = translate(model, ALL_FREE);
    expect(stageOfBoundary.map((s) => stages[s]!.type)).toEqual(['step', 'step', 'step']);
    for (const lump of model.lumps)
      expect(stages[stageOfLump.get(lump.id)!]).toMatchObject({ type: lump.type, strength: lump.strength });
  });

  it('reads the ratio of a section’s impedance at both of its ends, opposite ways', () => {
    const model = modelOf(RUN, GRID);
    model.impedanceRatio[1] = 0.1;
    const { stages, stageOfBoundary } = translate(model, NOTHING_FREE);
    const ratios = stageOfBoundary.map((s) => {
      const stage = stages[s]!;
      return stage.type === 'step' ? Math.log(stage.ratio) : Number.NaN;
    });
    expect(ratios).toEqual([0, 0.1, -0.1].map((r) => expect.closeTo(r, 12)));
  });

  it('gives parameters that read and write the model, stand within their bounds and may move', () => {
    const model = furnished();
    const { parameters } = translate(model, ALL_FREE);
    const before = parameters.map((parameter) => parameter.get());
    for (const parameter of parameters) {
      const value = parameter.get();
      expect(value, parameter.name).toBeGreaterThanOrEqual(parameter.minimum);
      expect(value, parameter.name).toBeLessThanOrEqual(parameter.maximum);
      expect(parameter.stepLimit, parameter.name).toBeGreaterThan(0);
      parameter.set(value + 1e-3);
      expect(parameter.get(), parameter.name).toBeCloseTo(value + 1e-3, 12);
      parameter.set(value);
    }
    expect(parameters.map((parameter) => parameter.get())).toEqual(before.map((v) => expect.closeTo(v, 12)));
  });

  it('has names that tell parameters of the line apart', () => {
    const { parameters, residueColumn } = translate(furnished(), ALL_FREE);
    const names = parameters.slice(0, residueColumn).map((parameter) => parameter.name);
    expect(new Set(names).size).toBe(names.length);
  });

  it('frees nothing, or only what it is told to', () => {
    const model = furnished();
    expect(translate(model, NOTHING_FREE).parameters).toEqual([]);
    const lump = model.lumps[0]!.id;
    const only = translate(model, { ...NOTHING_FREE, lumps: new Set([lump]), boundaries: new Set([1]) });
    expect(only.parameters.map((p) => p.lump ?? `boundary ${p.boundary}`).sort()).toEqual(
      ['boundary 1', lump, lump].sort(),
    );
  });

  it('does not move what is held in place: its strength alone is free', () => {
    const model = furnished();
    const held = model.lumps[1]!;
    const own = translate(model, ALL_FREE).parameters.filter((p) => p.lump === held.id);
    expect(own).toHaveLength(1);
    expect(own[0]!.get()).toBe(held.strength);
  });
});

describe('lumps', () => {
  it('tied to a boundary move with it; free ones stay', () => {
    const model = furnished();
    const [free, tied] = model.lumps;
    expect(lumpDistanceM(model, tied!)).toBeCloseTo(1.98, 12);
    model.boundaryM[0] = 2.3;
    expect(lumpDistanceM(model, tied!)).toBeCloseTo(2.28, 12);
    expect(lumpDistanceM(model, free!)).toBe(11);
  });

  it('get ids of their own, and go by them', () => {
    const model = furnished();
    const third = addFreeLump(model, { type: 'reactive', strength: 1e-12, distanceM: 33 });
    expect(new Set(model.lumps.map((lump) => lump.id)).size).toBe(3);
    expect(third.section).toBe(2);
    removeLump(model, third.id);
    removeLump(model, 999);
    expect(model).toEqual({ ...furnished(), nextId: model.nextId });
  });
});

describe('sectionAt', () => {
  it('counts a boundary to what follows it, and everything past the end to the last section', () => {
    const model = modelOf(RUN, GRID);
    expect([0, 1.99, 2, 31.9, 32, 35, 80].map((m) => sectionAt(model, m))).toEqual([0, 0, 1, 1, 2, 2, 2]);
  });
});

describe('cloneModel and restoreModel', () => {
  it('make a copy that can be changed, and bring it back', () => {
    const model = furnished();
    const copy = cloneModel(model);
    copy.boundaryM[1] = 31;
    copy.lumps[0]!.strength = 0.5;
    copy.residue[0]!.re = 0.1;
    copy.end = MATCHED;
    copy.conductor = 0.2;
    removeLump(copy, copy.lumps[1]!.id);
    expect(model).toEqual(furnished());
    restoreModel(model, copy);
    expect({ ...model, nextId: 0 }).toEqual({ ...copy, nextId: 0 });
    // Still two: a change of one leaves the other.
    model.lumps[0]!.strength = 0.7;
    expect(copy.lumps[0]!.strength).toBe(0.5);
  });

  it('never hand out an id twice', () => {
    const model = furnished();
    const before = cloneModel(model);
    const added = addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM: 20 });
    restoreModel(model, before);
    expect(addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM: 20 }).id).not.toBe(added.id);
  });
});

describe('around', () => {
  it('frees what stands between two distances and what everything behind it needs', () => {
    const model = furnished();
    addFreeLump(model, { type: 'reactive', strength: 1e-12, distanceM: 25 });
    const freedom = around(model, 10, 12);
    expect([...freedom.lumps!]).toEqual([model.lumps[0]!.id]);
    expect(freedom.loss).toBe(true);
    expect(freedom.end).toBe(true);
    expect(freedom.boundaries).toBeNull();
  });

  it('leaves the residue to the port and the impedances to their joints', () => {
    const model = furnished();
    expect(around(model, -1, 1).residue).toBe(true);
    expect(around(model, 10, 12).residue).toBe(false);
    expect(around(model, 10, 12).impedances!.size).toBe(0);
    expect([...around(model, 31, 33).impedances!].sort()).toEqual([1, 2]);
  });

  it('does not let an antenna follow', () => {
    const model = furnished();
    model.end = { type: 'antenna', parameters: [0.8, 0] };
    expect(around(model, 10, 12).end).toBe(false);
  });
});

describe('a thin cable’s model', () => {
  it('keeps the described medium: loss enters through its own two numbers', () => {
    const run: DrawnRun = { sections: [{ cable: THIN, lengthM: 5 }], end: OPEN };
    const model = modelOf(run, GRID);
    model.conductor = 0.5;
    const gamma = createCascade(GRID).gamma(translate(model, NOTHING_FREE).stages, model.end);
    const wanted = reflectionOf({ ...run, conductor: 0.5 }, GRID);
    expect(gamma.re[30]).toBeCloseTo(wanted.re[30]!, 12);
  });
});
