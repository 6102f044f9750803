/** `compare` on the command line, on the samples, and against a logbook. */
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { CompareDocument } from '../../src/app/compare-json.ts';
import { runCli } from './run-cli.ts';

const BEFORE = 'samples/north-1.s1p';
const AFTER = 'samples/north-1-later.s1p';

describe('feedsonde compare', () => {
  it('says that the joint of main run and top jumper has changed, and nothing else', async () => {
    const { status, stdout, stderr } = await runCli(['compare', BEFORE, AFTER, '--json']);
    expect(stderr).toBe('');
    expect(status).toBe(1);
    const document = JSON.parse(stdout) as CompareDocument;
    expect(document).toMatchObject({ schema: 1, command: 'compare', verdict: 'changed' });
    expect(document.changes).toHaveLength(1);
    expect(document.changes[0]).toMatchObject({
      kind: 'series-resistance',
      gone: false,
      joint: { index: 3, name: 'main run / top jumper' },
      place: 'at joint 3, main run to top jumper',
    });
    expect(Math.abs(document.changes[0]!.distanceM! - 48)).toBeLessThan(0.3);
    expect(document.changes[0]!.levelDb).toBeLessThan(-20);
    expect(document.bands[0]!.afterDb!).toBeLessThan(document.bands[0]!.beforeDb!);
  });

  it('calls a mended joint what it was, gone', async () => {
    const { status, stdout } = await runCli(['compare', AFTER, BEFORE, '--json']);
    expect(status).toBe(1);
    expect((JSON.parse(stdout) as CompareDocument).changes).toMatchObject([
      { kind: 'series-resistance', gone: true, joint: { index: 3 } },
    ]);
  });

  it('tells it in words within 80 columns, in feet where asked', async () => {
    const metres = await runCli(['compare', BEFORE, AFTER]);
    expect(metres.stdout).toMatch(/^× Ansel Ridge north 1: changed at one place\n/u);
    expect(metres.stdout).toContain('change at joint 3, main run to top jumper, 48.00 m');
    for (const line of metres.stdout.split('\n')) expect(line.length).toBeLessThanOrEqual(80);
    const feet = await runCli(['compare', BEFORE, AFTER, '--units', 'ft']);
    expect(feet.stdout).toMatch(/157\.48 ft/u);
    expect(feet.stdout).not.toMatch(/\d m\b/u);
  });

  it('finds a sweep unchanged against itself, with exit status 0; one of them on standard input', async () => {
    const { status, stdout } = await runCli(['compare', BEFORE, BEFORE, '--json']);
    expect(status).toBe(0);
    expect(JSON.parse(stdout)).toMatchObject({ verdict: 'unchanged', changes: [] });
    const twice = await runCli(['compare', '-', '-']);
    expect(twice.status).toBe(2);
    expect(twice.stderr).toContain('only one of the two');
  });

  it('says that a line was cut, and where', async () => {
    const { status, stdout } = await runCli(['compare', BEFORE, 'samples/south-3.s1p', '--json']);
    expect(status).toBe(1);
    const document = JSON.parse(stdout) as CompareDocument;
    expect(document.changes.at(-1)).toMatchObject({ kind: 'open', joint: null });
  });

  it('doubts that two sweeps that differ everywhere are of one line', async () => {
    const { stdout } = await runCli(['compare', 'samples/south-1.s1p', 'samples/south-2.s1p', '--json']);
    const { notices } = JSON.parse(stdout) as CompareDocument;
    expect(notices.map(({ code }) => code)).toContain('not-alike');
  });

  it('compares the baseline of a logged line with a file', async () => {
    const folder = await mkdtemp(join(tmpdir(), 'feedsonde-compare-'));
    try {
      const logbook = join(folder, 'log.sqlite');
      const since = ['compare', '--baseline', 'ansel-ridge-north-1', AFTER, '--logbook', logbook, '--json'];
      const none = await runCli(since);
      expect(none.status).toBe(2);
      expect(none.stdout).toBe('');
      await runCli(['log', 'add', BEFORE, '--when', '2024-05-03', '--baseline', '--logbook', logbook]);
      const { status, stdout, stderr } = await runCli(since);
      expect(stderr).toBe('');
      expect(status).toBe(1);
      const document = JSON.parse(stdout) as CompareDocument;
      expect(document.changes.map((change) => change.joint?.index)).toEqual([3]);
      expect(document.notices.map(({ what }) => what).join('\n')).toContain('north-1.s1p, taken 2024-05-03');
      const unknown = await runCli(['compare', '--baseline', 'no-such-line', AFTER, '--logbook', logbook]);
      expect(unknown.status).toBe(2);
    } finally {
      await rm(folder, { recursive: true });
    }
  });

  it('names every file that cannot be read, with exit status 2 and nothing printed', async () => {
    const { status, stdout, stderr } = await runCli(['compare', 'no-1.s1p', 'no-2.s1p', '--cable', 'rg-213']);
    expect(status).toBe(2);
    expect(stdout).toBe('');
    expect(stderr).toContain('no-1.s1p');
    expect(stderr).toContain('no-2.s1p');
  });
});
