import { describe, expect, it } from 'vitest';
import { type ChartSpec, drawChart } from '../../src/plot/chart.ts';
import { chartSheet } from '../../src/plot/chart-sheet.ts';
import { lineSheet } from '../../src/plot/line-sheet.ts';
import type { LineStripSpec } from '../../src/plot/line-strip.ts';
import { CELL_HEIGHT, type Sheet } from '../../src/plot/sheet.ts';
import { escapeXml, svgText } from '../../src/plot/svg.ts';

/** 20 000 samples at −70 dB with one of them, narrower than anything drawn, at −20 dB. */
function onePeak(fields: Partial<ChartSpec> = {}): ChartSpec {
  const x = Float64Array.from({ length: 20_000 }, (_, i) => i / 400);
  const y = x.map((_, i) => (i === 12_345 ? -20 : -70 + (i % 7)));
  return {
    x: { domain: [-1, 55], unit: 'm' },
    y: { domain: [-80, 0], unit: 'dB' },
    series: [{ x, y, role: 'trace' }],
    levels: [{ y: -28, role: 'guide', label: 'limit' }],
    marks: [{ x: x[12_345]!, y: null, glyph: '1', label: '×1', role: 'fault' }],
    cursor: null,
    ...fields,
  };
}

const svg = (sheet: Sheet): string =>
  svgText(sheet, { id: 'trace', title: 'a trace', description: 'levels against distance' });

const textsOf = (text: string): string[] => [...text.matchAll(/<text[^>]*>([^<]*)</gu)].map((one) => one[1]!);

describe('chartSheet and svgText', () => {
  it.each([
    [72, 14],
    [44, 12],
    [130, 20],
  ])('write the ticks of the terminal at %i × %i cells, and no others', (width, height) => {
    for (const spec of [onePeak(), onePeak({ x: { domain: [1.7e9, 2.2e9], unit: 'MHz', perUnit: 1e-6 } })]) {
      const frame = drawChart(spec, { width, height });
      const ticks = [
        ...frame.yLabels.filter((label) => label !== '').reverse(),
        'dB',
        ...frame.xLabels.map(({ text }) => text),
      ];
      expect(textsOf(svg(chartSheet({ ...spec, levels: [], marks: [] }, { width, height })))).toEqual(ticks);
    }
  });

  it('keep the one sample that stands out at its height, in a picture far smaller than the samples', () => {
    const sheet = chartSheet(onePeak({ marks: [] }), { width: 72, height: 16 });
    const curve = sheet.shapes.find((shape) => shape.shape === 'stroke' && shape.role === 'trace');
    const places = curve?.shape === 'stroke' ? curve.places : [];
    const highest = Math.min(...places.map(([, y]) => y));
    // −20 dB lies a quarter of the way down from 0 to −80 dB.
    expect(highest).toBeCloseTo(18 + (16 * CELL_HEIGHT) / 4, 6);
    expect(places.length).toBeLessThan(5000);
  });

  it('break a curve at what is not known and clip it at the axes', () => {
    const x = Float64Array.of(0, 1, 2, 3, 4);
    const y = Float64Array.of(-10, -20, Number.NaN, 30, Number.NEGATIVE_INFINITY);
    const sheet = chartSheet(onePeak({ series: [{ x, y, role: 'trace' }], marks: [] }), {
      width: 72,
      height: 16,
    });
    const curves = sheet.shapes.filter((shape) => shape.shape === 'stroke' && shape.role === 'trace');
    expect(curves).toHaveLength(2);
    const second = curves[1];
    const heights = second?.shape === 'stroke' ? second.places.map(([, at]) => at) : [];
    expect(heights).toEqual([18, 18 + 16 * CELL_HEIGHT]);
  });

  it('put signs that would cover each other in rows, and the highest row inside the picture', () => {
    const marks = [30, 30.1, 30.2].map((x, i) => ({
      x,
      y: -1,
      glyph: '×',
      label: `×${i + 1}`,
      role: 'fault' as const,
    }));
    const sheet = chartSheet(onePeak({ marks }), { width: 72, height: 16 });
    const signs = sheet.shapes.flatMap((shape) =>
      shape.shape === 'letters' && shape.role === 'fault' ? [shape] : [],
    );
    expect(signs.map(({ text }) => text)).toEqual(['×1', '×2', '×3']);
    expect(new Set(signs.map(({ at }) => at[1])).size).toBe(3);
    for (const { at } of signs) expect(at[1]).toBeGreaterThan(10);
  });

  it('give the same bytes for the same spec', () => {
    const text = svg(chartSheet(onePeak(), { width: 72, height: 16 }));
    expect(svg(chartSheet(onePeak(), { width: 72, height: 16 }))).toBe(text);
    expect(text).not.toMatch(/NaN|Infinity|undefined|e-\d/u);
  });

  it('shade a doubt between its two curves', () => {
    const x = Float64Array.of(0, 10, 20);
    const areas = [
      {
        x,
        low: Float64Array.of(-30, -40, -30),
        high: Float64Array.of(-20, -20, -20),
        role: 'doubt' as const,
      },
    ];
    const sheet = chartSheet(onePeak({ areas }), { width: 72, height: 16 });
    const patch = sheet.shapes.find((shape) => shape.shape === 'patch');
    expect(patch?.shape === 'patch' ? patch.places : []).toHaveLength(6);
  });
});

describe('lineSheet', () => {
  const spec: LineStripSpec = {
    domainM: [-1, 56],
    sections: [
      { fromM: 0, toM: 2, texts: ['bottom jumper 2.0 m', '2.0 m'], look: 'cable' },
      { fromM: 2, toM: 48, texts: ['main run 46.0 m'], look: 'cable' },
      { fromM: 48, toM: 50, texts: ['top jumper 2.0 m', '2.0'], look: 'device' },
    ],
    endText: 'antenna',
    marks: [{ distanceM: 48, severity: 'fault', chosen: false, label: '×1' }],
    cursorM: null,
  };

  it('stands over the plot: a distance lies where the chart of the same width has it', () => {
    const mark = { x: 48, y: -10, glyph: '1', label: '×1', role: 'fault' as const };
    const chart = chartSheet(onePeak({ x: { domain: spec.domainM, unit: 'm' }, marks: [mark] }), {
      width: 72,
      height: 16,
    });
    const line = lineSheet(spec, 72);
    const xOf = (sheet: Sheet): number | undefined =>
      sheet.shapes.flatMap((shape) =>
        shape.shape === 'letters' && shape.text === '×1' ? [shape.at[0]] : [],
      )[0];
    expect(xOf(line)).toBeCloseTo(xOf(chart)!, 9);
    expect(line.width).toBe(chart.width);
  });

  it('counts the joints from the port, names what has room, and says what ends the line', () => {
    const texts = textsOf(svg(lineSheet(spec, 72)));
    expect(texts).toEqual(expect.arrayContaining(['1', '2', '3', '4', 'main run 46.0 m', 'antenna', '×1']));
    expect(texts).not.toContain('bottom jumper 2.0 m');
  });
});

describe('svgText', () => {
  it('holds no markup, script or control character that came from a name', () => {
    const hostile = '</text><script>alert(1)</script>"\u001b[31m\u202e\ud800&';
    const sheet: Sheet = {
      width: 10,
      height: 10,
      shapes: [{ shape: 'letters', at: [1, 1], text: hostile, role: 'plain', anchor: 'start', size: 11 }],
    };
    const text = svgText(sheet, { id: 'x', title: hostile, description: hostile });
    expect(text).not.toMatch(/<script|\u001b|\u202e|\ud800/u);
    expect(text.match(/<\/?[a-z]+/gu)?.sort()).toEqual(
      ['<desc', '</desc', '<svg', '</svg', '<text', '</text', '<title', '</title'].sort(),
    );
    expect(escapeXml(`<a href="x" class='y'>&`)).toBe('&lt;a href=&quot;x&quot; class=&#39;y&#39;&gt;&amp;');
  });
});
