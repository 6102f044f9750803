/** What advice consists of, and what it is given for. */
import type { EchoKind, StretchKind } from '../locate/echo.ts';

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
