/**
 * Likely causes, first checks and what to bring, per kind of fault and kind of place.
 *
 * The words stand in the table; the work itself belongs to people trained and licensed for it.
 */
import type { EchoKind, StretchKind } from '../locate/echo.ts';
import { ADVICE_TABLE } from './advice-table.ts';

/** What kind of place a fault sits at. */
export type PlaceKind = 'port' | 'joint' | 'cable' | 'end';

export type Advice = {
  /** Likely causes, most likely first. */
  readonly causes: readonly string[];
  /** What to do first, in this order: what makes the rest safe, then the cheapest look. */
  readonly checks: readonly string[];
  readonly bring: readonly string[];
};

/** Kinds that can be a finding; `joint` is one that is sound by its kind but worse than its limit. */
export type FindingKind = EchoKind | Exclude<StretchKind, 'sound'>;

/** Advice for a finding of this kind at this kind of place; there is a row for each. */
export function adviceFor(kind: FindingKind, place: PlaceKind): Advice {
  return ADVICE_TABLE[kind][place];
}
