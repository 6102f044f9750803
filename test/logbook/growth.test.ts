/** A logbook of 10 000 sweeps answers without a wait, and no slower in proportion than one of 1 000. */
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openLogbookFile } from '../../src/app/log-file.ts';
import type { Logbook } from '../../src/logbook/logbook.ts';
import { followLine } from '../../src/logbook/trend.ts';
import { makeEcho, makeEntry, makeFigures } from './made-entry.ts';

/** Longest answer that nobody would call a wait, s; on a machine with two cores that does other things too. */
const NO_WAIT_S = 1.5;
/** Once 10 000 against ten times 1 000: one, and what a busy machine adds. */
const PROPORTION = 1.6;

let folder = '';
const logbooks = new Map<number, Logbook>();
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-growth-'));
  for (const count of [1000, 10_000]) logbooks.set(count, await filled(count));
});
afterAll(async () => {
  for (const logbook of logbooks.values()) logbook.close();
  await rm(folder, { recursive: true });
});

/** All of one line, which is the worst case of trend; six echoes each, one of them wandering. */
async function filled(count: number): Promise<Logbook> {
  const logbook = await openLogbookFile(join(folder, `${count}.sqlite`), { create: true });
  if (!logbook.ok) throw new Error(JSON.stringify(logbook.problems));
  function* entries() {
    for (let i = 0; i < count; i++) {
      const echoes = [0, 2, 9, 20].map((distanceM, n) => makeEcho({ distanceM, joint: n + 1 }));
      const wandering = makeEcho({ distanceM: 3 + ((i * 7) % 160) / 10, joint: null });
      const figures = makeFigures({
        echoes: [...echoes, makeEcho({ distanceM: 12.5, joint: null }), wandering],
      });
      yield { ok: true as const, value: makeEntry(i, { figures }), notices: [] };
    }
  }
  const merged = logbook.value.merge({ lines: [], entries: entries(), mergedAt: '2026-01-01T00:00:00.000Z' });
  if (!merged.ok) throw new Error(JSON.stringify(merged.problems));
  expect(merged.value.added).toBe(count);
  return logbook.value;
}

describe('a logbook of 10 000 sweeps', () => {
  it.each([
    [
      'list',
      (logbook: Logbook) => {
        const listed = logbook.list({});
        return listed.ok ? listed.value.length : 0;
      },
    ],
    [
      'trend',
      (logbook: Logbook) => {
        const line = logbook.findLine('made line');
        const history = line.ok ? logbook.history(line.value.id) : line;
        return history.ok ? followLine(history.value).lengthM.points.length : 0;
      },
    ],
  ])('%s without a wait, in proportion', (_, ask) => {
    const tenSmall = (): void => {
      for (let i = 0; i < 10; i++) expect(ask(logbooks.get(1000)!)).toBe(1000);
    };
    const oneLarge = (): void => expect(ask(logbooks.get(10_000)!)).toBe(10_000);
    // By turns, so that whatever else the machine does meets both.
    let small = Number.POSITIVE_INFINITY;
    let large = Number.POSITIVE_INFINITY;
    for (let turn = 0; turn < 5; turn++) {
      small = Math.min(small, secondsOf(tenSmall));
      large = Math.min(large, secondsOf(oneLarge));
    }
    expect(large).toBeLessThan(NO_WAIT_S);
    expect(large / small).toBeLessThan(PROPORTION);
  });
});

function secondsOf(act: () => void): number {
  const start = performance.now();
  act();
  return (performance.now() - start) / 1000;
}
