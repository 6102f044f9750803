/** Whether the solved line explains the sweep. */
import type { Solution } from '../locate/solution.ts';
import type { Notice } from '../outcome.ts';

/**
 * Below this share of the sweep's energy the line is taken for another one, unless what is left is small in itself
 * (of a well matched line only ripple comes back). The samples on their own lines: above 0.99, below −35 dB; on other
 * cables, lengths and ends most lie below 0.97 and above −30 dB. Choice of this program.
 */
const LEAST_EXPLAINED = 0.97;
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
      `the line as described explains only ${percent} % of what comes back (${residualDb.toFixed(0).replace('-', '−')} dB are left): neither what was found nor what was not ` +
      'can be relied on; check the cable, the lengths, the temperature and the end, or give the cable alone and let ' +
      'its length be searched for',
  };
}
