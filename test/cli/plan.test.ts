/** The built `plan` and `check-standards`. */
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { parseSweepRange } from '../../src/sweep/number-text.ts';
import { runCli } from './run-cli.ts';

let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-plan-'));
});
afterAll(() => rm(folder, { recursive: true }));

describe('feedsonde plan', () => {
  it('plans a sweep that simulate takes and locate has no complaint of', async () => {
    const { status, stdout } = await runCli(['plan', '--line', 'samples/north-1.line.json', '--json']);
    expect(status).toBe(0);
    const plan = JSON.parse(stdout) as {
      sweep: string;
      startHz: number;
      stopHz: number;
      points: number;
      ohms: boolean;
    };
    const range = parseSweepRange(plan.sweep);
    expect(range.ok && range.value).toEqual({
      startHz: plan.startHz,
      stopHz: plan.stopHz,
      points: plan.points,
    });
    const sweep = join(folder, 'planned.s1p');
    const line = 'samples/north-1.line.json';
    await runCli(['simulate', line, '--sweep', plan.sweep, '--noise', '-70', '-o', sweep]);
    const located = await runCli(['locate', sweep, '--line', line, '--json']);
    const { notices, reach } = JSON.parse(located.stdout) as {
      notices: { code: string }[];
      reach: { impedanceProfile: string };
    };
    expect(notices.map(({ code }) => code)).not.toContain('line-folds');
    expect(notices.map(({ code }) => code)).not.toContain('band-narrow');
    expect(reach.impedanceProfile).toBe(plan.ohms ? 'measured' : 'modelled');
  });

  it('plans for a cable and length, within a band', async () => {
    const args = ['plan', '--cable', 'foam-half', '--length', '46m', '--band', '1.7GHz-2.2GHz'];
    const { status, stdout } = await runCli(args);
    expect(status).toBe(0);
    expect(stdout).toMatch(/^line: 1\.7GHz-2\.2GHz:251\n/u);
    expect(stdout).toContain('a short at the far end');
  });

  it.each([
    [['plan'], 'nothing says what line'],
    [['plan', '--cable', 'foam-half'], 'a line of known length'],
    [['plan', '--cable', 'foam-half', '--length', '4m', '--band', 'wide'], 'this is no band'],
  ])('refuses %j', async (args, what) => {
    const { status, stdout, stderr } = await runCli(args);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toContain(what);
  });
});

describe('feedsonde check-standards', () => {
  async function standard(name: string, gamma: number): Promise<string> {
    const file = join(folder, `${name}.s1p`);
    const rows = Array.from({ length: 101 }, (_, i) => `${10 + 10 * i} ${gamma} 0`);
    await writeFile(file, `# MHz S RI R 50\n${rows.join('\n')}\n`);
    return file;
  }

  it('passes good ones with 0 and says of bad ones what is wrong with 1', async () => {
    const open = await standard('open', 0.998);
    const short = await standard('short', -0.998);
    const load = await standard('load', 0.004);
    const good = await runCli(['check-standards', open, short, load]);
    expect(good).toMatchObject({ status: 0, stderr: '' });
    expect(good.stdout).toMatch(/^● these are good standards/u);
    const bad = await runCli(['check-standards', open, load, short, '--json']);
    expect(bad.status).toBe(1);
    const { pass, checks } = JSON.parse(bad.stdout) as {
      pass: boolean;
      checks: { pass: boolean; mend: string }[];
    };
    expect(pass).toBe(false);
    for (const check of checks) expect(check.mend === null).toBe(check.pass);
  });

  it('names every file that cannot be read', async () => {
    const { status, stdout, stderr } = await runCli([
      'check-standards',
      'no-1.s1p',
      'no-2.s1p',
      'samples/south-1.s1p',
    ]);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toContain('no-1.s1p');
    expect(stderr).toContain('no-2.s1p');
  });
});
