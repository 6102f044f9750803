import { describe, expect, it } from 'vitest';
import { matchCurves } from '../../src/assess/match-curves.ts';
import { makeAnalysis } from '../app/made-analysis.ts';

const { sweep, line, solution } = makeAnalysis();
const bands = [
  { name: 'low', fromHz: 700e6, toHz: 900e6, returnLossDb: 14 },
  { name: 'not swept', fromHz: 5e9, toHz: 6e9, returnLossDb: 14 },
];

describe('matchCurves', () => {
  it('matchCurves gives the sweep itself at the port', () => {
    const { port } = matchCurves({ sweep, line, solution, limits: [] });
    expect(port.frequencyHz).toBe(sweep.frequencyHz);
    expect(port.gamma).toBe(sweep.gamma);
  });

  it('matchCurves gives the end within each swept band, where an open reflects all that the fault lets through', () => {
    const { end, endMissing } = matchCurves({
      sweep,
      line: { ...line, limits: { ...line.limits, bands } },
      solution,
      limits: [],
    });
    expect(endMissing).toBeNull();
    expect(end).toHaveLength(1);
    expect(end[0]!.frequencyHz[0]).toBe(700e6);
    expect(end[0]!.frequencyHz.at(-1)).toBe(900e6);
    // 10 Ω in series between 50 Ω passes 1 − 10/110, there and back.
    const passed = (1 - 10 / 110) ** 2;
    end[0]!.gamma.re.forEach((re, i) => {
      expect(Math.hypot(re, end[0]!.gamma.im[i]!)).toBeCloseTo(passed, 1);
    });
  });

  it('matchCurves gives the end over the whole sweep where the line names no band', () => {
    const { end } = matchCurves({ sweep, line, solution, limits: [] });
    expect(end[0]!.frequencyHz.length).toBe(sweep.frequencyHz.length);
  });

  it('matchCurves says why there is no end to look at', () => {
    const cut = matchCurves({ sweep, line, solution: { ...solution, endsEarly: true }, limits: [] });
    expect(cut.end).toEqual([]);
    expect(cut.endMissing).toContain('stops before its end');
    const unswept = { ...line, limits: { ...line.limits, bands: bands.slice(1) } };
    expect(matchCurves({ sweep, line: unswept, solution, limits: [] }).endMissing).toContain(
      'none of the bands',
    );
  });

  it('matchCurves keeps the limits of match and leaves the others out', () => {
    const result = {
      band: null,
      limitDb: 1,
      valueDb: 1,
      marginDb: 0,
      atHz: 1,
      where: null,
      pass: true,
      isDefault: false,
      why: null,
    };
    const limits = [
      { ...result, limit: 'match-at-port' as const },
      { ...result, limit: 'loss' as const },
      { ...result, limit: 'match-at-end' as const },
    ];
    const { results } = matchCurves({ sweep, line, solution, limits });
    expect(results.map(({ limit }) => limit)).toEqual(['match-at-port', 'match-at-end']);
  });
});
