import stringWidth from 'string-width';
import { describe, expect, it } from 'vitest';
import { drawLineStrip, type LineStripSpec } from '../../src/plot/line-strip.ts';
import { runsText } from '../../src/plot/run.ts';
import { cellOf, cellScale } from '../../src/plot/scale.ts';

const SPEC: LineStripSpec = {
  domainM: [-1, 57],
  sections: [
    { fromM: 0, toM: 2, texts: ['bottom jumper 2.0 m', '2.0 m', '2.0'], look: 'cable' },
    {
      fromM: 2,
      toM: 48,
      texts: ['main run 46.0 m · foam, 7/8 in', 'main run 46.0 m', '46.0'],
      look: 'cable',
    },
    { fromM: 48, toM: 50, texts: ['top jumper 2.0 m', '2.0 m', '2.0'], look: 'cable' },
  ],
  endText: 'antenna',
  marks: [
    { distanceM: 0, severity: 'sound', chosen: false },
    { distanceM: 2, severity: 'sound', chosen: false },
    { distanceM: 33.4, severity: 'watch', chosen: false },
    { distanceM: 48, severity: 'fault', chosen: true },
    { distanceM: 50, severity: 'sound', chosen: false },
  ],
  cursorM: 20,
};

function pictured(spec: LineStripSpec, width: number): string {
  const strip = drawLineStrip(spec, width);
  return `${[strip.line, strip.marks].map((row) => runsText(row).trimEnd()).join('\n')}\n`;
}

describe('drawLineStrip', () => {
  it('drawLineStrip gives two rows of exactly the width', () => {
    for (const width of [2, 10, 40, 72, 132, 200]) {
      const strip = drawLineStrip(SPEC, width);
      expect(stringWidth(runsText(strip.line))).toBe(width);
      expect(stringWidth(runsText(strip.marks))).toBe(width);
    }
  });

  it('drawLineStrip puts port, joints and end on the cells of the plot below', () => {
    const width = 132;
    const scale = cellScale(SPEC.domainM, width);
    const line = [...runsText(drawLineStrip(SPEC, width).line)];
    expect(line[cellOf(scale, 0)]).toBe('╞');
    expect(line[cellOf(scale, 2)]).toBe('╪');
    expect(line[cellOf(scale, 48)]).toBe('╪');
    expect(line[cellOf(scale, 50)]).toBe('╡');
    const marks = [...runsText(drawLineStrip(SPEC, width).marks)];
    expect(marks[cellOf(scale, 48)]).toBe('×');
    expect(marks[cellOf(scale, 33.4)]).toBe('▲');
    expect(marks[cellOf(scale, 20)]).toBe('╷');
  });

  it('drawLineStrip lets the worst mark of a cell be seen', () => {
    const crowded = {
      ...SPEC,
      marks: [
        { distanceM: 48, severity: 'fault', chosen: false },
        { distanceM: 48.02, severity: 'sound', chosen: true },
      ] as const,
    };
    const marks = drawLineStrip(crowded, 60).marks;
    expect(marks.filter((r) => r.text.trim() !== '' && r.role !== 'cursor')).toEqual([
      { text: '×', role: 'fault' },
    ]);
  });

  it('drawLineStrip shows by a broken line that the run goes on beside the view', () => {
    const strip = runsText(drawLineStrip({ ...SPEC, domainM: [10, 30] }, 60).line);
    expect(strip.startsWith('┄')).toBe(true);
    expect(strip.endsWith('┄')).toBe(true);
    expect(strip).toContain('main run 46.0 m · foam, 7/8 in');
    expect(strip).not.toContain('antenna');
  });

  it('drawLineStrip draws a device as a box and keeps wide characters in their cells', () => {
    const spec: LineStripSpec = {
      ...SPEC,
      sections: [
        { fromM: 0, toM: 30, texts: ['山頂局 30 m'], look: 'cable' },
        { fromM: 30, toM: 50, texts: ['arrestor'], look: 'device' },
      ],
    };
    const line = runsText(drawLineStrip(spec, 70).line);
    expect(line).toContain(' 山頂局 30 m ');
    expect(line).toContain('▒ arrestor ▒');
    expect(stringWidth(line)).toBe(70);
  });

  it.each([40, 72, 132])('drawLineStrip at %i cells looks as in the golden picture', async (width) => {
    await expect(pictured(SPEC, width)).toMatchFileSnapshot(`../golden/line-strip-${width}.txt`);
  });
});
