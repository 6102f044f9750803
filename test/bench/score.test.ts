import { describe, expect, it } from 'vitest';
import type { Scene, SceneTruth, TrueFault } from '../scenes/scene.ts';
import { drawScene } from '../scenes/suites.ts';
import type { Answer, AnsweredFinding } from './answer.ts';
import { failedAnswer } from './answer.ts';
import { plainRecipe } from './plain-recipe.ts';
import { scoreScene } from './score.ts';

const TRUTH: SceneTruth = {
  faults: [],
  stretches: [],
  end: 'open',
  lengthM: 50,
  jointM: [0, 2, 48, 50],
  jointReturnLossDb: [30, 30, 30, 30],
  ghostsM: [],
  plan: 'wide',
  points: 1350,
  even: true,
  spanHz: 2.698e9,
  resolutionM: 0.05,
  noiseDb: -70,
  structuralReturnLossDb: 40,
  temperatureC: 20,
  cableLossDb: Float64Array.of(1, 2, 3),
  interfered: [],
};

function faultAt(distanceM: number, more: Partial<TrueFault> = {}): TrueFault {
  return {
    distanceM,
    kind: 'series-resistance',
    value: 9,
    unit: 'ohm',
    joint: null,
    apparentReturnLossDb: 25,
    ...more,
  };
}

function findingAt(distanceM: number, more: Partial<AnsweredFinding> = {}): AnsweredFinding {
  return {
    severity: 'fault',
    kind: 'series-resistance',
    distanceM,
    sigmaM: 0.01,
    joint: null,
    confidence: 0.9,
    ...more,
  };
}

function score(truth: Partial<SceneTruth>, answer: Partial<Answer>) {
  const scene: Scene = {
    suite: 'single',
    seed: 1,
    index: 0,
    sweepText: '',
    lineText: '',
    lineDescribed: true,
    truth: { ...TRUTH, ...truth },
  };
  return scoreScene(scene, { ...failedAnswer('', 0), failed: null, ...answer });
}

describe('scoreScene', () => {
  it('counts a fault as found within 0.15 m where half a resolution and 3σ are less', () => {
    const found = (distanceM: number) =>
      score({ faults: [faultAt(20)] }, { findings: [findingAt(distanceM)] }).variants.fault.faults[0]!.found;
    expect(found(20.149)).toBe(true);
    expect(found(20.151)).toBe(false);
  });

  it('widens the tolerance to 3σ, but to no more than 1 % of the line', () => {
    const found = (distanceM: number, sigmaM: number) =>
      score({ faults: [faultAt(20)] }, { findings: [findingAt(distanceM, { sigmaM })] }).variants.fault
        .faults[0]!.found;
    expect(found(20.29, 0.1)).toBe(true);
    expect(found(20.31, 0.1)).toBe(false);
    expect(found(20.6, 5)).toBe(false);
  });

  it('pairs each finding with one fault only: one finding between two faults finds one', () => {
    const { faults, false: extra } = score(
      { faults: [faultAt(20), faultAt(20.04)] },
      { findings: [findingAt(20.02)] },
    ).variants.fault;
    expect(faults.filter((fault) => fault.found)).toHaveLength(1);
    expect(extra).toHaveLength(0);
  });

  it('pairs two close faults in their order rather than by the nearest first', () => {
    const close = [faultAt(20), faultAt(20.03, { kind: 'shunt-leakage' })];
    const answered = [findingAt(20.02), findingAt(20.05, { kind: 'shunt-leakage' })];
    const { faults } = score({ faults: close }, { findings: answered }).variants.fault;
    expect(faults.map((fault) => fault.kindRight)).toEqual([true, true]);
  });

  it('keeps watches out of the stricter count', () => {
    const { variants } = score(
      { faults: [faultAt(20)] },
      { findings: [findingAt(20, { severity: 'watch' }), findingAt(30, { severity: 'watch' })] },
    );
    expect(variants.fault.faults[0]!.found).toBe(false);
    expect(variants.fault.false).toHaveLength(0);
    expect(variants['fault-or-watch'].faults[0]!.found).toBe(true);
    expect(variants['fault-or-watch'].false).toHaveLength(1);
  });

  it('counts a finding where nothing is as false, and as a ghost where a bounce falls', () => {
    const { variants } = score(
      { faults: [faultAt(20)], ghostsM: [40] },
      { findings: [findingAt(20), findingAt(40), findingAt(33)] },
    );
    expect(variants.fault.false.map((finding) => finding.ghost)).toEqual([true, false]);
  });

  it('asks for the very joint', () => {
    const right = (joint: number | null) =>
      score({ faults: [faultAt(48, { joint: 3 })] }, { findings: [findingAt(48, { joint })] }).variants.fault
        .faults[0]!.jointRight;
    expect(right(3)).toBe(true);
    expect(right(null)).toBe(false);
    expect(right(2)).toBe(false);
  });

  it('measures the end against a cut where there is one', () => {
    const cut = faultAt(17.4, { kind: 'open', value: null, unit: null });
    const { end } = score({ faults: [cut] }, { lengthM: 17.42, lengthSigmaM: 0.05, end: 'open' });
    expect(end.kindRight && end.lengthRight).toBe(true);
  });

  it('gives findings inside a true stretch to the stretch, and wants it to overlap by half', () => {
    const stretches = [{ kind: 'wet' as const, fromM: 10, toM: 20, excessLossDb: 1 }];
    const wet = findingAt(15, { kind: 'wet' });
    const over = score({ stretches }, { findings: [wet], stretches: [{ kind: 'wet', fromM: 14, toM: 22 }] });
    expect(over.answeredStretch).toBe('wet');
    expect(over.variants.fault.false).toHaveLength(0);
    const off = score({ stretches }, { findings: [wet], stretches: [{ kind: 'wet', fromM: 19, toM: 29 }] });
    expect(off.answeredStretch).toBeNull();
  });

  it('puts the error of a lone echo over the Cramér–Rao bound', () => {
    // @source references.md section 6: N 401, B 1 GHz, 40 dB → 0.02562 mm at velocity factor 0.88.
    const scene: Scene = {
      ...drawScene('lone-echo', 1, 0),
      truth: {
        ...TRUTH,
        faults: [faultAt(20, { apparentReturnLossDb: 20 })],
        noiseDb: -60,
        points: 401,
        spanHz: 1e9,
        resolutionM: 0.131909,
      },
    };
    const answer = { ...failedAnswer('', 0), failed: null, findings: [findingAt(20 + 0.02562e-3)] };
    expect(scoreScene(scene, answer).errorOverBound).toBeCloseTo(1, 3);
  });
});

describe('plainRecipe', () => {
  it('finds most plain single faults, so that the comparison is with something that works', () => {
    const scenes = Array.from({ length: 12 }, (_, index) => drawScene('single', 17, index));
    const strong = scenes.filter(
      ({ truth }) => truth.faults[0]!.joint === null && truth.faults[0]!.apparentReturnLossDb < 34,
    );
    const found = strong.filter(
      (scene) => scoreScene(scene, plainRecipe(scene)).variants.fault.faults[0]!.found,
    );
    expect(strong.length).toBeGreaterThan(4);
    expect(found.length / strong.length).toBeGreaterThan(0.6);
  });

  it('takes the error of the loss at the middle of the sweep', () => {
    const loss = { lossDb: Float64Array.of(0, 2.03, 0), sigmaDb: Float64Array.of(9, 0.02, 9) };
    const { lossErrorDb, lossSigmaDb } = score({}, { loss });
    expect(lossErrorDb).toBeCloseTo(0.03, 12);
    expect(lossSigmaDb).toBe(0.02);
    expect(score({}, {}).lossErrorDb).toBeNull();
  });
});
