/** An echo (or a loss or match result) that matters, with kind, cause, place and advice. */
import type { EchoKind, Severity, StretchKind } from '../locate/echo.ts';

export type Finding = {
  readonly severity: Exclude<Severity, 'sound'>;
  /** Index into the analysis' echoes; null for a stretch. */
  readonly echo: number | null;
  readonly kind: EchoKind | Exclude<StretchKind, 'sound'>;
  readonly distanceM: number;
  readonly distanceSigmaM: number;
  /** "at joint 3, main run to top jumper". */
  readonly where: string;
  /** "series resistance 9.1 ± 0.6 Ω". */
  readonly what: string;
  readonly confidence: number;
  /** Most likely first. */
  readonly causes: readonly string[];
  /** What to do first, in this order: what makes the rest safe, then the cheapest look. */
  readonly checks: readonly string[];
  readonly bring: readonly string[];
};
