/**
 * Killed while it adds: every entry that was reported saved is there and verifies, and none is half there.
 *
 * FEEDSONDE_KILLS says how often; 12 by default, 100 for the longer run (DEVELOPERS.md).
 */
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openLogbookFile } from '../../src/app/log-file.ts';
import { createRandom } from '../../src/numerics/random.ts';
import { bundleWriter, startWriter } from './run-writer.ts';

const KILLS = Number(process.env['FEEDSONDE_KILLS'] ?? 12);

let folder = '';
let script = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-kill-'));
  script = await bundleWriter();
});
afterAll(async () => {
  await rm(folder, { recursive: true });
  await rm(join(script, '..'), { recursive: true });
});

describe('a logbook whose writer is killed', () => {
  it(
    `keeps every entry that was reported saved, ${KILLS} times`,
    async () => {
      const path = join(folder, 'logbook.sqlite');
      const random = createRandom(7);
      const saved = new Set<string>();
      for (let kill = 0; kill < KILLS; kill++) {
        const after = 1 + Math.floor(random.uniform() * 12);
        const writer = startWriter(script, ['add', path, String(kill * 1000), '1000', '20000'], {
          onLine: () => {
            // Somewhere within the next add, or the one after.
            if (writer.lines.length === after)
              setTimeout(() => writer.child.kill('SIGKILL'), random.uniform() * 12);
          },
        });
        expect(await writer.done).toBeNull();
        for (const line of writer.lines) saved.add(line.replace('saved ', ''));

        const logbook = await openLogbookFile(path, { create: false });
        if (!logbook.ok) throw new Error(JSON.stringify(logbook.problems));
        const found = logbook.value.check();
        const listed = logbook.value.list({});
        logbook.value.close();
        if (!found.ok || !listed.ok) throw new Error('the logbook cannot be read');
        expect(found.value.damaged).toEqual([]);
        expect(found.value.structure).toEqual([]);
        // Each has one original, none is left over from an add that did not come to its end.
        expect(found.value.originals).toBe(found.value.entries);
        const keys = new Set(listed.value.map(({ key }) => key));
        expect([...saved].filter((key) => !keys.has(key))).toEqual([]);
        // What was saved when the kill came, but not yet reported, may be there too: one a kill.
        expect(keys.size - saved.size).toBeLessThanOrEqual(kill + 1);
      }
      expect(saved.size).toBeGreaterThanOrEqual(KILLS);
    },
    60_000 + KILLS * 3000,
  );
});
