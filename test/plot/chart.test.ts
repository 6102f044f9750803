import stringWidth from 'string-width';
import { describe, expect, it } from 'vitest';
import { axisText, type ChartSpec, drawChart } from '../../src/plot/chart.ts';
import { runsText } from '../../src/plot/run.ts';
import { cellOf, cellScale } from '../../src/plot/scale.ts';

/** A trace of three echoes over a floor, in closed form; the middle one is far narrower than a dot. */
function threeEchoes(): ChartSpec {
  const x = Float64Array.from({ length: 5201 }, (_, i) => i / 100);
  const y = x.map((d) => {
    const echo = (at: number, level: number, width: number) => level - 3 * ((d - at) / width) ** 2;
    return Math.max(-72 + 3 * Math.sin(d * 2.1), echo(2, -32, 0.1), echo(25, -47, 0.002), echo(50, -6, 0.2));
  });
  return {
    x: { domain: [-1, 55], unit: 'm' },
    y: { domain: [-80, 0], unit: 'dB' },
    series: [{ x, y, role: 'trace' }],
    levels: [{ y: -60, role: 'guide' }],
    marks: [{ x: 50, y: null, glyph: '×', role: 'fault' }],
    cursor: 25,
  };
}

/** A frame as the screen shows it: labels at the left, the axis below. */
function pictured(spec: ChartSpec, width: number, height: number): string {
  const frame = drawChart(spec, { width, height });
  const rows = frame.rows.map((row, i) => `${(frame.yLabels[i] ?? '').padStart(4)} ┤${runsText(row)}`);
  return [...rows, `      ${axisText(frame.xLabels, width)}`].map((row) => row.trimEnd()).join('\n');
}

describe('drawChart', () => {
  it('drawChart gives rows of exactly the width asked for', () => {
    for (const [width, height] of [
      [1, 1],
      [2, 2],
      [17, 3],
      [74, 8],
      [133, 21],
    ] as const) {
      const frame = drawChart(threeEchoes(), { width, height });
      expect(frame.rows).toHaveLength(height);
      expect(frame.yLabels).toHaveLength(height);
      for (const row of frame.rows) expect(stringWidth(runsText(row))).toBe(width);
      expect(stringWidth(axisText(frame.xLabels, width))).toBe(width);
    }
  });

  it('drawChart draws a 1 × 1 picture exactly', () => {
    const spec: ChartSpec = {
      x: { domain: [0, 1], unit: '' },
      y: { domain: [0, 3], unit: '' },
      series: [{ x: Float64Array.of(0, 1), y: Float64Array.of(0, 3), role: 'trace' }],
      levels: [],
      marks: [],
      cursor: null,
    };
    // From the lower left dot to the upper right one; each column covers its half of the climb.
    expect(drawChart(spec, { width: 1, height: 1 }).rows).toEqual([[{ text: '⡜', role: 'trace' }]]);
  });

  it('drawChart lights the column of the highest sample at its height, however narrow the peak', () => {
    const spec = threeEchoes();
    const width = 40;
    const frame = drawChart({ ...spec, cursor: null, marks: [] }, { width, height: 10 });
    const column = cellOf(cellScale(spec.x.domain, width), 25);
    // −47 dB on 40 rows of dots over 80 dB: dot row round(47/80·39) = 23, in cell row 5.
    expect([...runsText(frame.rows[5]!)][column]).not.toBe(' ');
    expect([...runsText(frame.rows[4]!)][column]).toBe(' ');
  });

  it('drawChart gives a cell with curve and hair the role of the curve', () => {
    const frame = drawChart(threeEchoes(), { width: 40, height: 10 });
    const roles = frame.rows.flatMap((row) => row.map((r) => r.role));
    expect(new Set(roles)).toEqual(new Set(['plain', 'trace', 'guide', 'cursor', 'fault']));
  });

  it('drawChart sets a mark one row above the peak that it names, and leaves out marks beside the picture', () => {
    const spec = threeEchoes();
    const frame = drawChart(spec, { width: 60, height: 12 });
    const column = cellOf(cellScale(spec.x.domain, 60), 50);
    expect(frame.rows.map((row) => [...runsText(row)][column]).indexOf('×')).toBe(0);
    const away = { ...spec, marks: [{ ...spec.marks[0]!, x: 80 }] };
    expect(drawChart(away, { width: 60, height: 12 }).rows.map(runsText).join('')).not.toContain('×');
  });

  it('drawChart places x labels under their values and the unit once, at the last', () => {
    const spec = threeEchoes();
    const { xLabels } = drawChart(spec, { width: 70, height: 4 });
    const scale = cellScale(spec.x.domain, 70);
    expect(xLabels.map((l) => l.text).join(' ')).toMatch(/^0 10 20 30 40 50 m$/);
    expect(xLabels[0]?.column).toBe(cellOf(scale, 0));
    expect(xLabels[2]?.column).toBe(cellOf(scale, 20) - 1); // "20" is centred on its cell
  });

  it('drawChart in feet labels the same picture with round feet', () => {
    const spec = threeEchoes();
    const metres = drawChart(spec, { width: 70, height: 6 });
    const feet = drawChart(
      { ...spec, x: { ...spec.x, unit: 'ft', perUnit: 1 / 0.3048 } },
      { width: 70, height: 6 },
    );
    expect(feet.rows).toEqual(metres.rows);
    expect(feet.xLabels.at(-1)?.text).toMatch(/50 ft$/);
  });

  it.each([
    [40, 6],
    [74, 8],
    [133, 21],
  ])('drawChart at %i × %i looks as in the golden frame', async (width, height) => {
    await expect(`${pictured(threeEchoes(), width, height)}\n`).toMatchFileSnapshot(
      `../golden/chart-${width}x${height}.txt`,
    );
  });
});
