/** Match against frequency as a picture needs it: at the port as swept, at the end with the line taken away. */
import type { Line } from '../line/line.ts';
import type { Solution } from '../locate/solution.ts';
import type { Sweep } from '../sweep/sweep.ts';
import { type EndReflection, endReflection } from './end-match.ts';
import type { LimitResult } from './limits-check.ts';

export type MatchCurves = {
  /** The whole sweep. */
  readonly port: EndReflection;
  /** One curve a band, in order of the bands; one over the whole sweep where the line names none. */
  readonly end: readonly EndReflection[];
  /** Why there is nothing at the end, or null. */
  readonly endMissing: string | null;
  readonly bands: Line['limits']['bands'];
  /** How the limits of match were judged, band by band and plane by plane. */
  readonly results: readonly LimitResult[];
};

/**
 * Collects the curves.
 *
 * @param limits As judged by `checkLimits`.
 */
export function matchCurves(question: {
  readonly sweep: Sweep;
  readonly line: Line;
  readonly solution: Solution;
  readonly limits: readonly LimitResult[];
}): MatchCurves {
  const { sweep, line, solution, limits } = question;
  const { frequencyHz, gamma } = sweep;
  const bands = line.limits.bands;
  const whole = { fromHz: frequencyHz[0] ?? 0, toHz: frequencyHz.at(-1) ?? 0 };
  const end = solution.endsEarly
    ? []
    : (bands.length > 0 ? bands : [whole]).flatMap((band) => {
        const seen = endReflection(sweep, line, solution, band);
        const inside = seen && within(seen, band);
        return inside && inside.frequencyHz.length > 1 ? [inside] : [];
      });
  return {
    port: { frequencyHz, gamma },
    end,
    endMissing: end.length > 0 ? null : whyNoEnd(solution, bands.length > 0),
    bands,
    results: limits.filter(({ limit }) => limit === 'match-at-port' || limit === 'match-at-end'),
  };
}

function whyNoEnd(solution: Solution, hasBands: boolean): string {
  if (solution.endsEarly) return 'the line stops before its end: there is no end to look at';
  return hasBands
    ? 'none of the bands was swept, so the end cannot be looked at there'
    : 'this sweep does not part the end from the line before it';
}

/** The points of a curve within a band. */
function within(
  { frequencyHz, gamma }: EndReflection,
  { fromHz, toHz }: { readonly fromHz: number; readonly toHz: number },
): EndReflection {
  const kept = Array.from(frequencyHz.keys()).filter(
    (i) => frequencyHz[i]! >= fromHz && frequencyHz[i]! <= toHz,
  );
  const pick = (values: Float64Array): Float64Array => Float64Array.from(kept, (i) => values[i]!);
  return { frequencyHz: pick(frequencyHz), gamma: { re: pick(gamma.re), im: pick(gamma.im) } };
}
