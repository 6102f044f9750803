/**
 * Trace of what the model leaves over, with loss and dispersion of the fitted line undone: where the search looks for
 * the next echo, and where it reads the floor that an echo must rise above.
 */

import { type MediumRun, pathTo } from '../line/medium-run.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import type { WindowSpec } from '../numerics/window.ts';
import { planCorrectedTrace } from './distance-trace.ts';
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

/** A trace that is planned once for a model and used for every residual that it leaves. */
export type ResidualTracer = (residual: ComplexArray) => ResidualTrace;

/** Knots per section at which the throughput is summed; between them its logarithm is nearly straight. */
const KNOTS = 12;

/**
 * Plans the trace of what a model leaves over, by chirp-z transforms: the line as fitted at the time of planning.
 *
 * @param window Taper. @param weight The same taper's values, length n, for the density.
 * @param grid From the port on.
 */
export function planResidualTrace(
  model: LineModel,
  window: WindowSpec,
  weight: Float64Array,
  grid: { readonly stepM: number; readonly points: number },
): ResidualTracer {
  const run = runOfModel(model);
  const plan = planCorrectedTrace({
    frequencyHz: model.frequencyHz,
    run,
    window,
    fromM: 0,
    toM: grid.stepM * (grid.points - 1),
    points: grid.points,
  });
  let weightSum = 0;
  let weightEnergy = 0;
  for (const w of weight) {
    weightSum += w;
    weightEnergy += w * w;
  }
  const norm = throughputAlong(run, weight, grid);
  return (residual) => {
    const value = plan.trace(residual).value;
    const level = new Float64Array(grid.points);
    const density = new Float64Array(grid.points);
    for (let k = 0; k < grid.points; k++) {
      const power = value.re[k]! ** 2 + value.im[k]! ** 2;
      level[k] = Math.sqrt(power);
      density[k] = (power * norm[k]! * weightSum) / weightEnergy;
    }
    return { fromM: 0, stepM: grid.stepM, value, level, density };
  };
}

/** The model's sections with their fitted loss. */
function runOfModel(model: LineModel): MediumRun {
  const rates = model.media.map((_, section) =>
    Array.from(model.frequencyHz, (_, i) => lossyGamma(model, section, i)),
  );
  return {
    startM: Float64Array.from([0, ...model.boundaryM]),
    alpha: rates.map((rate) => Float64Array.from(rate, ({ alpha }) => alpha)),
    beta: rates.map((rate) => Float64Array.from(rate, ({ beta }) => beta)),
  };
}

/** Σ W·e^{−4A(d)} on the grid. */
function throughputAlong(
  run: MediumRun,
  weight: Float64Array,
  grid: { readonly stepM: number; readonly points: number },
): Float64Array {
  const toM = grid.stepM * (grid.points - 1);
  const knotsM = new Set<number>([toM]);
  for (let section = 0; section < run.alpha.length; section++) {
    const fromM = run.startM[section]!;
    const untilM = section + 1 < run.alpha.length ? run.startM[section + 1]! : Math.max(toM, fromM);
    for (let k = 0; k < KNOTS; k++) knotsM.add(fromM + ((untilM - fromM) * k) / KNOTS);
  }
  const sorted = [...knotsM].sort((a, b) => a - b);
  const logs = sorted.map((distanceM) => {
    const { attenuation } = pathTo(run, distanceM);
    let sum = 0;
    for (let i = 0; i < weight.length; i++) sum += weight[i]! * Math.exp(-4 * attenuation[i]!);
    return Math.log(Math.max(sum, 1e-300));
  });
  const out = new Float64Array(grid.points);
  let knot = 0;
  for (let k = 0; k < grid.points; k++) {
    const distanceM = k * grid.stepM;
    while (knot + 2 < sorted.length && sorted[knot + 1]! < distanceM) knot++;
    const low = sorted[knot]!;
    const share = (distanceM - low) / Math.max((sorted[knot + 1] ?? low) - low, 1e-9);
    out[k] = Math.exp(logs[knot]! + share * ((logs[knot + 1] ?? logs[knot]!) - logs[knot]!));
  }
  return out;
}
