import { describe, expect, it } from 'vitest';
import { locateDocument } from '../../src/app/json.ts';
import { makeAnalysis } from './made-analysis.ts';

const analysis = makeAnalysis();
const document = locateDocument(analysis, 'feedsonde 0.0.0', [{ code: 'line-beside', what: 'found' }]);

/** Schema 1, key by key, in order; a list stands for each of its entries. */
const SCHEMA_1 = {
  '': 'schema tool command sweep reach line echoes sections fit findings notices',
  sweep: 'file port startHz stopHz points stepHz even portOhm',
  reach: 'resolutionM unambiguousM weakestReturnLossDb impedanceProfile',
  line: 'name lengthM describedLengthM delayNs end scaledTo',
  'echoes[]':
    'distanceM distanceSigmaM returnLossDb correctedReturnLossDb kind confidence ghost value joint place severity',
  'echoes[].value': 'quantity value sigma unit',
  'echoes[].joint': 'index name',
  'sections[]': 'fromM toM excessLossDb excessLossSigmaDb kind',
  fit: 'residualDb explained elements',
  'findings[]': 'severity echo kind distanceM where what confidence causes checks bring',
  'notices[]': 'code what',
};

/** Keys of every object inside a value, under its path; a path met with other keys again throws. */
function keysByPath(value: unknown, path = '', found: Record<string, string> = {}): Record<string, string> {
  if (Array.isArray(value)) for (const entry of value) keysByPath(entry, `${path}[]`, found);
  else if (typeof value === 'object' && value !== null) {
    const keys = Object.keys(value).join(' ');
    if ((found[path] ?? keys) !== keys) throw new Error(`${path}: once ${found[path]}, once ${keys}`);
    found[path] = keys;
    for (const [key, entry] of Object.entries(value))
      keysByPath(entry, path === '' ? key : `${path}.${key}`, found);
  }
  return found;
}

describe('locateDocument', () => {
  it('has the keys of schema 1 and no others, in the order of the design', () => {
    const stretch = { fromM: 1, toM: 2, excessLossDb: 1.5, excessLossSigmaDb: 0.1, kind: 'wet' } as const;
    const full = makeAnalysis({ solution: { ...analysis.solution, stretches: [stretch] } });
    const written: unknown = JSON.parse(JSON.stringify(locateDocument(full, 'feedsonde 0.0.0')));
    expect(keysByPath(written)).toEqual(SCHEMA_1);
  });

  it('carries the values of the analysis', () => {
    expect(document).toMatchObject({ schema: 1, tool: 'feedsonde 0.0.0', command: 'locate' });
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
    expect(document.reach).toEqual(analysis.reach);
    expect(document.fit).toEqual({ residualDb: -72.4, explained: 0.99998, elements: 2 });
    expect(document.sections).toEqual([]);
    const { distanceSigmaM, ...finding } = analysis.findings[0]!;
    expect(document.findings).toEqual([finding]);
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
