import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { createWorkspaceLogbook, type WorkspaceLogbook } from '../../src/app/workspace-logbook.ts';
import { createCableTable } from '../../src/line/cable-table.ts';
import { requestFor } from '../terminal/made-state.ts';
import { makeAnalysis } from './made-analysis.ts';

let folder: string;
let logbook: WorkspaceLogbook;
const analysis = makeAnalysis();
const request = requestFor(analysis, { sweepBytes: new TextEncoder().encode('# Hz S RI R 50\n1 0 0\n') });

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-workspace-'));
  logbook = createWorkspaceLogbook(join(folder, 'logbook.sqlite'), createCableTable([]));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

function got<T>(outcome: { ok: true; value: T } | { ok: false; problems: readonly unknown[] }): T {
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.problems));
  return outcome.value;
}

describe('createWorkspaceLogbook', () => {
  it('lists nothing and knows no baseline where there is no logbook yet', async () => {
    expect(got(await logbook.list()).entries).toEqual([]);
    expect(got(await logbook.baselineOf(analysis.line))).toBeNull();
  });

  it('saves a sweep with a note, once, lists it, and opens it again byte for byte', async () => {
    const saved = got(await logbook.save(request, analysis, 'after the storm'));
    expect(saved.how).toBe('new');
    expect(got(await logbook.save(request, analysis, 'again')).how).toBe('already');
    const { entries } = got(await logbook.list());
    expect(entries).toHaveLength(1);
    expect(entries[0]).toMatchObject({ note: 'after the storm', faults: 1, file: 'made.s1p' });
    const opened = got(await logbook.open(saved.key));
    expect([...opened.sweepBytes]).toEqual([...request.sweepBytes]);
    expect(opened.line.sections.map(({ lengthM }) => lengthM)).toEqual([8, 12]);
    expect(opened.windowSpec).toBe('kaiser:6');
  });

  it('sets a baseline, which is then that of its line and of no other', async () => {
    const { key } = got(await logbook.save(request, analysis, ''));
    expect(got(await logbook.baselineOf(analysis.line))).toBeNull();
    got(await logbook.setBaseline(key));
    expect(got(await logbook.baselineOf(analysis.line))).toBe(key);
    expect(got(await logbook.baselineOf({ name: 'another', site: '' }))).toBeNull();
    expect(got(await logbook.list()).entries[0]!.baseline).toBe(true);
  });

  it('says what is wrong as a value: a line without a name, an entry that is not there', async () => {
    const unnamed = { ...analysis, line: { ...analysis.line, name: '' } };
    const refused = await logbook.save(request, unnamed, '');
    expect(!refused.ok && refused.problems[0]!.code).toBe('line-unnamed');
    await logbook.save(request, analysis, '');
    expect((await logbook.open('0'.repeat(64))).ok).toBe(false);
  });
});
