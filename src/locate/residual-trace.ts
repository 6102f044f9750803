/**
 * Trace of what the model leaves over, with loss and dispersion of the fitted line undone: where the search looks for
 * the next echo, and where it reads the floor that an echo must rise above.
 */
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import type { LineModel } from './line-model.ts';

export type ResidualTrace = {
  readonly fromM: number;
  readonly stepM: number;
  /** Corrected complex trace; |value| = 1 is a full reflection. */
  readonly value: ComplexArray;
  readonly level: Float64Array;
  /**
   * Energy of one distance cell per point, as if the whole residual were white noise of that density: what stands for
   * the noise variance (complex, total) when evidence at this distance is weighed.
   */
  readonly density: Float64Array;
};

/**
 * Least-squares reflection of an isolated discontinuity at each distance, Â(d) = Σ W·e^{−2A+2jB}·Γ / Σ W·e^{−4A}.
 *
 * A direct sum: for each frequency the distance grid is walked with one complex multiplication a step.
 *
 * @param values Sweep or residual, length n. @param weight Taper times validity, length n.
 */
export function residualTrace(
  model: LineModel,
  values: ComplexArray,
  weight: Float64Array,
  grid: { readonly fromM: number; readonly stepM: number; readonly points: number },
): ResidualTrace {
  const { fromM, stepM, points } = grid;
  const sum = complexZeros(points);
  const norm = new Float64Array(points);
  const sections = model.media.length;
  const sectionOf = Int32Array.from({ length: points }, (_, k) => {
    const d = fromM + k * stepM;
    const index = model.boundaryM.findIndex((b) => d < b);
    return index < 0 ? sections - 1 : index;
  });
  let weightEnergy = 0;
  for (let i = 0; i < weight.length; i++) {
    const w = weight[i]!;
    if (w === 0) continue;
    weightEnergy += w * w;
    const rRe = values.re[i]! * w;
    const rIm = values.im[i]! * w;
    let pRe = 0;
    let pIm = 0;
    let stepRe = 0;
    let stepIm = 0;
    let section = -1;
    for (let k = 0; k < points; k++) {
      if (sectionOf[k] !== section) {
        section = sectionOf[k]!;
        const start = pathExponent(model, i, fromM + k * stepM);
        const magnitude = Math.exp(-start.alpha);
        pRe = magnitude * Math.cos(start.beta);
        pIm = magnitude * Math.sin(start.beta);
        const rate = lossyGamma(model, section, i);
        const shrink = Math.exp(-2 * rate.alpha * stepM);
        stepRe = shrink * Math.cos(2 * rate.beta * stepM);
        stepIm = shrink * Math.sin(2 * rate.beta * stepM);
      }
      // p = e^{−2A + 2jB}: the conjugate of the path there and back.
      sum.re[k] = sum.re[k]! + pRe * rRe - pIm * rIm;
      sum.im[k] = sum.im[k]! + pRe * rIm + pIm * rRe;
      norm[k] = norm[k]! + w * (pRe * pRe + pIm * pIm);
      const next = pRe * stepRe - pIm * stepIm;
      pIm = pRe * stepIm + pIm * stepRe;
      pRe = next;
    }
  }
  const level = new Float64Array(points);
  const density = new Float64Array(points);
  let weightSum = 0;
  for (let i = 0; i < weight.length; i++) weightSum += weight[i]!;
  for (let k = 0; k < points; k++) {
    sum.re[k] = sum.re[k]! / norm[k]!;
    sum.im[k] = sum.im[k]! / norm[k]!;
    const power = sum.re[k]! ** 2 + sum.im[k]! ** 2;
    level[k] = Math.sqrt(power);
    // White noise of variance s² gives E|Â|² ≈ s²·ΣW²P²/(ΣWP²)²; P² is taken at its mean over the band.
    density[k] = (power * norm[k]! * weightSum) / weightEnergy;
  }
  return { fromM, stepM, value: sum, level, density };
}

/** Twice the attenuation and phase accumulated to a distance, at frequency index i. */
function pathExponent(model: LineModel, i: number, distanceM: number): { alpha: number; beta: number } {
  let alpha = 0;
  let beta = 0;
  let start = 0;
  for (let section = 0; section < model.media.length; section++) {
    const last = section === model.media.length - 1;
    const stop = last ? distanceM : Math.min(distanceM, model.boundaryM[section]!);
    const rate = lossyGamma(model, section, i);
    alpha += 2 * rate.alpha * (stop - start);
    beta += 2 * rate.beta * (stop - start);
    start = stop;
    if (stop >= distanceM) break;
  }
  return { alpha, beta };
}

function lossyGamma(model: LineModel, section: number, i: number): { alpha: number; beta: number } {
  const { gamma, gammaPerConductorLoss: c, gammaPerDielectricLoss: d } = model.media[section]!;
  return {
    alpha: gamma.re[i]! + model.conductor * c.re[i]! + model.dielectric * d.re[i]!,
    beta: gamma.im[i]! + model.conductor * c.im[i]! + model.dielectric * d.im[i]!,
  };
}
