import { describe, expect, it } from 'vitest';
import type { Line } from '../../src/line/line.ts';
import { createDistanceScale } from '../../src/locate/distance-scale.ts';
import { createLineModel, type LineModel } from '../../src/locate/line-model.ts';
import { evenHz, FOAM, lineOf, SOLID } from './drawn-line.ts';

const GRID = evenHz(5e6, 2700e6, 20);
const LINE = lineOf([
  { cable: SOLID, lengthM: 3 },
  { cable: FOAM, lengthM: 20 },
  { cable: SOLID, lengthM: 4 },
]);

/** The model as a fit left it: boundaries where the sweep showed them. */
function fitted(boundaryM: readonly number[], line: Line = LINE): LineModel {
  const lengths = line.sections.map(
    (section, i) => section.lengthM ?? boundaryM[i]! - (boundaryM[i - 1] ?? 0),
  );
  const model = createLineModel(line, GRID, 50, lengths, { lossSigma: 0.03 });
  model.boundaryM.splice(0, boundaryM.length, ...boundaryM);
  return model;
}

describe('createDistanceScale', () => {
  describe('where the line ends about where its description says', () => {
    const model = fitted([3.02, 23.1, 27.15]);
    const scale = createDistanceScale(LINE, model, false);

    it('takes described lengths for the better tape', () => {
      expect(scale.to).toBe('description');
      expect(scale.factor).toBeCloseTo(27 / 27.15, 12);
      expect(scale.notices).toEqual([]);
      expect([1, 2, 3].map((b) => scale.place(model.boundaryM[b - 1]!, b).distanceM)).toEqual([3, 23, 27]);
    });

    it('stretches each section by itself, from 0 at the port', () => {
      expect(scale.place(0, null).distanceM).toBe(0);
      // Half way along the main run.
      expect(scale.place((3.02 + 23.1) / 2, null).distanceM).toBeCloseTo(13, 12);
      for (const b of [3.02, 23.1]) {
        const before = scale.place(b - 1e-9, null).distanceM;
        const after = scale.place(b + 1e-9, null).distanceM;
        expect(after - before).toBeCloseTo(0, 7);
      }
    });

    it('says how a place moves with the distance and with each boundary', () => {
      const atM = 9.4;
      const { perM, perBoundary } = scale.place(atM, null);
      const h = 1e-6;
      const slope = (scale.place(atM + h, null).distanceM - scale.place(atM - h, null).distanceM) / (2 * h);
      expect(perM).toBeCloseTo(slope, 6);
      for (const index of [0, 1, 2]) {
        const moved = (by: number): number => {
          const other = fitted(model.boundaryM.map((m, i) => (i === index ? m + by : m)));
          return createDistanceScale(LINE, other, false).place(atM, null).distanceM;
        };
        expect(perBoundary.get(index) ?? 0).toBeCloseTo((moved(h) - moved(-h)) / (2 * h), 6);
      }
    });

    it('knows a joint as well as the tape that measured the way to it', () => {
      const sigmas = [1, 2, 3].map((b) => scale.place(model.boundaryM[b - 1]!, b).sigmaM);
      expect(sigmas).toEqual([...sigmas].sort((a, b) => a - b));
      expect(sigmas[0]).toBeGreaterThan(0);
      expect(scale.place(3.02, 1).perM).toBe(0);
    });
  });

  describe('where the line ends elsewhere', () => {
    const model = fitted([3, 25, 29]);
    const scale = createDistanceScale(LINE, model, false);

    it('follows the velocity factor and says so, with both lengths', () => {
      expect(scale.to).toBe('velocity-factor');
      expect(scale.notices.map(({ code }) => code)).toEqual(['length-differs']);
      expect(scale.notices[0]!.what).toContain('29.00 m');
      expect(scale.notices[0]!.what).toContain('27.00 m');
      expect(scale.notices[0]!.what).toContain('+7.4 %');
    });

    it('leaves distances as the model has them', () => {
      expect(scale.factor).toBe(1);
      for (const m of [0.5, 12, 28.9]) expect(scale.place(m, null).distanceM).toBeCloseTo(m, 12);
    });

    it('is unsure by the velocity’s tolerance, more the farther out', () => {
      // Types are known to 1 % of a velocity factor of 0.66 or 0.89.
      const { sigmaM } = scale.place(28, null);
      expect(sigmaM).toBeGreaterThan((28 * 0.01) / 0.89);
      expect(sigmaM).toBeLessThan((28 * 0.01) / 0.66 + 0.1);
      expect(scale.place(5, null).sigmaM).toBeLessThan(sigmaM);
    });
  });

  it('keeps the description’s lengths up to a cut, and the velocity’s after that', () => {
    const cut = lineOf([
      { cable: SOLID, lengthM: 3 },
      { cable: FOAM, lengthM: 8 },
    ]);
    const model = fitted([3.05, 11.05], cut);
    const scale = createDistanceScale(LINE, model, true);
    expect(scale.to).toBe('velocity-factor');
    expect(scale.notices).toEqual([]);
    expect(scale.place(3.05, 1).distanceM).toBeCloseTo(3, 12);
    expect(scale.place(11.05, 2).distanceM).toBeCloseTo(11, 12);
  });

  it('has nothing but the velocity for a line of unknown length', () => {
    const open = lineOf([{ cable: SOLID, lengthM: null }]);
    const scale = createDistanceScale(open, fitted([24.3], open), false);
    expect(scale.to).toBe('velocity-factor');
    expect(scale.notices).toEqual([]);
    const end = scale.place(24.3, 1);
    expect(end.distanceM).toBeCloseTo(24.3, 12);
    expect(end.sigmaM).toBeGreaterThan((24.3 * 0.01) / 0.67);
  });

  it('takes a difference of a hundredth for the velocity’s, of a tenth for a wrong description', () => {
    const at = (endM: number) => createDistanceScale(LINE, fitted([3, 23, endM]), false).to;
    expect(at(27.2)).toBe('description');
    expect(at(26.8)).toBe('description');
    expect(at(29.7)).toBe('velocity-factor');
    expect(at(24.3)).toBe('velocity-factor');
  });
});
