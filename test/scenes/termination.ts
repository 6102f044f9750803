/** What stands at the far end of a scene's line: open, short, load or antenna. */
import type { Draws } from './draws.ts';
import { emptySpectrum, type Spectrum, type Termination } from './ladder.ts';

export type EndKind = 'open' | 'short' | 'load' | 'antenna';

/** One resonance: matched near `centreHz`, reflecting away from it. */
export type Resonance = {
  readonly centreHz: number;
  readonly quality: number;
  readonly resistanceOhm: number;
};

export type EndModel =
  | { readonly kind: 'open'; readonly fringeF: number }
  | { readonly kind: 'short'; readonly inductanceH: number }
  | {
      readonly kind: 'load';
      readonly resistanceOhm: number;
      readonly inductanceH: number;
      readonly capacitanceF: number;
    }
  | {
      readonly kind: 'antenna';
      readonly form: 'grounded' | 'floating';
      readonly resonances: readonly Resonance[];
    };

/** Voltage and current of an end at each frequency. */
export function terminate(end: EndModel, frequencyHz: Float64Array): Termination {
  const n = frequencyHz.length;
  const one = { re: new Float64Array(n).fill(1), im: new Float64Array(n) };
  const rising = (perHenryOrFarad: number): Spectrum => ({
    re: new Float64Array(n),
    im: frequencyHz.map((f) => 2 * Math.PI * f * perHenryOrFarad),
  });
  switch (end.kind) {
    case 'open':
      return { voltage: one, current: rising(end.fringeF) };
    case 'short':
      return { voltage: rising(end.inductanceH), current: one };
    case 'load':
      return loadTermination(end, frequencyHz);
    case 'antenna': {
      const sum = resonanceSum(end.resonances, frequencyHz, end.form);
      return end.form === 'grounded' ? { voltage: sum, current: one } : { voltage: one, current: sum };
    }
  }
}

/** A resistor with a series inductance and a capacitance across both. */
function loadTermination(load: Extract<EndModel, { kind: 'load' }>, frequencyHz: Float64Array): Termination {
  const voltage = emptySpectrum(frequencyHz.length);
  const current = emptySpectrum(frequencyHz.length);
  for (let k = 0; k < frequencyHz.length; k++) {
    const omega = 2 * Math.PI * frequencyHz[k]!;
    voltage.re[k] = load.resistanceOhm;
    voltage.im[k] = omega * load.inductanceH;
    current.re[k] = 1 - omega * load.capacitanceF * voltage.im[k]!;
    current.im[k] = omega * load.capacitanceF * voltage.re[k]!;
  }
  return { voltage, current };
}

/**
 * Sum of r/(1 + jQ(f/f0 − f0/f)): as an impedance, parallel circuits in series (a short at low frequencies); as
 * an admittance in 1/r, series circuits in parallel (an open at low frequencies). Passive either way.
 *
 * @source Foster's forms with loss; common practice.
 */
function resonanceSum(
  resonances: readonly Resonance[],
  frequencyHz: Float64Array,
  form: 'grounded' | 'floating',
): Spectrum {
  const sum = emptySpectrum(frequencyHz.length);
  for (const { centreHz, quality, resistanceOhm } of resonances) {
    const size = form === 'grounded' ? resistanceOhm : 1 / resistanceOhm;
    for (let k = 0; k < frequencyHz.length; k++) {
      const off = quality * (frequencyHz[k]! / centreHz - centreHz / frequencyHz[k]!);
      sum.re[k]! += size / (1 + off * off);
      sum.im[k]! -= (size * off) / (1 + off * off);
    }
  }
  return sum;
}

/** Draws an end: open with a fringe, short with a little inductance, load of 15–35 dB, antenna. */
export function drawEnd(kind: EndKind, draws: Draws, frequencyHz: Float64Array): EndModel {
  switch (kind) {
    case 'open':
      return { kind, fringeF: draws.uniform(0.02e-12, 0.12e-12) };
    case 'short':
      return { kind, inductanceH: draws.uniform(0.05e-9, 0.4e-9) };
    case 'load':
      return drawLoad(draws, frequencyHz);
    case 'antenna':
      return {
        kind,
        form: draws.pick(['grounded', 'floating']),
        resonances: drawResonances(draws, frequencyHz),
      };
  }
}

/** A load whose RMS return loss over the band is 15–35 dB, part off-value resistor, part L or C. */
function drawLoad(draws: Draws, frequencyHz: Float64Array): EndModel {
  const wanted = 10 ** (-draws.uniform(15, 35) / 20);
  const realShare = draws.uniform(0.3, 0.95);
  const sign = draws.chance(0.5) ? 1 : -1;
  const gammaReal = sign * wanted * Math.sqrt(realShare);
  const topOmega = 2 * Math.PI * frequencyHz[frequencyHz.length - 1]!;
  // |Γ| of a small L or C is about ωL/2Z0 or ωCZ0/2; its RMS over a band from zero is 1/√3 of that at the top.
  const reactive = 2 * wanted * Math.sqrt(1 - realShare) * 1.3;
  const inductive = draws.chance(0.5);
  return {
    kind: 'load',
    resistanceOhm: (50 * (1 + gammaReal)) / (1 - gammaReal),
    inductanceH: inductive ? (reactive * 50) / topOmega : 0,
    capacitanceF: inductive ? 0 : reactive / (50 * topOmega),
  };
}

/** One to three bands, the first inside the swept span, so that the sweep can show what the end is. */
function drawResonances(draws: Draws, frequencyHz: Float64Array): Resonance[] {
  const low = frequencyHz[0]!;
  const high = frequencyHz[frequencyHz.length - 1]!;
  const centre = (low + high) / 2;
  const narrow = high - low < centre;
  const resonances: Resonance[] = [];
  const count = narrow ? draws.pick([1, 1, 2]) : draws.pick([1, 2, 3]);
  for (let i = 0; i < count; i++) {
    const centreHz = narrow
      ? centre +
        (high - low) * (i === 0 ? draws.uniform(-0.3, 0.3) : draws.pick([-1, 1]) * draws.uniform(0.6, 1.2))
      : draws.pick([0.75e9, 0.9e9, 1.85e9, 2.1e9, 2.45e9, 2.6e9]) * draws.uniform(0.96, 1.04);
    // In a narrow sweep the antenna's band fills most of the span: half of it is about centre/(2Q) wide.
    const quality = narrow ? (centre / (high - low)) * draws.uniform(0.7, 2) : draws.logUniform(4, 20);
    if (resonances.every((other) => Math.abs(other.centreHz - centreHz) > 0.08 * centreHz))
      resonances.push({ centreHz, quality, resistanceOhm: 50 * draws.uniform(0.78, 1.28) });
  }
  return resonances;
}
