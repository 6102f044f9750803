import { describe, expect, it } from 'vitest';
import { parseWallTime } from '../../src/cli/log-dates.ts';
import { checkText, echoLabel, listText } from '../../src/cli/log-text.ts';
import { trendText } from '../../src/cli/log-trend-text.ts';
import { createPaint } from '../../src/cli/paint.ts';
import type { EntrySummary, StoredLine } from '../../src/logbook/entry.ts';
import { followLine } from '../../src/logbook/trend.ts';
import { DESCRIBED, makeEcho, makeFigures } from '../logbook/made-entry.ts';

const OPTIONS = { columns: 80, units: 'm', paint: createPaint(false) } as const;
const LINE: StoredLine = {
  id: 1,
  site: 'Nowhere',
  name: 'Made line',
  described: DESCRIBED,
  changedAt: '2026-01-01T00:00:00.000Z',
  baseline: null,
  entries: 1,
};

const entry = (fields: Partial<EntrySummary>): EntrySummary => ({
  key: 'abcdef0123456789',
  lineId: 1,
  line: LINE,
  file: 'a.s1p',
  port: 1,
  takenAt: '2026-05-03T14:30',
  addedAt: '2026-05-04T00:00:00.000Z',
  who: '',
  instrument: '',
  weather: '',
  note: '',
  tool: 'feedsonde 0.0.0',
  faults: 0,
  watches: 0,
  baseline: false,
  ...fields,
});

describe('parseWallTime', () => {
  it.each([
    ['2026-05-03', '2026-05-03'],
    [' 2026-05-03 14:30 ', '2026-05-03T14:30'],
    ['2024-02-29T00:00', '2024-02-29T00:00'],
  ])('reads %j', (text, time) => {
    expect(parseWallTime(text, 'when')).toMatchObject({ ok: true, value: time });
  });

  it.each([
    '2026-02-29',
    '2026-13-01',
    '2026-05-03T24:00',
    '2026-05-03T12:60',
    '3.5.2026',
    '',
    '2026-05-03Z',
  ])('refuses %j', (text) => {
    expect(parseWallTime(text, 'when')).toMatchObject({ ok: false, problems: [{ code: 'flag-value' }] });
  });
});

describe('listText', () => {
  it('shows one line an entry, with its worst mark, cut to the width', () => {
    const text = listText(
      [entry({}), entry({ faults: 2, watches: 1 }), entry({ watches: 1, note: 'x'.repeat(200) })],
      'log.sqlite',
      OPTIONS,
    );
    expect(text.split('\n')).toEqual([
      '  entry          taken                 found  line',
      '● abcdef01  2026-05-03        no fault found  Nowhere Made line',
      '× abcdef01  2026-05-03  2 faults, 1 to watch  Nowhere Made line',
      expect.stringMatching(/^▲ abcdef01 .* x+…$/u),
      '3 entries of 1 line in log.sqlite',
      '',
    ]);
  });

  it('says so when there is nothing', () => {
    expect(listText([], 'log.sqlite', OPTIONS)).toBe('0 entries of 0 lines in log.sqlite\n');
  });
});

describe('echoLabel', () => {
  it('says what and where, once', () => {
    expect(echoLabel(makeEcho({ words: 'end: open', place: 'at the end' }))).toBe('end: open');
    expect(echoLabel(makeEcho({ kind: 'joint', words: 'joint', place: 'at joint 2, a to b' }))).toBe(
      'joint 2, a to b',
    );
    expect(echoLabel(makeEcho({ kind: 'short', words: 'short', place: 'in the run' }))).toBe(
      'short, in the run',
    );
  });
});

describe('checkText', () => {
  it('names every entry that is damaged and what the database says', () => {
    const damaged = [{ key: 'abcdef0123456789', line: LINE, what: 'its results cannot be read' }];
    const text = checkText(
      { entries: 3, originals: 3, damaged, structure: ['page 7 is lost'] },
      'log',
      OPTIONS,
    );
    expect(text).toBe(
      '× 1 of 3 entries are damaged, in log\n' +
        '  abcdef01 Nowhere Made line: its results cannot be read\n' +
        '  the file itself: page 7 is lost\n',
    );
  });
});

describe('trendText', () => {
  const moment = (takenAt: string, levelDb: number) => ({
    key: `${takenAt}-key`,
    takenAt,
    figures: makeFigures({
      echoes: [
        makeEcho({
          distanceM: 12,
          joint: null,
          kind: 'short',
          words: 'short',
          correctedReturnLossDb: -levelDb,
        }),
      ],
    }),
  });

  it('of a line without a sweep says so', () => {
    expect(trendText(LINE, followLine([]), OPTIONS)).toBe('Nowhere Made line: no sweep is logged yet\n');
  });

  it('of one sweep is a table without a picture, and without changes', () => {
    const text = trendText(LINE, followLine([moment('2026-05-03', -20)]), OPTIONS);
    expect(text).toContain('Nowhere Made line: 1 sweep, 2026-05-03');
    expect(text).not.toMatch(/[\u2800-\u28ff]/u);
    expect(text).toMatch(/a +12\.00 m +−20\.0 +−20\.0 +– +– +short, at the end/u);
    expect(text).toContain('loss one way at 1 GHz, as solved: 1.20 dB\n');
  });

  it('draws a rising echo from the bottom at the left to the top at the right, its letter behind it', () => {
    const trend = followLine([moment('2024-01-01', -38), moment('2026-01-01', -12)]);
    const rows = trendText(LINE, trend, OPTIONS).split('\n').slice(3, 13);
    const inked = rows.map((row) => row.slice(8).search(/[\u2801-\u28ff]/u));
    const top = rows.findIndex((row) => row.trimEnd().endsWith('a'));
    expect(top).toBeGreaterThanOrEqual(0);
    const drawn = inked.flatMap((column, row) => (column < 0 ? [] : [row]));
    // Higher rows begin further to the right.
    for (let i = 1; i < drawn.length; i++) expect(inked[drawn[i - 1]!]).toBeGreaterThan(inked[drawn[i]!]!);
    expect(drawn[0]).toBe(top);
    expect(drawn.length).toBeGreaterThan(4);
    expect(inked[drawn.at(-1)!]).toBe(0);
  });

  it('says since when an echo is there, and when it was last seen', () => {
    const none = { ...moment('2025-01-01', -20), figures: makeFigures({ echoes: [] }) };
    const came = trendText(LINE, followLine([none, moment('2026-01-01', -20)]), { ...OPTIONS, columns: 120 });
    expect(came).toContain('(since 2026-01-01)');
    const went = trendText(LINE, followLine([moment('2024-01-01', -20), none]), { ...OPTIONS, columns: 120 });
    expect(went).toContain('(last 2024-01-01)');
  });
});
