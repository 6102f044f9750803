import { describe, expect, it } from 'vitest';
import { endText, lineSpan, stripSections } from '../../src/report/line-sections.ts';
import { makeAnalysis } from '../app/made-analysis.ts';

const analysis = makeAnalysis();

describe('lineSpan', () => {
  it('leaves room before the port and behind the end', () => {
    const [from, to] = lineSpan(50);
    expect(from).toBeCloseTo(-1, 12);
    expect(to).toBeCloseTo(56.5, 12);
  });
});

describe('stripSections', () => {
  it('lays the sections end to end, the last one to where the line was found to end', () => {
    const sections = stripSections(analysis.line, null, 'm');
    expect(sections.map(({ fromM, toM }) => [fromM, toM])).toEqual([
      [0, 8],
      [8, 20],
    ]);
    expect(sections[0]!.texts[0]).toBe('lower run 8.0 m · made-up cable');
    const [first, last] = analysis.line.sections;
    const open = {
      ...analysis.line,
      sections: [first!, { ...last!, lengthM: null } as typeof last & object],
    };
    expect(stripSections(open, 19.5, 'm').at(-1)?.toM).toBe(19.5);
    expect(stripSections(open, null, 'm')).toHaveLength(1);
  });

  it('writes the end that was found where none is described', () => {
    expect(endText(analysis)).toBe('open');
    const unknown = makeAnalysis({ line: { ...analysis.line, end: 'unknown' } });
    expect(endText(unknown)).toBe('open');
    const neither = makeAnalysis({ ...unknown, solution: { ...analysis.solution, end: 'unknown' } });
    expect(endText(neither)).toBe('end');
  });
});
