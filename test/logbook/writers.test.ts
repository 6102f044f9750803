/** Two programs on one logbook. */
import { mkdtemp, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openLogbookFile } from '../../src/app/log-file.ts';
import { bundleWriter, startWriter } from './run-writer.ts';

let folder = '';
let script = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-writers-'));
  script = await bundleWriter();
});
afterAll(async () => {
  await rm(folder, { recursive: true });
  await rm(join(script, '..'), { recursive: true });
});

describe('two writers at once', () => {
  it('start one logbook together and add 200 entries each: all 400 are there', async () => {
    const path = join(folder, 'logbook.sqlite');
    const writers = [0, 1].map((n) => startWriter(script, ['add', path, String(n * 1000), '200']));
    expect(await Promise.all(writers.map(({ done }) => done))).toEqual([0, 0]);
    const saved = writers.flatMap(({ lines }) => lines.map((line) => line.replace('saved ', '')));
    const logbook = await openLogbookFile(path, { create: false });
    if (!logbook.ok) throw new Error(JSON.stringify(logbook.problems));
    const listed = logbook.value.list({});
    const found = logbook.value.check();
    logbook.value.close();
    if (!listed.ok || !found.ok) throw new Error('the logbook cannot be read');
    expect(listed.value.map(({ key }) => key).sort()).toEqual(saved.sort());
    expect(found.value).toMatchObject({ entries: 400, originals: 400, damaged: [], structure: [] });
    // Nothing is left of the making, nor of the writing.
    expect(await readdir(folder)).toEqual(['logbook.sqlite']);
  });
});
