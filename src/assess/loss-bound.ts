/** The most that a line can lose, from whatever its end sends back. */
import type { Sweep } from '../sweep/sweep.ts';

/** Windows over which the reading is averaged, so that echoes before the end count with their power alone. */
const WINDOWS = 24;
/** Doubt of the reading that is added, dB: the correction's residue. Common practice for one made in the field. */
const DOUBT_DB = 0.1;
/** A bound above this many times the table's loss says nothing. Choice of this program. */
const WORTH_SAYING = 2.5;

/**
 * Upper bound of the loss, one way, dB at each frequency: no end sends back more than it gets, so that return loss is
 * at least twice the loss. What one frequency shows bounds the others too: every loss of a cable grows with frequency at
 * least as its root and at most in proportion.
 *
 * @param tableLossDb Length n, of cables.
 * @returns Null where the end sends back too little to say anything, as a load does.
 */
export function lossAtMostDb(sweep: Sweep, tableLossDb: Float64Array): Float64Array | null {
  const { frequencyHz: f, gamma } = sweep;
  const n = f.length;
  const size = Math.max(1, Math.floor(n / WINDOWS));
  const shown: { readonly hz: number; readonly lossDb: number }[] = [];
  for (let from = 0; from + size <= n; from += size) {
    let power = 0;
    for (let i = from; i < from + size; i++) power += (gamma.re[i]! ** 2 + gamma.im[i]! ** 2) / size;
    // What the whole window shows is shown by its lowest frequency at the least.
    shown.push({ hz: f[from]!, lossDb: Math.max(0, -5 * Math.log10(Math.max(power, 1e-30))) + DOUBT_DB });
  }
  const bound = f.map((hz) =>
    shown.reduce((least, one) => {
      const ratio = hz / one.hz;
      return Math.min(least, one.lossDb * (ratio > 1 ? ratio : Math.sqrt(ratio)));
    }, Number.POSITIVE_INFINITY),
  );
  const says = bound.some((db, i) => db <= WORTH_SAYING * tableLossDb[i]!);
  return says ? bound : null;
}
