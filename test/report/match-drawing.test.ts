import { describe, expect, it } from 'vitest';
import type { LimitResult } from '../../src/assess/limits-check.ts';
import type { MatchCurves } from '../../src/assess/match-curves.ts';
import { drawChart } from '../../src/plot/chart.ts';
import { matchDrawing } from '../../src/report/match-drawing.ts';

const frequencyHz = Float64Array.from({ length: 201 }, (_, i) => 1e9 + 1e7 * i);
/** 20 dB everywhere but at 2 GHz, where it is 10 dB. */
const gamma = { re: frequencyHz.map((f) => (f === 2e9 ? 10 ** -0.5 : 0.1)), im: new Float64Array(201) };

function result(fields: Partial<LimitResult>): LimitResult {
  return {
    limit: 'match-at-port',
    band: 'main',
    limitDb: 14,
    valueDb: 10,
    marginDb: -4,
    atHz: 2e9,
    where: null,
    pass: false,
    isDefault: false,
    why: null,
    ...fields,
  };
}

const match: MatchCurves = {
  port: { frequencyHz, gamma },
  end: [
    {
      frequencyHz: frequencyHz.subarray(70, 120),
      gamma: { re: gamma.re.subarray(70, 120), im: gamma.im.subarray(70, 120) },
    },
  ],
  endMissing: null,
  bands: [{ name: 'main', fromHz: 1.7e9, toHz: 2.2e9, returnLossDb: 14 }],
  results: [result({}), result({ limit: 'match-at-end', valueDb: 18, pass: true, atHz: 1.8e9 })],
};

describe('matchDrawing', () => {
  it('matchDrawing draws return loss as a level below 0 dB and writes it as a positive figure', () => {
    const { chart } = matchDrawing(match, { plane: 'port', scale: 'return-loss' });
    const curve = chart.series.at(-1)!;
    expect(curve.y[0]).toBeCloseTo(-20, 9);
    expect(curve.y[100]).toBeCloseTo(-10, 9);
    const labels = drawChart(chart, { width: 60, height: 12 }).yLabels.filter((text) => text !== '');
    expect(labels[0]).toBe('0');
    expect(labels).toContain('10');
    expect(labels.join(' ')).not.toContain('−');
  });

  it('matchDrawing stands the limit over its band alone', () => {
    const [limit] = matchDrawing(match, { plane: 'port', scale: 'return-loss' }).chart.series;
    expect([...limit!.x]).toEqual([1.7e9, 2.2e9]);
    expect(limit!.y[0]).toBeCloseTo(-14, 9);
    expect(limit!.dotted).toBe(true);
  });

  it('matchDrawing marks where a band is worst: missed, kept, or missed by common practice alone', () => {
    const glyphs = (plane: 'port' | 'end', results = match.results) =>
      matchDrawing({ ...match, results }, { plane, scale: 'return-loss' }).chart.marks.map(({ glyph, x }) => [
        glyph,
        x,
      ]);
    expect(glyphs('port')).toEqual([['×', 2e9]]);
    expect(glyphs('end')).toEqual([['●', 1.8e9]]);
    expect(glyphs('port', [result({ isDefault: true })])).toEqual([['▲', 2e9]]);
    expect(glyphs('port', [result({ pass: null, valueDb: null, atHz: null })])).toEqual([]);
  });

  it('matchDrawing gives VSWR by its definition, with an axis from 1', () => {
    const { chart } = matchDrawing(match, { plane: 'port', scale: 'vswr' });
    const curve = chart.series.at(-1)!;
    expect(curve.y[0]).toBeCloseTo(1.1 / 0.9, 9);
    expect(chart.y.domain[0]).toBe(1);
    // The limit of 14 dB is a VSWR of 1.5: |Γ| = 0.1995.
    expect(chart.series[0]!.y[0]).toBeCloseTo(1.4985, 3);
    expect(chart.y.domain[1]).toBeGreaterThanOrEqual(2);
  });

  it('matchDrawing looks at the end where the end is wanted', () => {
    const { chart, title } = matchDrawing(match, { plane: 'end', scale: 'return-loss' });
    expect(chart.series.at(-1)!.x[0]).toBe(1.7e9);
    expect(title).toContain('line taken away');
    expect(matchDrawing({ ...match, end: [] }, { plane: 'end', scale: 'vswr' }).chart.series).toHaveLength(1);
  });

  it('matchDrawing counts in GHz where MHz would grow long, and keeps to the frequencies in view', () => {
    const high = { frequencyHz: frequencyHz.map((f) => 10 * f), gamma };
    const { chart } = matchDrawing({ ...match, port: high }, { plane: 'port', scale: 'return-loss' });
    expect(chart.x.unit).toBe('GHz');
    const near = matchDrawing(match, { plane: 'port', scale: 'return-loss', domainHz: [1.7e9, 1.8e9] }).chart;
    expect(near.x.domain).toEqual([1.7e9, 1.8e9]);
    expect(near.x.unit).toBe('MHz');
  });
});
