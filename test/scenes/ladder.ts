/** The scenes' own wave arithmetic: a chain of two-ports multiplied out as voltages and currents. */
import type { Medium } from './coax-medium.ts';

/** One element of the chain, from the port toward the end. */
export type Element =
  | {
      readonly type: 'slab';
      readonly medium: Medium;
      readonly lengthM: number;
      readonly impedanceScale: number;
    }
  | { readonly type: 'series'; readonly resistanceOhm: number; readonly inductanceH: number }
  | { readonly type: 'shunt'; readonly conductanceS: number; readonly capacitanceF: number }
  /** In series or across, Ω or S at each frequency. */
  | { readonly type: 'impedance'; readonly ohm: Spectrum }
  | { readonly type: 'admittance'; readonly siemens: Spectrum };

/** Complex numbers at each frequency. */
export type Spectrum = { readonly re: Float64Array; readonly im: Float64Array };

/** What terminates the chain, as a voltage and a current (any common scale) at each frequency. */
export type Termination = { readonly voltage: Spectrum; readonly current: Spectrum };

/** Zeros at n frequencies. */
export function emptySpectrum(n: number): Spectrum {
  return { re: new Float64Array(n), im: new Float64Array(n) };
}

/**
 * Carries the end's voltage and current back to the port through every element: (V, I) ← ABCD·(V, I).
 *
 * A slab is A = D = cosh γl, B = Z·sinh γl, C = sinh γl / Z; a series Z is B = Z; a shunt Y is C = Y.
 *
 * @returns Voltage and current at the port, at each frequency.
 * @source ABCD matrices: Pozar, Microwave Engineering, 4th ed., Table 4.1 (from memory).
 */
export function chainToPort(
  elements: readonly Element[],
  end: Termination,
  frequencyHz: Float64Array,
): Termination {
  const at: Termination = {
    voltage: { re: end.voltage.re.slice(), im: end.voltage.im.slice() },
    current: { re: end.current.re.slice(), im: end.current.im.slice() },
  };
  for (let i = elements.length - 1; i >= 0; i--) {
    const element = elements[i]!;
    if (element.type === 'slab') passSlab(element.medium, element.lengthM, element.impedanceScale, at);
    else if (element.type === 'series')
      passSeries(element.resistanceOhm, element.inductanceH, frequencyHz, at);
    else if (element.type === 'shunt') passShunt(element.conductanceS, element.capacitanceF, frequencyHz, at);
    else if (element.type === 'impedance') addProduct(element.ohm, at.current, at.voltage);
    else addProduct(element.siemens, at.voltage, at.current);
  }
  return at;
}

/** Reflection (V − Z·I)/(V + Z·I) at a port of real impedance. */
export function reflectionAtPort(port: Termination, portOhm: number): Spectrum {
  const n = port.voltage.re.length;
  return reflectionAgainst(port, { re: new Float64Array(n).fill(portOhm), im: new Float64Array(n) });
}

/** Reflection against an impedance that may be complex and differ from frequency to frequency. */
export function reflectionAgainst(port: Termination, impedance: Spectrum): Spectrum {
  const gamma = emptySpectrum(impedance.re.length);
  const { voltage: v, current: i } = port;
  for (let k = 0; k < impedance.re.length; k++) {
    const dropRe = impedance.re[k]! * i.re[k]! - impedance.im[k]! * i.im[k]!;
    const dropIm = impedance.re[k]! * i.im[k]! + impedance.im[k]! * i.re[k]!;
    const backRe = v.re[k]! - dropRe;
    const backIm = v.im[k]! - dropIm;
    const forthRe = v.re[k]! + dropRe;
    const forthIm = v.im[k]! + dropIm;
    const size = forthRe * forthRe + forthIm * forthIm;
    gamma.re[k] = (backRe * forthRe + backIm * forthIm) / size;
    gamma.im[k] = (backIm * forthRe - backRe * forthIm) / size;
  }
  return gamma;
}

function passSlab(medium: Medium, lengthM: number, scale: number, at: Termination): void {
  const { re: vRe, im: vIm } = at.voltage;
  const { re: iRe, im: iIm } = at.current;
  for (let k = 0; k < vRe.length; k++) {
    const grow = Math.exp(medium.gammaRe[k]! * lengthM);
    const phase = medium.gammaIm[k]! * lengthM;
    const cosine = Math.cos(phase);
    const sine = Math.sin(phase);
    const sumHalf = (grow + 1 / grow) / 2;
    const gapHalf = (grow - 1 / grow) / 2;
    const coshRe = sumHalf * cosine;
    const coshIm = gapHalf * sine;
    const sinhRe = gapHalf * cosine;
    const sinhIm = sumHalf * sine;
    const zRe = medium.impedanceRe[k]! * scale;
    const zIm = medium.impedanceIm[k]! * scale;
    const zSize = zRe * zRe + zIm * zIm;
    const bRe = zRe * sinhRe - zIm * sinhIm;
    const bIm = zRe * sinhIm + zIm * sinhRe;
    const cRe = (sinhRe * zRe + sinhIm * zIm) / zSize;
    const cIm = (sinhIm * zRe - sinhRe * zIm) / zSize;
    const v0 = vRe[k]!;
    const v1 = vIm[k]!;
    const i0 = iRe[k]!;
    const i1 = iIm[k]!;
    vRe[k] = coshRe * v0 - coshIm * v1 + bRe * i0 - bIm * i1;
    vIm[k] = coshRe * v1 + coshIm * v0 + bRe * i1 + bIm * i0;
    iRe[k] = cRe * v0 - cIm * v1 + coshRe * i0 - coshIm * i1;
    iIm[k] = cRe * v1 + cIm * v0 + coshRe * i1 + coshIm * i0;
  }
}

function passSeries(resistanceOhm: number, inductanceH: number, frequencyHz: Float64Array, at: Termination) {
  for (let k = 0; k < frequencyHz.length; k++) {
    const reactance = 2 * Math.PI * frequencyHz[k]! * inductanceH;
    const i0 = at.current.re[k]!;
    const i1 = at.current.im[k]!;
    at.voltage.re[k]! += resistanceOhm * i0 - reactance * i1;
    at.voltage.im[k]! += resistanceOhm * i1 + reactance * i0;
  }
}

function passShunt(conductanceS: number, capacitanceF: number, frequencyHz: Float64Array, at: Termination) {
  for (let k = 0; k < frequencyHz.length; k++) {
    const susceptance = 2 * Math.PI * frequencyHz[k]! * capacitanceF;
    const v0 = at.voltage.re[k]!;
    const v1 = at.voltage.im[k]!;
    at.current.re[k]! += conductanceS * v0 - susceptance * v1;
    at.current.im[k]! += conductanceS * v1 + susceptance * v0;
  }
}

/** to += a·b at each frequency. */
function addProduct(a: Spectrum, b: Spectrum, to: Spectrum) {
  for (let k = 0; k < to.re.length; k++) {
    to.re[k]! += a.re[k]! * b.re[k]! - a.im[k]! * b.im[k]!;
    to.im[k]! += a.re[k]! * b.im[k]! + a.im[k]! * b.re[k]!;
  }
}
