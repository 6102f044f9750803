/** Bad input: design section 12, rows 1 to 6. Message, exit status, and nothing half-done. */
import { spawn } from 'node:child_process';
import { mkdtemp, open, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { LocateDocument } from '../../src/app/json.ts';
import { type CliResult, PROGRAM, ROOT, runCli } from './run-cli.ts';

let folder = '';
let sample = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-bad-'));
  sample = await readFile(join(ROOT, 'samples', 'south-3.s1p'), 'utf8');
});
afterAll(() => rm(folder, { recursive: true }));

const CABLE = ['--cable', 'foam-half'];

async function locateText(text: string | Uint8Array, ...flags: string[]): Promise<CliResult> {
  await writeFile(join(folder, 'bad.s1p'), text);
  return runCli(['locate', 'bad.s1p', ...(flags.length > 0 ? flags : CABLE)], { cwd: folder });
}

/** Status 2, an explanation, nothing on standard output. */
function expectRefusal(result: CliResult, message: RegExp): void {
  expect(result.stderr).toMatch(message);
  expect(result.stderr).toMatch(/^feedsonde: /u);
  expect(result.stderr).not.toContain('a fault of the program');
  expect(result.stdout).toBe('');
  expect(result.status).toBe(2);
}

/** Goes on, and says what is odd. */
async function expectNotice(text: string, code: RegExp, ...flags: string[]): Promise<LocateDocument> {
  const result = await locateText(text, ...(flags.length > 0 ? flags : CABLE), '--json');
  expect(result.stderr).toBe('');
  expect([0, 1]).toContain(result.status);
  const document = JSON.parse(result.stdout) as LocateDocument;
  expect(document.notices.map((notice) => notice.code).join(' ')).toMatch(code);
  return document;
}

/** A sweep of a few cables' worth of points from a rule. */
function touchstone(
  points: number,
  gammaAt: (frequencyHz: number) => readonly [number, number],
  startHz = 2e6,
  stepHz = 2e6,
): string {
  const rows = Array.from({ length: points }, (_, i) => {
    const f = startHz + i * stepHz;
    return `${f} ${gammaAt(f).join(' ')}`;
  });
  return `# Hz S RI R 50\n${rows.join('\n')}\n`;
}

describe('row 1: a file that cannot be read', () => {
  it('that is missing: names it', async () => {
    expectRefusal(
      await runCli(['locate', 'none.s1p', ...CABLE], { cwd: folder }),
      /none\.s1p: there is no such file/u,
    );
  });

  it('that is a folder', async () => {
    expectRefusal(await runCli(['locate', '.', ...CABLE], { cwd: folder }), /this is a folder/u);
  });

  it('that is empty', async () => {
    expectRefusal(await locateText(''), /bad\.s1p: the file is empty/u);
  });

  it('that is standard input with nothing in it', async () => {
    expectRefusal(
      await runCli(['locate', '-', ...CABLE], { cwd: folder, input: '' }),
      /^feedsonde: standard input: nothing came\n/u,
    );
  });

  it('that is no sweep at all: says so even where the line is missing too', async () => {
    await writeFile(join(folder, 'letter.s1p'), 'Dear crew,\n');
    expectRefusal(
      await runCli(['locate', 'letter.s1p'], { cwd: folder }),
      /letter\.s1p, line 1: has data before any option line.*\n.*\n.*nothing says what line/u,
    );
  });

  it('that holds only comments', async () => {
    expectRefusal(await locateText('! nothing\n# Hz S RI R 50\n'), /bad\.s1p/u);
  });

  it('that is binary', async () => {
    const noise = Uint8Array.from({ length: 4000 }, (_, i) => (i * 7919) % 256);
    expectRefusal(await locateText(noise), /bad\.s1p: .*(not text|binary)/u);
  });

  it('that breaks off in the middle of a number row: names the line', async () => {
    const cut = sample.slice(0, sample.lastIndexOf(' '));
    expectRefusal(await locateText(cut), /bad\.s1p, line \d+: /u);
  });

  it('that is larger than the limit, at once', async () => {
    const handle = await open(join(folder, 'huge.s1p'), 'w');
    await handle.truncate(256 * 1024 * 1024 + 1);
    await handle.close();
    expectRefusal(
      await runCli(['locate', 'huge.s1p', ...CABLE], { cwd: folder }),
      /huge\.s1p: the file is larger than 256 MB/u,
    );
  });

  it('leaves no file behind that was to be written', async () => {
    await locateText('', ...CABLE, '--trace', 'trace.csv');
    await runCli(['simulate', 'none.line.json', '-o', 'made.s1p'], { cwd: folder });
    const left = await readdir(folder);
    expect(left).not.toContain('trace.csv');
    expect(left).not.toContain('made.s1p');
  });
});

describe('row 2: numbers that make no sweep', () => {
  it('frequencies that fall: names the line', async () => {
    expectRefusal(
      await locateText('# MHz S RI R 50\n10 0.1 0\n20 0.1 0\n15 0.1 0\n25 0.1 0\n'),
      /bad\.s1p, line 4: .*(frequenc|ris)/u,
    );
  });

  it('text where a number should stand: names the line and the text', async () => {
    expectRefusal(
      await locateText('# MHz S RI R 50\n10 0.1 0\n20 0.1 abc\n30 0.1 0\n'),
      /bad\.s1p, line 3: .*abc/u,
    );
  });

  it.each(['NaN', 'inf', '1e999'])('%s where a number should stand', async (word) => {
    expectRefusal(
      await locateText(`# MHz S RI R 50\n10 0.1 0\n20 ${word} 0\n30 0.1 0\n`),
      /bad\.s1p, line 3: /u,
    );
  });

  it('rows of different lengths: names the first odd one', async () => {
    expectRefusal(
      await locateText('# MHz S RI R 50\n10 0.1 0\n20 0.1 0 0.3\n30 0.1 0\n'),
      /bad\.s1p, line 3: /u,
    );
  });

  it('a reference of 0 Ω', async () => {
    expectRefusal(await locateText('# MHz S RI R 0\n10 0.1 0\n20 0.1 0\n'), /bad\.s1p, line 1: /u);
  });

  it('no option line: refuses to guess unit and format, and says what to write', async () => {
    expectRefusal(
      await locateText(sample.replace(/^#.*\n/mu, '')),
      /bad\.s1p, line \d+: has data before any option line.*\n {2}put the option line above the data/u,
    );
  });

  it('a repeated frequency: takes the mean, and says so with the line', async () => {
    const text = touchstone(200, () => [0.1, 0]).replace(/^40000000 .*$/mu, '$&\n$&');
    const document = await expectNotice(text, /repeat/u);
    expect(document.sweep.points).toBe(200);
    const [repeated] = document.notices.filter((notice) => notice.code.includes('repeat'));
    expect(repeated?.what).toMatch(/line 22 \(40 MHz\)/u);
  });

  it('a port that the file does not hold', async () => {
    expectRefusal(await locateText(sample, ...CABLE, '--port', '2'), /port/u);
  });
});

describe('row 3: data that no passive line gives', () => {
  it('Γ over 1: goes on, with the figure', async () => {
    const active = touchstone(400, (f) => [1.2 * Math.cos(f * 1e-8), 1.2 * Math.sin(f * 1e-8)]);
    const document = await expectNotice(active, /active|passiv|gamma/iu);
    expect(document.notices.map((notice) => notice.what).join(' ')).toMatch(/1\.2/u);
  });

  it('all zeros: goes on and finds nothing', async () => {
    const document = await expectNotice(
      touchstone(400, () => [0, 0]),
      /./u,
    );
    expect(document.findings.filter((finding) => finding.severity === 'fault')).toEqual([]);
  });

  it('noise instead of a line: goes on', async () => {
    let state = 1;
    const draw = (): number => {
      state = (state * 48271) % 2147483647;
      return state / 2147483647 - 0.5;
    };
    await expectNotice(
      touchstone(400, () => [draw(), draw()]),
      /./u,
    );
  });
});

describe('row 4: a wrong line file', () => {
  it('names every problem at once, each with its place and how to mend it', async () => {
    await writeFile(
      join(folder, 'wrong.line.json'),
      '{ "sections": [\n  { "cable": "foam-7/9", "lenghtM": 46 },\n  { "cable": "rg-213", "lengthM": -2 } ],\n  "end": "opne" }\n',
    );
    const result = await locateText(sample, '--line', 'wrong.line.json');
    expectRefusal(result, /wrong\.line\.json, line 2: .*lenghtM/u);
    expect(result.stderr).toContain('did you mean "lengthM"?');
    expect(result.stderr).toMatch(/line 2: .*cable/u);
    expect(result.stderr).toMatch(/line 3: .*lengthM/u);
    expect(result.stderr).toMatch(/line 4: .*end/u);
    expect(result.stderr).toContain('"open"');
  });

  it('that is no JSON: names the line', async () => {
    await writeFile(join(folder, 'broken.line.json'), '{ "sections": [\n');
    expectRefusal(await locateText(sample, '--line', 'broken.line.json'), /broken\.line\.json, line \d: /u);
  });

  it('says when nothing describes the line', async () => {
    await writeFile(join(folder, 'alone.s1p'), sample);
    expectRefusal(
      await runCli(['locate', 'alone.s1p'], { cwd: folder }),
      /nothing says what line this sweep was taken of\n {2}give --line FILE, or --cable ID/u,
    );
  });

  it('shows hostile names harmlessly', async () => {
    await writeFile(join(folder, 'evil.line.json'), '{ "sections": [], "\\u001b]0;owned\\u0007": 1 }');
    const result = await locateText(sample, '--line', 'evil.line.json');
    expectRefusal(result, /evil\.line\.json/u);
    expect(result.stderr).not.toMatch(/[\u0000-\u0009\u000b-\u001f\u007f-\u009f]/u);
  });
});

describe('row 5: a sweep that cannot do what is asked', () => {
  const noticeOf = (document: LocateDocument, code: string): string =>
    document.notices.find((notice) => notice.code === code)?.what ?? '';
  const mild = (f: number): readonly [number, number] => [
    0.3 * Math.cos(f * 1e-7),
    -0.3 * Math.sin(f * 1e-7),
  ];

  it('a line longer than the sweep can see: says so, and what sweep would do', async () => {
    const document = await expectNotice(
      touchstone(200, mild, 10e6, 10e6),
      /line-folds/u,
      ...CABLE,
      '--length',
      '60m',
    );
    // c·vf/(2·Δf) = 13.2 m for 10 MHz steps and a velocity factor of 0.88.
    expect(document.reach.unambiguousM).toBeCloseTo(13.2, 0);
    expect(noticeOf(document, 'line-folds')).toMatch(/steps of 1 MHz, 1991 points over this band/u);
  });

  it('a band too narrow: says what it parts, and what band would do', async () => {
    const document = await expectNotice(
      touchstone(200, mild, 900e6, 1e5),
      /band-narrow/u,
      ...CABLE,
      '--length',
      '40m',
    );
    expect(noticeOf(document, 'band-narrow')).toMatch(/ MHz would part 2\.00 m/u);
  });

  it('a start too high for ohms: says that there is no measured profile, and what sweep would give one', async () => {
    const document = await expectNotice(
      touchstone(200, mild, 1.7e9, 1e6),
      /ohms-not-measured/u,
      ...CABLE,
      '--length',
      '20m',
    );
    expect(document.reach.impedanceProfile).not.toBe('measured');
    expect(noticeOf(document, 'ohms-not-measured')).toMatch(/starts too high, at 1\.7 GHz/u);
  });

  it('two points only: says how many it takes', async () => {
    expectRefusal(
      await locateText('# MHz S RI R 50\n10 0.1 0\n20 0.1 0\n', ...CABLE),
      /bad\.s1p: the sweep has 2 usable points; 8 are the least\n {2}save a sweep of some hundreds of points/u,
    );
  });
});

describe('row 6: no terminal, or one that goes away', () => {
  it('prints the demo as text where standard output is no terminal', async () => {
    const result = await runCli([]);
    expect(result.stderr).toBe('');
    expect(result.status).toBe(0);
    expect(result.stdout).toContain('Ansel Ridge north 1');
    expect(result.stdout).not.toContain('\u001b');
  });

  it('is quiet when the reader of a pipe goes away', async () => {
    const result = await runCli(['cables', '--json'], { closeEarly: true });
    expect(result.stderr).toBe('');
    expect(result.status).toBe(0);
  });

  it('says when standard output cannot be written', async () => {
    const full = await open('/dev/full', 'w');
    const child = spawn(process.execPath, [PROGRAM, 'cables'], { stdio: ['ignore', full.fd, 'pipe'] });
    let stderr = '';
    child.stderr?.on('data', (chunk: Buffer) => {
      stderr += chunk.toString();
    });
    const status = await new Promise((resolve) => child.on('close', resolve));
    await full.close();
    expect(stderr).toBe(
      'feedsonde: standard output could not be written (ENOSPC)\n  check the disk that it goes to\n',
    );
    expect(status).toBe(2);
  });
});
