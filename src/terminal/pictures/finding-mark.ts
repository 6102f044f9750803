/** The sign of what was found, over the curve at its place. */
import type { ChartMark } from '../../plot/chart.ts';
import { SEVERITY_GLYPHS } from '../../plot/line-strip.ts';
import type { Found } from '../found.ts';

/** Set on top of whatever is drawn at its distance. */
export function findingMark(row: Found): ChartMark {
  return { x: row.distanceM, y: null, glyph: SEVERITY_GLYPHS[row.severity], role: row.severity };
}
