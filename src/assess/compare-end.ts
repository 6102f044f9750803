/** The end of a line as something that may have changed: another kind, or at another place. */
import { jointName, type Line } from '../line/line.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { sectionAtM } from './compare-change.ts';
import type { CommonSweeps, SolvedSweep } from './compare-common.ts';
import type { Subtraction } from './compare-subtract.ts';
import { planSeenTrace, sizesOf } from './compare-trace.ts';
import type { Change } from './comparison.ts';
import { type LengthWords, placeText } from './place-text.ts';

/** Share of the end's own echo from which its change is one of the end. */
const END_SHARE_CHANGED = 0.5;

/**
 * The end as a change: another kind, or at another place; null where it is as it was.
 *
 * @param lineEndM Model distance of the end before, m.
 */
export function endChange(
  { line, before, after }: { readonly line: Line; readonly before: SolvedSweep; readonly after: SolvedSweep },
  common: CommonSweeps,
  { alignment, run }: Subtraction,
  lineEndM: number,
  lengthWords: LengthWords,
): Change | null {
  const [was, is] = [before.solution, after.solution];
  const cut = is.endsEarly && !was.endsEarly && is.lengthM < was.lengthM;
  const quiet = (kind: string): string => (kind === 'open' || kind === 'short' ? kind : 'termination');
  const other = quiet(was.end) !== quiet(is.end) && was.end !== 'unknown' && is.end !== 'unknown';
  if (!cut && !other) return null;
  const endM = cut ? is.lengthM / is.distanceScale : lineEndM;
  const tracer = planSeenTrace(common.frequencyHz, run, endM * 1.02 + 0.1, endM / 50 + 0.05);
  const near = (trace: ComplexArray): number => {
    const sizes = sizesOf(trace);
    let most = 0;
    for (let k = 0; k < sizes.length; k++)
      if (Math.abs(k * tracer.stepM - endM) < Math.max(0.1, 2 * tracer.stepM))
        most = Math.max(most, sizes[k]!);
    return most;
  };
  const changed = near(tracer.trace(alignment.difference));
  const own = near(tracer.trace(common.after));
  if (!cut && changed < END_SHARE_CHANGED * own) return null;
  const distanceM = cut ? is.lengthM : was.lengthM;
  const atEnd = !cut;
  const index = line.sections.length + 1;
  return {
    distanceM,
    distanceSigmaM: Math.max(is.lengthSigmaM, was.lengthSigmaM),
    levelDb: 20 * Math.log10(changed + 1e-12),
    gone: false,
    kind: is.end === 'open' || is.end === 'short' ? is.end : 'termination',
    joint: atEnd ? { index, name: jointName(line, index) } : null,
    place: placeText(
      line,
      { distanceM, jointIndex: atEnd ? index : null, section: sectionAtM(line, was, distanceM) },
      lengthWords,
    ),
  };
}
