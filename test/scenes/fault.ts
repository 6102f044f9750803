/** Faults of the scenes: kind, size, and how large they look from the port. */
import type { Medium } from './coax-medium.ts';
import type { Draws } from './draws.ts';
import type { Element, Spectrum } from './ladder.ts';

export type LumpedKind = 'series-resistance' | 'shunt-leakage' | 'series-inductance' | 'shunt-capacitance';
export type FaultKind = LumpedKind | 'open' | 'short';

export const LUMPED_KINDS: readonly LumpedKind[] = [
  'series-resistance',
  'shunt-leakage',
  'series-inductance',
  'shunt-capacitance',
];

/** A fault in its own unit: ohm, ohm, nH, pF; nothing for a cut or a short across the line. */
export type Fault = { readonly kind: FaultKind; readonly value: number | null };

/** Unit of a kind's value. */
export const FAULT_UNITS: Record<FaultKind, 'ohm' | 'nH' | 'pF' | null> = {
  'series-resistance': 'ohm',
  'shunt-leakage': 'ohm',
  'series-inductance': 'nH',
  'shunt-capacitance': 'pF',
  open: null,
  short: null,
};

/** The element that a lumped fault puts into the chain. */
export function faultElement(kind: LumpedKind, value: number): Element {
  switch (kind) {
    case 'series-resistance':
      return { type: 'series', resistanceOhm: value, inductanceH: 0 };
    case 'series-inductance':
      return { type: 'series', resistanceOhm: 0, inductanceH: value * 1e-9 };
    case 'shunt-leakage':
      return { type: 'shunt', conductanceS: 1 / value, capacitanceF: 0 };
    case 'shunt-capacitance':
      return { type: 'shunt', conductanceS: 0, capacitanceF: value * 1e-12 };
  }
}

/**
 * Reflection of a lumped fault in a matched 50 Ω line.
 *
 * @source references.md section 5.2: series Z/(Z + 2·z0), shunt −Y·z0/(Y·z0 + 2).
 */
export function faultReflection(kind: LumpedKind, value: number, frequencyHz: Float64Array): Spectrum {
  const element = faultElement(kind, value);
  const re = new Float64Array(frequencyHz.length);
  const im = new Float64Array(frequencyHz.length);
  for (let k = 0; k < frequencyHz.length; k++) {
    const omega = 2 * Math.PI * frequencyHz[k]!;
    const [real, imaginary, sign] =
      element.type === 'series'
        ? [element.resistanceOhm / 50, (omega * element.inductanceH) / 50, 1]
        : element.type === 'shunt'
          ? [element.conductanceS * 50, omega * element.capacitanceF * 50, -1]
          : [0, 0, 1];
    const size = (real + 2) ** 2 + imaginary ** 2;
    re[k] = (sign * (real * (real + 2) + imaginary * imaginary)) / size;
    im[k] = (sign * (imaginary * (real + 2) - real * imaginary)) / size;
  }
  return { re, im };
}

/** Accumulated one-way loss in neper at each frequency through sections up to a distance. */
export function lossUpTo(
  distanceM: number,
  sections: readonly { readonly lengthM: number; readonly medium: Medium }[],
): Float64Array {
  const loss = new Float64Array(sections[0]?.medium.gammaRe.length ?? 0);
  let from = 0;
  for (const { lengthM, medium } of sections) {
    const inside = Math.max(0, Math.min(lengthM, distanceM - from));
    for (let k = 0; k < loss.length; k++) loss[k]! += medium.gammaRe[k]! * inside;
    from += lengthM;
  }
  return loss;
}

/** RMS level over the band as the fault looks from the port, dB, positive; mismatch on the way not counted. */
export function apparentReturnLossDb(fault: Fault, frequencyHz: Float64Array, lossNp: Float64Array): number {
  const { kind, value } = fault;
  const reflection =
    kind === 'open' || kind === 'short' ? null : faultReflection(kind, value ?? Number.NaN, frequencyHz);
  let power = 0;
  for (let k = 0; k < frequencyHz.length; k++) {
    const local = reflection ? reflection.re[k]! ** 2 + reflection.im[k]! ** 2 : 1;
    power += (local * Math.exp(-4 * lossNp[k]!)) / frequencyHz.length;
  }
  return -10 * Math.log10(power);
}

/** Sizes that a field fault of each kind can have, in its unit. */
const FAULT_RANGE: Record<LumpedKind, readonly [number, number]> = {
  'series-resistance': [0.3, 300],
  'shunt-leakage': [8, 8000],
  'series-inductance': [0.03, 30],
  'shunt-capacitance': [0.012, 12],
};

/** The size at which a fault of this kind looks as large as wanted from the port, within what can occur. */
export function faultOfLevel(
  kind: LumpedKind,
  wantedDb: number,
  frequencyHz: Float64Array,
  lossNp: Float64Array,
): Fault {
  let [low, high] = FAULT_RANGE[kind];
  const growsWithValue = kind !== 'shunt-leakage';
  for (let i = 0; i < 50; i++) {
    const middle = Math.sqrt(low * high);
    const tooSmall = apparentReturnLossDb({ kind, value: middle }, frequencyHz, lossNp) > wantedDb;
    if (tooSmall === growsWithValue) low = middle;
    else high = middle;
  }
  return { kind, value: roundTo(Math.sqrt(low * high), 4) };
}

/** Draws a bad joint's fault by its size on site rather than by its level. */
export function drawJointFault(kind: LumpedKind, draws: Draws, frequencyHz: Float64Array): Fault {
  const lossless = new Float64Array(frequencyHz.length);
  switch (kind) {
    case 'series-resistance':
      return { kind, value: roundTo(draws.logUniform(4, 40), 4) };
    case 'shunt-leakage':
      return { kind, value: roundTo(draws.logUniform(60, 600), 4) };
    // A reactive joint is a fault from about 25 dB over the band (design section 6, point 9).
    case 'series-inductance':
    case 'shunt-capacitance':
      return faultOfLevel(kind, draws.uniform(10, 22), frequencyHz, lossless);
  }
}

function roundTo(value: number, digits: number): number {
  return Number(value.toPrecision(digits));
}
