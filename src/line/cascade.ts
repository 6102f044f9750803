/**
 * The forward model: reflection of a whole line seen from the port, with analytic derivatives.
 *
 * Stages stand in order from the port to the end. Going back from the end, each stage turns the reflection behind it
 * into the one before it, Γ ← S11 + S21·S12·Γ/(1 − S22·Γ); all re-reflections are in it. Derivatives come by the chain
 * rule in one pass from the port: O(stages × frequencies).
 */
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { createTwoPort, type LumpedType, type TwoPort, writeLumped, writeStep } from './discontinuity.ts';
import { type EndModel, writeEnd } from './end.ts';
import type { Medium } from './medium.ts';

export type Stage =
  /** A stretch of one medium. `conductor` and `dielectric` are relative changes of its loss (0 = as described). */
  | {
      readonly type: 'line';
      readonly medium: Medium;
      readonly lengthM: number;
      readonly conductor: number;
      readonly dielectric: number;
    }
  /** Impedance step; `ratio` multiplies the far side's impedance against the near side's. */
  | { readonly type: 'step'; readonly before: Medium; readonly after: Medium; readonly ratio: number }
  | { readonly type: LumpedType; readonly medium: Medium; readonly strength: number };

/** Which derivative of which stage goes into which column of the Jacobian. */
export type Slot = {
  /** Stage index; the number of stages means the end. */
  readonly stage: number;
  /** `length` in m, relative `conductor` or `dielectric` loss, `strength` (ln ratio for a step), or an end parameter. */
  readonly of: 'length' | 'conductor' | 'dielectric' | 'strength' | number;
  readonly column: number;
  /** Factor on the derivative before it is added to the column. */
  readonly factor: number;
};

/** A cascade evaluator with buffers that are reused between calls. */
export type Cascade = {
  /** Reflection at the port. The returned array is overwritten by the next call. */
  gamma(stages: readonly Stage[], end: EndModel): ComplexArray;
  /**
   * Reflection at the port and its derivatives, added up into `columns` (which are cleared first).
   * Both are overwritten by the next call.
   */
  linearise(
    stages: readonly Stage[],
    end: EndModel,
    slots: readonly Slot[],
    columns: readonly ComplexArray[],
  ): ComplexArray;
  /** Reflection looking toward the end just behind stage `index − 1` (before stage `index`), from the last call. */
  behind(index: number): ComplexArray;
  /** ∂Γport/∂Γ at that place, from the last `linearise`. */
  sensitivity(index: number): ComplexArray;
  /** S11 of stage `index` by itself, which is no stretch of line, from the last call. */
  reflection(index: number): ComplexArray;
};

/**
 * Creates an evaluator for one frequency grid.
 *
 * @param frequencyHz Each above 0, length n.
 */
export function createCascade(frequencyHz: Float64Array): Cascade {
  const n = frequencyHz.length;
  // Buffers are counted from the end (0 = the end itself): what is put in nearer to the port leaves them in place.
  const states: ComplexArray[] = [complexZeros(n)];
  const known: { stage: Stage; twoPort: TwoPort; phasor: ComplexArray }[] = [];
  const sensitivities: ComplexArray[] = [];
  const endDerivatives: ComplexArray[] = [];
  const result = complexZeros(n);
  let knownEnd: EndModel | null = null;
  let count = 0;

  function prepare(stages: number): void {
    count = stages;
    while (states.length <= stages) states.push(complexZeros(n));
    while (sensitivities.length <= stages) sensitivities.push(complexZeros(n));
  }

  /** Fills states back from the end, working out anew only what differs from the last call. */
  function forward(stages: readonly Stage[], end: EndModel, derivatives: boolean): void {
    prepare(stages.length);
    const endColumns = derivatives ? end.parameters.length : 0;
    while (endDerivatives.length < endColumns) endDerivatives.push(complexZeros(n));
    let changed = knownEnd === null || !sameEnd(knownEnd, end);
    if (changed || derivatives) {
      writeEnd(end, frequencyHz, states[0]!, derivatives ? endDerivatives : null);
      knownEnd = { type: end.type, parameters: end.parameters.slice() };
    }
    for (let back = 1; back <= stages.length; back++) {
      const stage = stages[stages.length - back]!;
      let own = known[back - 1];
      const renewed = own === undefined || !sameStage(own.stage, stage);
      if (own === undefined) {
        own = { stage, twoPort: createTwoPort(n), phasor: complexZeros(n) };
        known.push(own);
      }
      own.stage = stage;
      if (stage.type === 'line') {
        if (renewed) writePhasor(stage, own.phasor);
        if (renewed || changed) multiply(own.phasor, states[back - 1]!, states[back]!);
      } else {
        if (renewed) {
          if (stage.type === 'step') writeStep(own.twoPort, stage.before, stage.after, stage.ratio);
          else writeLumped(own.twoPort, stage, stage.medium, frequencyHz);
        }
        if (renewed || changed) terminate(own.twoPort, states[back - 1]!, states[back]!);
      }
      changed ||= renewed;
    }
    result.re.set(states[stages.length]!.re);
    result.im.set(states[stages.length]!.im);
  }

  return {
    gamma(stages, end) {
      forward(stages, end, false);
      return result;
    },
    linearise(stages, end, slots, columns) {
      forward(stages, end, true);
      for (const column of columns) {
        column.re.fill(0);
        column.im.fill(0);
      }
      const byStage: Slot[][] = Array.from({ length: stages.length + 1 }, () => []);
      for (const slot of slots) byStage[slot.stage]!.push(slot);
      sensitivities[0]!.re.fill(1);
      sensitivities[0]!.im.fill(0);
      for (let k = 0; k < stages.length; k++) {
        const stage = stages[k]!;
        const { twoPort, phasor } = known[stages.length - k - 1]!;
        const before = states[stages.length - k]!;
        const behind = states[stages.length - k - 1]!;
        const wanted = byStage[k]!;
        if (stage.type === 'line') {
          for (const slot of wanted) addLineDerivative(stage, slot, sensitivities[k]!, before, columns);
          multiply(sensitivities[k]!, phasor, sensitivities[k + 1]!);
        } else {
          for (const slot of wanted)
            addTwoPortDerivative(twoPort, slot, sensitivities[k]!, behind, columns[slot.column]!);
          passThrough(twoPort, behind, sensitivities[k]!, sensitivities[k + 1]!);
        }
      }
      for (const slot of byStage[stages.length]!) {
        if (typeof slot.of !== 'number') throw new TypeError(`the end has no ${slot.of}`);
        addProduct(
          sensitivities[stages.length]!,
          endDerivatives[slot.of]!,
          slot.factor,
          columns[slot.column]!,
        );
      }
      return result;
    },
    behind: (index) => states[count - index]!,
    sensitivity: (index) => sensitivities[index]!,
    reflection: (index) => known[count - index - 1]!.twoPort.s11,
  };
}

function sameEnd(a: EndModel, b: EndModel): boolean {
  return (
    a.type === b.type &&
    a.parameters.length === b.parameters.length &&
    a.parameters.every((value, i) => value === b.parameters[i])
  );
}

function sameStage(a: Stage, b: Stage): boolean {
  if (a.type === 'line')
    return (
      b.type === 'line' &&
      a.medium === b.medium &&
      a.lengthM === b.lengthM &&
      a.conductor === b.conductor &&
      a.dielectric === b.dielectric
    );
  if (a.type === 'step')
    return b.type === 'step' && a.before === b.before && a.after === b.after && a.ratio === b.ratio;
  return b.type === a.type && a.medium === b.medium && a.strength === b.strength;
}

/** e^{−2γℓ} of a stretch with its loss changes. */
function writePhasor(stage: Extract<Stage, { type: 'line' }>, out: ComplexArray): void {
  const { gamma, gammaPerConductorLoss: c, gammaPerDielectricLoss: d } = stage.medium;
  const factor = -2 * stage.lengthM;
  for (let i = 0; i < out.re.length; i++) {
    const alpha = gamma.re[i]! + stage.conductor * c.re[i]! + stage.dielectric * d.re[i]!;
    const beta = gamma.im[i]! + stage.conductor * c.im[i]! + stage.dielectric * d.im[i]!;
    const magnitude = Math.exp(factor * alpha);
    const angle = factor * beta;
    out.re[i] = magnitude * Math.cos(angle);
    out.im[i] = magnitude * Math.sin(angle);
  }
}

function multiply(a: ComplexArray, b: ComplexArray, out: ComplexArray): void {
  for (let i = 0; i < out.re.length; i++) {
    const re = a.re[i]! * b.re[i]! - a.im[i]! * b.im[i]!;
    out.im[i] = a.re[i]! * b.im[i]! + a.im[i]! * b.re[i]!;
    out.re[i] = re;
  }
}

/** out = S11 + through·Γ/(1 − S22·Γ). */
function terminate(port: TwoPort, behind: ComplexArray, out: ComplexArray): void {
  const { s11, through, mirror } = port;
  for (let i = 0; i < out.re.length; i++) {
    const gRe = behind.re[i]!;
    const gIm = behind.im[i]!;
    const dRe = 1 - mirror * (s11.re[i]! * gRe - s11.im[i]! * gIm);
    const dIm = -mirror * (s11.re[i]! * gIm + s11.im[i]! * gRe);
    const inverse = 1 / (dRe * dRe + dIm * dIm);
    const tRe = through.re[i]! * gRe - through.im[i]! * gIm;
    const tIm = through.re[i]! * gIm + through.im[i]! * gRe;
    out.re[i] = s11.re[i]! + (tRe * dRe + tIm * dIm) * inverse;
    out.im[i] = s11.im[i]! + (tIm * dRe - tRe * dIm) * inverse;
  }
}

/** ∂out/∂Γ = through/(1 − S22·Γ)², multiplied into the sensitivity. */
function passThrough(port: TwoPort, behind: ComplexArray, before: ComplexArray, out: ComplexArray): void {
  const { s11, through, mirror } = port;
  for (let i = 0; i < out.re.length; i++) {
    const gRe = behind.re[i]!;
    const gIm = behind.im[i]!;
    const dRe = 1 - mirror * (s11.re[i]! * gRe - s11.im[i]! * gIm);
    const dIm = -mirror * (s11.re[i]! * gIm + s11.im[i]! * gRe);
    const eRe = dRe * dRe - dIm * dIm;
    const eIm = 2 * dRe * dIm;
    const inverse = 1 / (eRe * eRe + eIm * eIm);
    const qRe = (through.re[i]! * eRe + through.im[i]! * eIm) * inverse;
    const qIm = (through.im[i]! * eRe - through.re[i]! * eIm) * inverse;
    out.re[i] = before.re[i]! * qRe - before.im[i]! * qIm;
    out.im[i] = before.re[i]! * qIm + before.im[i]! * qRe;
  }
}

function addLineDerivative(
  stage: Extract<Stage, { type: 'line' }>,
  slot: Slot,
  sensitivity: ComplexArray,
  state: ComplexArray,
  columns: readonly ComplexArray[],
): void {
  const { gamma, gammaPerConductorLoss: c, gammaPerDielectricLoss: d } = stage.medium;
  const column = columns[slot.column]!;
  const byLength = slot.of === 'length';
  const rate = slot.of === 'conductor' ? c : d;
  const factor = -2 * slot.factor * (byLength ? 1 : stage.lengthM);
  for (let i = 0; i < column.re.length; i++) {
    const re = byLength
      ? gamma.re[i]! + stage.conductor * c.re[i]! + stage.dielectric * d.re[i]!
      : rate.re[i]!;
    const im = byLength
      ? gamma.im[i]! + stage.conductor * c.im[i]! + stage.dielectric * d.im[i]!
      : rate.im[i]!;
    const pRe = sensitivity.re[i]! * state.re[i]! - sensitivity.im[i]! * state.im[i]!;
    const pIm = sensitivity.re[i]! * state.im[i]! + sensitivity.im[i]! * state.re[i]!;
    column.re[i] = column.re[i]! + factor * (pRe * re - pIm * im);
    column.im[i] = column.im[i]! + factor * (pRe * im + pIm * re);
  }
}

/** ∂out/∂strength = S11'·(1 ± through·Γ²/D²) + through'·Γ/D, with D = 1 − S22·Γ. */
function addTwoPortDerivative(
  port: TwoPort,
  slot: Slot,
  sensitivity: ComplexArray,
  behind: ComplexArray,
  column: ComplexArray,
): void {
  const { s11, through, mirror, s11PerStrength: ds, throughPerStrength: dt } = port;
  for (let i = 0; i < column.re.length; i++) {
    const gRe = behind.re[i]!;
    const gIm = behind.im[i]!;
    const dRe = 1 - mirror * (s11.re[i]! * gRe - s11.im[i]! * gIm);
    const dIm = -mirror * (s11.re[i]! * gIm + s11.im[i]! * gRe);
    const inverse = 1 / (dRe * dRe + dIm * dIm);
    // q = Γ/D
    const qRe = (gRe * dRe + gIm * dIm) * inverse;
    const qIm = (gIm * dRe - gRe * dIm) * inverse;
    const q2Re = qRe * qRe - qIm * qIm;
    const q2Im = 2 * qRe * qIm;
    const mRe = 1 + mirror * (through.re[i]! * q2Re - through.im[i]! * q2Im);
    const mIm = mirror * (through.re[i]! * q2Im + through.im[i]! * q2Re);
    const re = ds.re[i]! * mRe - ds.im[i]! * mIm + dt.re[i]! * qRe - dt.im[i]! * qIm;
    const im = ds.re[i]! * mIm + ds.im[i]! * mRe + dt.re[i]! * qIm + dt.im[i]! * qRe;
    column.re[i] = column.re[i]! + slot.factor * (sensitivity.re[i]! * re - sensitivity.im[i]! * im);
    column.im[i] = column.im[i]! + slot.factor * (sensitivity.re[i]! * im + sensitivity.im[i]! * re);
  }
}

function addProduct(a: ComplexArray, b: ComplexArray, factor: number, column: ComplexArray): void {
  for (let i = 0; i < column.re.length; i++) {
    column.re[i] = column.re[i]! + factor * (a.re[i]! * b.re[i]! - a.im[i]! * b.im[i]!);
    column.im[i] = column.im[i]! + factor * (a.re[i]! * b.im[i]! + a.im[i]! * b.re[i]!);
  }
}
