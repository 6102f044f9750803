import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loadCableTable } from '../../src/app/cable-files.ts';
import { type LineFlags, lineFileOf, type RequestedLine, requestLine } from '../../src/app/line-request.ts';
import type { CableTable } from '../../src/line/cable-table.ts';
import type { CoaxSection } from '../../src/line/line.ts';
import type { Outcome } from '../../src/outcome.ts';

const NO_FLAGS: LineFlags = {
  line: null,
  cable: null,
  length: null,
  end: null,
  temperature: null,
  velocityFactor: null,
};

let folder = '';
let cables: CableTable;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-line-'));
  await writeFile(
    join(folder, 'run.line.json'),
    JSON.stringify({
      name: 'beside',
      sections: [
        { cable: 'foam-half-extraflex', lengthM: 2 },
        { cable: 'foam-7-8', lengthM: 40 },
      ],
    }),
  );
  const table = await loadCableTable();
  if (!table.ok) throw new Error(JSON.stringify(table.problems));
  cables = table.value;
});
afterAll(() => rm(folder, { recursive: true }));

const request = (
  flags: Partial<LineFlags>,
  sweep = join(folder, 'run.s1p'),
): Promise<Outcome<RequestedLine>> => requestLine({ ...NO_FLAGS, ...flags }, sweep, cables);
const codesOf = async (flags: Partial<LineFlags>, sweep?: string): Promise<string[]> => {
  const outcome = await request(flags, sweep);
  return outcome.ok ? [] : outcome.problems.map((problem) => problem.code);
};

describe('lineFileOf', () => {
  it('changes the extension, and only that', () => {
    expect(lineFileOf('a.b/run.s1p')).toBe('a.b/run.line.json');
    expect(lineFileOf('a.b/run')).toBe('a.b/run.line.json');
    expect(lineFileOf('run.old.s1p')).toBe('run.old.line.json');
  });
});

describe('requestLine', () => {
  it('takes the line file beside the sweep when nothing is said, and says so', async () => {
    const outcome = await request({});
    expect(outcome.ok && outcome.value.line.name).toBe('beside');
    expect(outcome.ok && outcome.value.lineDescribed).toBe(true);
    expect(outcome.ok && outcome.notices.map((notice) => notice.code)).toContain('line-beside');
  });

  it('takes a guide by --cable, its length known or not', async () => {
    const known = await request({ cable: 'WR-137', length: '20m' });
    expect(known.ok && known.value).toMatchObject({
      lineDescribed: true,
      line: {
        sections: [{ type: 'guide', guide: { id: 'WR-137' }, lengthM: 20, label: 'WR-137 waveguide' }],
      },
    });
    const open = await request({ cable: 'r70' });
    expect(open.ok && open.value).toMatchObject({
      lineDescribed: false,
      line: { sections: [{ lengthM: null }] },
    });
  });

  it('names near guides for a slip, and refuses a velocity factor where nothing has one', async () => {
    const slip = await request({ cable: 'WR-138' });
    expect(!slip.ok && slip.problems[0]?.mend).toContain('"WR-137"');
    expect(await codesOf({ cable: 'WR-137', velocityFactor: '0.8' })).toEqual(['flag-clash']);
  });

  it('says nothing about a line file that was named', async () => {
    const outcome = await request({ line: join(folder, 'run.line.json') }, '-');
    expect(outcome.ok && outcome.notices).toEqual([]);
  });

  it('makes one section of a named cable: described with a length, else only of known type', async () => {
    const known = await request({ cable: 'RG-213/U', length: '150ft' });
    expect(known.ok && known.value.lineDescribed).toBe(true);
    // 150 ft = 45.72 m by definition.
    expect(known.ok && known.value.line.sections).toMatchObject([
      { lengthM: 45.72, cable: { id: 'rg-213' } },
    ]);
    const unknown = await request({ cable: 'rg-213' });
    expect(unknown.ok && unknown.value.lineDescribed).toBe(false);
    expect(unknown.ok && unknown.value.line.sections[0]?.lengthM).toBeNull();
  });

  it('puts end, temperature and the velocity factor of the longest section in place', async () => {
    const outcome = await request({ end: 'short', temperature: '50F', velocityFactor: '0.85' });
    if (!outcome.ok) throw new Error(JSON.stringify(outcome.problems));
    const { line } = outcome.value;
    expect(line.end).toBe('short');
    expect(line.temperatureC).toBeCloseTo(10, 9);
    expect(line.temperatureKnown).toBe(true);
    expect(line.sections.map((section) => (section as CoaxSection).cable.velocityFactor)).toEqual([
      0.81, 0.85,
    ]);
  });

  it.each([
    ['no line at all', {}, 'line-missing', '-'],
    ['a line and a cable', { line: 'x', cable: 'rg-213' }, 'flag-clash', undefined],
    ['a length without a cable', { length: '3m' }, 'flag-clash', undefined],
    ['a length of nothing', { cable: 'rg-213', length: '0m' }, 'flag-value', undefined],
    ['an unknown cable', { cable: 'rg-1234567' }, 'cable-unknown', undefined],
    ['an unknown end', { end: 'opne' }, 'flag-value', undefined],
    ['a velocity factor above 1', { velocityFactor: '1.2' }, 'flag-value', undefined],
    ['a velocity factor in words', { velocityFactor: 'fast' }, 'flag-value', undefined],
    ['a missing line file', { line: '/none.line.json' }, 'file-missing', undefined],
  ] as const)('refuses %s', async (_, flags, code, sweep) => {
    expect(await codesOf(flags, sweep)).toEqual([code]);
  });

  it('names the end or cable that was probably meant', async () => {
    const end = await request({ end: 'opne' });
    expect(!end.ok && end.problems[0]?.mend).toBe('write --end open');
    const cable = await request({ cable: 'rg-231' });
    expect(!cable.ok && cable.problems[0]?.mend).toContain('"rg-213"');
  });
});
