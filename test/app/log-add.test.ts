import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Analysis } from '../../src/app/analysis.ts';
import { loadCableTable } from '../../src/app/cable-files.ts';
import { requestLine } from '../../src/app/line-request.ts';
import { type AboutSweep, keepLine, knownLine, newEntry } from '../../src/app/log-add.ts';
import { figuresOf, WHOLE_SWEEP } from '../../src/app/log-figures.ts';
import { openLogbookFile } from '../../src/app/log-file.ts';
import { baselineSweep, findLine, loggedSweep } from '../../src/app/log-lines.ts';
import type { AnalyseRequest } from '../../src/app/solver.ts';
import { type CableTable, cableOf } from '../../src/line/cable-table.ts';
import type { Line } from '../../src/line/line.ts';
import { attenuationDbPer100m } from '../../src/line/loss.ts';
import type { Added } from '../../src/logbook/add-entry.ts';
import { figuresForm, readStored } from '../../src/logbook/figures.ts';
import type { Logbook } from '../../src/logbook/logbook.ts';
import type { Outcome } from '../../src/outcome.ts';
import { MADE_CABLE, makeAnalysis } from './made-analysis.ts';

const ABOUT: AboutSweep = {
  who: 'Mara',
  instrument: '',
  weather: '',
  note: '',
  takenAt: '2026-05-03',
  addedAt: '2026-05-04T10:00:00.000Z',
  name: null,
  site: null,
  tool: 'feedsonde 0.0.0',
};
const NO_FLAGS = { cable: null, length: null, end: null, temperature: null, velocityFactor: null };

let folder = '';
let cables: CableTable;
let path = '';
let logbook: Logbook;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'feedsonde-log-add-'));
  cables = must(await loadCableTable());
});
afterAll(() => rm(folder, { recursive: true }));
beforeEach(async () => {
  path = join(await mkdtemp(join(folder, 'case-')), 'logbook.sqlite');
  logbook = must(await openLogbookFile(path, { create: true }));
  return () => logbook.close();
});

let sweeps = 0;
function add(analysis: Analysis, about: Partial<AboutSweep> = {}, baseline = false): Outcome<Added> {
  const request: AnalyseRequest = {
    sweepFile: '/some/where/run.s1p',
    sweepBytes: new TextEncoder().encode(`! ${++sweeps}\n`),
    line: analysis.line,
    lineDescribed: analysis.lineDescribed,
    windowSpec: 'kaiser:6',
    port: null,
    offsetM: 0,
    standards: null,
  };
  const said = { ...ABOUT, ...about };
  const known = must(knownLine(logbook, analysis.line, said));
  const entry = newEntry(request, analysis, said, cables, known);
  return entry.ok ? logbook.add(entry.value, { replace: false, baseline }) : entry;
}

function lineOf(fields: Partial<Line>): Analysis {
  const analysis = makeAnalysis();
  return { ...analysis, line: { ...analysis.line, ...fields } };
}

describe('newEntry', () => {
  it('keeps the file name without its folder, and cleans what was said', () => {
    const { key } = must(add(makeAnalysis(), { note: 'a\u001b[2Jb\nc' }));
    expect(must(logbook.entry(key))).toMatchObject({ file: 'run.s1p', note: 'ab c', who: 'Mara' });
  });

  it('needs a name for the line, which may be said apart', () => {
    const outcome = add(lineOf({ name: '', site: '' }));
    expect(outcome.ok ? [] : outcome.problems).toMatchObject([
      { code: 'line-unnamed', mend: expect.stringContaining('--name') },
    ]);
    const { key } = must(add(lineOf({ name: '', site: '' }), { name: 'mast 7', site: 'Bell Hill' }));
    expect(must(logbook.entry(key)).line).toEqual({ name: 'mast 7', site: 'Bell Hill' });
  });

  it('keeps the line as described then, every figure of it, whatever the table says later', () => {
    const entry = cables.find('foam-7-8')!;
    const sections = [{ ...makeAnalysis().line.sections[0]!, type: 'coax' as const, cable: cableOf(entry) }];
    const { key } = must(add(lineOf({ sections })));
    const described = JSON.parse(must(logbook.entry(key)).described);
    expect(described.sections[0].cable).toEqual({
      id: 'foam-7-8',
      z0: entry.z0Ohm,
      velocityFactor: entry.velocityFactor,
      k1: entry.k1,
      k2: entry.k2,
    });
    // What later sweeps use goes by the table.
    expect(JSON.parse(must(logbook.findLine('made line')).described).sections[0].cable).toBe('foam-7-8');
  });

  it('describes a known line anew only for what belongs to the line, not to the day', () => {
    expect(must(add(makeAnalysis())).lineChanged).toBe(false);
    expect(must(add(lineOf({ temperatureC: -10, end: 'short' }))).lineChanged).toBe(false);
    expect(JSON.parse(must(logbook.findLine('made line')).described)).toMatchObject({ end: 'open' });
    const [first, ...others] = makeAnalysis().line.sections;
    expect(must(add(lineOf({ sections: [{ ...first!, label: 'new run' }, ...others] }))).lineChanged).toBe(
      true,
    );
  });

  it('does not describe a line by a cable alone', async () => {
    must(add({ ...makeAnalysis(), lineDescribed: false }));
    const line = await findLine('made line', path, cables);
    expect(line.ok ? [] : line.problems.map(({ code }) => code)).toEqual(['line-not-described']);
  });
});

describe('figuresOf', () => {
  it('have the form that is stored', () => {
    const figures = figuresOf(makeAnalysis());
    expect(readStored(JSON.stringify(figures), figuresForm)).toEqual(figures);
  });

  it('give the loss of the described sections, as the solver scaled it, at band centre', () => {
    const { solution, line, ...rest } = makeAnalysis();
    const figures = figuresOf({ ...rest, line, solution: { ...solution, lossFactor: 1.1, lengthM: 20 } });
    const centreHz = (5e6 + 2e9) / 2;
    expect(figures.lossAtHz).toBe(centreHz);
    // The table's sum of both losses; the causal medium differs from it by less than 1 %.
    const tableDb = (attenuationDbPer100m(MADE_CABLE, centreHz, 20) * 20) / 100;
    expect(Math.abs(figures.lossDb! / (1.1 * tableDb) - 1)).toBeLessThan(0.01);
    // A line that is cut loses only up to the cut.
    const cut = figuresOf({ ...rest, line, solution: { ...solution, lossFactor: 1.1, lengthM: 10 } });
    expect(cut.lossDb! / figures.lossDb!).toBeCloseTo(0.5, 6);
  });

  it('give the worst match over each named band, else over the whole sweep', () => {
    const analysis = makeAnalysis();
    const { gamma, frequencyHz } = analysis.sweep;
    const sizes = Array.from(frequencyHz, (f, i) => ({ f, size: Math.hypot(gamma.re[i]!, gamma.im[i]!) }));
    const worstOf = (from: number, to: number) =>
      sizes.filter(({ f }) => f >= from && f <= to).reduce((a, b) => (b.size > a.size ? b : a));
    const whole = figuresOf(analysis).bands;
    expect(whole).toMatchObject([{ name: WHOLE_SWEEP, limitDb: null, worstAtHz: worstOf(0, 3e9).f }]);
    const band = { name: 'main', fromHz: 9e8, toHz: 1.1e9, returnLossDb: 14 };
    const outside = { name: 'beyond', fromHz: 3e9, toHz: 4e9, returnLossDb: 14 };
    const limits = { ...analysis.line.limits, bands: [band, outside] };
    const figures = figuresOf({ ...analysis, line: { ...analysis.line, limits } });
    const worst = worstOf(band.fromHz, band.toHz);
    expect(figures.bands).toHaveLength(1);
    expect(figures.bands[0]).toMatchObject({ name: 'main', limitDb: 14, worstAtHz: worst.f });
    expect(figures.bands[0]!.worstReturnLossDb).toBeCloseTo(-20 * Math.log10(worst.size), 9);
  });
});

describe('a line of the logbook', () => {
  it('stands in for a line file by its name, without the temperature of that day', async () => {
    must(add(makeAnalysis()));
    logbook.close();
    const flags = { ...NO_FLAGS, line: 'made-line', logbook: path };
    const { line, lineDescribed } = must(await requestLine(flags, 'later.s1p', cables));
    expect(lineDescribed).toBe(true);
    expect(line).toMatchObject({ name: 'Made line', site: 'Nowhere', end: 'open', temperatureKnown: false });
    expect(line.sections.map(({ lengthM, label }) => [lengthM, label])).toEqual([
      [8, 'lower run'],
      [12, 'upper run'],
    ]);
    const hot = must(await requestLine({ ...flags, temperature: '30C', end: 'short' }, 'later.s1p', cables));
    expect(hot.line).toMatchObject({ temperatureC: 30, temperatureKnown: true, end: 'short' });
    logbook = must(await openLogbookFile(path, { create: false }));
  });

  it('is stored from its line file too', () => {
    const line = makeAnalysis().line;
    expect(must(keepLine(logbook, line, cables, ABOUT.addedAt))).toMatchObject({ changed: false });
    expect(must(logbook.findLine('made line'))).toMatchObject({ entries: 0, baseline: null });
    expect(must(keepLine(logbook, { ...line, end: 'load' }, cables, ABOUT.addedAt)).changed).toBe(true);
  });

  it('is looked for only where there is no file, and missing when there is none', async () => {
    const codes = async (line: string, logbookPath: string): Promise<readonly string[]> => {
      const outcome = await requestLine({ ...NO_FLAGS, line, logbook: logbookPath }, 'later.s1p', cables);
      return outcome.ok ? [] : outcome.problems.map(({ code }) => code);
    };
    expect(await codes('made line', path)).toEqual(['line-not-logged']);
    expect(await codes('made line', join(folder, 'none.sqlite'))).toEqual(['line-missing']);
    expect(await codes('made.line.json', path)).toEqual(['file-missing']);
  });
});

describe('baselineSweep', () => {
  it('gives back the bytes and the line as described then', () => {
    must(add(makeAnalysis(), {}, true));
    must(add(lineOf({ end: 'short' })));
    const { entry, bytes, line, standards } = must(baselineSweep(logbook, 'made-line', cables));
    expect(entry.baseline).toBe(true);
    expect(new TextDecoder().decode(bytes)).toMatch(/^! \d+\n$/u);
    expect(standards).toBeNull();
    expect(line).toMatchObject({ end: 'open', temperatureC: 20, temperatureKnown: true });
    expect(line.sections[0]).toMatchObject({ cable: { k1: MADE_CABLE.k1, k2: MADE_CABLE.k2 }, lengthM: 8 });
    expect(must(loggedSweep(logbook, entry.key, cables)).bytes).toEqual(bytes);
  });

  it('is missing until one is chosen', () => {
    must(add(makeAnalysis()));
    const outcome = baselineSweep(logbook, 'made-line', cables);
    expect(outcome.ok ? [] : outcome.problems.map(({ code }) => code)).toEqual(['baseline-missing']);
  });
});

function must<T>(outcome: Outcome<T>): T {
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.problems));
  return outcome.value;
}
