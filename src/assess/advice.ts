/**
 * Likely causes, first checks and what to bring, per kind of fault and kind of place.
 *
 * The words stand in the table; the work itself belongs to people trained and licensed for it.
 */
import type { Advice, FindingKind, PlaceKind } from './advice-kinds.ts';
import { ADVICE_TABLE } from './advice-table.ts';

/** Advice for a finding of this kind at this kind of place; there is a row for each. */
export function adviceFor(kind: FindingKind, place: PlaceKind): Advice {
  return ADVICE_TABLE[kind][place];
}
