/** What the program says of each sample, and that each sample can be made again. */
import { copyFile, mkdtemp, readdir, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { LocateDocument } from '../../src/app/json.ts';
import { ROOT, runCli } from './run-cli.ts';

const SAMPLES = join(ROOT, 'samples');
/** The measure: the fault within this distance. */
const NEAR_M = 0.5;

async function locate(
  name: string,
): Promise<{ readonly status: number | null; readonly document: LocateDocument }> {
  const { status, stdout, stderr } = await runCli(['locate', `samples/${name}.s1p`, '--json']);
  expect(stderr).toBe('');
  return { status, document: JSON.parse(stdout) as LocateDocument };
}

describe('feedsonde locate on the samples', () => {
  it.each([
    ['north-1-later', 'series-resistance', 48.0],
    ['north-2', 'shunt-capacitance', 31.4],
    ['south-3', 'open', 17.4],
  ] as const)('%s: names %s at %d m, and nothing else', async (name, kind, distanceM) => {
    const { status, document } = await locate(name);
    expect(status).toBe(1);
    const faults = document.findings.filter((finding) => finding.severity === 'fault');
    expect(faults.map((fault) => fault.kind)).toEqual([kind]);
    expect(Math.abs((faults[0]?.distanceM ?? 0) - distanceM)).toBeLessThan(NEAR_M);
  });

  it('north-1-later: sizes the resistance and names the joint', async () => {
    const { document } = await locate('north-1-later');
    const echo = document.echoes[document.findings[0]?.echo ?? -1];
    expect(echo?.joint?.index).toBe(3);
    expect(echo?.value?.unit).toBe('ohm');
    // Invented as 9 Ω; the joint's own reactance and the ripple leave about 1 Ω of doubt.
    expect(Math.abs((echo?.value?.value ?? 0) - 9)).toBeLessThan(1.5);
  });

  it.each(['north-1', 'south-1'])('%s: finds nothing but sound joints and the end', async (name) => {
    const { status, document } = await locate(name);
    expect(status).toBe(0);
    expect(document.findings).toEqual([]);
    const kinds = document.echoes.filter((echo) => !echo.ghost).map((echo) => echo.kind);
    for (const kind of kinds) expect(['joint', 'termination', 'open', 'short']).toContain(kind);
    expect(document.echoes.map((echo) => echo.severity)).not.toContain('fault');
  });

  it('south-1: finds the short at the top', async () => {
    const { document } = await locate('south-1');
    expect(document.line.end).toBe('short');
    expect(Math.abs((document.line.lengthM ?? 0) - 41)).toBeLessThan(NEAR_M);
  });
});

describe('the samples', async () => {
  const sweeps = (await readdir(SAMPLES)).filter((name) => name.endsWith('.s1p'));

  it.each(sweeps)(
    '%s says that it is invented, and its command makes it again byte for byte',
    async (name) => {
      const text = await readFile(join(SAMPLES, name), 'utf8');
      expect(text).toMatch(/^! Invented: a simulated sweep/u);
      const command = /^! Made by: feedsonde (.*)$/mu.exec(text)?.[1] ?? '';
      const folder = await mkdtemp(join(tmpdir(), 'feedsonde-sample-'));
      try {
        const lineFile = name.replace('.s1p', '.line.json');
        await copyFile(join(SAMPLES, lineFile), join(folder, lineFile));
        expect(await runCli(command.split(' '), { cwd: folder })).toEqual({
          status: 0,
          stdout: '',
          stderr: '',
        });
        expect(await readFile(join(folder, name), 'utf8')).toBe(text);
      } finally {
        await rm(folder, { recursive: true });
      }
    },
  );

  it('are all spoken of in their README', async () => {
    const readme = await readFile(join(SAMPLES, 'README.md'), 'utf8');
    for (const name of sweeps) expect(readme).toContain(`\`${name}\``);
  });
});
