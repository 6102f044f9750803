/** Whether the solved line explains the sweep at all. */
import type { Solution } from '../locate/solution.ts';
import type { Notice } from '../outcome.ts';

/**
 * Below this share of the sweep's energy the line is taken for another one, unless what is left is small in itself
 * (of a well matched line only ripple comes back). Sound lines of the samples: above 0.98; of a wrong cable or a length
 * 8 % off: below 0.1. Choice of this program.
 */
const LEAST_EXPLAINED = 0.8;
const LEAST_RESIDUAL_DB = -30;

/**
 * The doubt about all that was found, and about all that was not, on a line that is not the one described.
 *
 * @returns Null where the line explains the sweep.
 */
export function fitDoubt(solution: Pick<Solution, 'explained' | 'residualDb'>): Notice | null {
  const { explained, residualDb } = solution;
  if (explained >= LEAST_EXPLAINED || residualDb <= LEAST_RESIDUAL_DB) return null;
  const percent = Math.max(0, Math.round(100 * explained));
  return {
    code: 'line-unexplained',
    what:
      `the line as described explains only ${percent} % of what comes back: neither what was found nor what was not ` +
      'can be relied on; check the cable, the lengths, the temperature and the end, or give the cable alone and let ' +
      'its length be searched for',
  };
}
