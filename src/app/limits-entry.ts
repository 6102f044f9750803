/** The limits of an analysed line, judged, as data for the documents. */
import { checkLimits, type LimitResult, type Verdict } from '../assess/limits-check.ts';
import type { Analysis } from './analysis.ts';

/** Judges the limits of an analysed line. */
export function limitsVerdictOf(analysis: Analysis): Verdict {
  return checkLimits(analysis);
}

/** The verdict in the documents; what is not finite is not known. */
export type VerdictEntry = Omit<Verdict, 'limits'> & { readonly limits: readonly LimitResult[] };

/** The verdict as data. */
export function verdictEntry({ pass, text, limits }: Verdict): VerdictEntry {
  return {
    pass,
    text,
    limits: limits.map(
      ({ limit, band, limitDb, valueDb, marginDb, atHz, where, pass: kept, isDefault, why }) => ({
        limit,
        band,
        limitDb,
        valueDb: known(valueDb),
        marginDb: known(marginDb),
        atHz: known(atHz),
        where,
        pass: kept,
        isDefault,
        why,
      }),
    ),
  };
}

function known(value: number | null): number | null {
  return value !== null && Number.isFinite(value) ? value : null;
}
