import { describe, expect, it } from 'vitest';
import type { Analysis } from '../../src/app/analysis.ts';
import type { Scene, TrueFault } from '../scenes/scene.ts';
import { answerTo, type Sketch, type SketchedFault, sketchedScene } from './sketched-scene.ts';

/** Enough points for a run of 26 m in a wide sweep; a run takes a third of a second. */
const WIDE = { plan: 'wide', points: 675 } as const;
const BAND_LIMITED = { plan: 'band-limited', points: 601 } as const;
const NARROW = { plan: 'narrow-high', points: 401 } as const;

function solved(sketch: Sketch, seed = 1): { scene: Scene; analysis: Analysis } {
  const scene = sketchedScene(sketch, seed);
  const analysis = answerTo(scene);
  expectWhole(analysis);
  return { scene, analysis };
}

/** What holds of every answer: numbers, in order, probabilities, the end last. */
function expectWhole({ solution }: Analysis): void {
  const { echoes } = solution;
  for (const echo of echoes) {
    for (const value of [echo.distanceM, echo.returnLossDb, echo.correctedReturnLossDb])
      expect(Number.isFinite(value)).toBe(true);
    expect(echo.distanceSigmaM).toBeGreaterThan(0);
    expect(echo.confidence).toBeGreaterThanOrEqual(0);
    expect(echo.confidence).toBeLessThanOrEqual(1);
    expect(echo.distanceM).toBeLessThanOrEqual(solution.lengthM + 1e-9);
  }
  const distances = echoes.map(({ distanceM }) => distanceM);
  expect(distances).toEqual([...distances].sort((a, b) => a - b));
  expect(echoes.at(-1)!.distanceM).toBe(solution.lengthM);
  expect(solution.explained).toBeGreaterThan(0.9);
  expect(solution.explained).toBeLessThanOrEqual(1);
}

/** Findings with the joint that they are at. */
function foundIn({ findings, solution }: Analysis) {
  return findings.map(({ kind, distanceM, distanceSigmaM, echo }) => ({
    kind,
    distanceM,
    distanceSigmaM,
    joint: echo === null ? null : (solution.echoes[echo]!.joint?.index ?? null),
    value: echo === null ? null : (solution.echoes[echo]!.value?.value ?? null),
  }));
}

/** Every true fault is found as what it is, where it is and about as large as it is, and nothing else is. */
function expectFound({ scene, analysis }: { scene: Scene; analysis: Analysis }, sizeWithin = 0.2): void {
  const found = foundIn(analysis);
  const { faults } = scene.truth;
  expect(found.map(({ kind }) => kind)).toEqual(faults.map(({ kind }) => kind));
  faults.forEach((fault: TrueFault, k) => {
    const { distanceM, joint, value, distanceSigmaM } = found[k]!;
    // Four of the sigma that it gives itself: the tape and half a per cent of velocity are in it.
    expect(Math.abs(distanceM - fault.distanceM)).toBeLessThan(4 * distanceSigmaM);
    expect(joint).toBe(fault.joint);
    if (fault.value === null) return;
    expect(value! / fault.value).toBeGreaterThan(1 - sizeWithin);
    expect(value! / fault.value).toBeLessThan(1 + sizeWithin);
  });
}

describe('solveLine', () => {
  describe('finds a single flaw in the cable, names it and sizes it', () => {
    const IN_CABLE = [
      { kind: 'series-resistance', value: 12, atM: 13.2 },
      { kind: 'shunt-leakage', value: 200, atM: 9.4 },
      { kind: 'series-inductance', value: 2, atM: 16.3 },
      { kind: 'shunt-capacitance', value: 0.8, atM: 11.1 },
    ] as const satisfies readonly SketchedFault[];

    it.each(IN_CABLE)('$kind in a wide sweep', (fault) => {
      expectFound(solved({ ...WIDE, faults: [fault] }, 1));
    });

    it.each(IN_CABLE)('$kind in a band-limited sweep', (fault) => {
      expectFound(solved({ ...BAND_LIMITED, faults: [fault] }, 4));
    });

    it.each(IN_CABLE)('$kind in a narrow sweep', (fault) => {
      expectFound(solved({ ...NARROW, faults: [fault] }, 2));
    });

    it.each(IN_CABLE.slice(0, 2))('$kind in a sweep of uneven steps', (fault) => {
      expectFound(solved({ ...WIDE, uneven: true, faults: [fault] }, 5));
    });

    it('a weak one, 38 dB as seen from the port', () => {
      const answer = solved({ ...WIDE, faults: [{ kind: 'series-resistance', value: 1.6, atM: 13.2 }] });
      expect(answer.scene.truth.faults[0]!.apparentReturnLossDb).toBeGreaterThan(38);
      expectFound(answer);
    });
  });

  describe('tells two flaws 4 or 5 cm apart from one', () => {
    // The Fourier resolution of a wide sweep is 4.9 cm here, of a band-limited one 6.3 cm.
    it.each([
      ['a resistance and a capacitance', WIDE, 12, 0.6, 0.04],
      ['the same in a band-limited sweep', BAND_LIMITED, 12, 0.6, 0.05],
    ] as const)('%s', (_, plan, ohm, pF, apartM) => {
      const faults = [
        { kind: 'series-resistance', value: ohm, atM: 13.2 },
        { kind: 'shunt-capacitance', value: pF, atM: 13.2 + apartM },
      ] as const;
      expectFound(solved({ ...plan, faults }));
    });

    it('two of one kind', () => {
      const faults = [
        { kind: 'series-resistance', value: 12, atM: 11.1 },
        { kind: 'series-resistance', value: 12, atM: 11.15 },
      ] as const;
      expectFound(solved({ ...WIDE, faults }, 3));
    });
  });

  describe('behind strong flaws', () => {
    it('finds a weak one, and takes no ghost for a flaw', () => {
      // 40 Ω bounces with all that is behind it: 2·13.2 − 8.1 = 18.3 m is clear of everything true.
      const faults = [
        { kind: 'series-resistance', value: 40, atM: 8.1 },
        { kind: 'series-resistance', value: 3, atM: 13.2 },
      ] as const;
      const answer = solved({ ...WIDE, faults });
      expectFound(answer);
    });

    it('explains the bounces between two strong ones', () => {
      const faults = [
        { kind: 'series-resistance', value: 40, atM: 8.1 },
        { kind: 'series-inductance', value: 5, atM: 11.1 },
        { kind: 'shunt-capacitance', value: 0.25, atM: 17.5 },
      ] as const;
      const { scene, analysis } = solved({ ...WIDE, faults }, 4);
      expectFound({ scene, analysis });
      // The first bounce, 2·11.1 − 8.1 = 14.1 m, would be a flaw to the eye.
      expect(scene.truth.ghostsM.some((m) => Math.abs(m - 14.1) < 0.01)).toBe(true);
      expect(foundIn(analysis).every(({ distanceM }) => Math.abs(distanceM - 14.1) > 0.2)).toBe(true);
      // So it is told as what it is.
      const [ghost] = analysis.solution.ghosts.filter(({ distanceM }) => Math.abs(distanceM - 14.1) < 0.1);
      expect(ghost!.betweenM).toHaveLength(2);
    });
  });

  describe('names a bad joint and which it is', () => {
    it.each([
      { kind: 'series-resistance', value: 18, joint: 2 },
      { kind: 'series-resistance', value: 18, joint: 3, half: 'far' },
      { kind: 'shunt-leakage', value: 120, joint: 3 },
      { kind: 'series-inductance', value: 4, joint: 2 },
      { kind: 'shunt-capacitance', value: 1.5, joint: 3 },
    ] as const)('$kind at joint $joint in a wide sweep', (fault) => {
      expectFound(solved({ ...WIDE, faults: [fault] }));
    });

    it('a resistance in a band-limited sweep', () => {
      const faults = [{ kind: 'series-resistance', value: 18, joint: 3 }] as const;
      expectFound(solved({ ...BAND_LIMITED, faults }), 0.25);
    });

    it('an inductance in a narrow sweep', () => {
      expectFound(
        solved({ ...NARROW, faults: [{ kind: 'series-inductance', value: 4, joint: 3 }] }, 6),
        0.25,
      );
    });
  });

  describe('says nothing is wrong with a sound line', () => {
    it.each([
      ['a load', { ...WIDE, end: 'load' }],
      ['an antenna', { ...WIDE, end: 'antenna' }],
      ['an open', { ...WIDE, end: 'open' }],
      ['a short', { ...WIDE, end: 'short' }],
      ['a load, its joints as rough as 31 dB', { ...WIDE, jointDb: 31 }],
      ['an antenna, in a narrow sweep', { ...NARROW, end: 'antenna' }],
      ['a load, in a narrow sweep of few points', { plan: 'narrow-low', points: 201 }],
    ] as const)('to %s', (_, sketch) => {
      const { analysis, scene } = solved(sketch, 3);
      expect(foundIn(analysis)).toEqual([]);
      expect(analysis.solution.end).toBe(scene.truth.end);
      expect(analysis.solution.lengthM).toBeCloseTo(26, 1);
      expect(analysis.solution.scaledTo).toBe('description');
    });
  });

  it.each(['open', 'short'] as const)(
    'finds where a line to an antenna is cut, and that it is %s there',
    (kind) => {
      const { analysis } = solved({ ...WIDE, end: 'antenna', faults: [{ kind, atM: 14.3 }] });
      const { solution } = analysis;
      expect(solution.end).toBe(kind);
      expect(solution.endsEarly).toBe(true);
      expect(Math.abs(solution.lengthM - 14.3)).toBeLessThan(3 * solution.lengthSigmaM);
      expect(foundIn(analysis).map(({ kind: found }) => found)).toEqual([kind]);
    },
  );

  describe('finds the end of a line of which only the cable’s type is known', () => {
    const ONE_RUN = { ...WIDE, typeOnly: true, sections: [{ cable: 'rg-213', lengthM: 18.3 }] } as const;

    it.each(['open', 'short', 'antenna'] as const)('%s', (end) => {
      const { solution } = solved({ ...ONE_RUN, end }, 2).analysis;
      expect(solution.end).toBe(end);
      expect(Math.abs(solution.lengthM - 18.3)).toBeLessThan(3 * solution.lengthSigmaM);
      expect(solution.scaledTo).toBe('velocity-factor');
    });

    it('a load, as something that takes the power', () => {
      const endModel = { kind: 'load', resistanceOhm: 65, inductanceH: 0, capacitanceF: 0 } as const;
      const { solution } = solved({ ...ONE_RUN, end: 'load', endModel }, 2).analysis;
      expect(solution.echoes.at(-1)!.kind).toBe('termination');
      expect(Math.abs(solution.lengthM - 18.3)).toBeLessThan(3 * solution.lengthSigmaM);
      // Γ = 15/115 of the load: 17.7 dB, the connector’s own part in it.
      expect(Math.abs(solution.echoes.at(-1)!.correctedReturnLossDb - 17.7)).toBeLessThan(1.5);
    });

    it('and a flaw on the way', () => {
      const faults = [{ kind: 'series-resistance', value: 20, atM: 11.2 }] as const;
      expectFound(solved({ ...ONE_RUN, end: 'open', faults }, 4));
    });
  });

  it('replaces what carriers have hit, says which, and finds the flaw all the same', () => {
    const { analysis, scene } = solved(
      {
        ...WIDE,
        end: 'antenna',
        carriers: true,
        faults: [{ kind: 'series-resistance', value: 12, atM: 13.2 }],
      },
      3,
    );
    expectFound({ scene, analysis });
    expect(scene.truth.interfered.length).toBeGreaterThan(0);
    const notice = analysis.notices.find(({ code }) => code === 'interference')!;
    const [first] = scene.truth.interfered;
    const atMHz = (analysis.sweep.frequencyHz[first!]! / 1e6).toFixed(1);
    expect(notice.what).toContain(`${atMHz} MHz`);
    expect(notice.what).toContain(`${scene.truth.interfered.length} point`);
  });

  it('says nothing of carriers where there are none', () => {
    const { analysis } = solved({ ...WIDE, end: 'antenna' }, 3);
    expect(analysis.notices.filter(({ code }) => code === 'interference')).toEqual([]);
  });

  it('finds the flaw where a length is described 2 % too long, within that', () => {
    const sections = [
      { cable: 'foam-half-extraflex', lengthM: 3 },
      { cable: 'foam-half', lengthM: 20, describedLengthM: 20.4 },
      { cable: 'foam-half-extraflex', lengthM: 3 },
    ] as const;
    const faults = [{ kind: 'series-resistance', value: 12, atM: 13.2 }] as const;
    const { analysis } = solved({ ...WIDE, end: 'open', sections, faults }, 5);
    const [found, ...more] = foundIn(analysis);
    expect(more).toEqual([]);
    expect(found!.kind).toBe('series-resistance');
    expect(Math.abs(found!.distanceM / 13.2 - 1)).toBeLessThan(0.025);
  });

  it('explains the sweep down to its noise and structure, and keeps the sweep as it was', () => {
    const { analysis, scene } = solved({ ...WIDE, end: 'open' }, 3);
    const { solution, sweep } = analysis;
    expect(solution.residualDb).toBeLessThan(-40);
    expect(solution.modelGamma.re).toHaveLength(scene.truth.points);
    const [first] = scene.sweepText.split('\n').slice(2);
    expect(sweep.gamma.re[0]).toBeCloseTo(Number(first!.split(' ')[1]), 9);
  });

  it('gives the same answer to the same sweep', () => {
    const sketch = { ...NARROW, faults: [{ kind: 'series-resistance', value: 12, atM: 13.2 }] } as const;
    expect(solved(sketch, 2).analysis.solution).toEqual(solved(sketch, 2).analysis.solution);
  });
});
