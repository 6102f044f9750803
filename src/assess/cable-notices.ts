/** What a sweep asks of the cables on its line that their figures do not cover. */
import type { Cable } from '../line/cable.ts';
import type { Line } from '../line/line.ts';
import { aboveHighestFrequency, outsideFittedBand } from '../line/loss.ts';
import type { Notice } from '../outcome.ts';

/**
 * How far above the band of its published points a loss is continued without a word. √f and f carry it a little way
 * well; below the band loss is small and matters little. Choice of this program.
 */
const CONTINUED = 1.3;

/**
 * A notice for each kind of cable that the sweep takes above its highest frequency of use, or well above the band its
 * loss is known for.
 *
 * @param stopHz Highest frequency used.
 */
export function cableNotices(line: Line, stopHz: number): readonly Notice[] {
  const cables = new Map<string, Cable>();
  for (const section of line.sections)
    if (section.type === 'coax') cables.set(section.cable.id, section.cable);
  return [...cables.values()].flatMap((cable) => noticeOf(cable, stopHz) ?? []);
}

function noticeOf(cable: Cable, stopHz: number): Notice | null {
  const above = aboveHighestFrequency(cable, stopHz);
  if (above !== null || cable.fittedBandMHz === null) return above;
  const [lowMHz, highMHz] = cable.fittedBandMHz;
  return stopHz > CONTINUED * highMHz * 1e6 ? outsideFittedBand(cable, lowMHz * 1e6, stopHz) : null;
}
