import { describe, expect, it } from 'vitest';
import type { EndModel } from '../../src/line/end.ts';
import type { EndKind, Line } from '../../src/line/line.ts';
import type { EndSearch } from '../../src/locate/end-search.ts';
import { findEnd, truncateLine } from '../../src/locate/find-end.ts';
import { moveEnd } from '../../src/locate/fit-end.ts';
import { ALL_FREE, cloneModel } from '../../src/locate/line-model.ts';
import { evaluateCost } from '../../src/locate/linearise.ts';
import { reviseEnd } from '../../src/locate/revise-end.ts';
import { evenHz, FOAM, lineOf, SOLID } from './drawn-line.ts';
import { contextOn, type DrawnRun, modelOf, reflectionOf, searchOn, withNoise } from './drawn-model.ts';

const WIDE = evenHz(5e6, 2700e6, 540);
const BAND_LIMITED = evenHz(600e6, 2700e6, 540);
const NARROW = evenHz(1700e6, 2200e6, 400);

const ENDS = {
  open: { type: 'open', parameters: [4e-12] },
  short: { type: 'short', parameters: [4e-12] },
  load: { type: 'load', parameters: [1.25, 0] },
  antenna: { type: 'antenna', parameters: [-1, 0, 1, 0, 8, 1900e6] },
} as const satisfies Record<string, EndModel>;

function described(run: DrawnRun, end: EndKind): Line {
  return { ...lineOf(run.sections), end };
}

function searchFor(line: Line, frequencyHz: Float64Array): EndSearch {
  const { taper, resolutionM } = searchOn(frequencyHz, FOAM);
  const stepHz = frequencyHz[1]! - frequencyHz[0]!;
  const unambiguousM = (299_792_458 * 0.89) / (2 * stepHz);
  return { line, portOhm: 50, taper, resolutionM, unambiguousM, lossSigma: 0.03 };
}

/** The end of a noisy sweep of one run, looked for in the description of another. */
function found(truth: DrawnRun, line: Line, frequencyHz: Float64Array, noiseDb = -60) {
  const context = contextOn(frequencyHz, withNoise(reflectionOf(truth, frequencyHz), noiseDb, 9));
  return findEnd(context, searchFor(line, frequencyHz));
}

function oneRun(lengthM: number, end: EndModel): DrawnRun {
  return { sections: [{ cable: FOAM, lengthM }], end };
}

describe('findEnd', () => {
  describe.each([
    ['wide', WIDE],
    ['band-limited', BAND_LIMITED],
    ['narrow', NARROW],
  ])('in a %s sweep of a described line', (_, frequencyHz) => {
    it.each(['open', 'short', 'load', 'antenna'] as const)('finds a described %s where it is', (kind) => {
      // The true line is 0.4 % longer than described.
      const truth = oneRun(20.08, ENDS[kind]);
      const end = found(truth, described(oneRun(20, ENDS[kind]), kind), frequencyHz);
      expect(end.kind).toBe(kind);
      expect(end.cut).toBe(false);
      // An antenna’s resonances and its distance stand for each other in part.
      const toleranceM = kind === 'antenna' ? 0.1 : 0.02;
      expect(Math.abs(end.model.boundaryM[0]! - 20.08)).toBeLessThan(toleranceM);
    });

    it('tells a short from an open that the description had there', () => {
      const end = found(oneRun(20.08, ENDS.short), described(oneRun(20, ENDS.open), 'open'), frequencyHz);
      expect(end.kind).toBe('short');
      expect(end.lead).toBeGreaterThan(2);
    });

    it.each(['open', 'short'] as const)('finds a cut line’s %s, and where', (kind) => {
      const whole: DrawnRun = {
        sections: [
          { cable: FOAM, lengthM: 4 },
          { cable: FOAM, lengthM: 22 },
        ],
        end: ENDS.antenna,
      };
      const truth: DrawnRun = {
        sections: [
          { cable: FOAM, lengthM: 4 },
          { cable: FOAM, lengthM: 9.3 },
        ],
        end: { type: kind, parameters: [0] },
      };
      const end = found(truth, described(whole, 'antenna'), frequencyHz);
      expect(end.kind).toBe(kind);
      expect(end.cut).toBe(true);
      expect(end.line.sections).toHaveLength(2);
      expect(Math.abs(end.model.boundaryM[1]! - 13.3)).toBeLessThan(0.05);
    });
  });

  it.each(['open', 'short'] as const)('finds the %s of a line of unknown length', (kind) => {
    const truth: DrawnRun = { sections: [{ cable: SOLID, lengthM: 17.4 }], end: ENDS[kind] };
    const end = found(truth, lineOf([{ cable: SOLID, lengthM: null }]), WIDE);
    expect(end.kind).toBe(kind);
    expect(Math.abs(end.model.boundaryM[0]! - 17.4)).toBeLessThan(0.02);
    expect(end.line.sections[0]!.lengthM).toBeGreaterThan(17);
  });

  it('finds a load that hardly reflects at the end of a line of unknown length, as no open or short', () => {
    const truth = oneRun(17.4, { type: 'load', parameters: [1.1, 0] });
    const end = found(truth, lineOf([{ cable: FOAM, lengthM: null }]), WIDE, -70);
    expect(['load', 'antenna']).toContain(end.kind);
    expect(Math.abs(end.model.boundaryM[0]! - 17.4)).toBeLessThan(0.05);
  });

  it('counts what is known before the section of unknown length', () => {
    const truth: DrawnRun = {
      sections: [
        { cable: FOAM, lengthM: 4 },
        { cable: FOAM, lengthM: 11 },
      ],
      end: ENDS.open,
    };
    const line = lineOf([
      { cable: FOAM, lengthM: 4 },
      { cable: FOAM, lengthM: null },
    ]);
    const end = found(truth, line, WIDE);
    expect(Math.abs(end.model.boundaryM[1]! - 15)).toBeLessThan(0.02);
    expect(Math.abs(end.line.sections[1]!.lengthM! - 11)).toBeLessThan(0.2);
  });

  it('says off or broken of an antenna that reflects everything', () => {
    const end = found(oneRun(20, ENDS.open), described(oneRun(20, ENDS.antenna), 'antenna'), WIDE);
    expect(end.kind).toBe('open');
  });
});

describe('reviseEnd', () => {
  it('leaves the model as it is where the kind stays', () => {
    const run = oneRun(20, ENDS.open);
    const line = described(run, 'open');
    const context = contextOn(WIDE, withNoise(reflectionOf(run, WIDE), -60, 2));
    const search = searchFor(line, WIDE);
    const { model, kind, lead } = findEnd(context, search);
    const before = cloneModel(model);
    evaluateCost(context, model, ALL_FREE, 1);
    expect(reviseEnd(context, model, search, { kind, lead }).kind).toBe('open');
    expect({ ...model, nextId: 0 }).toEqual({ ...before, nextId: 0 });
  });

  it('puts another kind into the model where that explains the sweep', () => {
    const run = oneRun(20, ENDS.short);
    const context = contextOn(WIDE, withNoise(reflectionOf(run, WIDE), -60, 2));
    const model = modelOf(oneRun(20, ENDS.open), WIDE);
    evaluateCost(context, model, ALL_FREE, 1);
    const search = searchFor(described(run, 'open'), WIDE);
    expect(reviseEnd(context, model, search, { kind: 'open', lead: 1 }).kind).toBe('short');
    expect(model.end.type).toBe('short');
  });
});

describe('truncateLine', () => {
  const LINE = lineOf([
    { cable: SOLID, lengthM: 3 },
    { cable: FOAM, lengthM: 20 },
    { cable: SOLID, lengthM: null },
  ]);
  const lengthsAt = (atM: number) => truncateLine(LINE, atM).sections.map(({ lengthM }) => lengthM);

  it('shortens the section that the cut lies in, and drops what is behind', () => {
    expect(lengthsAt(11)).toEqual([3, 8]);
    expect(lengthsAt(2)).toEqual([2]);
    expect(lengthsAt(30)).toEqual([3, 20, 7]);
  });

  it('keeps a section whole when it is cut at its end', () => {
    expect(lengthsAt(3)).toEqual([3]);
    expect(lengthsAt(23)).toEqual([3, 20]);
  });

  it('leaves some length, and the line that it was given', () => {
    expect(lengthsAt(0)[0]).toBeGreaterThan(0);
    expect(LINE.sections.map(({ lengthM }) => lengthM)).toEqual([3, 20, null]);
  });
});

describe('moveEnd', () => {
  const RUN: DrawnRun = {
    sections: [
      { cable: FOAM, lengthM: 4 },
      { cable: FOAM, lengthM: 20 },
    ],
    end: ENDS.open,
  };

  it('puts the end where it is told, and joints as far as their errors go with its own', () => {
    const model = modelOf(RUN, WIDE);
    const c = model.priors.boundaryCovariance;
    moveEnd(model, 24.3);
    expect(model.boundaryM[1]).toBeCloseTo(24.3, 12);
    expect(model.boundaryM[0]).toBeCloseTo(4 + (c[1]! / c[3]!) * 0.3, 12);
  });

  it('keeps the delay to the end when joints between fast and slow cable move along', () => {
    const mixed: DrawnRun = {
      sections: [
        { cable: SOLID, lengthM: 4 },
        { cable: FOAM, lengthM: 20 },
      ],
      end: ENDS.open,
    };
    const model = modelOf(mixed, WIDE);
    const delay = (joint: number, end: number) => joint / 0.66 + (end - joint) / 0.89;
    moveEnd(model, 24.3);
    const [joint, end] = model.boundaryM;
    expect(joint).toBeGreaterThan(4);
    // The trace has the end at 24.3 m with the joint where it was; velocities here leave dispersion out, 1 % of 0.3 m.
    expect(delay(joint!, end!)).toBeCloseTo(delay(4, 24.3), 2);
  });

  it('comes back by the way it went', () => {
    const model = modelOf(RUN, WIDE);
    moveEnd(model, 22);
    moveEnd(model, 24);
    expect(model.boundaryM).toEqual([4, 24].map((m) => expect.closeTo(m, 12)));
  });

  it('keeps joints before the end', () => {
    const model = modelOf(RUN, WIDE);
    moveEnd(model, 1);
    expect(model.boundaryM[0]).toBeLessThanOrEqual(1);
  });
});
