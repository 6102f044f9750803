import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { cellWidth } from '../../src/plot/cells.ts';
import { runCli } from './run-cli.ts';
import { runInTerminal } from './run-in-terminal.ts';

type Entry = { readonly id: string; readonly [key: string]: unknown };

async function entries(...args: string[]): Promise<Entry[]> {
  const { status, stdout, stderr } = await runCli(['cables', ...args, '--json']);
  expect(stderr).toBe('');
  expect(status).toBe(0);
  return JSON.parse(stdout) as Entry[];
}

describe('feedsonde cables', () => {
  it('lists every entry of its JSON, a line each', async () => {
    const { status, stdout, stderr } = await runCli(['cables']);
    expect(stderr).toBe('');
    expect(status).toBe(0);
    const ids = (await entries()).map((entry) => entry.id);
    for (const id of ['rg-213', 'foam-7-8', 'foam-half-extraflex', 'braided-foam-10mm'])
      expect(ids).toContain(id);
    const listed = stdout.split('\n').map((line) => line.split(/\s/u)[0]);
    for (const id of ids) expect(listed).toContain(id);
  });

  it('fits its table into a terminal, and leaves it whole in a pipe', async () => {
    const { output } = await runInTerminal(['cables'], { NO_COLOR: '1' });
    const lines = output.trimEnd().split(/\r?\n/u);
    expect(Math.max(...lines.map(cellWidth))).toBeLessThanOrEqual(100);
    const { stdout } = await runCli(['cables']);
    expect(stdout).toContain('1/2 in extra-flexible corrugated foam\n');
    const foot = stdout.trimEnd().split('\n').slice(-4);
    expect(Math.max(...foot.map(cellWidth))).toBeLessThanOrEqual(80);
  });

  it('gives of each entry what a script needs', async () => {
    for (const entry of await entries()) {
      const guide = entry['type'] === 'guide';
      for (const key of ['z0', 'velocityFactor', 'k1', 'k2'])
        expect(entry[key] === null ? 'null' : typeof entry[key], key).toBe(guide ? 'null' : 'number');
      if (guide) for (const key of ['aMm', 'bMm', 'cutoffMHz']) expect(typeof entry[key], key).toBe('number');
      expect(entry['name']).not.toBe('');
    }
  });

  it('gives loss and delay of a run by the laws of the table', async () => {
    const [entry] = await entries('rg-213', '--at', '900MHz', '--length', '46m');
    const { k1, k2, run } = entry as unknown as {
      readonly k1: number;
      readonly k2: number;
      readonly run: { readonly lossDb: number; readonly delayNs: number };
    };
    // A = k1·√f + k2·f, dB per 100 m, f in MHz; delay within half a percent of L/(vf·c), vf = 0.66.
    expect(run.lossDb).toBeCloseTo(((k1 * Math.sqrt(900) + k2 * 900) * 46) / 100, 9);
    expect(Math.abs(run.delayNs / ((46 / (0.66 * 299_792_458)) * 1e9) - 1)).toBeLessThan(0.005);
    const { stdout } = await runCli(['cables', 'rg-213', '--at', '900MHz', '--length', '46m']);
    expect(stdout).toContain(`${run.lossDb.toFixed(2)} dB for 46.00 m at 900 MHz, 20 °C`);
    expect(stdout).toContain(`${run.delayNs.toFixed(2)} ns one way`);
  });

  it('gives loss, delay, cut-off and wavelength of a guide', async () => {
    const [entry] = await entries('WR-137', '--at', '6.5GHz', '--length', '20m');
    const { run, cutoffMHz } = entry as unknown as {
      readonly cutoffMHz: number;
      readonly run: { readonly lossDb: number; readonly delayNs: number; readonly guideWavelengthM: number };
    };
    // c/2a with a = 1.372 in; delay L/(c·√(1 − (fc/f)²)); λg = λ0/√(1 − (fc/f)²). @source references.md section 4.
    expect(cutoffMHz).toBeCloseTo(299.792458 / (2 * 1.372 * 0.0254), 6);
    const root = Math.sqrt(1 - (cutoffMHz / 6500) ** 2);
    expect(run.delayNs).toBeCloseTo(20 / 0.299792458 / root, 6);
    expect(run.guideWavelengthM).toBeCloseTo(0.299792458 / 6.5 / root, 9);
    // Between the copper losses at 5.85 and 8.2 GHz, 6.40 and 5.05 dB per 100 m.
    expect(run.lossDb).toBeGreaterThan(1.01);
    expect(run.lossDb).toBeLessThan(1.28);
    const { stdout } = await runCli(['cables', 'wr137', '--at', '6.5GHz', '--length', '20m']);
    expect(stdout).toContain(`${run.lossDb.toFixed(2)} dB for 20.00 m at 6.5 GHz, 20 °C`);
    expect(stdout).toContain(`${run.delayNs.toFixed(2)} ns one way`);
    expect(stdout).toContain('4301.3 MHz (TE10)');
    expect(stdout).toContain('61.52 mm along the guide');
    expect(stdout).toContain('with the far end shorted');
  });

  it('says so outside the band of a guide, and refuses what does not travel in it', async () => {
    const { stdout } = await runCli(['cables', 'WR-137', '--at', '4.6GHz']);
    expect(stdout.replace(/\s+/gu, ' ')).toContain(
      'meant for 5850–8200 MHz; below it its delay and loss rise steeply',
    );
    const refused = await runCli(['cables', 'WR-137', '--at', '4301MHz']);
    expect(refused).toMatchObject({ status: 2, stdout: '' });
    expect(refused.stderr).toMatch(
      /nothing travels in WR-137 waveguide at or below its cut-off, 4301.3 MHz/u,
    );
  });

  it('takes and shows feet and °F', async () => {
    const args = ['cables', 'rg-213', '--at', '900MHz', '--length', '150ft', '--temperature', '54F'];
    const { stdout } = await runCli([...args, '--units', 'ft']);
    expect(stdout).toContain('for 150.0 ft at 900 MHz, 54 °F');
    expect((await runCli(['cables', '--units', 'ft'])).stdout).toContain('dB per 100 ft');
  });

  it('finds a cable by another name, and names the nearest to one it does not know', async () => {
    expect((await entries('RG213'))[0]?.id).toBe('rg-213');
    const { status, stdout, stderr } = await runCli(['cables', 'rg-214x']);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toMatch(/not in the table: rg-214x\n {2}did you mean "rg-214"/u);
  });

  it("lets the user's own cable win over the table", async () => {
    const folder = await mkdtemp(join(tmpdir(), 'feedsonde-cables-'));
    try {
      await writeFile(
        join(folder, 'mine.json'),
        JSON.stringify({
          family: 'Mine',
          cables: [{ id: 'rg-213', name: 'mine', z0Ohm: 50, velocityFactor: 0.7, k1: 0.5, k2: 0.005 }],
        }),
      );
      const [entry] = await entries('rg-213', '--cables', folder);
      expect(entry).toMatchObject({ name: 'mine', velocityFactor: 0.7, k1: 0.5, k2: 0.005 });
    } finally {
      await rm(folder, { recursive: true });
    }
  });

  it.each([
    [['--at', '900MHz'], /--at asks about one cable/u],
    [['rg-213', '--length', '46m'], /--length goes with --at/u],
    [['rg-213', '--at', '900'], /900 Hz is below .*--at 900\n {2}give the unit too: --at 900MHz/u],
    [['rg-213', '--cables', 'no-such-folder'], /no such folder of cable files/u],
  ] as const)('refuses %j', async (args, message) => {
    const { status, stdout, stderr } = await runCli(['cables', ...args]);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toMatch(message);
  });
});
