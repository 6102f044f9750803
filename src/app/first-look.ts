/** What can be drawn of a sweep before its line is solved: the trace along the described sections. */
import { describedLengthM } from '../line/line.ts';
import { sectionMedium } from '../line/medium.ts';
import { runOfMedia } from '../line/medium-run.ts';
import { usableBand } from '../line/usable-band.ts';
import { type DistanceTrace, planCorrectedTrace } from '../locate/distance-trace.ts';
import { parseWindow } from '../numerics/window.ts';
import { readSweep } from '../sweep/read-sweep.ts';
import type { AnalyseRequest } from './solver.ts';

/**
 * Up to this many frequencies times distances the plain sum is taken. At a start nothing has been compiled yet, and its
 * one short loop soon is: 20 ms where the fast way takes 65; beyond, the fast way's better growth wins.
 */
const MOST_PLAIN_COST = 1e7;

/**
 * The corrected trace over a piece of the line as described.
 *
 * It takes some milliseconds where solving takes seconds. Distances rest on the description alone; the solved line
 * may be a little longer or shorter.
 *
 * @param view First and last distance, m, and how many, ≥ 2.
 * @returns Null when there is no quick answer: the sweep is still to be corrected or moved, the line's length is
 *   not described, or something cannot be read (the analysis says what).
 */
export function firstLook(
  request: AnalyseRequest,
  view: { readonly fromM: number; readonly toM: number; readonly points: number },
): DistanceTrace | null {
  const { line, sweepFile, port } = request;
  if (request.standards !== null || request.offsetM !== 0 || describedLengthM(line) === null) return null;
  const window = parseWindow(request.windowSpec);
  const read = readSweep(request.sweepBytes, port === null ? { file: sweepFile } : { file: sweepFile, port });
  if (!window.ok || !read.ok) return null;
  const { frequencyHz: all, gamma, portOhm } = read.value;
  const first = Math.max(all[0] === 0 ? 1 : 0, usableBand(line, all).carried.from);
  const frequencyHz = all.subarray(first);
  if (frequencyHz.length < 2) return null;
  const media = line.sections.map((section) =>
    sectionMedium(section, frequencyHz, { temperatureC: line.temperatureC, z0Ohm: portOhm }),
  );
  const run = runOfMedia(
    media,
    line.sections.map((section) => section.lengthM ?? 0),
  );
  const cost = frequencyHz.length * view.points;
  const plan = planCorrectedTrace({
    ...view,
    frequencyHz,
    run,
    window: window.value,
    method: cost <= MOST_PLAIN_COST ? 'exact' : 'fast',
  });
  return plan.trace({ re: gamma.re.subarray(first), im: gamma.im.subarray(first) });
}
