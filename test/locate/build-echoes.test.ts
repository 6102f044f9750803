import { describe, expect, it } from 'vitest';
import { strengthOf } from '../../src/line/discontinuity.ts';
import { coaxMedium } from '../../src/line/medium.ts';
import { buildEchoes, type EchoParts } from '../../src/locate/build-echoes.ts';
import { createDistanceScale } from '../../src/locate/distance-scale.ts';
import { quietJoint } from '../../src/locate/judge-joints.ts';
import { addFreeLump, addLump, type LineModel } from '../../src/locate/line-model.ts';
import { evenHz, FOAM, lineOf, MATCHED, OPEN } from './drawn-line.ts';
import { contextOn, type DrawnRun, EACH_KIND, modelOf, reflectionOf, varianceOf } from './drawn-model.ts';

const GRID = evenHz(5e6, 2700e6, 540);
const RUN: DrawnRun = {
  sections: [
    { cable: FOAM, lengthM: 5 },
    { cable: { ...FOAM, id: 'other' }, lengthM: 15 },
  ],
  end: OPEN,
};
const LINE = lineOf(RUN.sections);
const VARIANCE = varianceOf(-60);

/** Echoes of a model that is the line itself. */
function echoesOf(model: LineModel, parts: Partial<EchoParts> = {}) {
  return buildEchoes(contextOn(GRID, reflectionOf(RUN, GRID)), model, {
    line: LINE,
    joints: [],
    endJoint: null,
    lumps: model.lumps.map(({ id }) => ({ id, confidence: 0.9, resolved: true })),
    endKind: 'open',
    endConfidence: 0.8,
    endsEarly: false,
    scale: createDistanceScale(LINE, model, false),
    varianceAt: () => VARIANCE,
    ...parts,
  });
}

/** A joint's fault, 1 cm before it. */
function spoilJoint(model: LineModel, strength: number): void {
  addLump(model, {
    type: 'resistive',
    strength,
    strengthSigma: null,
    section: 0,
    boundary: 1,
    offsetM: -0.01,
    offsetSigmaM: 0.02,
    offsetMeanM: 0,
  });
}

/** One-way loss of the cable, RMS over the band of what it leaves of a reflection at a distance, dB. */
function roundTripDb(distanceM: number): number {
  const { gamma } = coaxMedium(FOAM, GRID, { temperatureC: 20 });
  const mean = gamma.re.reduce((sum, a) => sum + Math.exp(-4 * a * distanceM), 0) / GRID.length;
  return -10 * Math.log10(mean);
}

describe('buildEchoes', () => {
  it.each(EACH_KIND)('gives $kind its size in its own unit', ({ kind, value }) => {
    const model = modelOf(RUN, GRID);
    addFreeLump(model, { ...strengthOf(kind, value, 50), distanceM: 9 });
    const [echo] = echoesOf(model);
    expect(echo!.kind).toBe(kind);
    const perUnit = { ohm: 1, nH: 1e9, pF: 1e12, dB: Number.NaN, z0: Number.NaN }[echo!.value!.unit];
    expect(echo!.value!.value).toBeCloseTo(value * perUnit, 9);
    expect(echo!.value!.quantity).toBe(
      { ohm: 'resistance', nH: 'inductance', pF: 'capacitance', dB: '', z0: '' }[echo!.value!.unit],
    );
    // 26 dB or so over −60 dB in 540 points.
    expect(echo!.value!.sigma! / echo!.value!.value).toBeGreaterThan(1e-4);
    expect(echo!.value!.sigma! / echo!.value!.value).toBeLessThan(0.05);
  });

  it('gives levels as seen from the port, and with the loss on the way taken off', () => {
    const model = modelOf(RUN, GRID);
    addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM: 9 });
    const [echo] = echoesOf(model);
    // 5 Ω in 50: Γ = 5/105.
    expect(echo!.correctedReturnLossDb).toBeCloseTo(20 * Math.log10(105 / 5), 6);
    expect(echo!.returnLossDb - echo!.correctedReturnLossDb).toBeCloseTo(roundTripDb(9), 2);
  });

  it('takes what stands before off an echo’s level, too', () => {
    const model = modelOf({ ...RUN, end: MATCHED }, GRID);
    addFreeLump(model, { type: 'resistive', strength: 2, distanceM: 3 });
    addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM: 9 });
    const [, behind] = echoesOf(model);
    // Through 100 Ω in series twice: (1 − 1/2)², −12.04 dB; bounces with the echo itself add 0.4 dB at most.
    expect(behind!.correctedReturnLossDb).toBeCloseTo(20 * Math.log10(105 / 5), 6);
    expect(behind!.returnLossDb - behind!.correctedReturnLossDb).toBeCloseTo(roundTripDb(9) + 12.04, 0);
  });

  it('lists echoes by distance, the end last', () => {
    const model = modelOf(RUN, GRID);
    for (const distanceM of [12, 2, 9]) addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM });
    const echoes = echoesOf(model);
    const distances = echoes.map(({ distanceM }) => distanceM);
    expect(distances).toEqual([2, 9, 12, 20].map((m) => expect.closeTo(m, 9)));
    expect(echoes.map(({ section }) => section)).toEqual([0, 1, 1, 1]);
    expect(echoes.map(({ joint }) => joint?.index ?? null)).toEqual([null, null, null, 3]);
    expect(echoes.at(-1)!.kind).toBe('open');
    expect(echoes.at(-1)!.confidence).toBe(0.8);
  });

  it('is surer of a strong echo’s place than of a weak one’s, and never surer than a tape', () => {
    const sigmaAt = (strength: number): number => {
      const model = modelOf(RUN, GRID);
      addFreeLump(model, { type: 'resistive', strength, distanceM: 9 });
      return echoesOf(model, { varianceAt: () => varianceOf(-20) })[0]!.distanceSigmaM;
    };
    expect(sigmaAt(0.01)).toBeGreaterThan(sigmaAt(0.2));
    expect(sigmaAt(0.2)).toBeGreaterThan(0.001);
  });

  it('is less sure where the floor is higher', () => {
    const sigmaWith = (floor: number): number => {
      const model = modelOf(RUN, GRID);
      addFreeLump(model, { type: 'resistive', strength: 0.05, distanceM: 9 });
      const varianceAt = (m: number) => (m > 8 ? floor : VARIANCE);
      return echoesOf(model, { varianceAt })[0]!.value!.sigma!;
    };
    expect(sigmaWith(9 * VARIANCE) / sigmaWith(VARIANCE)).toBeCloseTo(3, 6);
  });

  it('says unresolved of a kind that was a coin toss, with the size of the likelier', () => {
    const model = modelOf(RUN, GRID);
    const lump = addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM: 9 });
    const [echo] = echoesOf(model, { lumps: [{ id: lump.id, confidence: 0.55, resolved: false }] });
    expect(echo).toMatchObject({ kind: 'unresolved', confidence: 0.55 });
    expect(echo!.value).toMatchObject({ quantity: 'resistance', unit: 'ohm' });
  });

  describe('at a joint', () => {
    const verdict = { boundary: 1, state: 'series-resistance', clear: true, odds: 200, lead: 100 } as const;

    it('names the joint and puts its fault where the joint is', () => {
      const model = modelOf(RUN, GRID);
      spoilJoint(model, 0.3);
      const [echo] = echoesOf(model, { joints: [quietJoint(0), verdict] });
      expect(echo!.kind).toBe('series-resistance');
      expect(echo!.joint).toEqual({ index: 2, name: 'section 1 / section 2' });
      expect(echo!.distanceM).toBeCloseTo(5, 9);
      expect(echo!.value!.value).toBeCloseTo(15, 9);
      expect(echo!.confidence).toBeGreaterThan(0.95);
    });

    it('is less confident, the nearer another kind comes', () => {
      const model = modelOf(RUN, GRID);
      spoilJoint(model, 0.3);
      const confidenceAt = (lead: number) =>
        echoesOf(model, { joints: [{ ...verdict, lead }] })[0]!.confidence;
      expect(confidenceAt(0.1)).toBeLessThan(confidenceAt(3));
      expect(confidenceAt(0.1)).toBeGreaterThan(0.3);
      expect(confidenceAt(0.1)).toBeLessThan(0.7);
      const tossed = echoesOf(model, { joints: [{ ...verdict, clear: false, lead: 0.1 }] })[0]!;
      expect(tossed.kind).toBe('unresolved');
    });

    it('lists a sound joint that shows by its return loss, and leaves out one that does not', () => {
      const model = modelOf(RUN, GRID);
      expect(echoesOf(model, { joints: [quietJoint(1)] })).toHaveLength(1);
      model.impedanceRatio[1] = 0.04;
      const [joint] = echoesOf(model, { joints: [quietJoint(1)] });
      // A step of 4 % returns 2 %: 34 dB.
      expect(joint!.kind).toBe('joint');
      expect(joint!.value!.quantity).toBe('return loss');
      expect(joint!.correctedReturnLossDb).toBeCloseTo(20 * Math.log10(2 / 0.04), 1);
    });
  });

  describe('at the end', () => {
    it.each(['open', 'short'] as const)('calls a full reflection %s, 0 dB, of no size', (endKind) => {
      const model = modelOf({ ...RUN, end: { type: endKind, parameters: [3e-12] } }, GRID);
      const end = echoesOf(model, { endKind }).at(-1)!;
      expect(end).toMatchObject({ kind: endKind, value: null });
      expect(end.correctedReturnLossDb).toBeCloseTo(0, 9);
      expect(end.returnLossDb).toBeCloseTo(roundTripDb(20), 2);
    });

    it.each(['load', 'antenna'] as const)('calls a %s a termination, with its return loss', (endKind) => {
      // r = 1.5: Γ = 0.2, 13.98 dB.
      const model = modelOf({ ...RUN, end: { type: 'load', parameters: [1.5, 0] } }, GRID);
      const end = echoesOf(model, { endKind }).at(-1)!;
      expect(end.kind).toBe('termination');
      expect(end.value).toMatchObject({ quantity: 'return loss', unit: 'dB' });
      expect(end.value!.value).toBeCloseTo(13.979, 2);
    });

    it('is no joint where the line stops early', () => {
      const end = echoesOf(modelOf(RUN, GRID), { endsEarly: true }).at(-1)!;
      expect(end.joint).toBeNull();
    });

    it('has a fault of the last joint before it, and stays last', () => {
      const endJoint = { state: 'series-resistance', strength: 0.4, odds: 50, lead: 20 } as const;
      const model = modelOf({ ...RUN, end: MATCHED }, GRID);
      const echoes = echoesOf(model, { endJoint, endKind: 'load' });
      expect(echoes.map(({ kind }) => kind)).toEqual(['series-resistance', 'termination']);
      expect(echoes[0]!.joint!.index).toBe(3);
      expect(echoes[0]!.value!.value).toBeCloseTo(20, 9);
    });
  });

  it('gives numbers and no nonsense for a model that nothing is known of', () => {
    const model = modelOf({ ...RUN, end: MATCHED }, GRID);
    addFreeLump(model, { type: 'resistive', strength: 0, distanceM: 9 });
    for (const echo of echoesOf(model, { endKind: 'load' })) {
      for (const value of [
        echo.distanceM,
        echo.distanceSigmaM,
        echo.returnLossDb,
        echo.correctedReturnLossDb,
      ])
        expect(Number.isFinite(value)).toBe(true);
    }
  });
});
