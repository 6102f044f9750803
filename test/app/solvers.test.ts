/** Both solvers keep one promise; the worker is the built one, since Node 20 cannot start one from TypeScript. */
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { afterAll, describe, expect, it } from 'vitest';
import { createInProcessSolver } from '../../src/app/in-process-solver.ts';
import { simulate } from '../../src/app/simulate.ts';
import type { AnalyseRequest, Solver } from '../../src/app/solver.ts';
import { createWorkerSolver } from '../../src/app/worker-solver.ts';
import { writeTouchstone } from '../../src/sweep/write-touchstone.ts';
import { makeLine } from '../assess/made-line.ts';
import { ROOT } from '../cli/run-cli.ts';

const WORKER = join(ROOT, 'dist', 'solve-worker.js');

function request(fields: Partial<AnalyseRequest> = {}): AnalyseRequest {
  const line = makeLine({ end: 'open' });
  const sweep = simulate({
    line,
    faults: [],
    range: { startHz: 10e6, stopHz: 1000e6, points: 400 },
    portOhm: 50,
    asBuilt: null,
    noiseDb: -70,
    residueDb: null,
    seed: 1,
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
    ...fields,
  };
}

const solvers: readonly (readonly [string, () => Solver])[] = [
  ['createInProcessSolver', createInProcessSolver],
  [
    'createWorkerSolver',
    () => {
      if (!existsSync(WORKER)) throw new Error('dist/solve-worker.js is missing: run "npm run build" first');
      return createWorkerSolver(pathToFileURL(WORKER));
    },
  ],
];

describe.each(solvers)('%s', (_, create) => {
  const solver = create();
  afterAll(() => solver.close());

  it('gives an analysis, with progress that does not go back', async () => {
    const fractions: number[] = [];
    const outcome = await solver.solve(request(), ({ fraction }) => fractions.push(fraction)).result;
    if (!outcome.ok) throw new Error(JSON.stringify(outcome.problems));
    expect(outcome.value.solution.end).toBe('open');
    expect(Math.abs(outcome.value.solution.lengthM - 50)).toBeLessThan(0.5);
    // Typed arrays have crossed whole.
    expect(outcome.value.sweep.gamma.re).toBeInstanceOf(Float64Array);
    expect(fractions.length).toBeGreaterThan(0);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
  });

  it('gives problems as values', async () => {
    const outcome = await solver.solve(request({ sweepBytes: new TextEncoder().encode('nothing') }), () => {})
      .result;
    expect(outcome.ok).toBe(false);
  });

  it('settles a solve that is cancelled before it began, and solves the next', async () => {
    const first = solver.solve(request(), () => {});
    first.cancel();
    const outcome = await first.result;
    expect(!outcome.ok && outcome.problems.map((problem) => problem.code)).toEqual(['cancelled']);
    expect((await solver.solve(request(), () => {}).result).ok).toBe(true);
  });
});

describe('createWorkerSolver', () => {
  it('drops the solve that runs when another is asked for', async () => {
    const solver = createWorkerSolver(pathToFileURL(WORKER));
    const stale = solver.solve(request(), () => {});
    const wanted = solver.solve(request({ windowSpec: 'hann' }), () => {});
    const dropped = await stale.result;
    expect(!dropped.ok && dropped.problems[0]?.code).toBe('cancelled');
    expect((await wanted.result).ok).toBe(true);
    solver.close();
  });

  it('settles what runs when it is closed, and refuses more', async () => {
    const solver = createWorkerSolver(pathToFileURL(WORKER));
    const running = solver.solve(request(), () => {});
    solver.close();
    expect((await running.result).ok).toBe(false);
    expect(() => solver.solve(request(), () => {})).toThrow('closed');
  });

  it('rejects, and does not hang, when the worker cannot be started', async () => {
    const solver = createWorkerSolver(pathToFileURL(join(ROOT, 'dist', 'no-such-worker.js')));
    await expect(solver.solve(request(), () => {}).result).rejects.toThrow();
    solver.close();
  });
});

describe('the built worker', () => {
  it('is plain text of this project, without the workspace in it', () => {
    expect(readFileSync(WORKER, 'utf8')).not.toContain('react');
  });
});
