/** Which kinds of end are worth a trial. */
import type { Line } from '../line/line.ts';
import { assertNever } from '../outcome.ts';
import { type FoundEnd, FULL_REFLECTION_LEVEL } from './end-search.ts';

/** A described open or short is looked for where the trace shows at least this level. */
const FULL_END_LEVEL = 0.08;

/** Kinds that an end may be, given what was described and how large it looks. */
export function likelyKinds(line: Line, frequencyHz: Float64Array, level: number): FoundEnd[] {
  const described = line.end;
  const full: FoundEnd[] = level > FULL_END_LEVEL ? ['open', 'short'] : [];
  switch (described) {
    case 'open':
    case 'short':
      // A described end is believed unless hardly anything comes back.
      return level > NOTHING_LEVEL ? ['open', 'short'] : ['open', 'short', 'load', 'antenna'];
    case 'load':
    case 'antenna':
      // A load or antenna that reflects everything in its band is off or broken.
      return level > FULL_REFLECTION_LEVEL && !isOutOfBand(line, frequencyHz)
        ? [described, 'open', 'short']
        : [described];
    case 'unknown':
      return [...full, 'load', 'antenna'];
    default:
      return assertNever(described);
  }
}

/** Whether a sweep keeps clear of every band that the line's antenna is described for. */
function isOutOfBand(line: Line, frequencyHz: Float64Array): boolean {
  const low = frequencyHz[0]!;
  const high = frequencyHz[frequencyHz.length - 1]!;
  const { bands } = line.limits;
  return line.end === 'antenna' && bands.length > 0 && bands.every((b) => b.toHz < low || b.fromHz > high);
}

/** An open or a short that is described, however much stands before it, shows more than this. */
const NOTHING_LEVEL = 0.03;
