import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readBytes, readText, refuseTarget, writeText } from '../../src/app/files.ts';
import type { Outcome } from '../../src/outcome.ts';

let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-files-'));
});
afterAll(async () => {
  await rm(folder, { recursive: true });
});

const codes = (outcome: Outcome<unknown>): string[] =>
  outcome.ok ? [] : outcome.problems.map((p) => p.code);

describe('readBytes', () => {
  it('gives the bytes as they are', async () => {
    const path = join(folder, 'plain');
    await writeFile(path, Uint8Array.of(1, 2, 0, 255));
    const read = await readBytes(path);
    expect(read.ok && [...read.value]).toEqual([1, 2, 0, 255]);
  });

  it('says that a file is missing, and keeps escape codes of its name out of the message', async () => {
    const read = await readBytes(join(folder, 'no\u001b[31msuch'));
    expect(codes(read)).toEqual(['file-missing']);
    expect(JSON.stringify(read)).not.toContain('\\u001b');
  });

  it('says that a folder is a folder', async () => {
    expect(codes(await readBytes(folder))).toEqual(['file-is-folder']);
  });

  it('says that a file is empty', async () => {
    const path = join(folder, 'empty');
    await writeFile(path, '');
    expect(codes(await readBytes(path))).toEqual(['file-empty']);
  });

  it('refuses a file above the limit before reading it', async () => {
    const path = join(folder, 'large');
    await writeFile(path, 'x'.repeat(11));
    expect(codes(await readBytes(path, { mostBytes: 10 }))).toEqual(['file-too-large']);
  });

  it('stops reading a device that never ends', async () => {
    expect(codes(await readBytes('/dev/zero', { mostBytes: 100_000 }))).toEqual(['file-too-large']);
  });

  it('takes standard input for "-"', async () => {
    const read = await readBytes('-', { stdin: Readable.from([Buffer.from('ab'), Buffer.from('c')]) });
    expect(read.ok && Buffer.from(read.value).toString()).toBe('abc');
  });
});

describe('readText', () => {
  it('drops a byte-order mark', async () => {
    const path = join(folder, 'marked');
    await writeFile(path, '\ufeff{}');
    expect(await readText(path)).toEqual({ ok: true, value: '{}', notices: [] });
  });
});

describe('writeText', () => {
  it('leaves a file that is there alone unless told to overwrite it', async () => {
    const path = join(folder, 'kept');
    await writeFile(path, 'old');
    expect(codes(await writeText(path, 'new', { overwrite: false }))).toEqual(['file-exists']);
    expect(await readFile(path, 'utf8')).toBe('old');
    expect((await writeText(path, 'new', { overwrite: true })).ok).toBe(true);
    expect(await readFile(path, 'utf8')).toBe('new');
  });

  it('says that the folder is missing, and leaves nothing behind', async () => {
    expect(codes(await writeText(join(folder, 'none', 'x'), 'text', { overwrite: true }))).toEqual([
      'folder-missing',
    ]);
    expect(await readdir(folder)).not.toContain('none');
  });

  it('refuseTarget names a folder', async () => {
    expect((await refuseTarget(folder, { overwrite: true }))?.code).toBe('file-is-folder');
  });
});
