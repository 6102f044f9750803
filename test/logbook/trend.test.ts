import { describe, expect, it } from 'vitest';
import type { EchoFigures, EntryFigures } from '../../src/logbook/entry.ts';
import { dayOf, followLine, type Moment } from '../../src/logbook/trend.ts';
import { makeEcho, makeFigures } from './made-entry.ts';

const moment = (takenAt: string, figures: Partial<EntryFigures>): Moment => ({
  key: takenAt,
  takenAt,
  figures: makeFigures(figures),
});
const inRun = (distanceM: number, fields: Partial<EchoFigures> = {}): EchoFigures =>
  makeEcho({ distanceM, joint: null, kind: 'series-resistance', place: 'in the run', ...fields });

describe('dayOf', () => {
  it('counts days from 1970, with the time of day as a part', () => {
    expect(dayOf('1970-01-02')).toBe(1);
    expect(dayOf('1970-01-02T12:00')).toBe(1.5);
  });
});

describe('followLine', () => {
  it('follows a joint that corrodes, and tells its slope: 3 dB a year', () => {
    const trend = followLine(
      [2024, 2025, 2026].map((year, i) =>
        moment(`${year}-01-01`, { echoes: [makeEcho({ joint: 1, correctedReturnLossDb: 40 - 3 * i })] }),
      ),
    );
    expect(trend.echoes).toHaveLength(1);
    const { levelDb } = trend.echoes[0]!;
    expect(levelDb.points.map(({ value }) => value)).toEqual([-40, -37, -34]);
    expect(levelDb.change).toBe(6);
    // 2024 has 366 days, so the two steps are not quite a year each.
    expect(levelDb.perYear).toBeCloseTo(3, 1);
  });

  it('takes the slope of least squares', () => {
    const days = ['2024-01-01', '2024-05-01', '2025-01-01', '2025-03-01'];
    const losses = [1.0, 1.4, 1.1, 1.5];
    const trend = followLine(days.map((day, i) => moment(day, { lossDb: losses[i]! })));
    const x = days.map((day) => dayOf(day) / 365.25);
    const meanX = x.reduce((a, b) => a + b) / 4;
    const meanY = losses.reduce((a, b) => a + b) / 4;
    const top = x.reduce((sum, value, i) => sum + (value - meanX) * (losses[i]! - meanY), 0);
    const bottom = x.reduce((sum, value) => sum + (value - meanX) ** 2, 0);
    expect(trend.lossDb.perYear).toBeCloseTo(top / bottom, 9);
  });

  it('tells no slope within a season, and no change of one sweep', () => {
    const short = followLine([moment('2024-01-01', {}), moment('2024-03-01', {})]);
    expect(short.lengthM).toMatchObject({ change: 0, perYear: null });
    expect(followLine([moment('2024-01-01', {})]).lengthM).toMatchObject({ change: null, perYear: null });
    expect(followLine([])).toMatchObject({ echoes: [], match: [], lossAtHz: null });
  });

  it('knows an echo inside a section again by its distance, within the doubt of both', () => {
    const trend = followLine([
      moment('2024-01-01', { echoes: [inRun(8, { distanceSigmaM: 0.1 }), inRun(12)] }),
      moment('2025-01-01', { echoes: [inRun(8.35, { distanceSigmaM: 0.1 }), inRun(12.05)] }),
      moment('2026-01-01', { echoes: [inRun(12.6)] }),
    ]);
    expect(trend.echoes.map(({ echoes }) => echoes.map(({ at, echo }) => [at, echo.distanceM]))).toEqual([
      [
        [0, 8],
        [1, 8.35],
      ],
      [
        [0, 12],
        [1, 12.05],
      ],
      [[2, 12.6]],
    ]);
    expect(trend.echoes.map(({ lastAt }) => lastAt)).toEqual([1, 1, 2]);
  });

  it('keeps two close echoes of one sweep apart', () => {
    const trend = followLine([
      moment('2024-01-01', { echoes: [inRun(8), inRun(8.15)] }),
      moment('2025-01-01', { echoes: [inRun(8.01), inRun(8.14)] }),
    ]);
    expect(trend.echoes.map(({ echoes }) => echoes.map(({ echo }) => echo.distanceM))).toEqual([
      [8, 8.01],
      [8.15, 8.14],
    ]);
  });

  it('takes a joint of the same number elsewhere for another one', () => {
    const trend = followLine([
      moment('2024-01-01', { echoes: [makeEcho({ joint: 1, distanceM: 48 }), makeEcho({ joint: 9 })] }),
      moment('2025-01-01', { echoes: [makeEcho({ joint: 1, distanceM: 30 }), makeEcho({ joint: 9 })] }),
    ]);
    expect(trend.echoes.map(({ echoes }) => echoes.length)).toEqual([2, 1, 1]);
  });

  it('follows the end apart for antenna and short', () => {
    const trend = followLine(
      ['antenna', 'short', 'antenna', 'short'].map((end, i) => moment(`202${i}-01-01`, { end })),
    );
    const ends = trend.echoes.filter(({ joint }) => joint === 2);
    expect(ends.map(({ echoes }) => echoes.map(({ at }) => at))).toEqual([
      [0, 2],
      [1, 3],
    ]);
  });

  it('compares loss at one frequency, and match over one band behind an end that takes power', () => {
    const band = { name: 'main', fromHz: 1.7e9, toHz: 2.2e9, worstAtHz: 1.8e9, limitDb: 14 };
    const bands = (worstReturnLossDb: number, toHz = 2.2e9) => [{ ...band, toHz, worstReturnLossDb }];
    const trend = followLine([
      moment('2023-01-01', { end: 'antenna', bands: bands(18), lossDb: 2, lossAtHz: 5e8 }),
      moment('2024-01-01', { end: 'short', bands: bands(1) }),
      moment('2025-01-01', { end: 'antenna', bands: bands(17, 2.5e9), lossDb: 3 }),
      moment('2026-01-01', { end: 'antenna', bands: bands(16), lossDb: 3.5 }),
    ]);
    expect(trend.match).toMatchObject([
      {
        band: 'main',
        returnLossDb: {
          change: -2,
          points: [
            { at: 0, value: 18 },
            { at: 3, value: 16 },
          ],
        },
      },
    ]);
    expect(trend.lossDb.points.map(({ at }) => at)).toEqual([1, 2, 3]);
  });
});
