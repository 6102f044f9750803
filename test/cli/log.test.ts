/** The built `log` as people and scripts use it, on the samples. */
import { type ExecFileException, execFile } from 'node:child_process';
import { cp, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { LocateDocument } from '../../src/app/json.ts';
import { type CliResult, ROOT, runCli } from './run-cli.ts';

const FIRST = 'samples/north-1.s1p';
const LATER = 'samples/north-1-later.s1p';
const LINE = 'ansel-ridge-north-1';

let folder = '';
let file = '';
let added: { readonly first: CliResult; readonly later: CliResult };
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-log-'));
  file = join(folder, 'logbook.sqlite');
  added = {
    first: await log('add', FIRST, '--when', '2024-05-03', '--who', 'Mara', '--baseline'),
    later: await log('add', LATER, '--when', '2026-05-11T09:30', '--note', 'after the storm'),
  };
});
afterAll(() => rm(folder, { recursive: true }));

function log(...words: readonly string[]): Promise<CliResult> {
  return runCli(['log', ...words, '--logbook', file]);
}

async function logJson(...words: readonly string[]) {
  const { stdout, stderr } = await log(...words, '--json');
  expect(stderr).toBe('');
  return JSON.parse(stdout);
}

describe('feedsonde log add', () => {
  it('says what was found and under which key it is saved; 1 where there is a fault', () => {
    expect(added.first).toMatchObject({ status: 0, stderr: '' });
    expect(added.first.stdout).toMatch(
      /^● Ansel Ridge north 1, 2024-05-03: no fault found; logged as [0-9a-f]{8}/u,
    );
    expect(added.first.stdout.replace(/\s+/gu, ' ')).toContain(', the baseline');
    expect(added.later).toMatchObject({ status: 1, stderr: '' });
    expect(added.later.stdout).toMatch(
      /^× Ansel Ridge north 1, 2026-05-11 09:30: 1 fault; logged as [0-9a-f]{8}/u,
    );
  });

  it('of a sweep that is there says so and changes nothing', async () => {
    const before = await logJson('list');
    const again = await log('add', LATER, '--note', 'another note');
    expect(again.status).toBe(1);
    expect(again.stdout).toContain('this very sweep is logged');
    expect(await logJson('list')).toEqual(before);
  });

  it('saves what it can of several, and says what it could not', async () => {
    const other = join(folder, 'several.sqlite');
    const { status, stdout, stderr } = await runCli([
      ...['log', 'add', 'samples/none.s1p', FIRST, 'samples/south-1.line.json', '--logbook', other, '--when'],
      ...['2024-05-03'],
    ]);
    expect(status).toBe(2);
    expect(stderr).toMatch(/^feedsonde: samples\/none\.s1p: there is no such file\n/u);
    expect(stdout).toContain('Ansel Ridge north 1, 2024-05-03: no fault found');
    expect(stdout).toContain('line "Ansel Ridge south 1" is stored');
    const swept = await runCli([
      ...['locate', 'samples/south-1.s1p', '--line', 'ansel-ridge-south-1', '--logbook', other, '--json'],
    ]);
    expect((JSON.parse(swept.stdout) as LocateDocument).line).toMatchObject({ name: 'Ansel Ridge south 1' });
  });

  it('takes the date of the file where none is said, and says so', async () => {
    const sweep = join(folder, 'copy.s1p');
    await writeFile(sweep, `! a copy\n${await readFile(join(ROOT, FIRST), 'utf8')}`);
    await cp(join(ROOT, 'samples/north-1.line.json'), join(folder, 'copy.line.json'));
    const other = join(folder, 'dated.sqlite');
    const { stdout } = await runCli(['log', 'add', sweep, '--logbook', other]);
    expect(stdout.replace(/\s+/gu, ' ')).toMatch(/taken \d{4}-\d\d-\d\d \d\d:\d\d, the date of the file/u);
  });

  it('refuses a date that is none, before anything is saved', async () => {
    const { status, stdout, stderr } = await log('add', 'samples/south-1.s1p', '--when', '2026-02-30');
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toContain('this is not a date: --when 2026-02-30');
    expect((await logJson('list')).entries).toHaveLength(2);
  });
});

describe('feedsonde log list', () => {
  it('shows entries by line, site and date, in text and in JSON', async () => {
    const { stdout, status } = await log('list', LINE);
    expect(status).toBe(0);
    expect(stdout).toMatch(
      /● [0-9a-f]{8} +2024-05-03 +no fault found +Ansel Ridge north 1 · baseline · Mara/u,
    );
    expect(stdout).toMatch(/× [0-9a-f]{8} +2026-05-11 +1 fault +Ansel Ridge north 1 · after the storm/u);
    for (const line of stdout.split('\n')) expect(line.length).toBeLessThanOrEqual(80);
    const document = await logJson('list', '--since', '2025-01-01', '--site', 'ansel ridge');
    expect(document).toMatchObject({ schema: 1, command: 'log list', logbook: file });
    expect(document.entries).toMatchObject([
      {
        line: 'Ansel Ridge north 1',
        takenAt: '2026-05-11T09:30',
        faults: 1,
        note: 'after the storm',
        baseline: false,
      },
    ]);
    expect((await logJson('list', '--site', 'elsewhere')).entries).toEqual([]);
  });
});

describe('feedsonde log show', () => {
  it('shows an entry with what locate said, and gives its sweep back byte for byte', async () => {
    const output = join(folder, 'back.s1p');
    const document = await logJson('show', LINE, '-o', output);
    expect(await readFile(output)).toEqual(await readFile(join(ROOT, LATER)));
    const located = JSON.parse((await runCli(['locate', LATER, '--json'])).stdout) as LocateDocument;
    expect(document.results).toEqual({ ...located, notices: document.results.notices });
    expect(document.described.sections[0].cable).toHaveProperty('k1');
    const { stdout } = await log('show', document.entry.slice(0, 8), '--units', 'ft');
    expect(stdout).toContain('series resistance 9.0 Ω, at joint 3');
    expect(stdout).toContain('after the storm');
    expect(stdout).toMatch(/157\.\d+ ft/u);
    for (const line of stdout.split('\n')) expect(line.length).toBeLessThanOrEqual(80);
  });

  it('leaves a file that is there alone without --force', async () => {
    const output = join(folder, 'mine.s1p');
    await writeFile(output, 'mine');
    expect((await log('show', LINE, '-o', output)).status).toBe(2);
    expect(await readFile(output, 'utf8')).toBe('mine');
    expect((await log('show', LINE, '-o', output, '--force')).status).toBe(0);
    expect(await readFile(output)).toEqual(await readFile(join(ROOT, LATER)));
  });
});

describe('feedsonde log baseline', () => {
  it('tells it, and refuses a sweep of another line', async () => {
    const { baseline } = await logJson('baseline', LINE);
    expect(baseline).toMatchObject({ takenAt: '2024-05-03', baseline: true });
    const other = join(folder, 'baseline.sqlite');
    for (const sweep of [FIRST, 'samples/south-1.s1p'])
      await runCli(['log', 'add', sweep, '--logbook', other]);
    const wrong = await runCli([
      ...['log', 'baseline', 'ansel-ridge-south-1', baseline.entry.slice(0, 8), '--logbook', other],
    ]);
    expect(wrong).toMatchObject({ status: 2, stdout: '' });
    expect(wrong.stderr).toContain('is a sweep of "Ansel Ridge north 1"');
    const set = await runCli(['log', 'baseline', LINE, baseline.entry.slice(0, 8), '--logbook', other]);
    expect(set).toMatchObject({ status: 0, stderr: '' });
    expect((await runCli(['log', 'list', '--logbook', other])).stdout.match(/· baseline/gu)).toHaveLength(1);
  });
});

describe('feedsonde log trend', () => {
  it('shows the joint that corroded, and the joints that did not', async () => {
    const trend = await logJson('trend', LINE);
    const joints = trend.echoes.filter(({ joint }: { joint: number | null }) => joint !== null);
    expect(joints.map(({ joint }: { joint: number }) => joint)).toEqual([1, 2, 3, 4]);
    const changes = joints.map(({ changeDb }: { changeDb: number }) => changeDb);
    // 9 Ω in series is −22 dB; the joint was a sound one before.
    expect(changes[2]).toBeGreaterThan(10);
    for (const joint of [0, 1, 3]) expect(Math.abs(changes[joint])).toBeLessThan(2);
    expect(joints[2].perYearDb).toBeCloseTo(changes[2] / 2.02, 1);
    expect(Math.abs(trend.lossDb.change)).toBeLessThan(0.05);
    expect(trend.match.map(({ band }: { band: string }) => band)).toEqual(['main']);
    const { stdout, status } = await log('trend', LINE);
    expect(status).toBe(0);
    expect(stdout).toMatch(/× c +48\.00 m .* series resistance 9\.0 Ω/u);
    expect(stdout).toMatch(/[\u2801-\u28ff]c\n/u);
    for (const line of stdout.split('\n')) expect(line.length).toBeLessThanOrEqual(80);
  });
});

describe('feedsonde log export, import and check', () => {
  it('carry everything to another logbook, once', async () => {
    const out = join(folder, 'out');
    expect((await log('export', out)).stdout).toBe('2 entries of 1 line written\n');
    const other = join(folder, 'other.sqlite');
    const taken = await runCli(['log', 'import', out, '--logbook', other]);
    expect(taken).toMatchObject({ status: 0, stdout: '2 entries taken in, 0 already there\n', stderr: '' });
    const again = await runCli(['log', 'import', out, '--logbook', other, '--json']);
    expect(JSON.parse(again.stdout)).toMatchObject({ added: 0, already: 2, notices: [] });
    expect((await runCli(['log', 'baseline', LINE, '--logbook', other])).stdout).toContain('2024-05-03');
    expect(await logJson('check')).toMatchObject({ pass: true, entries: 2, originals: 2, damaged: [] });
    expect((await log('check')).stdout).toContain('every entry is what was saved');
  });
});

describe('feedsonde log', () => {
  it.each([
    [['lst'], 'did you mean "log list"?'],
    [['constructor'], 'it can add, list, show, baseline, trend, export, import, check'],
    [['trend'], 'write feedsonde log trend LINE'],
    [['check', 'it'], 'write feedsonde log check'],
    [['trend', 'ansel ridge nort 1'], 'did you mean "Ansel Ridge north 1"'],
    [['show', 'abcdef'], '"feedsonde log list" shows what it has'],
  ])('refuses %j', async (words, mend) => {
    const { status, stdout, stderr } = await log(...words);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toContain(mend);
  });

  it('says how to start one where there is none, and makes no file', async () => {
    const none = join(folder, 'none.sqlite');
    const { status, stderr } = await runCli(['log', 'list', '--logbook', none]);
    expect(status).toBe(2);
    expect(stderr).toContain('"feedsonde log add SWEEP" starts one');
    await expect(readFile(none)).rejects.toThrow('ENOENT');
  });

  it('lies in the data folder of the user where no file is named', async () => {
    const env = { XDG_DATA_HOME: join(folder, 'data') };
    expect((await runCli(['log', 'add', FIRST], { env })).status).toBe(0);
    const document = JSON.parse((await runCli(['log', 'list', '--json'], { env })).stdout);
    expect(document.logbook).toBe(join(folder, 'data', 'feedsonde', 'logbook.sqlite'));
    expect(document.entries).toHaveLength(1);
  });

  it('says what is missing where there is no SQLite, while everything else works', async (context) => {
    const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
    if (major > 22 || (major === 22 && minor >= 13)) context.skip('this Node brings its own SQLite');
    // The program without the packages beside it.
    const bare = join(folder, 'bare');
    for (const part of ['dist', 'cables', 'package.json'])
      await cp(join(ROOT, part), join(bare, part), { recursive: true });
    const refused = await runBare(join(bare, 'dist/cli.js'), [
      'log',
      'add',
      FIRST,
      '--logbook',
      join(folder, 'x.sqlite'),
    ]);
    expect(refused).toMatchObject({ status: 2, stdout: '' });
    expect(refused.stderr).toContain('the logbook needs SQLite');
    expect(refused.stderr).toContain('Node 22.13 or newer');
    expect((await runBare(join(bare, 'dist/cli.js'), ['locate', LATER])).status).toBe(1);
  });
});

/** Runs another copy of the program. */
async function runBare(program: string, args: readonly string[]): Promise<CliResult> {
  const { error, stdout, stderr } = await new Promise<{
    error: ExecFileException | null;
    stdout: string;
    stderr: string;
  }>((resolve) => {
    execFile(process.execPath, [program, ...args], { cwd: ROOT }, (failure, out, err) =>
      resolve({ error: failure, stdout: out, stderr: err }),
    );
  });
  return { status: error ? Number(error.code) : 0, stdout, stderr };
}
