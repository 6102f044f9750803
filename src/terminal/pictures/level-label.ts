/** A word on a dotted level, at the right edge of the plot. */
import type { ChartMark } from '../../plot/chart.ts';
import { cellScale, DOTS_ACROSS, type Domain } from '../../plot/scale.ts';

/** Cells between the word and the edge. */
const MARGIN = 1;

/** The word as marks, one a cell; its characters must be one cell wide each. */
export function levelLabel(word: string, y: number, span: Domain, plotWidth: number): readonly ChartMark[] {
  const scale = cellScale(span, plotWidth);
  const letters = [...word];
  const first = plotWidth - MARGIN - letters.length;
  return letters.map((glyph, i) => ({
    x: scale.toValue((first + i) * DOTS_ACROSS),
    y,
    glyph,
    role: 'dim',
  }));
}
