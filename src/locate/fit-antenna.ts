/**
 * An antenna as seen from its connector: reflecting out of its bands, matched in them.
 *
 * Its Γ(f) is a sum of resonances, found one at a time: what the fit leaves over is carried back to the end, the
 * resonance that explains most of it is added, everything is refined, and the next is added only while the gain is
 * worth its parameters (Bayesian information criterion).
 */
import { complexZeros } from '../numerics/complex.ts';
import { solveSymmetric } from '../numerics/linear-solve.ts';
import { refine } from './fit-cascade.ts';
import { type FitContext, residualEnergy } from './fit-context.ts';
import { cloneModel, type Freedom, type LineModel, restoreModel } from './line-model.ts';
import { linearise } from './linearise.ts';

/** Most resonances of one antenna. */
const MOST_RESONANCES = 5;
/** Parameters of one resonance, and of the constant part. */
const PER_RESONANCE = 4;
const CONSTANT_PART = 2;
/** Gain over the information criterion that one more resonance must bring, as a factor of it. */
const WORTH = 1.5;

const CENTRES = 28;
/** Widths tried, as shares of the band. */
const WIDTHS = [0.03, 0.06, 0.12, 0.25, 0.5, 1];

/**
 * Fits an antenna at the end of the model, in place.
 *
 * @param model Its end is an antenna, with or without resonances to begin with.
 * @param most Resonances at most.
 */
export function fitAntenna(
  context: FitContext,
  model: LineModel,
  freedom: Freedom,
  most = MOST_RESONANCES,
): void {
  const points = context.weight.reduce((sum, w) => sum + w, 0);
  settle(context, model, freedom, 6);
  const already = (model.end.parameters.length - CONSTANT_PART) / PER_RESONANCE;
  for (let count = already; count < most; count++) {
    const before = Math.max(residualEnergy(context), 1e-14);
    const trial = cloneModel(model);
    const found = strongestResonance(context, trial, freedom);
    if (found === null) return;
    trial.end = { type: 'antenna', parameters: [...trial.end.parameters, ...found] };
    settle(context, trial, freedom, most === MOST_RESONANCES ? 10 : 5);
    const after = Math.max(residualEnergy(context), 1e-14);
    const gain = 2 * points * Math.log(before / after);
    if (gain < WORTH * PER_RESONANCE * Math.log(2 * points)) {
      // Leaves the residual in the state of the model that is kept.
      linearise(context, model, freedom, 1);
      return;
    }
    restoreModel(model, trial);
  }
}

function settle(context: FitContext, model: LineModel, freedom: Freedom, maxIterations: number): void {
  linearise(context, model, freedom, 1);
  const points = context.weight.reduce((sum, w) => sum + w, 0);
  const variance = Math.max(residualEnergy(context) / (2 * points), 1e-10);
  refine(context, model, freedom, { variance, maxIterations });
}

/** [a, b, Q, f0] of the resonance that explains most of the residual together with a change of the constant part. */
function strongestResonance(context: FitContext, model: LineModel, freedom: Freedom): number[] | null {
  const { stages } = linearise(context, model, freedom, 1).translation;
  const through = context.cascade.sensitivity(stages.length);
  const { residual, frequencyHz, weight } = context;
  const n = frequencyHz.length;
  // S*·r and |S|², so that every resonance costs one pass.
  const carried = complexZeros(n);
  const power = new Float64Array(n);
  const stride = Math.max(1, Math.floor(n / 400));
  let powerSum = 0;
  let realSum = 0;
  for (let i = 0; i < n; i += stride) {
    const w = weight[i]!;
    carried.re[i] = w * (through.re[i]! * residual.re[i]! + through.im[i]! * residual.im[i]!);
    carried.im[i] = w * (through.re[i]! * residual.im[i]! - through.im[i]! * residual.re[i]!);
    power[i] = w * (through.re[i]! ** 2 + through.im[i]! ** 2);
    powerSum += power[i]!;
    realSum += carried.re[i]!;
  }
  if (!(powerSum > 0)) return null;
  const first = frequencyHz[0]!;
  const bandHz = frequencyHz[n - 1]! - first;
  let best: number[] | null = null;
  let bestGain = 0;
  for (let c = 0; c < CENTRES; c++) {
    const f0 = first + bandHz * (-0.1 + (1.2 * (c + 0.5)) / CENTRES);
    if (f0 <= 0) continue;
    for (const width of WIDTHS) {
      const q = Math.max(0.6, Math.min(150, f0 / (width * bandHz)));
      let pp = 0;
      let xRe = 0;
      let xIm = 0;
      let mRe = 0;
      let mIm = 0;
      for (let i = 0; i < n; i += stride) {
        const f = frequencyHz[i]!;
        const x = q * (f / f0 - f0 / f);
        const pRe = 1 / (1 + x * x);
        const pIm = -x * pRe;
        pp += power[i]! * pRe;
        xRe += carried.re[i]! * pRe + carried.im[i]! * pIm;
        xIm += carried.im[i]! * pRe - carried.re[i]! * pIm;
        mRe += power[i]! * pRe;
        mIm += power[i]! * pIm;
      }
      // Normal equations in (a, b, δ): |p|² = Re p for this form; columns p, jp, 1.
      const normal = Float64Array.of(pp, 0, mRe, 0, pp, -mIm, mRe, -mIm, powerSum);
      const solved = solveSymmetric(normal, Float64Array.of(xRe, xIm, realSum));
      if (!solved) continue;
      const a = solved[0]!;
      const b = solved[1]!;
      const gain = a * xRe + b * xIm + solved[2]! * realSum;
      if (gain > bestGain) {
        bestGain = gain;
        best = [clip(a), clip(b), q, f0];
      }
    }
  }
  return best;
}

function clip(value: number): number {
  return Math.max(-2, Math.min(2, value));
}
