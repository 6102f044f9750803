import { describe, expect, it } from 'vitest';
import { fail, succeed } from '../../src/outcome.ts';
import { chosenOf, outerSpan, spanOf, traceWish, wholeSpan } from '../../src/terminal/derived.ts';
import { layoutOf } from '../../src/terminal/layout.ts';
import { mostScroll } from '../../src/terminal/pages/pages.ts';
import { picksOf } from '../../src/terminal/picks.ts';
import { analysisOf } from '../../src/terminal/state.ts';
import { update } from '../../src/terminal/update.ts';
import { makeAnalysis } from '../app/made-analysis.ts';
import { OTHER_CABLE, play, press, readyState, requestFor, startedState } from './made-state.ts';

const SIZE = { columns: 100, rows: 30 };
const problem = { code: 'made', what: 'it broke', mend: 'mend it' };

describe('update: questions and answers', () => {
  it('asks to solve and for a first look when it starts', () => {
    const { effects } = play(startedState(SIZE), { type: 'started' });
    expect(effects.map((effect) => effect.type)).toEqual(['solve', 'look']);
    expect(effects[1]).toMatchObject({ id: 1, view: { fromM: -0.4, points: expect.any(Number) } });
  });

  it('asks for no first look where the length is not described', () => {
    const analysis = makeAnalysis();
    const [section] = analysis.line.sections;
    const line = { ...analysis.line, sections: [{ ...section!, lengthM: null }] as never };
    const { effects } = play(startedState(SIZE, requestFor(analysis, { line })), { type: 'started' });
    expect(effects.map((effect) => effect.type)).toEqual(['solve']);
  });

  it('chooses the worst of what was found when the answer comes, and puts the cursor there', () => {
    const state = readyState(SIZE);
    expect(chosenOf(state)?.severity).toBe('fault');
    expect(state.cursorM).toBe(8.004);
    expect(state.trace?.trace.distanceM.length).toBe(traceWish(state)?.points);
  });

  it('drops progress and answers of an earlier question', () => {
    const { state, effects } = press(readyState(SIZE), 'r');
    expect(analysisOf(state)).toBeNull();
    expect(effects.map((effect) => effect.type)).toEqual(['stopSolving', 'readSweep']);
    const late = play(
      state,
      { type: 'progress', id: 1, stage: 'old', fraction: 0.9 },
      { type: 'looked', id: 1, trace: makeAnalysis().trace },
      { type: 'solved', id: 1, outcome: succeed(makeAnalysis()) },
      { type: 'sweepRead', id: 1, outcome: succeed(new Uint8Array(3)) },
    );
    expect(late.state).toEqual(state);
    expect(late.effects).toEqual([]);
  });

  it('drops a trace that was wished for an earlier view', () => {
    const state = readyState(SIZE);
    const stale = makeAnalysis().trace;
    expect(play(state, { type: 'traced', id: state.lastTraceId - 1, trace: stale }).state).toBe(state);
  });

  it('solves again with the bytes just read, and shows problems in place of the answer', () => {
    const { state } = press(readyState(SIZE), 'r');
    const bytes = Uint8Array.of(1, 2);
    const read = play(state, { type: 'sweepRead', id: 2, outcome: succeed(bytes) });
    expect(read.effects[0]).toMatchObject({ type: 'solve', id: 2, request: { sweepBytes: bytes } });
    const failed = play(read.state, { type: 'solved', id: 2, outcome: fail(problem) }).state;
    expect(failed.solve).toEqual({ phase: 'failed', id: 2, problems: [problem] });
    expect(play(state, { type: 'sweepRead', id: 2, outcome: fail(problem) }).state.solve.phase).toBe(
      'failed',
    );
  });

  it('says that standard input cannot be read again, until the next key', () => {
    const analysis = makeAnalysis();
    const started = startedState(SIZE, requestFor(analysis, { sweepFile: '-' }));
    const ready = play(started, { type: 'solved', id: 1, outcome: succeed(analysis) }).state;
    const { state, effects } = press(ready, 'r');
    expect(effects).toEqual([]);
    expect(state.remark).toMatch(/standard input/);
    expect(press(state, 'u').state.remark).toBeNull();
  });

  it('shows each notice once, those of opening first', () => {
    const twice = { code: 'twice', what: 'said twice' };
    const opening = { code: 'opening', what: 'decided at the start' };
    const started = { ...startedState(SIZE), openingNotices: [opening] };
    const analysis = makeAnalysis({ notices: [twice] });
    const { solve } = play(started, { type: 'solved', id: 1, outcome: succeed(analysis, [twice]) }).state;
    expect(solve).toMatchObject({ notices: [opening, twice] });
  });
});

describe('update: looking', () => {
  it('goes through what was found and stops at both ends', () => {
    const state = readyState(SIZE);
    const last = press(state, 'down', 'down', 'down').state;
    expect(chosenOf(last)?.short).toBe('end: open');
    expect(last.cursorM).toBe(20.001);
    expect(press(last, 'pageup').state.chosen).toBe(0);
  });

  it('moves the cursor by whole cells of the plot', () => {
    const state = readyState(SIZE);
    const [from, to] = spanOf(state, analysisOf(state)!);
    const dotM = (to - from) / (2 * layoutOf(state).plotWidth - 1);
    const moved = press(state, 'right').state.cursorM - state.cursorM;
    expect(Math.abs(moved - 2 * dotM)).toBeLessThanOrEqual(dotM / 2 + 1e-9);
    expect(press(state, 'shift+right').state.cursorM - state.cursorM).toBeCloseTo(20 * dotM, 0);
  });

  it('zooms about the cursor and asks for the trace at the new dots', () => {
    const state = readyState(SIZE);
    const near = press(state, '+', '+').state;
    const [from, to] = spanOf(near, analysisOf(near)!);
    const whole = wholeSpan(analysisOf(state)!);
    expect((to - from) / (whole[1] - whole[0])).toBeCloseTo(1 / 1.6 ** 2, 9);
    expect((near.cursorM - from) / (to - from)).toBeCloseTo(
      (near.cursorM - whole[0]) / (whole[1] - whole[0]),
      9,
    );
    expect(near.trace?.trace.distanceM[0]).toBeCloseTo(from, 9);
    expect(near.trace?.trace.distanceM.at(-1)).toBeCloseTo(to, 9);
    expect(near.trace!.trace.distanceM.length % (2 * layoutOf(near).plotWidth)).toBe(0);
    expect(press(near, '0').state.span).toBeNull();
  });

  it('never zooms in beyond two widths of an echo nor out of what the sweep can see', () => {
    const state = readyState(SIZE);
    const closest = press(state, ...Array.from({ length: 40 }, () => '+')).state;
    const [from, to] = spanOf(closest, analysisOf(closest)!);
    expect(to - from).toBeCloseTo(2 * 0.12, 9);
    const farthest = press(closest, ...Array.from({ length: 40 }, () => '-')).state;
    expect(spanOf(farthest, analysisOf(farthest)!)).toEqual(outerSpan(analysisOf(farthest)!));
  });

  it('pans inside what can be seen, the cursor going along, and brings the view back to a chosen echo', () => {
    const zoomed = press(readyState(SIZE), '+', '+', '+', '+').state;
    const panned = press(zoomed, '>', '>', '>').state;
    expect(spanOf(panned, analysisOf(panned)!)[0]).toBeGreaterThan(zoomed.span![0]);
    const back = press(panned, 'down', 'up').state;
    const [from, to] = spanOf(back, analysisOf(back)!);
    expect(from).toBeLessThanOrEqual(8.004);
    expect(to).toBeGreaterThanOrEqual(8.004);
    const far = press(zoomed, ...Array.from({ length: 60 }, () => '>')).state;
    expect(spanOf(far, analysisOf(far)!)[1]).toBeCloseTo(outerSpan(analysisOf(far)!)[1], 9);
  });

  it('lets the view follow a cursor that leaves it', () => {
    const zoomed = press(readyState(SIZE), '+', '+', '+', '+', '+').state;
    const out = press(zoomed, ...Array.from({ length: 12 }, () => 'shift+right')).state;
    expect(out.cursorM).toBeLessThanOrEqual(spanOf(out, analysisOf(out)!)[1] + 1e-9);
    expect(out.cursorM).toBeGreaterThan(zoomed.span![1]);
  });

  it('keeps the zoomed view over a new answer', () => {
    const zoomed = press(readyState(SIZE), '+', '+').state;
    const asked = press(zoomed, 'r').state;
    const again = play(
      asked,
      { type: 'sweepRead', id: 2, outcome: succeed(new Uint8Array()) },
      { type: 'solved', id: 2, outcome: succeed(makeAnalysis()) },
    ).state;
    expect(again.span).toEqual(zoomed.span);
  });

  it('turns through the views, and to metres or feet, and to the trace as measured', () => {
    const state = readyState(SIZE);
    expect(press(state, 'tab').state.view).toBe('ohms');
    expect(press(state, 'tab', 'tab').state.view).toBe('trace');
    expect(press(state, 'shift+tab').state.view).toBe('ohms');
    expect(press(state, '2', '1').state.view).toBe('trace');
    expect(press(state, 'u').state.units).toBe('ft');
    const measured = press(state, 'l').state;
    expect(measured.trace?.trace.corrected).toBe(false);
  });

  it('asks for a redraw and, the plot being wider, for another trace when the terminal grows', () => {
    const state = readyState(SIZE);
    const { state: wide, effects } = play(state, { type: 'resized', columns: 140, rows: 40 });
    expect(effects).toEqual([{ type: 'redraw' }]);
    expect(wide.trace!.trace.distanceM.length).toBe(traceWish(wide)!.points);
    expect(play(state, { type: 'resized', columns: 40, rows: 10 }).state.columns).toBe(40);
  });
});

describe('update: pages and pickers', () => {
  it('scrolls a page no farther than to its last line', () => {
    const page = press(readyState({ columns: 80, rows: 24 }), '!').state;
    const most = mostScroll(page, 'cautions');
    const down = press(page, ...Array.from({ length: 9 }, () => 'pagedown')).state;
    expect(down.panel).toMatchObject({ scroll: most });
    expect(press(down, 'up').state.panel).toMatchObject({ scroll: Math.max(0, most - 1) });
    const closed = press(down, 'esc').state;
    expect(closed.panel).toBeNull();
    expect(closed.cautionsRead).toBe(true);
  });

  it('shows the trace with the window under the pointer and goes back when it is left', () => {
    const state = readyState(SIZE);
    const open = press(state, 'w').state;
    expect(picksOf(open)[open.panel?.type === 'pick' ? open.panel.row : -1]?.id).toBe('kaiser:6');
    const next = press(open, 'down').state;
    expect(next.trace?.trace.value.re).not.toEqual(state.trace?.trace.value.re);
    const left = press(next, 'esc').state;
    expect(left.windowSpec).toBe('kaiser:6');
    expect(left.trace?.trace.value.re).toEqual(state.trace?.trace.value.re);
    const { state: taken, effects } = press(next, 'enter');
    expect(taken.windowSpec).toBe('hann');
    expect(effects).toEqual([]);
  });

  it('narrows the cables by letters and solves again with the one taken', () => {
    const open = press(readyState(SIZE), 'c').state;
    const narrowed = press(open, 'a', 'n', 'o').state;
    expect(picksOf(narrowed).map((pick) => pick.id)).toEqual(['other']);
    expect(picksOf(press(narrowed, 'x').state)).toEqual([]);
    expect(press(narrowed, 'x', 'backspace').state).toEqual(narrowed);
    const { state, effects } = press(narrowed, 'enter');
    expect(analysisOf(state)).toBeNull();
    expect(state.trace).toBeNull();
    const solve = effects.find((effect) => effect.type === 'solve');
    const sections = solve?.type === 'solve' ? solve.request.line.sections : [];
    expect(sections.map((section) => (section.type === 'coax' ? section.cable.id : ''))).toEqual([
      'made',
      OTHER_CABLE.id,
    ]);
  });

  it('takes nothing from an empty list', () => {
    const none = press(readyState(SIZE), 'c', 'x', 'q', 'z').state;
    expect(press(none, 'enter')).toEqual({ state: none, effects: [] });
  });

  it('stops solving and quits', () => {
    const { effects } = press(startedState(SIZE), 'q');
    expect(effects).toEqual([{ type: 'stopSolving' }, { type: 'quit' }]);
    expect(press(readyState(SIZE), 'ctrl+c').effects).toHaveLength(2);
    expect(press(readyState(SIZE), 'ctrl+z').effects).toEqual([{ type: 'suspend' }]);
  });

  it('changes nothing in the state it is given', () => {
    const state = readyState(SIZE);
    const before = structuredClone({ ...state, trace: null });
    for (const type of ['wholeLine', 'toggleUnits', 'toggleCorrected'] as const) update(state, { type });
    update(state, { type: 'zoom', factor: 2 });
    expect(structuredClone({ ...state, trace: null })).toEqual(before);
  });
});
