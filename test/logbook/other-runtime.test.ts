/**
 * The same tests on the other SQLite: where this Node has none of its own, they run again in one that has.
 *
 * FEEDSONDE_OTHER_NODE names it; else it is looked for where DEVELOPERS.md says how to install it.
 */
import { execFile } from 'node:child_process';
import { existsSync } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { openLogbookFile } from '../../src/app/log-file.ts';
import { findDriver } from '../../src/logbook/driver.ts';
import { makeEntry } from './made-entry.ts';

const ROOT = fileURLToPath(new URL('../..', import.meta.url));
const OTHER_NODE = process.env['FEEDSONDE_OTHER_NODE'] ?? join(tmpdir(), 'node24/node_modules/node/bin/node');
/** Everything that opens a logbook without the built program. */
const SUITES = ['test/logbook/', 'test/app/log-'];

/** Why there is nothing to do here; null when there is. */
const NOT_HERE =
  process.env['FEEDSONDE_INNER'] !== undefined
    ? 'these are the inner tests'
    : findDriver()?.name === 'node:sqlite'
      ? 'this Node is one'
      : existsSync(OTHER_NODE)
        ? null
        : `there is none at ${OTHER_NODE}`;

describe('a Node with its own SQLite', () => {
  it('passes the same tests', async (context) => {
    if (NOT_HERE !== null) context.skip(NOT_HERE);
    expect((await run(['-p', "process.getBuiltinModule('node:sqlite') !== undefined"])).output).toContain(
      'true',
    );
    const { status, output } = await run([
      ...[join(ROOT, 'node_modules/vitest/vitest.mjs'), 'run', '--reporter=json', ...SUITES],
    ]);
    const report = JSON.parse(output.slice(output.indexOf('{'), output.lastIndexOf('}') + 1));
    expect(report).toMatchObject({ numFailedTests: 0, numFailedTestSuites: 0 });
    expect(report.numPassedTests).toBeGreaterThan(60);
    expect(status).toBe(0);
  }, 300_000);

  it('opens a logbook that the other SQLite wrote, with nothing on standard error', async (context) => {
    if (NOT_HERE !== null) context.skip(NOT_HERE);
    const folder = await mkdtemp(join(tmpdir(), 'feedsonde-other-'));
    const path = join(folder, 'logbook.sqlite');
    const logbook = await openLogbookFile(path, { create: true });
    if (!logbook.ok) throw new Error(JSON.stringify(logbook.problems));
    logbook.value.add(makeEntry(1), { replace: false, baseline: false });
    logbook.value.close();
    const listed = await run([join(ROOT, 'dist/cli.js'), 'log', 'check', '--logbook', path, '--json']);
    expect(listed).toMatchObject({ status: 0, errors: '' });
    expect(JSON.parse(listed.output)).toMatchObject({ entries: 1, pass: true });
    await rm(folder, { recursive: true });
  });
});

type Run = { readonly status: number; readonly output: string; readonly errors: string };

function run(args: readonly string[]): Promise<Run> {
  return new Promise((resolve) => {
    execFile(
      OTHER_NODE,
      [...args],
      { cwd: ROOT, env: { ...process.env, FEEDSONDE_INNER: '1' }, maxBuffer: 64 * 1024 * 1024 },
      (error, stdout, stderr) =>
        resolve({ status: error ? Number(error.code) : 0, output: stdout, errors: stderr }),
    );
  });
}
