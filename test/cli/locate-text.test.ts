import { describe, expect, it } from 'vitest';
import { locateText, type TextOptions } from '../../src/cli/locate-text.ts';
import { createPaint } from '../../src/cli/paint.ts';
import { cellWidth } from '../../src/plot/cells.ts';
import { makeAnalysis } from '../app/made-analysis.ts';

const options: TextOptions = { columns: 80, units: 'm', paint: createPaint(false), notices: [] };
const text = locateText(makeAnalysis(), options);

describe('locateText', () => {
  it('reads as in the golden file', async () => {
    await expect(text).toMatchFileSnapshot('../golden/locate-80.txt');
  });

  it.each([60, 80, 120])('fits %d columns', (columns) => {
    for (const line of locateText(makeAnalysis(), { ...options, columns }).split('\n'))
      expect(cellWidth(line), line).toBeLessThanOrEqual(columns);
  });

  it('says the verdict in the first line', () => {
    expect(text.split('\n')[0]).toBe('× Made line: 1 fault');
    const sound = makeAnalysis({ findings: [], severities: ['sound', 'sound'] });
    expect(locateText(sound, options).split('\n')[0]).toBe('● Made line: no fault found');
    const other = { ...sound, solution: { ...sound.solution, explained: 0.04, residualDb: -9 } };
    const doubted = locateText(other, options);
    expect(doubted.split('\n')[0]).toBe('▲ Made line: this line explains the sweep badly');
    expect(doubted).toMatch(/\nnote {2}the line as described explains only 4 %/u);
  });

  it('holds no escape code without colour, and the same words with it', () => {
    expect(text).not.toContain('\u001b');
    const coloured = locateText(makeAnalysis(), { ...options, paint: createPaint(true) });
    expect(coloured).toContain('\u001b[31m× Made line: 1 fault\u001b[0m');
    expect(coloured.replace(/\u001b\[\d+m/gu, '')).toBe(text);
  });

  it('shows feet and °F where they are wanted', () => {
    const feet = locateText(makeAnalysis(), { ...options, units: 'ft' });
    // 8.004 m = 26.26 ft.
    expect(feet).toContain('26.26 ft');
    expect(feet).toContain('68 °F');
    expect(feet).not.toMatch(/\d m\b/u);
  });

  it('shows ghosts as what they are, and every notice', () => {
    expect(text).toContain('ghost 32.00 m');
    expect(text).toContain('note  a doubt that travels with the result');
    expect(
      locateText(makeAnalysis(), { ...options, notices: [{ code: 'x', what: 'seen first' }] }),
    ).toContain('note  seen first');
  });
});
