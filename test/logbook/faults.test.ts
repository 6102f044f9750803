/** What a logbook must survive, on the real database: each a clear problem, and the file as it was. */
import { execFileSync } from 'node:child_process';
import { chmod, copyFile, mkdir, mkdtemp, readFile, rm, truncate, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { openLogbookFile } from '../../src/app/log-file.ts';
import { findDriver } from '../../src/logbook/driver.ts';
import type { Logbook } from '../../src/logbook/logbook.ts';
import { SCHEMA_VERSION } from '../../src/logbook/schema.ts';
import type { Outcome } from '../../src/outcome.ts';
import { makeEntry } from './made-entry.ts';
import { bundleWriter, startWriter } from './run-writer.ts';

const ADD = { replace: false, baseline: false };
const IS_ROOT = process.getuid?.() === 0;
/** A user who owns nothing. */
const NOBODY = 65534;

let folder = '';
let script = '';
let sound = '';
let path = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-faults-'));
  await chmod(folder, 0o755);
  script = await bundleWriter();
  await chmod(join(script, '..'), 0o755);
  sound = join(folder, 'sound.sqlite');
  const logbook = await open(sound, true);
  for (let i = 0; i < 30; i++) expect(logbook.add(makeEntry(i, {}, 4000), ADD).ok).toBe(true);
  logbook.close();
});
afterAll(async () => {
  await rm(folder, { recursive: true });
  await rm(join(script, '..'), { recursive: true });
});
beforeEach(async () => {
  path = join(await mkdtemp(join(folder, 'case-')), 'logbook.sqlite');
  await copyFile(sound, path);
});

describe('a logbook that another program holds', () => {
  it('is still read, says so to a writer after its patience, and is written once it is free', async () => {
    const other = findDriver()!.open(path);
    other.exec('BEGIN IMMEDIATE');
    const logbook = await open(path, false, 100);
    expect(codesOf(logbook.add(makeEntry(100), ADD))).toEqual(['logbook-locked']);
    expect(lengthOf(logbook)).toBe(30);
    other.exec('ROLLBACK');
    other.close();
    expect(logbook.add(makeEntry(100), ADD).ok).toBe(true);
    expect(lengthOf(logbook)).toBe(31);
    logbook.close();
  });

  it('says so to a reader too where it is held alone', async () => {
    const other = findDriver()!.open(path);
    other.exec('PRAGMA locking_mode = EXCLUSIVE');
    other.exec('BEGIN EXCLUSIVE');
    expect(await openAndRead(path)).toEqual(['logbook-locked']);
    other.exec('ROLLBACK');
    other.close();
  });
});

describe('a damaged logbook', () => {
  it.each([
    ['empty', 0, 'logbook-not-one'],
    ['cut within its head', 60, 'logbook-not-one'],
    ['cut after its head', 100, 'logbook-damaged'],
    ['cut after its first page', 4096, 'logbook-damaged'],
    ['cut in the middle', 40_960, 'logbook-damaged'],
    ['short of its last byte', -1, 'logbook-damaged'],
  ])('%s is refused, and left as it is', async (_, size, code) => {
    const { length } = await readFile(path);
    await truncate(path, size < 0 ? length + size : size);
    await expectRefused(path, [code]);
  });

  it('that is garbage from end to end is refused, and left as it is', async () => {
    const { length } = await readFile(path);
    await writeFile(path, Buffer.alloc(length, 'noise '));
    await expectRefused(path, ['logbook-not-one']);
  });

  it('that is garbage behind its head is refused, and left as it is', async () => {
    const bytes = await readFile(path);
    await writeFile(path, bytes.fill('noise ', 100));
    const [code] = await openAndRead(path);
    expect(['logbook-damaged', 'logbook-not-one']).toContain(code);
    expect(await readFile(path)).toEqual(bytes);
  });

  it('with garbage in its middle is found out by check', async () => {
    const bytes = await readFile(path);
    await writeFile(path, bytes.fill('noise ', 4096 * 12, 4096 * 20));
    const logbook = await open(path);
    const found = logbook.check();
    logbook.close();
    if (found.ok) expect(found.value.damaged.length + found.value.structure.length).toBeGreaterThan(0);
    else expect(codesOf(found)).toEqual(['logbook-damaged']);
  });

  it('names the one entry whose sweep was changed, and the one whose note was; --replace mends them', async () => {
    const before = await open(path);
    const listed = before.list({});
    before.close();
    if (!listed.ok) throw new Error('no list');
    const [first, second] = listed.value;
    const raw = findDriver()!.open(path);
    raw.run('UPDATE original SET bytes = ? WHERE hash = ?', new Uint8Array([1, 2, 3]), first!.key);
    raw.run('UPDATE entry SET note = ? WHERE key = ?', 'all is well', second!.key);
    raw.close();
    const logbook = await open(path);
    const found = logbook.check();
    if (!found.ok) throw new Error('no check');
    expect(found.value.damaged.map(({ key }) => key).sort()).toEqual([first!.key, second!.key].sort());
    expect(codesOf(logbook.original(first!.key))).toEqual(['entry-damaged']);
    expect(logbook.original(second!.key).ok).toBe(true);
    for (const i of [0, 1])
      expect(logbook.add(makeEntry(i, {}, 4000), { replace: true, baseline: false }).ok).toBe(true);
    expect(logbook.check()).toMatchObject({ value: { damaged: [], structure: [] } });
    logbook.close();
  });
});

describe('a file that this program must not touch', () => {
  it('is a logbook of a newer version', async () => {
    const raw = findDriver()!.open(path);
    raw.exec(`PRAGMA user_version = ${SCHEMA_VERSION + 1}`);
    raw.close();
    await expectRefused(path, ['logbook-newer']);
  });

  it('is the database of another program', async () => {
    const foreign = join(path, '..', 'foreign.sqlite');
    const raw = findDriver()!.open(foreign);
    raw.exec('CREATE TABLE recipe (name TEXT)');
    raw.close();
    await expectRefused(foreign, ['logbook-not-one']);
  });

  it('is a folder', async () => {
    const place = join(path, '..', 'a-folder');
    await mkdir(place);
    expect(await openAndRead(place)).toEqual(['file-is-folder']);
  });

  it('is one in a folder that does not exist', async () => {
    const logbook = await openLogbookFile(join(path, '..', 'nowhere', 'logbook.sqlite'), { create: true });
    expect(codesOf(logbook)).toEqual(['folder-missing']);
  });
});

describe('a logbook that may only be read', () => {
  it.each([
    ['in a folder that may be written', 0o777],
    ['in a folder that may not', 0o555],
  ])('says so to a writer, %s', async (_, mode) => {
    await chmod(path, 0o444);
    await chmod(join(path, '..'), mode);
    const before = await readFile(path);
    // For root every file may be written, so somebody else is asked.
    const user = IS_ROOT ? { user: NOBODY } : {};
    const writer = startWriter(script, ['add', path, '100', '1'], user);
    expect(await writer.done).toBe(2);
    expect(writer.lines).toHaveLength(1);
    expect(writer.lines[0]).toMatch(/^failed (logbook-read-only|logbook-not-openable)$/u);
    const reader = startWriter(script, ['list', path], user);
    await reader.done;
    expect(reader.lines[0]).toMatch(/^(listed 30|failed logbook-(not-openable|read-only))$/u);
    await chmod(join(path, '..'), 0o755);
    expect(await readFile(path)).toEqual(before);
  });
});

describe('a full disk', () => {
  it('stops an add with a clear problem; what was saved is whole, and it goes on once there is room', async (context) => {
    const disk = join(path, '..', 'disk');
    await mkdir(disk);
    if (!mounted(disk)) context.skip('a small disk of its own can only be mounted by root');
    try {
      const filler = join(disk, 'filler');
      await writeFile(filler, Buffer.alloc(300_000));
      const full = join(disk, 'logbook.sqlite');
      const logbook = await open(full, true);
      const saved: string[] = [];
      let stopped: Outcome<unknown> | null = null;
      for (let i = 0; i < 400 && !stopped; i++) {
        const added = logbook.add(makeEntry(i, {}, 10_000), ADD);
        if (added.ok) saved.push(added.value.key);
        else stopped = added;
      }
      expect(stopped && codesOf(stopped)).toEqual(['disk-full']);
      expect(saved.length).toBeGreaterThan(5);
      expectWhole(logbook, saved);
      logbook.close();
      await rm(filler);
      const again = await open(full);
      expectWhole(again, saved);
      expect(again.add(makeEntry(1000, {}, 10_000), ADD).ok).toBe(true);
      again.close();
    } finally {
      execFileSync('umount', [disk]);
    }
  });

  it('by a quota on the size of files: a clear problem, and what was saved is whole', async () => {
    const writer = startWriter(script, ['add', path, '100', '400', '10000'], { fileBlocks: 900 });
    expect(await writer.done).toBe(2);
    expect(writer.lines.at(-1)).toMatch(/^failed (disk-full|logbook-disk)$/u);
    const saved = writer.lines.slice(0, -1).map((line) => line.replace('saved ', ''));
    expect(saved.length).toBeGreaterThan(5);
    const logbook = await open(path);
    expectWhole(logbook, saved, 30);
    expect(logbook.add(makeEntry(1000), ADD).ok).toBe(true);
    logbook.close();
  });
});

function mounted(disk: string): boolean {
  if (!IS_ROOT) return false;
  try {
    execFileSync('mount', ['-t', 'tmpfs', '-o', 'size=1m', 'tmpfs', disk], { stdio: 'ignore' });
    return true;
  } catch {
    return false;
  }
}

function expectWhole(logbook: Logbook, saved: readonly string[], others = 0): void {
  const listed = logbook.list({});
  if (!listed.ok) throw new Error(JSON.stringify(listed.problems));
  const keys = listed.value.map(({ key }) => key);
  expect(keys).toHaveLength(saved.length + others);
  expect(keys).toEqual(expect.arrayContaining([...saved]));
  expect(logbook.check()).toMatchObject({ ok: true, value: { damaged: [], structure: [] } });
}

async function expectRefused(place: string, codes: readonly string[]): Promise<void> {
  const before = await readFile(place);
  expect(await openAndRead(place)).toEqual(codes);
  expect(await readFile(place)).toEqual(before);
  const writing = await openLogbookFile(place, { create: true });
  if (writing.ok) {
    expect(codesOf(writing.value.add(makeEntry(100), ADD))).toEqual(codes);
    writing.value.close();
  }
  expect(await readFile(place)).toEqual(before);
}

/** Codes of the problems that stand between a file and its list; none when it can be read. */
async function openAndRead(place: string): Promise<readonly string[]> {
  const logbook = await openLogbookFile(place, { create: false, patienceMs: 100 });
  if (!logbook.ok) return codesOf(logbook);
  const listed = logbook.value.list({});
  logbook.value.close();
  return codesOf(listed);
}

async function open(place: string, create = false, patienceMs = 1000): Promise<Logbook> {
  const logbook = await openLogbookFile(place, { create, patienceMs });
  if (!logbook.ok) throw new Error(JSON.stringify(logbook.problems));
  return logbook.value;
}

function lengthOf(logbook: Logbook): number {
  const listed = logbook.list({});
  if (!listed.ok) throw new Error(JSON.stringify(listed.problems));
  return listed.value.length;
}

function codesOf(outcome: Outcome<unknown>): readonly string[] {
  return outcome.ok ? [] : outcome.problems.map(({ code }) => code);
}
