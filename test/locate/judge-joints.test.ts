import { describe, expect, it } from 'vitest';
import type { LumpedKind } from '../../src/line/discontinuity.ts';
import { refine } from '../../src/locate/fit-cascade.ts';
import { residualVariance } from '../../src/locate/fit-context.ts';
import {
  addSoundJoints,
  judgeJoint,
  judgeJoints,
  quietJoint,
  reactiveStrength,
  residualDb,
  resistiveStrength,
} from '../../src/locate/judge-joints.ts';
import { ALL_FREE, boundaryAt, lumpDistanceM, NOTHING_FREE } from '../../src/locate/line-model.ts';
import { evaluateCost } from '../../src/locate/linearise.ts';
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

const WIDE = evenHz(5e6, 2700e6, 540);
const BAND_LIMITED = evenHz(600e6, 2700e6, 540);
const NARROW = evenHz(1700e6, 2200e6, 400);
const JOINT_M = 6;
const RUN: DrawnRun = {
  sections: [
    { cable: FOAM, lengthM: JOINT_M },
    { cable: { ...FOAM, id: 'other', k1: 0.21 }, lengthM: 14 },
  ],
  end: MATCHED,
};

/** Two halves of a sound connector, 4 cm apart: each returns less than 35 dB at 2.7 GHz. */
const SOUND_HALVES: readonly PutIn[] = [
  { kind: 'series-inductance', value: 0.08e-9, atM: JOINT_M - 0.02 },
  { kind: 'shunt-capacitance', value: 0.03e-12, atM: JOINT_M + 0.02 },
];

/** A model in front of a noisy sweep of the run with these things at its joint. */
function facing(put: readonly PutIn[], frequencyHz = WIDE, run = RUN) {
  const context = contextOn(frequencyHz, withNoise(reflectionOf({ ...run, put }, frequencyHz), -65, 6));
  const model = modelOf(RUN, frequencyHz);
  addSoundJoints(model);
  evaluateCost(context, model, ALL_FREE, 1);
  refine(context, model, ALL_FREE, { variance: residualVariance(context), maxIterations: 4 });
  return { context, model, settings: settingsOf(model, FOAM) };
}

function verdictOn(put: readonly PutIn[], frequencyHz = WIDE, run = RUN) {
  const { context, model, settings } = facing(put, frequencyHz, run);
  return { verdict: judgeJoint(context, model, settings, 1), model };
}

const BAD: readonly { readonly kind: LumpedKind; readonly value: number }[] = [
  { kind: 'series-resistance', value: 20 },
  { kind: 'shunt-leakage', value: 110 },
  { kind: 'series-inductance', value: 4e-9 },
  { kind: 'shunt-capacitance', value: 1.6e-12 },
];

describe('addSoundJoints', () => {
  it('gives every joint before the end two faces at rest that are not a fault’s', () => {
    const model = modelOf(RUN, WIDE);
    addSoundJoints(model);
    for (const boundary of [0, 1]) {
      const faces = model.lumps.filter((lump) => lump.boundary === boundary);
      expect(faces).toHaveLength(2);
      for (const face of faces) {
        expect(face).toMatchObject({ type: 'reactive', strength: 0, offsetSigmaM: 0 });
        // Connectors are some centimetres long, and none lies before the port.
        expect(Math.abs(lumpDistanceM(model, face) - boundaryAt(model, boundary))).toBeLessThan(0.1);
        expect(lumpDistanceM(model, face)).toBeGreaterThan(0);
        // 28–45 dB at the top of the band (references.md section 8): strength of Γ = ωτ/2.
        const levelDb = -20 * Math.log10((2 * Math.PI * 2700e6 * face.strengthSigma!) / 2);
        expect(levelDb).toBeGreaterThan(26);
        expect(levelDb).toBeLessThan(46);
      }
    }
    expect(model.lumps.filter((lump) => lump.boundary === 2)).toEqual([]);
  });
});

describe('judgeJoint', () => {
  describe.each([
    ['wide', WIDE],
    ['band-limited', BAND_LIMITED],
    ['narrow', NARROW],
  ])('in a %s sweep', (_, frequencyHz) => {
    it.each(BAD)('names $kind in a connector that is sound otherwise', ({ kind, value }) => {
      const put = [...SOUND_HALVES, { kind, value, atM: JOINT_M - 0.01 }];
      const { verdict } = verdictOn(put, frequencyHz);
      expect(verdict.boundary).toBe(1);
      expect(verdict.state).toBe(kind);
      // Nine nats are clear odds (design section 6, point 9).
      expect(verdict.odds).toBeGreaterThanOrEqual(9);
    });

    it('calls a sound connector sound', () => {
      const { verdict } = verdictOn(SOUND_HALVES, frequencyHz);
      expect(verdict).toEqual(quietJoint(1));
    });

    it('calls the step between two sound samples sound', () => {
      const run: DrawnRun = {
        ...RUN,
        sections: [RUN.sections[0]!, { cable: { ...RUN.sections[1]!.cable, z0Ohm: 51 }, lengthM: 14 }],
      };
      expect(verdictOn(SOUND_HALVES, frequencyHz, run).verdict.state).toBe('sound');
    });

    it('does not call what a sound connector can mimic: 1.5 Ω', () => {
      const put = [...SOUND_HALVES, { kind: 'series-resistance', value: 1.5, atM: JOINT_M } as const];
      expect(verdictOn(put, frequencyHz).verdict.state).toBe('sound');
    });
  });

  it('leaves the fault in the model, as large as it is and at the joint', () => {
    const put = [...SOUND_HALVES, { kind: 'series-resistance', value: 20, atM: JOINT_M } as const];
    const { model } = verdictOn(put);
    // Samples of both cables may be off by ±1 Ω, a step that looks like as many ohms; three sigma of both.
    expect(Math.abs(resistiveStrength(model, 1) * 50 - 20)).toBeLessThan(3 * Math.SQRT2);
    const fault = model.lumps.find((lump) => lump.boundary === 1 && lump.strengthSigma === null)!;
    expect(Math.abs(lumpDistanceM(model, fault) - JOINT_M)).toBeLessThan(0.03);
  });

  it('leaves no fault in the model of a joint that it acquits, one found before neither', () => {
    const { context, model, settings } = facing(SOUND_HALVES);
    model.lumps.push({
      id: 77,
      type: 'resistive',
      strength: 0.05,
      strengthSigma: null,
      section: 0,
      boundary: 1,
      offsetM: 0,
      offsetSigmaM: 0.02,
      offsetMeanM: 0,
    });
    expect(judgeJoint(context, model, settings, 1).state).toBe('sound');
    expect(model.lumps.every((lump) => lump.strengthSigma !== null)).toBe(true);
    expect(resistiveStrength(model, 1)).toBe(0);
  });

  it('is as sure in the second trial as in the first', () => {
    const put = [...SOUND_HALVES, { kind: 'shunt-leakage', value: 110, atM: JOINT_M } as const];
    const { context, model, settings } = facing(put);
    const first = judgeJoint(context, model, settings, 1);
    const second = judgeJoint(context, model, settings, 1);
    expect(second.state).toBe(first.state);
    expect(model.lumps.filter((lump) => lump.strengthSigma === null)).toHaveLength(1);
  });

  it('blames no joint for the residue of the correction at the port', () => {
    const { context, model, settings } = facing([{ kind: 'series-resistance', value: 4, atM: 0.01 }]);
    expect(judgeJoint(context, model, settings, 0).state).toBe('sound');
  });
});

describe('judgeJoints', () => {
  it('has a verdict on every joint before the end, and finds the bad one unasked', () => {
    const put = [...SOUND_HALVES, { kind: 'shunt-capacitance', value: 1.6e-12, atM: JOINT_M } as const];
    const { context, model, settings } = facing(put);
    const verdicts = judgeJoints(context, model, settings, new Set([1]));
    expect(verdicts.map(({ boundary, state }) => [boundary, state])).toEqual([
      [0, 'sound'],
      [1, 'shunt-capacitance'],
    ]);
  });
});

describe('resistiveStrength and reactiveStrength', () => {
  it('add up what stands at one joint, by kind', () => {
    const model = modelOf(RUN, WIDE);
    addSoundJoints(model);
    const [, , near, far] = model.lumps;
    near!.strength = 3e-12;
    far!.strength = -1e-12;
    expect(reactiveStrength(model, 1)).toBeCloseTo(2e-12, 20);
    expect(reactiveStrength(model, 0)).toBe(0);
    expect(resistiveStrength(model, 1)).toBe(0);
  });
});

describe('residualDb', () => {
  it('is the power of the residual per point that counts', () => {
    const clean = reflectionOf(RUN, WIDE);
    const context = contextOn(WIDE, {
      re: clean.re.map((v) => v + 0.003),
      im: clean.im.map((v) => v - 0.004),
    });
    evaluateCost(context, modelOf(RUN, WIDE), NOTHING_FREE, 1);
    // 0.005² is −46.02 dB.
    expect(residualDb(context)).toBeCloseTo(20 * Math.log10(0.005), 6);
    context.weight[0] = 0;
    context.residual.re[0] = 0;
    context.residual.im[0] = 0;
    expect(residualDb(context)).toBeCloseTo(20 * Math.log10(0.005), 6);
  });

  it('is finite where nothing is left', () => {
    const context = contextOn(WIDE, reflectionOf(RUN, WIDE));
    evaluateCost(context, modelOf(RUN, WIDE), NOTHING_FREE, 1);
    expect(Number.isFinite(residualDb(context))).toBe(true);
  });
});
