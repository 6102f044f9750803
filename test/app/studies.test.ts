/** Studies are the same wherever they are done; the worker is the built one. */
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { afterAll, describe, expect, it } from 'vitest';
import { analyse } from '../../src/app/analyse.ts';
import { createInProcessStudies } from '../../src/app/in-process-studies.ts';
import { simulate } from '../../src/app/simulate.ts';
import type { AnalyseRequest } from '../../src/app/solver.ts';
import type { Studies } from '../../src/app/studies.ts';
import { createWorkerStudies } from '../../src/app/worker-studies.ts';
import { writeTouchstone } from '../../src/sweep/write-touchstone.ts';
import { makeLine } from '../assess/made-line.ts';
import { ROOT } from '../cli/run-cli.ts';

const WORKER = join(ROOT, 'dist', 'study-worker.js');

/** A shorted line, sound or with a resistance in it. */
function request(ohm: number | null): AnalyseRequest {
  const line = makeLine({ end: 'short' });
  const sweep = simulate({
    line,
    faults: ohm === null ? [] : [{ kind: 'series-resistance', value: ohm, place: { at: 'joint', joint: 3 } }],
    range: { startHz: 10e6, stopHz: 1000e6, points: 400 },
    portOhm: 50,
    asBuilt: null,
    noiseDb: -75,
    residueDb: null,
    seed: ohm === null ? 1 : 2,
  });
  if (!sweep.ok) throw new Error(JSON.stringify(sweep.problems));
  return {
    sweepFile: 'made.s1p',
    sweepBytes: new TextEncoder().encode(writeTouchstone(sweep.value, [])),
    line,
    lineDescribed: true,
    windowSpec: 'kaiser:6',
    port: null,
    offsetM: 0,
    standards: null,
  };
}

function solved(of: AnalyseRequest) {
  const outcome = analyse({ ...of, skipImpedance: true });
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.problems));
  return outcome.value;
}

const kinds: readonly (readonly [string, () => Studies])[] = [
  ['createInProcessStudies', createInProcessStudies],
  [
    'createWorkerStudies',
    () => {
      if (!existsSync(WORKER)) throw new Error('dist/study-worker.js is missing: run "npm run build" first');
      return createWorkerStudies(pathToFileURL(WORKER));
    },
  ],
];

describe.each(kinds)('%s', (_, create) => {
  const studies = create();
  afterAll(() => studies.close());
  const later = solved(request(12));

  it('reads loss, match and limits of a handover', async () => {
    const { result } = studies.study({ type: 'handover', analysis: later, units: 'm' }, () => {});
    const outcome = await result;
    if (!outcome.ok || outcome.value.type !== 'handover') throw new Error(JSON.stringify(outcome));
    const { loss, match, verdict } = outcome.value.handover;
    expect(loss.method).toBe('end-echo');
    // 50 m of the made cable at the middle of the sweep, by its k1 and k2.
    const middle = loss.frequencyHz.length >> 1;
    const mhz = loss.frequencyHz[middle]! / 1e6;
    expect(loss.lossDb![middle]!).toBeCloseTo((0.2 * Math.sqrt(mhz) + 0.0007 * mhz) / 2, 1);
    expect(match.port.frequencyHz.length).toBe(400);
    expect(verdict.limits.map(({ limit }) => limit)).toContain('joint');
  });

  it('finds what has changed since an earlier sweep, and gives the difference as a sweep of its own', async () => {
    const stages: string[] = [];
    const { result } = studies.study(
      { type: 'change', before: request(null), after: later, units: 'ft' },
      ({ stage }) => stages.push(stage),
    );
    const outcome = await result;
    if (!outcome.ok || outcome.value.type !== 'change') throw new Error(JSON.stringify(outcome));
    const { comparison, difference, before } = outcome.value.change;
    expect(comparison.verdict).toBe('changed');
    expect(comparison.changes[0]!.joint?.index).toBe(3);
    expect(Math.abs(comparison.changes[0]!.distanceM - 48)).toBeLessThan(0.3);
    expect(difference.sweep.gamma).toEqual(comparison.difference.gamma);
    expect(difference.solution).toEqual(before.solution);
    expect(stages.some((stage) => stage.startsWith('the baseline'))).toBe(true);
  });

  it('gives problems as values', async () => {
    const bad = { ...request(null), sweepBytes: new TextEncoder().encode('nothing') };
    const { result } = studies.study({ type: 'change', before: bad, after: later, units: 'm' }, () => {});
    expect((await result).ok).toBe(false);
  });
});
