/** Structure of real cable: short slabs whose impedance wanders a little, now and then a lot. */
import type { Medium } from './coax-medium.ts';
import type { Draws } from './draws.ts';

/** One slab before its ripple is scaled. */
export type Slab = { readonly lengthM: number; readonly shape: number };

/** How the return loss of the structure is read off: its worst over the band (the trade's sense), or its RMS. */
export type RippleMeasure = 'worst' | 'rms';

export type Ripple = { readonly returnLossDb: number; readonly measure: RippleMeasure };

/** Band over which structure is judged, whatever the sweep: it is a property of the cable. */
export const RIPPLE_BAND_HZ: Float64Array = Float64Array.from({ length: 521 }, (_, i) => 100e6 + i * 5e6);

/** Cuts a length into slabs of 5–25 cm with a faint dense ripple and a sparse heavy-tailed one. */
export function drawSlabs(lengthM: number, draws: Draws): Slab[] {
  const slabs: Slab[] = [];
  let left = lengthM;
  while (left > 0) {
    const drawn = draws.uniform(0.05, 0.25);
    const slabM = left - drawn < 0.05 ? left : drawn;
    const dense = 0.2 * draws.normal();
    const sparse = draws.chance(0.12) ? draws.heavyTail() : 0;
    slabs.push({ lengthM: slabM, shape: dense + sparse });
    left -= slabM;
  }
  return slabs;
}

/**
 * The factor on the slabs' shapes that gives the whole run the wanted structural return loss.
 *
 * First order: half the step of ln Z at each boundary, carried to the port and back through the run's own loss.
 * The steps are below 1 %, so that products of them don't count (held by a test against the full chain).
 *
 * @param spans Slabs with the medium they lie in, worked out at `RIPPLE_BAND_HZ`.
 */
export function rippleScale(
  spans: readonly { readonly slab: Slab; readonly medium: Medium }[],
  ripple: Ripple,
): number {
  const n = RIPPLE_BAND_HZ.length;
  const re = new Float64Array(n);
  const im = new Float64Array(n);
  const loss = new Float64Array(n);
  const phase = new Float64Array(n);
  let before = 0;
  const step = (difference: number) => {
    for (let k = 0; k < n; k++) {
      const size = 0.5 * difference * Math.exp(-2 * loss[k]!);
      re[k]! += size * Math.cos(2 * phase[k]!);
      im[k]! -= size * Math.sin(2 * phase[k]!);
    }
  };
  for (const { slab, medium } of spans) {
    step(slab.shape - before);
    before = slab.shape;
    for (let k = 0; k < n; k++) {
      loss[k]! += medium.gammaRe[k]! * slab.lengthM;
      phase[k]! += medium.gammaIm[k]! * slab.lengthM;
    }
  }
  step(-before);
  let worst = 0;
  let energy = 0;
  for (let k = 0; k < n; k++) {
    const power = re[k]! ** 2 + im[k]! ** 2;
    worst = Math.max(worst, power);
    energy += power / n;
  }
  const size = Math.sqrt(ripple.measure === 'worst' ? worst : energy);
  return size === 0 ? 0 : 10 ** (-ripple.returnLossDb / 20) / size;
}
