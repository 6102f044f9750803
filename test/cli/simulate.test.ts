import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readSweep } from '../../src/sweep/read-sweep.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';
import { runCli } from './run-cli.ts';

const LINE = 'samples/south-1.line.json';

let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-simulate-'));
});
afterAll(() => rm(folder, { recursive: true }));

function sweepOf(text: string): Sweep {
  const read = readSweep(new TextEncoder().encode(text), { file: 'made.s1p' });
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  return read.value;
}

describe('feedsonde simulate', () => {
  it('prints a sweep that reads back, and says that it is invented and how it was made', async () => {
    const args = ['simulate', LINE, '--sweep', '10MHz-1GHz:100', '--noise', '-70', '--seed', '7'];
    const { status, stdout, stderr } = await runCli(args);
    expect(stderr).toBe('');
    expect(status).toBe(0);
    expect(stdout).toMatch(/^! Invented: a simulated sweep of Ansel Ridge south 1, not a measurement\.\n/u);
    expect(stdout).toContain(`! Made by: feedsonde ${args.join(' ')}\n`);
    const { frequencyHz, portOhm } = sweepOf(stdout);
    expect(frequencyHz.length).toBe(100);
    expect([frequencyHz[0], frequencyHz[99]]).toEqual([10e6, 1e9]);
    expect(portOhm).toBe(50);
  });

  it('makes the same sweep from the same seed and another from another', async () => {
    const make = async (seed: string): Promise<string> => {
      const { stdout } = await runCli([
        'simulate',
        LINE,
        '--sweep',
        '10MHz-1GHz:50',
        '--noise',
        '-60',
        '--seed',
        seed,
      ]);
      return stdout.replace(/^!.*\n/gmu, '');
    };
    expect(await make('7')).toBe(await make('7'));
    expect(await make('8')).not.toBe(await make('7'));
  });

  it('changes the end as asked: a short turned to an open turns the sign', async () => {
    const at = async (end: string): Promise<Sweep> =>
      sweepOf((await runCli(['simulate', LINE, '--sweep', '10MHz-100MHz:10', '--end', end])).stdout);
    const [open, short] = [await at('open'), await at('short')];
    // Both come back over the same lossy line of 41 m: opposite and nearly alike in size.
    open.gamma.re.forEach((re, i) => {
      expect(Math.hypot(re + short.gamma.re[i]!, open.gamma.im[i]! + short.gamma.im[i]!)).toBeLessThan(0.02);
      expect(Math.hypot(re, open.gamma.im[i]!)).toBeGreaterThan(0.5);
    });
  });

  it('writes a file whole, and leaves one that is there alone', async () => {
    const file = join(folder, 'made.s1p');
    expect(await runCli(['simulate', LINE, '-o', file])).toEqual({ status: 0, stdout: '', stderr: '' });
    const made = await readFile(file, 'utf8');
    expect(sweepOf(made).frequencyHz.length).toBe(1350);
    const again = await runCli(['simulate', LINE, '-o', file, '--end', 'open']);
    expect(again.status).toBe(2);
    expect(again.stderr).toMatch(/made\.s1p: the file is already there/u);
    expect(await readFile(file, 'utf8')).toBe(made);
  });

  it.each([
    ['a place beyond the line', ['--fault', 'open@99m'], /99 m is beyond the end of the line: open … @99m/u],
    ['a joint that is not there', ['--fault', 'short@joint9'], /there is no joint 9/u],
    ['a kind that is not there', ['--fault', 'opne@3m'], /did you mean "open"\?/u],
    ['a size without its unit', ['--fault', 'series-resistance:nine@joint2'], /feedsonde: /u],
    ['a range that falls', ['--sweep', '2GHz-1GHz:100'], /stop above its start/u],
    ['a start at 0', ['--sweep', '0Hz-1GHz:100'], /cannot be computed at 0 Hz/u],
    [
      'a range without its units',
      ['--sweep', '2-2700:100'],
      /2700 Hz, below all .*\n {2}give the units too/u,
    ],
    ['a seed that is no number', ['--seed', 'x'], /a seed is a whole number/u],
  ] as const)('refuses %s', async (_, flags, message) => {
    const before = await readdir(folder);
    const { status, stdout, stderr } = await runCli([
      'simulate',
      LINE,
      ...flags,
      '-o',
      join(folder, 'refused.s1p'),
    ]);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toMatch(message);
    expect(await readdir(folder)).toEqual(before);
  });

  it('names every problem at once', async () => {
    const { stderr } = await runCli(['simulate', LINE, '--fault', 'opne@3m', '--sweep', 'x', '--seed', '-1']);
    expect(stderr.match(/^feedsonde: /gmu)).toHaveLength(3);
  });

  it('refuses a line whose length or end is not known, and says how to give them', async () => {
    const file = join(folder, 'unknown.line.json');
    await writeFile(file, '{ "sections": [{ "cable": "rg-213" }] }');
    const { status, stderr } = await runCli(['simulate', file]);
    expect(status).toBe(2);
    expect(stderr).toContain('give its "lengthM" in the line file');
    expect(stderr).toContain('give --end open, short, load or antenna');
  });
});
