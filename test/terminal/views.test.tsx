import { renderToString } from 'ink';
import { describe, expect, it } from 'vitest';
import type { Analysis } from '../../src/app/analysis.ts';
import { PLAIN_JOINT } from '../../src/line/line.ts';
import { fail } from '../../src/outcome.ts';
import { cellWidth } from '../../src/plot/cells.ts';
import { cellOf, cellScale } from '../../src/plot/scale.ts';
import { spanOf } from '../../src/terminal/derived.ts';
import { GUTTER, layoutOf } from '../../src/terminal/layout.ts';
import { analysisOf, type State } from '../../src/terminal/state.ts';
import { themeFor } from '../../src/terminal/theme.ts';
import { ScreenView } from '../../src/terminal/views/screen-view.tsx';
import { makeAnalysis } from '../app/made-analysis.ts';
import { play, press, readyState, startedState } from './made-state.ts';

const SGR = /\u001b\[([0-9;]*)m/g;

function drawn(state: State, env: Record<string, string> = {}): string {
  return renderToString(<ScreenView state={state} theme={themeFor(env)} />, { columns: state.columns });
}

/** The screen without styles. */
function plain(state: State): readonly string[] {
  return drawn(state).replace(SGR, '').split('\n');
}

/** The screen by its words, blanks and line ends squeezed. */
function words(state: State): string {
  return plain(state).join(' ').replace(/\s+/g, ' ');
}

/** A page from its first line to its last. */
function readThrough(state: State): string {
  let text = '';
  for (let i = 0, next = state; i < 10; i++, next = press(next, 'pagedown').state) text += `${words(next)} `;
  return text;
}

const SIZES = [
  { columns: 80, rows: 24 },
  { columns: 100, rows: 30 },
  { columns: 140, rows: 40 },
] as const;

describe.each(SIZES)('views at $columns × $rows', (size) => {
  const ready = readyState(size);
  const screens: readonly (readonly [string, State])[] = [
    ['starting', startedState(size)],
    ['nothing open', startedState(size, null)],
    ['trace', ready],
    ['ohms', press(ready, '2').state],
    ['feet', press(ready, 'u').state],
    ['zoomed', press(ready, '+', '+', '+', '+').state],
    ['window list', press(ready, 'w', 'down').state],
    ['cable list', press(ready, 'c', 'o').state],
    ['keys', press(ready, '?').state],
    ['cautions', press(ready, '!').state],
    ['notices', press(ready, 'n').state],
    ['finding', press(ready, 'enter').state],
    ['sound echo', press(ready, 'down', 'enter').state],
  ];

  it.each(screens)('draws %s on all rows but the last, none wider than the terminal', (_name, state) => {
    const rows = plain(state);
    expect(rows.length).toBe(size.rows - 1);
    for (const row of rows) expect(cellWidth(row)).toBeLessThanOrEqual(size.columns);
  });

  it.each(screens)('draws %s without colour under NO_COLOR, and with the same characters', (_name, state) => {
    const text = drawn(state, { NO_COLOR: '1' });
    const parameters = [...text.matchAll(SGR)].flatMap((match) => match[1]!.split(';').map(Number));
    expect(parameters.filter((p) => (p >= 30 && p <= 49) || p >= 90)).toEqual([]);
    expect(text.replace(SGR, '').split('\n')).toEqual(plain(state));
    expect(drawn(state, { TERM: 'dumb' })).not.toMatch(/\u001b/);
  });

  it('stands the strip exactly on the axis of the plot, whole and zoomed', () => {
    for (const state of [ready, press(ready, '+', '+', 'left').state]) {
      const { plotWidth, cautionRows } = layoutOf(state);
      const scale = cellScale(spanOf(state, analysisOf(state)!), plotWidth);
      const [line, marks, ...rest] = plain(state).slice(1 + cautionRows);
      const joint = GUTTER + cellOf(scale, 8);
      const fault = GUTTER + cellOf(scale, 8.004);
      expect([...line!][joint]).toBe('╪');
      expect([...marks!][fault]).toBe('×');
      expect(rest.some((row) => [...row][fault] === '×')).toBe(true);
    }
  });

  it('names what was found with sign, place, size and advice, without a colour to help', () => {
    const text = words(ready);
    expect(text).toContain('× 1 fault');
    expect(text).toContain('›× 8.004 m ±0.012');
    expect(text).toContain('series resistance 10.0 Ω');
    expect(text).toContain('joint 2');
    expect(text).toContain('corroded centre contact; loose connector');
    expect(text).toContain('● 20.001 m ±0.010');
    expect(text).toContain('n 1 notice');
    expect(text).toContain('? keys q quit');
  });

  it('shows every key of the table on the help page', () => {
    const text = readThrough(press(ready, '?').state);
    for (const key of [
      'PgUp PgDn',
      'Enter',
      'Home End',
      'Ctrl-L',
      'Ctrl-Z',
      'q Ctrl-C',
      'quit',
      'fg returns',
    ])
      expect(text).toContain(key);
    expect(text).not.toContain('…');
  });
});

describe('views', () => {
  const SIZE = { columns: 80, rows: 24 };
  const ready = readyState(SIZE);

  it('says politely what room it needs, in one line that fits', () => {
    for (const size of [
      { columns: 79, rows: 30 },
      { columns: 100, rows: 23 },
      { columns: 30, rows: 5 },
      { columns: 4, rows: 1 },
    ]) {
      const rows = plain({ ...ready, ...size });
      expect(rows).toHaveLength(1);
      expect(cellWidth(rows[0]!)).toBeLessThan(size.columns);
      if (size.columns >= 30) expect(rows[0]).toMatch(/80 × 24/);
    }
  });

  it('shows the described line and how far the solve is while there is no answer', () => {
    const running = play(startedState(SIZE), {
      type: 'progress',
      id: 1,
      stage: 'looking for echoes',
      fraction: 0.42,
    }).state;
    expect(words(running)).toMatch(/lower run.*looking for echoes.*━─.* 42 %/);
    expect(words(running)).not.toContain('fault');
    const looked = play(running, { type: 'looked', id: 1, trace: makeAnalysis().trace }).state;
    expect(words(looked)).toMatch(/┤.*dB 0 .*42 % looking for echoes/);
    expect(words(looked)).toMatch(/[\u2801-\u28ff]/);
  });

  it('shows every problem in place of an answer: where, what, what was found, and how to mend it', () => {
    const failed = play(startedState(SIZE), {
      type: 'solved',
      id: 1,
      outcome: fail(
        { code: 'a', file: 'x.s1p', line: 7, what: 'this is no number', found: 'abc', mend: 'save it anew' },
        { code: 'b', what: 'and another', mend: 'mend that' },
      ),
    }).state;
    const text = words(failed);
    expect(text).toContain('× x.s1p, line 7: this is no number (found: abc) save it anew');
    expect(text).toContain('× and another mend that');
    expect(text).toContain('not solved');
    const problem = { code: 'c', what: `${'very '.repeat(40)}long`, mend: 'shorten it' };
    expect(
      words(play(startedState(SIZE), { type: 'solved', id: 1, outcome: fail(problem) }).state),
    ).toContain(`× ${'very '.repeat(40)}long shorten it`);
    const many = fail(...Array.from({ length: 30 }, (_, i) => ({ ...problem, what: `no ${i}` })));
    const cut = plain(play(startedState(SIZE), { type: 'solved', id: 1, outcome: many }).state);
    expect(cut.some((row) => row.includes('r reads the sweep again'))).toBe(true);
    expect(cut.some((row) => row.trim() === '…')).toBe(true);
    expect(cut).toHaveLength(SIZE.rows - 1);
  });

  it('says a sound line is sound, and that nothing stands out where nothing does', () => {
    const { solution } = makeAnalysis();
    const sound: Analysis = makeAnalysis({ findings: [], severities: ['sound', 'sound'] });
    expect(words(readyState(SIZE, sound))).toMatch(/● no fault found.*as it should be/);
    const other = { ...sound, solution: { ...solution, explained: 0.04, residualDb: -9 } };
    expect(words(readyState(SIZE, other))).toMatch(/▲ fits badly .*n 2 notices/);
    const nothing = makeAnalysis({
      findings: [],
      severities: [],
      places: [],
      solution: { ...solution, echoes: [] },
    });
    expect(words(readyState(SIZE, nothing))).toContain('nothing stands out along this line');
  });

  it('writes ohms with where they come from, or why there are none', () => {
    expect(words(press(ready, '2').state)).toContain('8.00 m 58.0 Ω');
    expect(words(press(ready, '2').state)).toContain('from the sweep');
    const { reach } = makeAnalysis();
    const none = makeAnalysis({ impedance: null, reach: { ...reach, impedanceProfile: 'no' } });
    expect(words(press(readyState(SIZE, none), '2').state)).toContain(
      'Ohms need a sweep that begins near zero',
    );
    const guide = {
      ...{ id: 'made', name: 'made guide', aMm: 1e5, aToleranceMm: 0.1, bMm: 15, conductivitySPerM: 5.8e7 },
      ...{ lossDbPer100m: null, bandMHz: null },
    };
    const tube = { type: 'guide' as const, guide, lengthM: 20, label: 'tube', jointAfter: PLAIN_JOINT };
    const guided = makeAnalysis({ ...none, line: { ...none.line, sections: [tube] } });
    expect(words(press(readyState(SIZE, guided), '2').state)).toContain('A waveguide has no ohms of its own');
  });

  it('keeps the axis of ohms to what lies before the end, whatever the end reads', () => {
    const profile = {
      distanceM: Float64Array.of(0, 10, 19, 20, 21),
      impedanceOhm: Float64Array.of(50, 59, 51, 0.2, 0.1),
      origin: 'measured' as const,
    };
    const ohms = words(press(readyState(SIZE, makeAnalysis({ impedance: profile })), '2').state);
    expect(ohms).toMatch(/ 60 ┤/);
    expect(ohms).not.toMatch(/ (?:[0-3]?\d) ┤/);
  });

  it('marks a ghost by a letter and explains it under the cursor', () => {
    const { solution } = makeAnalysis();
    const ghosts = [{ distanceM: 16.008, returnLossDb: 46.2, betweenM: [0, 8.004] }];
    const state = readyState(SIZE, makeAnalysis({ solution: { ...solution, ghosts } }));
    expect(words({ ...state, cursorM: 16.008 })).toContain('g a bounce between 0.0 m and 8.0 m');
  });

  it('lets no text of a file move the cursor or change the screen', () => {
    const { line, findings } = makeAnalysis();
    const hostile = '\u001b[2J\u001b]0;x\u0007\u0000name\u202e';
    const analysis = makeAnalysis({
      line: { ...line, name: hostile, sections: line.sections.map((s) => ({ ...s, label: hostile })) },
      findings: [{ ...findings[0]!, where: hostile, what: hostile, causes: [hostile] }],
      notices: [{ code: 'x', what: hostile }],
    });
    const state = readyState(SIZE, analysis);
    for (const screen of [
      state,
      press(state, 'enter').state,
      press(state, 'n').state,
      press(state, 'u').state,
    ]) {
      const text = drawn(screen);
      expect(text.replace(SGR, '')).not.toMatch(/[\u0000-\u0009\u000b-\u001f\u007f-\u009f\u202e]/);
      expect(text).not.toContain('\u001b[2J');
    }
  });

  it('shows where a long list goes on', () => {
    const { solution } = makeAnalysis();
    const echoes = Array.from({ length: 12 }, (_, i) => ({
      ...solution.echoes[0]!,
      distanceM: 1 + i,
      kind: 'joint' as const,
    }));
    const analysis = makeAnalysis({
      findings: [],
      severities: echoes.map(() => 'sound' as const),
      places: echoes.map(() => ''),
      solution: { ...solution, echoes },
    });
    const state = readyState(SIZE, analysis);
    const listed = (s: State) => plain(s).filter((row) => /^.[●] /.test(row));
    expect(listed(state).at(-1)).toMatch(/↓$/);
    const middle = press(state, ...Array.from({ length: 6 }, () => 'down')).state;
    expect(listed(middle)[0]).toMatch(/↑$/);
    expect(listed(middle).some((row) => row.startsWith('›'))).toBe(true);
  });
});
