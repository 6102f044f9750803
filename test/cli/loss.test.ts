/** The built `loss` on the shipped samples. */
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { LossDocument } from '../../src/app/loss-document.ts';
import { runCli } from './run-cli.ts';

let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-loss-'));
});
afterAll(() => rm(folder, { recursive: true }));

async function document(...args: string[]): Promise<{ status: number | null; loss: LossDocument }> {
  const { status, stdout } = await runCli(['loss', ...args, '--json']);
  return { status, loss: JSON.parse(stdout) as LossDocument };
}

describe('feedsonde loss', () => {
  it('passes south 1, which is shorted at the top, in text and in JSON', async () => {
    const text = await runCli(['loss', 'samples/south-1.s1p']);
    expect(text.status).toBe(0);
    expect(text.stdout.split('\n')[0]).toMatch(
      /^● Ansel Ridge south 1: loss check passes, 0\.\d\d dB to spare/u,
    );
    const { status, loss } = await document('samples/south-1.s1p');
    expect(status).toBe(0);
    expect(loss).toMatchObject({ schema: 1, command: 'loss', method: 'end-echo', pass: true });
    const n = loss.frequencyHz.length;
    expect([loss.lossDb, loss.sigmaDb, loss.tableLossDb].map((curve) => curve?.length)).toEqual([n, n, n]);
    const [band] = loss.bands;
    expect(band!.name).toBe('main');
    expect(loss.marginDb!).toBeCloseTo(band!.tableLossDb + loss.jointsDb + 0.5 - band!.lossDb!, 9);
  });

  it('fails south 2 and names the wet jumper', async () => {
    const { status, stdout } = await runCli(['loss', 'samples/south-2.s1p']);
    expect(status).toBe(1);
    expect(stdout).toMatch(/× Ansel Ridge south 2: loss check fails/u);
    expect(stdout).toContain('in the top jumper, from 41.0 m to 44.0 m: wet cable');
    const { loss } = await document('samples/south-2.s1p');
    expect(loss.pass).toBe(false);
    expect(loss.marginDb!).toBeLessThan(0);
    expect(loss.excess[0]).toMatchObject({ kind: 'wet' });
  });

  it('says of an antenna what it can and cannot tell, and how to get the rest', async () => {
    const { status, stdout } = await runCli(['loss', 'samples/north-1.s1p']);
    expect(status).toBe(0);
    expect(stdout).toContain('no loss check: this end does not tell the loss');
    expect(stdout.replace(/\s+/gu, ' ')).toContain('sweep once more with the far end open or shorted');
    const { loss } = await document('samples/north-1.s1p');
    expect(loss).toMatchObject({ method: 'bound', lossDb: null, sigmaDb: null, marginDb: null, pass: null });
    loss.atMostDb!.forEach((db, i) => {
      if (loss.frequencyHz[i]! > 1e9) expect(db).toBeGreaterThan(loss.tableLossDb[i]! * 0.95);
    });
  });

  it('leaves with 2 where a load takes everything in, and says what to do', async () => {
    const sweep = join(folder, 'loaded.s1p');
    const made = ['simulate', 'samples/north-1.line.json', '--end', 'load', '-o', sweep];
    expect((await runCli(made)).status).toBe(0);
    const line = ['--line', 'samples/north-1.line.json', '--end', 'load'];
    const { status, stdout, stderr } = await runCli(['loss', sweep, ...line]);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toContain('the far end (load) sends back too little');
    expect(stderr).toContain('open or shorted');
  });

  it('does not check a line that is cut', async () => {
    const { status, stdout } = await runCli(['loss', 'samples/south-3.s1p']);
    expect(status).toBe(1);
    expect(stdout).toContain('no loss check: the line stops before its end');
  });

  it('reads the transmission of a two-port file', async () => {
    // 10 m of cable that loses 1 dB, matched: S11 = 0, |S21| = −1 dB.
    const file = join(folder, 'through.s2p');
    const size = 10 ** (-1 / 20);
    const rows = Array.from({ length: 201 }, (_, i) => `${100 + 10 * i} 0.001 0 ${size} 0 ${size} 0 0.001 0`);
    await writeFile(file, `# MHz S RI R 50\n${rows.join('\n')}\n`);
    const { loss } = await document(file, '--cable', 'foam-half', '--length', '10m', '--end', 'load');
    expect(loss.method).toBe('transmission');
    for (const db of loss.lossDb!) expect(db!).toBeCloseTo(1, 4);
  });

  it('shows feet and °F with --units ft, and JSON in metres all the same', async () => {
    const { stdout } = await runCli(['loss', 'samples/south-2.s1p', '--units', 'ft']);
    expect(stdout).toContain('144.4 ft');
    expect(stdout).not.toMatch(/\d m\b/u);
    const feet = await runCli(['loss', 'samples/south-2.s1p', '--json', '--units', 'ft']);
    expect(JSON.parse(feet.stdout)).toEqual((await document('samples/south-2.s1p')).loss);
  });
});
