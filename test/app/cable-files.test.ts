import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loadCableTable } from '../../src/app/cable-files.ts';

let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-table-'));
});
afterAll(() => rm(folder, { recursive: true }));

async function folderWith(name: string, velocityFactor: number): Promise<string> {
  const path = join(folder, name);
  await mkdir(path, { recursive: true });
  const cable = { id: 'rg-213', z0Ohm: 50, velocityFactor, k1: 0.5, k2: 0.005 };
  await writeFile(join(path, 'mine.json'), JSON.stringify({ cables: [cable] }));
  await writeFile(join(path, 'notes.txt'), 'no cable file');
  return path;
}

describe('loadCableTable', () => {
  it('has the cables that ship with the program', async () => {
    const table = await loadCableTable();
    expect(table.ok && table.value.find('foam-7-8')?.name).toBe('7/8 in corrugated foam');
  });

  it('lets each later folder win over the earlier ones, and passes over what is no JSON', async () => {
    const table = await loadCableTable([await folderWith('one', 0.7), await folderWith('two', 0.71)]);
    expect(table.ok && table.value.find('rg-213')?.velocityFactor).toBe(0.71);
  });

  it('names every problem of every folder', async () => {
    const broken = join(folder, 'broken');
    await mkdir(broken);
    await writeFile(join(broken, 'a.json'), '{ "cables": [');
    const table = await loadCableTable([broken, join(folder, 'none')]);
    expect(table.ok).toBe(false);
    const files = table.ok ? [] : table.problems.map((problem) => problem.file ?? '');
    expect(files.some((file) => file.endsWith('broken/a.json'))).toBe(true);
    expect(files.some((file) => file.endsWith('none'))).toBe(true);
  });
});
