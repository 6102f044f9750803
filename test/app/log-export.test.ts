import { cp, mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { loadCableTable } from '../../src/app/cable-files.ts';
import { exportLogbook } from '../../src/app/log-export.ts';
import { openLogbookFile } from '../../src/app/log-file.ts';
import { importLogbook } from '../../src/app/log-import.ts';
import type { CableTable } from '../../src/line/cable-table.ts';
import { shortKey } from '../../src/logbook/entry.ts';
import type { Logbook } from '../../src/logbook/logbook.ts';
import { hashOf } from '../../src/logbook/packing.ts';
import type { Outcome } from '../../src/outcome.ts';
import { makeEntry } from '../logbook/made-entry.ts';

const ADD = { replace: false, baseline: false };
const NOW = '2026-01-01T00:00:00.000Z';

let folder = '';
let cables: CableTable;
let source: Logbook;
let out = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-export-'));
  cables = must(await loadCableTable());
  source = await newLogbook('source');
  must(source.add(makeEntry(1), { replace: false, baseline: true }));
  must(source.add(makeEntry(2, { takenAt: '2026-05-03T14:30', note: 'snow; "quotes"', faults: 1 }), ADD));
  // Bytes that no text tool would leave alone: every value, both line ends, no end of line at the end.
  const odd = Uint8Array.from([...Array(256).keys(), 13, 10, 10, 13]);
  must(
    source.add(
      makeEntry(3, { bytes: odd, file: '../odd name.CSV', line: { site: '', name: 'été/../x' } }),
      ADD,
    ),
  );
  const standards = {
    open: Buffer.from('# Hz S RI R 50\n1 1 0\n'),
    short: Buffer.from('frequency_hz,real,imaginary\n1,0,0\n'),
    load: Uint8Array.of(9),
  };
  must(source.add(makeEntry(4, { standards, port: 3 }), ADD));
  out = join(folder, 'out');
  must(await exportLogbook(source, out, {}));
});
afterAll(async () => {
  source.close();
  await rm(folder, { recursive: true });
});

let target: Logbook;
let number = 0;
beforeEach(async () => {
  number++;
  target = await newLogbook(`target-${number}`);
  return () => target.close();
});

describe('exportLogbook', () => {
  it('writes each sweep byte for byte beside its JSON, under a name that says what it is', async () => {
    const names = (await readdir(out)).sort();
    expect(names).toContain('logbook.json');
    expect(names).toContain(`2026-05-03-nowhere-made-line-${keyOf(2)}.s1p`);
    expect(names).toContain(`${dateOf(3)}-été-x-${keyOf(3)}.csv`);
    expect(
      names.filter((name) => name.includes('-standard-')).map((name) => name.replace(/.*-standard-/u, '')),
    ).toEqual(['load.csv', 'open.s1p', 'short.csv']);
    for (const entry of must(source.list({}))) {
      const stem = names.find((name) => name.includes(entry.key.slice(0, 8)) && name.endsWith('.json'));
      const document = JSON.parse(await readFile(join(out, stem!), 'utf8'));
      const bytes = await readFile(join(out, document.sweep.file));
      expect(bytes).toEqual(must(source.original(must(source.entry(entry.key)).hash)));
    }
  });

  it('refuses a folder that holds other things, and brings an earlier export up to date', async () => {
    const used = join(folder, 'used');
    await mkdir(used);
    await writeFile(join(used, 'mine.txt'), 'mine');
    expect(codesOf(await exportLogbook(source, used, {}))).toEqual(['folder-in-use']);
    expect(await readdir(used)).toEqual(['mine.txt']);
    expect(codesOf(await exportLogbook(source, join(used, 'mine.txt'), {}))).toEqual(['file-exists']);
    expect(must(await exportLogbook(source, out, {}))).toEqual({ entries: 4, lines: 2 });
  });

  it('writes a part of the logbook with the lines of that part', async () => {
    const part = join(folder, 'part');
    const line = must(source.findLine('made line'));
    expect(must(await exportLogbook(source, part, { lineId: line.id, since: '2026-01-01' }))).toEqual({
      entries: 1,
      lines: 1,
    });
    expect(must(await importLogbook(target, part, cables, NOW))).toEqual({ added: 1, already: 0 });
    // Its baseline was not among what was exported.
    expect(must(target.findLine('made line')).baseline).toBeNull();
  });
});

describe('importLogbook', () => {
  it('takes everything in once: importing again changes nothing', async () => {
    expect(must(await importLogbook(target, out, cables, NOW))).toEqual({ added: 4, already: 0 });
    const first = must(target.list({}));
    expect(must(await importLogbook(target, out, cables, NOW))).toEqual({ added: 0, already: 4 });
    expect(must(target.list({}))).toEqual(first);
    const ids = (logbook: Logbook) =>
      must(logbook.list({})).map(({ lineId: _, ...entry }) => ({
        ...entry,
        file: entry.file.replace('../', ''),
      }));
    expect(ids(target)).toEqual(ids(source));
    expect(must(target.check())).toMatchObject({ entries: 4, damaged: [], structure: [] });
  });

  it('gives a logbook whose own export is the same, file for file and byte for byte', async () => {
    must(await importLogbook(target, out, cables, NOW));
    const again = join(folder, `again-${number}`);
    must(await exportLogbook(target, again, {}));
    const names = (await readdir(out)).sort();
    expect((await readdir(again)).sort()).toEqual(names);
    for (const name of names)
      expect((await readFile(join(again, name))).equals(await readFile(join(out, name))), name).toBe(true);
  });

  it('merges into a logbook that has some of it', async () => {
    must(target.add(makeEntry(2, { note: 'known here' }), ADD));
    must(target.add(makeEntry(9), { replace: false, baseline: true }));
    expect(must(await importLogbook(target, out, cables, NOW))).toEqual({ added: 3, already: 1 });
    expect(must(target.list({}))).toHaveLength(5);
    expect(must(target.find(makeKey(2))).note).toBe('known here');
    expect(must(target.findLine('made line')).baseline).toBe(makeKey(9));
  });

  it.each([
    [
      'a sweep with one byte changed',
      async (copy: string, sweep: string) => writeFile(join(copy, sweep), 'x'),
      'export-changed',
    ],
    ['a sweep that is missing', async (copy: string, sweep: string) => rm(join(copy, sweep)), 'file-missing'],
    [
      'an entry that is no JSON',
      async (copy: string, sweep: string) =>
        writeFile(join(copy, sweep.replace('.s1p', '.json')), '{ "schema": 1'),
      'json-syntax',
    ],
    [
      'a name that leads out of the folder',
      async (copy: string, sweep: string) => {
        const file = join(copy, sweep.replace('.s1p', '.json'));
        await writeFile(file, (await readFile(file, 'utf8')).replace(sweep, `../out/${sweep}`));
      },
      'wrong-type',
    ],
  ])('takes in nothing where there is %s', async (_, harm, code) => {
    const copy = join(folder, `harmed-${number}`);
    await cp(out, copy, { recursive: true });
    await harm(copy, `2026-05-03-nowhere-made-line-${keyOf(2)}.s1p`);
    const codes = codesOf(await importLogbook(target, copy, cables, NOW));
    expect(codes).toEqual([code]);
    expect(must(target.list({}))).toEqual([]);
  });

  it('refuses a folder that is no export', async () => {
    expect(codesOf(await importLogbook(target, folder, cables, NOW))).toEqual(['not-an-export']);
    expect(codesOf(await importLogbook(target, join(folder, 'nowhere'), cables, NOW))).toEqual([
      'not-an-export',
    ]);
  });

  it('says so where an export was cut short', async () => {
    const copy = join(folder, `short-${number}`);
    await cp(out, copy, { recursive: true });
    for (const ending of ['.s1p', '.json'])
      await rm(join(copy, `2026-05-03-nowhere-made-line-${keyOf(2)}${ending}`));
    const taken = await importLogbook(target, copy, cables, NOW);
    expect(taken).toMatchObject({
      ok: true,
      value: { added: 3 },
      notices: [{ code: 'export-incomplete', what: expect.stringContaining('3 of 4') }],
    });
  });

  it('cleans every text that could steer a terminal', async () => {
    const copy = join(folder, `hostile-${number}`);
    await cp(out, copy, { recursive: true });
    const file = join(copy, `2026-05-03-nowhere-made-line-${keyOf(2)}.json`);
    const document = JSON.parse(await readFile(file, 'utf8'));
    const bad = 'a\u001b[2Jb\u009b31mc\u0007';
    document.note = bad;
    document.who = bad;
    document.results.findings = [{ what: bad }];
    document.figures.echoes[0].place = bad;
    await writeFile(file, JSON.stringify(document));
    must(await importLogbook(target, copy, cables, NOW));
    const entry = must(target.entry(makeKey(2)));
    expect(`${JSON.stringify(entry)}${entry.document}`).not.toMatch(/[\u0000-\u001f\u007f-\u009f]|\\u00/u);
    expect(entry).toMatchObject({ note: 'abc', who: 'abc' });
  });
});

async function newLogbook(name: string): Promise<Logbook> {
  return must(await openLogbookFile(join(folder, `${name}.sqlite`), { create: true }));
}

/** Key of a made entry on port 1. */
function makeKey(index: number): string {
  return hashOf(makeEntry(index).bytes);
}

/** The part of the key of an entry of the source that stands in names. */
function keyOf(index: number): string {
  const found = must(source.list({})).find(({ addedAt }) => addedAt === makeEntry(index).addedAt);
  return found ? shortKey(found.key) : '';
}

function dateOf(index: number): string {
  return makeEntry(index).takenAt;
}

function must<T>(outcome: Outcome<T>): T {
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.problems));
  return outcome.value;
}

function codesOf(outcome: Outcome<unknown>): readonly string[] {
  return outcome.ok ? [] : outcome.problems.map(({ code }) => code);
}
