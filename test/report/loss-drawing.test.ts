import { describe, expect, it } from 'vitest';
import type { LossCheck } from '../../src/assess/loss-check.ts';
import { lossDrawing, lossLimitDb } from '../../src/report/loss-drawing.ts';

const frequencyHz = Float64Array.of(1e9, 2e9, 4e9);
const read: LossCheck = {
  method: 'end-echo',
  frequencyHz,
  lossDb: Float64Array.of(2.1, 3, 4.4),
  sigmaDb: Float64Array.of(0.05, 0.1, 0.2),
  tableLossDb: Float64Array.of(2, 2.9, 4.2),
  atMostDb: null,
  joints: 2,
  jointsDb: 0.1,
  allowedDb: 0.5,
  allowedIsDefault: true,
  bands: [
    {
      name: 'main',
      fromHz: 1e9,
      toHz: 2e9,
      atHz: 2e9,
      lossDb: 3,
      sigmaDb: 0.1,
      tableLossDb: 2.9,
      faultsDb: 0.2,
      limitDb: 3.54,
      marginDb: 0.34,
      pass: true,
    },
  ],
  atHz: 2e9,
  marginDb: 0.34,
  pass: true,
  excess: [],
  notices: [],
};

describe('lossDrawing', () => {
  it('lossDrawing shades two σ to either side of what was read', () => {
    const [area] = lossDrawing(read).chart.areas!;
    expect([...area!.low]).toEqual([2, 2.8, 4]);
    expect([...area!.high]).toEqual([2.2, 3.2, 4.800000000000001]);
  });

  it('lossDrawing draws the limit as table, joints and what is allowed', () => {
    // Two joints of 0.05 dB times the root of GHz, and 0.5 dB: by hand.
    const limit = lossLimitDb(read);
    expect(limit[0]).toBeCloseTo(2 + 0.1 + 0.5, 12);
    expect(limit[2]).toBeCloseTo(4.2 + 0.2 + 0.5, 12);
    expect(lossDrawing(read).chart.series[0]).toMatchObject({ role: 'guide', dotted: true });
    expect(lossDrawing(read).chart.y.domain[0]).toBe(0);
    expect(lossDrawing(read).chart.y.domain[1]).toBeGreaterThan(4.9);
  });

  it('lossDrawing marks a band where it is nearest to its limit, what faults add counted', () => {
    expect(lossDrawing(read).chart.marks).toEqual([{ x: 2e9, y: 3.2, glyph: '●', role: 'sound' }]);
    const missed = { ...read, bands: [{ ...read.bands[0]!, pass: false }] };
    expect(lossDrawing(missed).chart.marks[0]).toMatchObject({ glyph: '×', role: 'fault' });
  });

  it('lossDrawing dots the most that a loss can be, and claims no doubt of it', () => {
    const bound: LossCheck = { ...read, method: 'bound', lossDb: null, sigmaDb: null, atMostDb: read.lossDb };
    const { chart, key } = lossDrawing({ ...bound, bands: [{ ...read.bands[0]!, lossDb: null }] });
    expect(chart.series.at(-1)).toMatchObject({ role: 'trace', dotted: true });
    expect(chart.areas).toEqual([]);
    expect(chart.marks).toEqual([]);
    expect(key.map(({ text }) => text)).toEqual(['the most it can be', 'table', 'limit']);
  });

  it('lossDrawing draws the table alone where nothing could be read', () => {
    const none: LossCheck = { ...read, method: 'none', lossDb: null, sigmaDb: null, pass: null };
    expect(lossDrawing(none).chart.series.map(({ role }) => role)).toEqual(['guide', 'baseline']);
  });
});
