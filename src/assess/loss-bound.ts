/** The most that a line can lose, from whatever its end sends back. */
import type { Sweep } from '../sweep/sweep.ts';

/** Windows over which the reading is averaged, so that echoes before the end count with their power alone. */
const WINDOWS = 24;
/** Doubt of the reading that is added, dB: the correction's residue. Common practice for one made in the field. */
const DOUBT_DB = 0.1;
/** A bound above this many times the table's loss says nothing. Choice of this program. */
const WORTH_SAYING = 4;

/**
 * Upper bound of the loss, one way, dB at each frequency: no end sends back more than it gets, so that return loss is
 * at least twice the loss, at any frequency. The loss of the whole band follows the table's, times the least factor.
 *
 * @param tableLossDb Length n, of cables and guides.
 * @returns Null where the end sends back too little to say anything, as a load does.
 */
export function lossAtMostDb(sweep: Sweep, tableLossDb: Float64Array): Float64Array | null {
  const n = sweep.frequencyHz.length;
  const size = Math.max(1, Math.floor(n / WINDOWS));
  let factor = Number.POSITIVE_INFINITY;
  for (let from = 0; from + size <= n; from += size) {
    let power = 0;
    let tableDb = 0;
    for (let i = from; i < from + size; i++) {
      power += (sweep.gamma.re[i]! ** 2 + sweep.gamma.im[i]! ** 2) / size;
      tableDb += tableLossDb[i]! / size;
    }
    const boundDb = -5 * Math.log10(Math.max(power, 1e-30)) + DOUBT_DB;
    if (tableDb > 0) factor = Math.min(factor, boundDb / tableDb);
  }
  return factor > WORTH_SAYING ? null : tableLossDb.map((db) => db * Math.max(0, factor));
}
