/** The limits of an analysed line, judged, for both front doors. */
import { checkLimits, type Verdict } from '../assess/limits-check.ts';
import type { Analysis } from './analysis.ts';

/** Judges the limits of an analysed line. */
export function limitsVerdictOf(analysis: Analysis): Verdict {
  return checkLimits(analysis);
}
