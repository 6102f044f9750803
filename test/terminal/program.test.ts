import { describe, expect, it } from 'vitest';
import type { Analysis } from '../../src/app/analysis.ts';
import type { SolveProgress } from '../../src/app/solver.ts';
import { traceWindow } from '../../src/app/trace-view.ts';
import { fail, type Outcome, succeed } from '../../src/outcome.ts';
import { createPerform, type World } from '../../src/terminal/perform.ts';
import { createProgram } from '../../src/terminal/program.ts';
import { analysisOf } from '../../src/terminal/state.ts';
import { update } from '../../src/terminal/update.ts';
import { makeAnalysis } from '../app/made-analysis.ts';
import { startedState } from './made-state.ts';

const SIZE = { columns: 100, rows: 30 };

type Solving = {
  readonly answer: (outcome: Outcome<Analysis>) => void;
  readonly breakDown: (error: Error) => void;
  readonly progress: (progress: SolveProgress) => void;
  cancelled: boolean;
};

/** A program on a world that is moved by hand: jobs run when `settle` is awaited, solves end when they are told. */
function makeProgram(fields: Partial<World> = {}) {
  const solvings: Solving[] = [];
  const calls: string[] = [];
  const jobs: (() => void)[] = [];
  const traced: number[] = [];
  const clock = { ms: 0 };
  const defer = (job: () => void): void => {
    jobs.push(job);
  };
  const world: World = {
    solver: {
      solve(_request, onProgress) {
        let solving: Solving | null = null;
        const result = new Promise<Outcome<Analysis>>((answer, breakDown) => {
          solving = { answer, breakDown, progress: onProgress, cancelled: false };
        });
        solvings.push(solving!);
        return {
          result,
          cancel: () => {
            solving!.cancelled = true;
          },
        };
      },
      close() {},
    },
    files: { readSweep: async () => succeed(Uint8Array.of(7)) },
    traceWindow: (analysis, view) => {
      traced.push(view.points);
      return traceWindow(analysis, view);
    },
    firstLook: async () => null,
    redraw: () => calls.push('redraw'),
    suspend: () => calls.push('suspend'),
    quit: () => calls.push('quit'),
    defer,
    now: () => clock.ms,
    ...fields,
  };
  const program = createProgram({
    initial: startedState(SIZE),
    update,
    perform: createPerform(world),
    defer,
  });
  const settle = async (): Promise<void> => {
    for (let turn = 0; turn < 5; turn++) {
      await Promise.resolve();
      for (const job of jobs.splice(0)) job();
    }
  };
  return { program, solvings, calls, traced, clock, settle };
}

describe('program', () => {
  it('solves once started, and draws the trace for the screen when the answer comes', async () => {
    const { program, solvings, traced, settle } = makeProgram();
    program.dispatch({ type: 'started' });
    solvings[0]!.answer(succeed(makeAnalysis()));
    await settle();
    expect(analysisOf(program.snapshot())?.line.name).toBe('Made line');
    expect(traced).toHaveLength(1);
    expect(program.snapshot().trace?.trace.distanceM.length).toBe(traced[0]);
  });

  it('shows the first look while it solves; one that fails or comes to nothing changes nothing', async () => {
    const { trace } = makeAnalysis();
    const { program, settle } = makeProgram({ firstLook: async () => trace });
    program.dispatch({ type: 'started' });
    await settle();
    expect(program.snapshot().solve).toMatchObject({ phase: 'running', look: trace });
    const broken = makeProgram({ firstLook: () => Promise.reject(new Error('no look')) });
    broken.program.dispatch({ type: 'started' });
    await broken.settle();
    expect(broken.program.snapshot().solve).toMatchObject({ phase: 'running', look: null });
  });

  it('passes progress on at most ten times a second', () => {
    const { program, solvings, clock } = makeProgram();
    program.dispatch({ type: 'started' });
    const fractions: number[] = [];
    for (let i = 0; i <= 100; i++) {
      clock.ms = i * 10;
      solvings[0]!.progress({ stage: 'looking', fraction: i / 100 });
      const { solve } = program.snapshot();
      if (solve.phase === 'running' && solve.fraction !== fractions.at(-1)) fractions.push(solve.fraction);
    }
    expect(fractions.length).toBe(11);
  });

  it('cancels a running solve when another question comes, and never shows its answer', async () => {
    const { program, solvings, settle } = makeProgram();
    program.dispatch({ type: 'started' });
    program.dispatch({ type: 'openPicker', what: 'cable' });
    program.dispatch({ type: 'pickMove', by: 1 });
    program.dispatch({ type: 'pickTake' });
    expect(solvings.map((solving) => solving.cancelled)).toEqual([true, false]);
    solvings[0]!.answer(succeed(makeAnalysis()));
    await settle();
    expect(program.snapshot().solve.phase).toBe('running');
    solvings[1]!.answer(succeed(makeAnalysis()));
    await settle();
    expect(program.snapshot().solve).toMatchObject({ phase: 'ready', id: 2 });
  });

  it('reads the sweep again and solves it, or says why it cannot', async () => {
    const { program, solvings, settle } = makeProgram();
    program.dispatch({ type: 'readAgain' });
    await settle();
    expect(solvings).toHaveLength(1);
    expect(program.snapshot().request?.sweepBytes).toEqual(Uint8Array.of(7));
    const gone = makeProgram({
      files: { readSweep: async () => fail({ code: 'gone', what: 'it is gone', mend: 'look for it' }) },
    });
    gone.program.dispatch({ type: 'readAgain' });
    await gone.settle();
    expect(gone.program.snapshot().solve).toMatchObject({ phase: 'failed', problems: [{ code: 'gone' }] });
    const broken = makeProgram({ files: { readSweep: () => Promise.reject(new Error('EIO')) } });
    broken.program.dispatch({ type: 'readAgain' });
    await broken.settle();
    expect(broken.program.snapshot().solve).toMatchObject({ problems: [{ code: 'sweep-unreadable' }] });
  });

  it('says so when the solver breaks down', async () => {
    const { program, solvings, settle } = makeProgram();
    program.dispatch({ type: 'started' });
    solvings[0]!.breakDown(new Error('the worker ended'));
    await settle();
    expect(program.snapshot().solve).toMatchObject({
      phase: 'failed',
      problems: [{ code: 'solver-stopped', what: expect.stringContaining('the worker ended') }],
    });
  });

  it('computes one trace for several keys that come together, and tells the view once', async () => {
    const { program, solvings, traced, settle } = makeProgram();
    program.dispatch({ type: 'started' });
    solvings[0]!.answer(succeed(makeAnalysis()));
    await settle();
    traced.length = 0;
    let told = 0;
    const stop = program.subscribe(() => {
      told++;
    });
    for (let i = 0; i < 6; i++) program.dispatch({ type: 'zoom', factor: 1.6 });
    await settle();
    expect(traced).toHaveLength(1);
    expect(told).toBe(1);
    expect(program.snapshot().trace?.id).toBe(program.snapshot().lastTraceId);
    stop();
    program.dispatch({ type: 'wholeLine' });
    await settle();
    expect(told).toBe(1);
  });

  it('redraws, suspends and quits through the world, and stops solving when it quits', () => {
    const { program, solvings, calls } = makeProgram();
    program.dispatch({ type: 'started' });
    for (const type of ['redraw', 'suspend', 'quit'] as const) program.dispatch({ type });
    expect(calls).toEqual(['redraw', 'suspend', 'quit']);
    expect(solvings[0]!.cancelled).toBe(true);
  });
});
