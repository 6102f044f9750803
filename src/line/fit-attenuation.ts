/** From published attenuation points to k1 and k2. */
import type { AttenuationPoint } from './cable.ts';

export type AttenuationFit = {
  /** Conductor loss, dB per 100 m per √MHz. */
  readonly k1: number;
  /** Dielectric loss, dB per 100 m per MHz. */
  readonly k2: number;
  /** Lowest and highest frequency among the points, MHz. */
  readonly bandMHz: readonly [number, number];
  /** Fit ÷ point − 1 where it is furthest from 0, with its sign. */
  readonly worstResidual: number;
};

/**
 * Fits A = k1·√f + k2·f to attenuation points by least squares of the relative error, k1 and k2 ≥ 0.
 *
 * Relative, because a table spans two decades of loss and its digits are relative. Where the free fit
 * turns one figure negative (copper-clad steel, foam of hardly any loss) that figure is held at 0 and the
 * other fitted alone; so too where all the points share one frequency.
 *
 * @param points At least one; frequencies in MHz and dB per 100 m, all above 0; any order.
 * @throws RangeError When there is no point, or a figure is not above 0.
 * @source Form of the law: Reference Data for Engineers, 9th ed., "Transmission Lines".
 */
export function fitAttenuation(points: readonly AttenuationPoint[]): AttenuationFit {
  if (points.length === 0) throw new RangeError('fitAttenuation needs at least one point');
  // Each point is the row x·k1 + y·k2 = 1, with x = √f/A and y = f/A: the two-by-two normal equations.
  let xx = 0;
  let xy = 0;
  let yy = 0;
  let x1 = 0;
  let y1 = 0;
  let lowMHz = Number.POSITIVE_INFINITY;
  let highMHz = 0;
  for (const { frequencyMHz, dbPer100m } of points) {
    if (!(frequencyMHz > 0 && dbPer100m > 0 && frequencyMHz * dbPer100m < Number.POSITIVE_INFINITY)) {
      throw new RangeError(`not an attenuation point: ${dbPer100m} dB/100 m at ${frequencyMHz} MHz`);
    }
    const x = Math.sqrt(frequencyMHz) / dbPer100m;
    const y = frequencyMHz / dbPer100m;
    xx += x * x;
    xy += x * y;
    yy += y * y;
    x1 += x;
    y1 += y;
    lowMHz = Math.min(lowMHz, frequencyMHz);
    highMHz = Math.max(highMHz, frequencyMHz);
  }
  const determinant = xx * yy - xy * xy;
  let k1 = x1 / xx;
  let k2 = 0;
  // Points of one frequency leave a determinant of rounding errors only.
  if (determinant > 1e-12 * xx * yy) {
    const free1 = (x1 * yy - y1 * xy) / determinant;
    const free2 = (y1 * xx - x1 * xy) / determinant;
    if (free1 < 0) {
      k1 = 0;
      k2 = y1 / yy;
    } else if (free2 >= 0) {
      k1 = free1;
      k2 = free2;
    }
  }
  return { k1, k2, bandMHz: [lowMHz, highMHz], worstResidual: worstResidual(points, k1, k2) };
}

/**
 * How far k1 and k2 miss the points: fit ÷ point − 1 where it is furthest from 0, with its sign.
 *
 * @param points Frequencies in MHz and dB per 100 m, above 0; 0 is returned when there is none.
 */
export function worstResidual(points: readonly AttenuationPoint[], k1: number, k2: number): number {
  let worst = 0;
  for (const { frequencyMHz, dbPer100m } of points) {
    const residual = (k1 * Math.sqrt(frequencyMHz) + k2 * frequencyMHz) / dbPer100m - 1;
    if (Math.abs(residual) > Math.abs(worst)) worst = residual;
  }
  return worst;
}
