/** README.md says what holds: its examples run, its files read, its cautions are those of the program. */
import { cp, mkdtemp, readFile, rm, symlink } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loadCableTable } from '../../src/app/cable-files.ts';
import { VERBS, verbSpec } from '../../src/cli/commands.ts';
import { readCables } from '../../src/line/read-cables.ts';
import { readLine } from '../../src/line/read-line.ts';
import { CAUTIONS } from '../../src/report/cautions.ts';
import { ROOT, runCli } from './run-cli.ts';

const readme = await readFile(join(ROOT, 'README.md'), 'utf8');

/** The fenced text between the marks of this name. */
function block(name: string): string {
  const found = new RegExp(`<!-- ${name} -->\n\`\`\`\\w+\n(.*?)\`\`\`\n<!-- /${name} -->`, 'su').exec(readme);
  if (found?.[1] === undefined) throw new Error(`README.md has no block "${name}"`);
  return found[1];
}

/** Where examples run: the samples as they ship, and room to write beside them. */
let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-readme-'));
  await cp(join(ROOT, 'samples'), join(folder, 'samples'), { recursive: true });
  await symlink(join(ROOT, 'cables'), join(folder, 'cables'));
});
afterAll(() => rm(folder, { recursive: true }));

describe('README.md', () => {
  const commands = (Object.keys(VERBS) as (keyof typeof VERBS)[]).flatMap((verb) =>
    verbSpec(verb).examples.map((example) => example.command),
  );

  it.each(commands)('shows "%s", which runs on the samples', async (command) => {
    expect(readme).toContain(command);
    const { status, stdout, stderr } = await runCli(command.split(' ').slice(1), { cwd: folder });
    expect(stderr).toBe('');
    // 1 is the answer to a sample with a fault in it.
    expect([0, 1]).toContain(status);
    if (!command.includes(' -o ')) expect(stdout).not.toBe('');
  });

  it('holds every caution of the program', () => {
    const words = readme.replace(/\s+/gu, ' ');
    for (const paragraph of CAUTIONS.paragraphs) expect(words).toContain(paragraph);
  });

  it('shows a line file that reads', async () => {
    const cables = await loadCableTable();
    const line = cables.ok ? readLine(block('line file'), 'README.md', cables.value) : cables;
    expect(line.ok ? line.notices : line.problems).toEqual([]);
  });

  it('shows a cable file that reads', () => {
    const cables = readCables(block('cable file'), 'README.md');
    expect(cables.ok ? cables.value.map((cable) => cable.id) : cables.problems).toEqual(['our-7-8']);
  });

  it('shows a real screen, of 100 columns or fewer', () => {
    const screen = block('screen');
    expect(screen).toContain('Ansel Ridge north 1');
    // A trace is drawn in braille.
    expect(screen).toMatch(/[\u2801-\u28ff]/u);
    for (const line of screen.split('\n')) expect(line.length).toBeLessThanOrEqual(100);
  });
});
