import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { openLogbookFile } from '../../src/app/log-file.ts';
import { findDriver, sqlFault } from '../../src/logbook/driver.ts';
import { entryKey, shortKey } from '../../src/logbook/entry.ts';
import type { Logbook } from '../../src/logbook/logbook.ts';
import { hashOf } from '../../src/logbook/packing.ts';
import type { Outcome } from '../../src/outcome.ts';
import { DESCRIBED, makeEntry, makeFigures } from './made-entry.ts';

const ADD = { replace: false, baseline: false };
const NORTH = { site: 'Ansel Ridge', name: 'north 1' };
const OTHER_NORTH = { site: 'Bell Hill', name: 'north 1' };

let folder = '';
let logbook: Logbook;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-logbook-'));
});
afterAll(() => rm(folder, { recursive: true }));
beforeEach(async () => {
  const path = join(await mkdtemp(join(folder, 'case-')), 'logbook.sqlite');
  logbook = must(await openLogbookFile(path, { create: true }));
});
afterEach(() => logbook.close());

describe('findDriver', () => {
  it('takes the SQLite of the runtime where it has one, else the package', () => {
    const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
    const builtIn = major > 22 || (major === 22 && minor >= 13);
    expect(findDriver()?.name).toBe(builtIn ? 'node:sqlite' : 'better-sqlite3');
    expect(logbook.driver).toBe(findDriver()?.name);
  });
});

describe('sqlFault', () => {
  it('reads what either library throws, and nothing else', () => {
    const db = findDriver()!.open(':memory:');
    const faultOf = (act: () => void): unknown => {
      try {
        act();
      } catch (error) {
        return sqlFault(error);
      }
      return 'nothing was thrown';
    };
    db.exec('CREATE TABLE t (a INTEGER); PRAGMA query_only = 1');
    expect(faultOf(() => db.exec('INSERT INTO t VALUES (1)'))).toBe('read-only');
    expect(faultOf(() => db.exec('SELECT nonsense FROM nowhere'))).toBeNull();
    db.close();
    expect(faultOf(() => db.exec('SELECT 1'))).toBeNull();
    expect(sqlFault(Object.assign(new Error('x'), { code: 'ENOENT' }))).toBeNull();
    expect(sqlFault('SQLITE_FULL')).toBeNull();
  });
});

describe('add', () => {
  it('gives back every byte and everything that was said', () => {
    const standards = { open: Uint8Array.of(1), short: Uint8Array.of(2), load: Uint8Array.of(3, 4) };
    const given = makeEntry(1, {
      line: NORTH,
      bytes: Uint8Array.from({ length: 1000 }, (_, i) => (i * 37) % 256),
      standards,
      takenAt: '2026-05-03T14:30',
      instrument: 'the red one',
      weather: 'frost',
      note: 'after the storm; "quoted" \\ 雪',
      faults: 1,
      watches: 2,
      setup: { port: 2, offsetM: 0.4, windowSpec: 'hann', lineDescribed: false },
    });
    const { key } = must(logbook.add(given, ADD));
    const entry = must(logbook.entry(key));
    const { bytes, standards: _, knownAs: _knownAs, line, setup, ...said } = given;
    expect(entry).toMatchObject(said);
    expect(entry).toMatchObject({ line, hash: hashOf(bytes), sizeBytes: 1000, baseline: false });
    expect(must(logbook.original(entry.hash))).toEqual(Buffer.from(bytes));
    expect(entry.setup).toMatchObject(setup);
    for (const which of ['open', 'short', 'load'] as const)
      expect(must(logbook.original(entry.setup.standards![which]))).toEqual(Buffer.from(standards[which]));
  });

  it('of the same sweep twice is one entry, and changes nothing', () => {
    const first = must(logbook.add(makeEntry(1, { note: 'first' }), ADD));
    const again = must(logbook.add(makeEntry(1, { note: 'second', line: NORTH }), ADD));
    expect(first.how).toBe('new');
    expect(again).toEqual({ key: first.key, how: 'already', lineChanged: false });
    expect(must(logbook.list({})).map(({ note }) => note)).toEqual(['first']);
    expect(must(logbook.lines()).map(({ name }) => name)).toEqual(['Made line']);
  });

  it('with replace takes the new line, results and remarks, and the baseline of the wrong line goes', () => {
    const { key } = must(logbook.add(makeEntry(1), { replace: false, baseline: true }));
    const again = must(
      logbook.add(makeEntry(1, { note: 'second', line: NORTH, faults: 1 }), {
        replace: true,
        baseline: false,
      }),
    );
    expect(again).toMatchObject({ key, how: 'replaced' });
    expect(must(logbook.list({}))).toMatchObject([
      { note: 'second', line: NORTH, faults: 1, baseline: false },
    ]);
    expect(must(logbook.findLine('Made line')).baseline).toBeNull();
    expect(must(logbook.check()).damaged).toEqual([]);
  });

  it('keeps two ports of one file apart, with one original', () => {
    const first = makeEntry(1);
    const second = { ...first, port: 2, line: NORTH };
    const keys = [first, second].map((entry) => must(logbook.add(entry, ADD)).key);
    expect(keys).toEqual([entryKey(hashOf(first.bytes), 1), entryKey(hashOf(first.bytes), 2)]);
    expect(must(logbook.check())).toMatchObject({ entries: 2, originals: 1, damaged: [] });
    expect(must(logbook.find(shortKey(keys[0]!))).port).toBe(1);
    expect(must(logbook.find(shortKey(keys[1]!))).port).toBe(2);
  });

  it('says when a line is described anew', () => {
    const other = DESCRIBED.replace('"lengthM": 20', '"lengthM": 21');
    expect(must(logbook.add(makeEntry(1), ADD)).lineChanged).toBe(false);
    expect(must(logbook.add(makeEntry(2, { knownAs: null }), ADD)).lineChanged).toBe(false);
    expect(must(logbook.add(makeEntry(3, { knownAs: other }), ADD)).lineChanged).toBe(true);
    expect(must(logbook.findLine('made line')).described).toBe(other);
    // What was described then stays what it was.
    expect(must(logbook.entry(hashOf(makeEntry(1).bytes))).described).toBe(DESCRIBED);
  });
});

describe('find', () => {
  it('takes the beginning of a key, and asks for more where several begin alike', () => {
    const keys = Array.from({ length: 600 }, (_, i) => must(logbook.add(makeEntry(i), ADD)).key);
    expect(must(logbook.find(keys[5]!.slice(0, 12))).key).toBe(keys[5]);
    expect(must(logbook.find(keys[5]!.toUpperCase())).key).toBe(keys[5]);
    expect(codesOf(logbook.find('zzzz'))).toEqual(['entry-missing']);
    expect(codesOf(logbook.find(keys[5]!.slice(0, 3)))).toEqual(['entry-missing']);
    expect(codesOf(logbook.find(`${keys[5]}-p2`))).toEqual(['entry-missing']);
    const sorted = [...keys].sort();
    const twins = sorted.findIndex((key, i) => key.slice(0, 4) === sorted[i + 1]?.slice(0, 4));
    // With 600 keys two share their first four digits: 600²/2 pairs over 65 536.
    expect(twins).toBeGreaterThanOrEqual(0);
    expect(codesOf(logbook.find(sorted[twins]!.slice(0, 4)))).toEqual(['entry-ambiguous']);
  });
});

describe('list', () => {
  it('goes by line, site and date, in the order in which the sweeps were taken', () => {
    for (const [i, takenAt, line] of [
      [1, '2025-03-01', NORTH],
      [2, '2024-03-01T08:00', NORTH],
      [3, '2024-03-01', OTHER_NORTH],
      [4, '2026-01-01', OTHER_NORTH],
    ] as const)
      must(logbook.add(makeEntry(i, { takenAt, line }), ADD));
    const files = (filter: Parameters<Logbook['list']>[0]) =>
      must(logbook.list(filter)).map(({ file }) => file.replace(/sweep-|\.s1p/gu, ''));
    expect(files({})).toEqual(['3', '2', '1', '4']);
    expect(files({ site: 'ansel ridge' })).toEqual(['2', '1']);
    expect(files({ since: '2024-03-01', until: '2024-03-01' })).toEqual(['3', '2']);
    expect(files({ since: '2024-03-02' })).toEqual(['1', '4']);
    expect(files({ lineId: must(logbook.findLine('Bell Hill north 1')).id })).toEqual(['3', '4']);
  });
});

describe('findLine', () => {
  it('takes a name in any case, with hyphens, with its site; and names what was meant', () => {
    must(logbook.add(makeEntry(1, { line: NORTH }), ADD));
    must(logbook.add(makeEntry(2, { line: { site: 'Ansel Ridge', name: 'Ansel Ridge south 1' } }), ADD));
    for (const name of ['north 1', 'NORTH-1', 'ansel-ridge-north-1', 'Ansel Ridge: north 1'])
      expect(must(logbook.findLine(name)), name).toMatchObject(NORTH);
    expect(must(logbook.findLine('ansel-ridge-south-1')).name).toBe('Ansel Ridge south 1');
    const unknown = logbook.findLine('ansel ridge nort 1');
    expect(unknown.ok ? [] : unknown.problems).toMatchObject([
      { code: 'line-not-logged', mend: expect.stringContaining('"Ansel Ridge north 1"') },
    ]);
    must(logbook.add(makeEntry(3, { line: OTHER_NORTH }), ADD));
    const several = logbook.findLine('north 1');
    expect(several.ok ? [] : several.problems).toMatchObject([
      { code: 'line-ambiguous', mend: expect.stringContaining('"Bell Hill north 1"') },
    ]);
    expect(codesOf(logbook.findLine(''))).toEqual(['line-not-logged']);
    const once = logbook.findLine('ansel ridge suth 1');
    expect(once.ok ? [] : once.problems).toMatchObject([
      { mend: 'did you mean "Ansel Ridge south 1" or "Ansel Ridge north 1"?' },
    ]);
  });
});

describe('baseline', () => {
  it('is one sweep of a line: the last one chosen', () => {
    const keys = [1, 2].map((i) => must(logbook.add(makeEntry(i), { replace: false, baseline: true })).key);
    expect(must(logbook.findLine('made line')).baseline).toBe(keys[1]);
    must(logbook.setBaseline(must(logbook.findLine('made line')).id, keys[0]!));
    expect(must(logbook.list({})).map(({ baseline }) => baseline)).toEqual([true, false]);
  });

  it('is chosen too by adding again what is there', () => {
    const { key } = must(logbook.add(makeEntry(1), ADD));
    expect(must(logbook.add(makeEntry(1), { replace: false, baseline: true })).how).toBe('already');
    expect(must(logbook.findLine('made line')).baseline).toBe(key);
  });
});

describe('merge', () => {
  it('undoes all where one entry cannot be read', () => {
    const bad = { ok: false as const, problems: [{ code: 'test', what: 'bad', mend: 'none' }] };
    const entries = [{ ok: true as const, value: makeEntry(1), notices: [] }, bad];
    expect(codesOf(logbook.merge({ lines: [], entries, mergedAt: '2026-01-01' }))).toEqual(['test']);
    expect(must(logbook.list({}))).toEqual([]);
    expect(must(logbook.lines())).toEqual([]);
  });

  it('leaves the description and the baseline of a line that is known here', () => {
    const { key } = must(logbook.add(makeEntry(1), { replace: false, baseline: true }));
    const entries = [{ ok: true as const, value: makeEntry(2, { knownAs: null }), notices: [] }];
    const lines = [
      { site: 'Nowhere', name: 'Made line', described: '{}', baseline: hashOf(makeEntry(2).bytes) },
      { site: 'New', name: 'one', described: '{}', baseline: hashOf(makeEntry(2).bytes) },
    ];
    expect(must(logbook.merge({ lines, entries, mergedAt: '2026-01-01' }))).toEqual({
      added: 1,
      already: 0,
    });
    expect(must(logbook.findLine('made line'))).toMatchObject({ described: DESCRIBED, baseline: key });
    // A baseline that is a sweep of another line is none.
    expect(must(logbook.findLine('one'))).toMatchObject({ described: '{}', baseline: null });
  });
});

describe('history', () => {
  it('gives the figures of one line in order of time', () => {
    for (const [i, lengthM] of [
      [3, 20.3],
      [1, 20.1],
      [2, 20.2],
    ] as const)
      must(logbook.add(makeEntry(i, { figures: makeFigures({ lengthM }) }), ADD));
    must(logbook.add(makeEntry(4, { line: NORTH }), ADD));
    const history = must(logbook.history(must(logbook.findLine('made line')).id));
    expect(history.map(({ figures }) => figures.lengthM)).toEqual([20.1, 20.2, 20.3]);
  });
});

function must<T>(outcome: Outcome<T>): T {
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.problems));
  return outcome.value;
}

function codesOf(outcome: Outcome<unknown>): readonly string[] {
  return outcome.ok ? [] : outcome.problems.map(({ code }) => code);
}
