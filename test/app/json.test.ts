import { describe, expect, it } from 'vitest';
import { locateDocument } from '../../src/app/json.ts';
import { makeAnalysis } from './made-analysis.ts';

const analysis = makeAnalysis();
const document = locateDocument(analysis, 'feedsonde 0.0.0', [{ code: 'line-beside', what: 'found' }]);

describe('locateDocument', () => {
  it('has the keys of schema 1, in the order of the design', () => {
    expect(Object.keys(document)).toEqual([
      'schema',
      'tool',
      'command',
      'sweep',
      'reach',
      'line',
      'echoes',
      'sections',
      'fit',
      'findings',
      'notices',
    ]);
    expect(document.sweep).toEqual({
      file: 'made.s1p',
      port: 1,
      startHz: 5e6,
      stopHz: 2e9,
      points: 400,
      stepHz: 5e6,
      even: true,
      portOhm: 50,
    });
    expect(document.line).toEqual({
      name: 'Made line',
      lengthM: 20.001,
      describedLengthM: 20,
      delayNs: 151.6,
      end: 'open',
      scaledTo: 'description',
    });
    expect(document.echoes[0]).toEqual({
      distanceM: 8.004,
      distanceSigmaM: 0.012,
      returnLossDb: 22.04,
      correctedReturnLossDb: 20.83,
      kind: 'series-resistance',
      confidence: 0.973,
      ghost: false,
      value: { quantity: 'resistance', value: 9.96, sigma: 0.3, unit: 'ohm' },
      joint: { index: 2, name: 'lower run / upper run' },
      place: 'at joint 2, lower run to upper run',
      severity: 'fault',
    });
  });

  it('counts the echoes of findings without the ghosts, which follow, marked and sound', () => {
    expect(document.findings[0]?.echo).toBe(0);
    expect(document.echoes.map((echo) => echo.ghost)).toEqual([false, false, true]);
    expect(document.echoes[2]).toMatchObject({ severity: 'sound', distanceSigmaM: null, value: null });
  });

  it('puts the notices of reading before those of the analysis', () => {
    expect(document.notices.map((notice) => notice.code)).toEqual(['line-beside', 'made-notice']);
  });

  it('writes null for what is not finite, never NaN', () => {
    const broken = makeAnalysis({
      reach: { ...analysis.reach, weakestReturnLossDb: Number.POSITIVE_INFINITY },
      solution: {
        ...analysis.solution,
        delayNs: Number.NaN,
        echoes: analysis.solution.echoes.map((echo) => ({
          ...echo,
          returnLossDb: Number.POSITIVE_INFINITY,
          value: { quantity: 'resistance', value: 1, sigma: Number.NaN, unit: 'ohm' },
        })),
      },
    });
    const written = locateDocument(broken, 'feedsonde 0.0.0');
    expect(written.line.delayNs).toBeNull();
    expect(written.reach.weakestReturnLossDb).toBeNull();
    expect(written.echoes[0]).toMatchObject({ returnLossDb: null, value: { value: 1, sigma: null } });
    expect(JSON.stringify(written)).not.toContain('NaN');
  });

  it('keeps numbers at full precision', () => {
    const exact = makeAnalysis({ solution: { ...analysis.solution, lengthM: 0.1 + 0.2 } });
    expect(JSON.stringify(locateDocument(exact, 'x'))).toContain('0.30000000000000004');
  });
});
