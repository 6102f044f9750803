/** The built `locate` as scripts and people use it; what it finds is the matter of samples.test.ts. */
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { LocateDocument } from '../../src/app/json.ts';
import { TRACE_COLUMNS } from '../../src/app/trace-export.ts';
import { ROOT, runCli } from './run-cli.ts';
import { runInTerminal } from './run-in-terminal.ts';

const SAMPLE = 'samples/south-3.s1p';
const LINE = 'samples/south-3.line.json';

let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-locate-'));
});
afterAll(() => rm(folder, { recursive: true }));

describe('feedsonde locate', () => {
  it('reads a sweep from standard input, and concludes of it what it concludes of the file', async () => {
    const input = await readFile(join(ROOT, SAMPLE));
    const piped = await runCli(['locate', '-', '--line', LINE, '--json'], { input });
    const named = await runCli(['locate', SAMPLE, '--line', LINE, '--json']);
    expect(piped.stderr).toBe('');
    expect(piped.status).toBe(named.status);
    const document = JSON.parse(piped.stdout) as LocateDocument;
    expect(document.sweep.file).toBe('-');
    expect({ ...document, sweep: { ...document.sweep, file: SAMPLE } }).toEqual(JSON.parse(named.stdout));
  });

  it('says the same in text and in JSON', async () => {
    const text = await runCli(['locate', SAMPLE]);
    const json = await runCli(['locate', SAMPLE, '--json']);
    const { findings } = JSON.parse(json.stdout) as LocateDocument;
    const words = text.stdout.replace(/\s+/gu, ' ');
    expect(findings.length).toBeGreaterThan(0);
    for (const finding of findings) {
      expect(words).toContain(`${finding.severity} ${finding.where}`);
      expect(words).toContain(finding.what);
      for (const cause of finding.causes) expect(words).toContain(cause);
    }
    expect(text.status).toBe(1);
    expect(json.status).toBe(1);
  });

  it('shows feet everywhere with --units ft, while JSON stays in metres', async () => {
    const { stdout } = await runCli(['locate', SAMPLE, '--units', 'ft']);
    // The line of 48 m.
    expect(stdout).toContain('157.5 ft described, 64 °F');
    expect(stdout).toMatch(/× fault in the main run, \d+\.\d ft /u);
    expect(stdout).not.toMatch(/\d m\b/u);
    const metres = await runCli(['locate', SAMPLE, '--json']);
    expect((await runCli(['locate', SAMPLE, '--json', '--units', 'ft'])).stdout).toBe(metres.stdout);
  });

  it('writes trace and profile against distance with --trace, beside the text', async () => {
    const file = join(folder, 'trace.csv');
    const { status, stdout, stderr } = await runCli(['locate', SAMPLE, '--trace', file]);
    expect(stderr).toBe('');
    expect(status).toBe(1);
    expect(stdout).toContain('Ansel Ridge south 3');
    const [head, ...rows] = (await readFile(file, 'utf8')).trimEnd().split('\n');
    expect(head).toBe(TRACE_COLUMNS.join(','));
    expect(rows.length).toBeGreaterThan(500);
    const distances = rows.map((row) => Number(row.split(',')[0]));
    expect(distances).toEqual([...distances].sort((a, b) => a - b));
    const corrected = rows.map((row) => Number(row.split(',')[1]));
    // The cut end reflects everything: the strongest place of the trace, near 0 dB.
    const strongest = corrected.indexOf(Math.max(...corrected));
    expect(Math.abs(distances[strongest]! - 17.4)).toBeLessThan(0.5);
    expect(corrected[strongest]).toBeGreaterThan(-3);
  });

  it('leaves a file that is there alone, and replaces it with --force', async () => {
    const file = join(folder, 'kept.csv');
    await writeFile(file, 'mine');
    const refused = await runCli(['locate', SAMPLE, '--trace', file]);
    expect(refused).toMatchObject({ status: 2, stdout: '' });
    expect(refused.stderr).toMatch(/kept\.csv: the file is already there\n.*--force/u);
    expect(await readFile(file, 'utf8')).toBe('mine');
    expect((await runCli(['locate', SAMPLE, '--trace', file, '--force'])).status).toBe(1);
    expect(await readFile(file, 'utf8')).not.toBe('mine');
  });

  it('holds no escape code where standard output is a pipe', async () => {
    expect((await runCli(['locate', SAMPLE])).stdout).not.toContain('\u001b');
  });

  it('colours a terminal, but never with NO_COLOR', async () => {
    const coloured = await runInTerminal(['locate', SAMPLE]);
    expect(coloured.output).toContain('\u001b[31m× Ansel Ridge south 3');
    expect(coloured.status).toBe(1);
    const plain = await runInTerminal(['locate', SAMPLE], { NO_COLOR: '1' });
    expect(plain.output).toContain('× Ansel Ridge south 3');
    expect(plain.output).not.toContain('\u001b[3');
  });

  it('is quiet when the reader of a pipe goes away', async () => {
    const { stderr, status } = await runCli(['locate', SAMPLE, '--json'], { closeEarly: true });
    expect(stderr).toBe('');
    // It had either said all it had to say, or was cut off: 1 for the fault, or 0.
    expect([0, 1]).toContain(status);
  });
});
