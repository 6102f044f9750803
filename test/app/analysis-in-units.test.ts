import { describe, expect, it } from 'vitest';
import { analysisInUnits, noticeInUnits } from '../../src/app/analysis-in-units.ts';
import { findingsOf, placesOf } from '../../src/assess/find-findings.ts';
import { makeEcho, makeEnd, makeLine, makeSolution } from '../assess/made-line.ts';
import { makeAnalysis } from './made-analysis.ts';

const line = makeLine();
const solution = makeSolution([makeEcho(), makeEnd()], {
  stretches: [{ fromM: 20, toM: 28, excessLossDb: 1.4, excessLossSigmaDb: 0.2, kind: 'wet' }],
});
const places = placesOf(line, solution);
const severities = ['fault', 'sound'] as const;
const analysis = makeAnalysis({
  line,
  solution,
  severities,
  places,
  findings: findingsOf(line, solution, severities, places),
});

describe('analysisInUnits', () => {
  it('leaves metres as they are', () => {
    expect(analysisInUnits(analysis, 'm')).toBe(analysis);
  });

  it('writes places and sizes in feet, and leaves every number and the advice alone', () => {
    const shown = analysisInUnits(analysis, 'ft');
    // 48 − 31.4 = 16.6 m = 54.5 ft; 20 m = 65.6 ft, 28 m = 91.9 ft, 8 m = 26.2 ft.
    expect(shown.places[0]).toBe('in the main run, 54.5 ft before joint 3');
    const [wet, dent] = shown.findings;
    expect(wet?.where).toBe('in the main run, from 65.6 ft to 91.9 ft');
    expect(wet?.what).toContain('wet cable over 26.2 ft, 1.4 ± 0.2 dB');
    expect(dent?.where).toBe(shown.places[0]);
    expect(shown.findings.map(({ where, what, ...rest }) => rest)).toEqual(
      analysis.findings.map(({ where, what, ...rest }) => rest),
    );
  });
});

describe('noticeInUnits', () => {
  const notice = {
    code: 'length-differs',
    what: 'the line measures 46.99 m by its velocity factor but is described as 45.72 m (+2.8 %): distances follow it',
  };

  it('writes the lengths of a notice in feet, one decimal fewer, and nothing else', () => {
    expect(noticeInUnits(notice, 'm')).toBe(notice);
    expect(noticeInUnits(notice, 'ft').what).toBe(
      'the line measures 154.2 ft by its velocity factor but is described as 150.0 ft (+2.8 %): distances follow it',
    );
    const band = { code: 'band-narrow', what: 'the band of 20 MHz parts only what is 6.61 m apart, on 5 mm' };
    expect(noticeInUnits(band, 'ft').what).toBe(
      'the band of 20 MHz parts only what is 21.7 ft apart, on 5 mm',
    );
  });

  it('leaves a notice alone that holds the name of a file', () => {
    const named = { code: 'line-beside', what: 'the line description is mast 45.72 m.line.json' };
    expect(noticeInUnits(named, 'ft')).toBe(named);
  });
});
