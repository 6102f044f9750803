import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loadCableTable } from '../../src/app/cable-files.ts';
import { loadSettings } from '../../src/app/settings.ts';

const NO_FLAGS = { units: null, window: null, cables: null };
let empty = '';
let filled = '';
beforeAll(async () => {
  empty = await mkdtemp(join(tmpdir(), 'feedsonde-none-'));
  filled = await mkdtemp(join(tmpdir(), 'feedsonde-some-'));
  await mkdir(join(filled, 'cables'));
  await writeFile(join(filled, 'settings.json'), '{ "units": "ft", "window": "hann" }');
  await writeFile(
    join(filled, 'cables', 'mine.json'),
    JSON.stringify({
      family: 'mine',
      cables: [{ id: 'rg-213', z0Ohm: 49.5, velocityFactor: 0.67, k1: 0.6, k2: 0.007 }],
    }),
  );
});
afterAll(async () => {
  await rm(empty, { recursive: true });
  await rm(filled, { recursive: true });
});

describe('loadSettings', () => {
  it('gives the defaults where nothing is set', async () => {
    expect(await loadSettings(NO_FLAGS, {}, empty)).toEqual({
      ok: true,
      value: {
        units: 'm',
        windowSpec: 'kaiser:6',
        cableFolders: [],
        colour: true,
        colours: null,
        plot: 'braille',
      },
      notices: [],
    });
  });

  it('takes the file over the defaults, and flags over the file', async () => {
    const file = await loadSettings(NO_FLAGS, {}, filled);
    expect(file.ok && file.value).toMatchObject({ units: 'ft', windowSpec: 'hann' });
    const flags = await loadSettings({ units: 'm', window: 'blackman', cables: '/mine' }, {}, filled);
    expect(flags.ok && flags.value).toMatchObject({ units: 'm', windowSpec: 'blackman' });
    expect(flags.ok && flags.value.cableFolders).toEqual([join(filled, 'cables'), '/mine']);
  });

  it.each([
    [{ NO_COLOR: '1' }, false],
    // no-color.org: an empty value counts as not set.
    [{ NO_COLOR: '' }, true],
    [{ TERM: 'dumb' }, false],
  ])('with %j has colour %s', async (environment, colour) => {
    const settings = await loadSettings(NO_FLAGS, environment, empty);
    expect(settings.ok && settings.value.colour).toBe(colour);
  });

  it('takes colours and the characters of plots, flags over the file', async () => {
    await writeFile(
      join(filled, 'settings.json'),
      '{ "units": "ft", "colours": "contrast", "plot": "ascii" }',
    );
    const file = await loadSettings(NO_FLAGS, {}, filled);
    expect(file.ok && file.value).toMatchObject({ colours: 'contrast', plot: 'ascii' });
    const flags = await loadSettings({ ...NO_FLAGS, colours: 'light', plot: 'blocks' }, {}, filled);
    expect(flags.ok && flags.value).toMatchObject({ colours: 'light', plot: 'blocks' });
    const wrong = await loadSettings({ ...NO_FLAGS, colours: 'ligth', plot: 'dots' }, {}, filled);
    expect(!wrong.ok && wrong.problems.map(({ found, mend }) => [found, mend])).toEqual([
      ['--colours ligth', 'did you mean "light"?'],
      ['--plot dots', 'use "braille", "blocks" or "ascii"'],
    ]);
  });

  it('names every wrong flag at once', async () => {
    const settings = await loadSettings({ units: 'feet', window: 'hanning?', cables: null }, {}, empty);
    expect(!settings.ok && settings.problems).toHaveLength(2);
  });

  it('names the key of a settings file that is wrong', async () => {
    await writeFile(join(empty, 'settings.json'), '{ "unit": "m" }');
    const settings = await loadSettings(NO_FLAGS, {}, empty);
    await rm(join(empty, 'settings.json'));
    expect(!settings.ok && settings.problems[0]).toMatchObject({
      code: 'unknown-key',
      mend: 'did you mean "units"?',
    });
  });
});

describe('loadCableTable', () => {
  it('finds the bundled cables', async () => {
    const table = await loadCableTable();
    expect(table.ok && table.value.find('rg-213')?.velocityFactor).toBe(0.66);
  });

  it('lets a later folder win', async () => {
    const table = await loadCableTable([join(filled, 'cables')]);
    expect(table.ok && table.value.find('rg-213')?.velocityFactor).toBe(0.67);
  });

  it('refuses a folder that is not there', async () => {
    const table = await loadCableTable([join(empty, 'none')]);
    expect(!table.ok && table.problems.map((problem) => problem.code)).toEqual(['cables-folder']);
  });
});
