import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { firstLook } from '../../src/app/first-look.ts';
import type { AnalyseRequest } from '../../src/app/solver.ts';
import { traceWindow } from '../../src/app/trace-view.ts';
import { writeTouchstone } from '../../src/sweep/write-touchstone.ts';
import { makeAnalysis } from './made-analysis.ts';

const analysis = makeAnalysis();
const view = { fromM: -0.4, toM: 22, points: 900 };
const request: AnalyseRequest = {
  sweepFile: 'made.s1p',
  sweepBytes: new TextEncoder().encode(writeTouchstone(analysis.sweep, [])),
  line: analysis.line,
  lineDescribed: true,
  windowSpec: 'kaiser:6',
  port: null,
  offsetM: 0,
  standards: null,
};

describe('firstLook', () => {
  it('draws what the analysis draws where the line is as described', () => {
    const look = firstLook(request, view)!;
    const drawn = traceWindow(analysis, { ...view, windowSpec: 'kaiser:6', corrected: true });
    expect(look.distanceM).toEqual(drawn.distanceM);
    for (let i = 0; i < view.points; i += 7) expect(look.value.re[i]).toBeCloseTo(drawn.value.re[i]!, 6);
  });

  it('gives no answer where the sweep is still to be corrected or moved, or the length is not described', () => {
    const bytes = request.sweepBytes;
    const [section] = analysis.line.sections;
    const line = { ...analysis.line, sections: [{ ...section!, lengthM: null } as typeof section & object] };
    expect(firstLook({ ...request, standards: { open: bytes, short: bytes, load: bytes } }, view)).toBeNull();
    expect(firstLook({ ...request, offsetM: 0.4 }, view)).toBeNull();
    expect(firstLook({ ...request, line }, view)).toBeNull();
  });

  it('leaves out what lies at or below the cut-off of a guide', () => {
    const [section] = analysis.line.sections;
    // c/2a above the lower half of the sweep, below its upper end.
    const { frequencyHz } = analysis.sweep;
    const cutoffHz = frequencyHz[frequencyHz.length >> 1]!;
    const guide = {
      id: 'own',
      name: 'own',
      aMm: 299_792_458e3 / (2 * cutoffHz),
      aToleranceMm: 1,
      bMm: null,
      conductivitySPerM: null,
      lossDbPer100m: 3,
      bandMHz: null,
    };
    const line = {
      ...analysis.line,
      sections: [
        { type: 'guide' as const, guide, lengthM: 20, label: 'tube', jointAfter: section!.jointAfter },
      ],
    };
    const look = firstLook({ ...request, line }, view)!;
    expect(look.value.re.every(Number.isFinite)).toBe(true);
    const narrow = { ...guide, aMm: 1 };
    const none = { ...line, sections: [{ ...line.sections[0]!, guide: narrow }] };
    expect(firstLook({ ...request, line: none }, view)).toBeNull();
  });

  it('leaves it to the analysis to say what cannot be read', () => {
    expect(firstLook({ ...request, sweepBytes: new Uint8Array() }, view)).toBeNull();
    expect(firstLook({ ...request, windowSpec: 'no such' }, view)).toBeNull();
    const noSweep = readFileSync(new URL('../../package.json', import.meta.url));
    expect(firstLook({ ...request, sweepBytes: noSweep }, view)).toBeNull();
  });
});
