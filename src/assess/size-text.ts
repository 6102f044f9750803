/** What an echo or a stretch is, in words: its kind and its size with the doubt in it. */
import type { EchoKind, EchoValue, Stretch } from '../locate/echo.ts';
import { inMetres, type LengthWords } from './place-text.ts';

export const KIND_WORDS: Readonly<Record<EchoKind, string>> = {
  open: 'open',
  short: 'short',
  termination: 'termination',
  'series-resistance': 'series resistance',
  'shunt-leakage': 'shunt leakage',
  'series-inductance': 'series inductance',
  'shunt-capacitance': 'shunt capacitance',
  'impedance-step': 'impedance step',
  joint: 'joint',
  unresolved: 'unresolved',
};

const UNIT_TEXT: Readonly<Record<EchoValue['unit'], string>> = {
  ohm: 'Ω',
  nH: 'nH',
  pF: 'pF',
  z0: 'of the guide’s own impedance',
  dB: 'dB return loss',
};

/**
 * "series resistance 9.1 ± 0.6 Ω"; the kind alone where no size is known. Of a fault whose kind could not be told
 * the size of the likeliest kind is only compared with: "fault of unresolved kind, like 0.50 ± 0.10 Ω".
 */
export function sizeText(kind: EchoKind, value: EchoValue | null): string {
  const unresolved = kind === 'unresolved';
  const name = unresolved ? 'fault of unresolved kind' : KIND_WORDS[kind];
  if (value === null || !Number.isFinite(value.value)) return name;
  return `${name}${unresolved ? ', like' : ''} ${withSigma(value.value, value.sigma)} ${UNIT_TEXT[value.unit]}`;
}

/** "wet cable over 8.0 m, 1.42 ± 0.12 dB more loss than described, one way at band centre". */
export function stretchText(stretch: Stretch, lengthWords: LengthWords = inMetres): string {
  const name = stretch.kind === 'wet' ? 'wet cable' : 'another cable';
  const over = `${name} over ${lengthWords(stretch.toM - stretch.fromM)}`;
  const excess = withSigma(Math.abs(stretch.excessLossDb), stretch.excessLossSigmaDb);
  const more = stretch.excessLossDb < 0 ? 'less' : 'more';
  return `${over}, ${excess} dB ${more} loss than described, one way at band centre`;
}

/** A number with its doubt, which shows one digit, or two when it begins with 1; two digits where it is not known. */
function withSigma(value: number, sigma: number | null): string {
  if (sigma === null || !Number.isFinite(sigma) || sigma <= 0) return twoDigits(value);
  const magnitude = Math.floor(Math.log10(sigma));
  const beginsWithOne = sigma < 2 * 10 ** magnitude;
  const decimals = Math.min(4, Math.max(0, (beginsWithOne ? 1 : 0) - magnitude));
  return `${value.toFixed(decimals)} ± ${sigma.toFixed(decimals)}`;
}

/** Two significant digits without an exponent. */
function twoDigits(value: number): string {
  if (value === 0) return '0';
  const magnitude = Math.floor(Math.log10(Math.abs(value)));
  return value.toFixed(Math.min(6, Math.max(0, 1 - magnitude)));
}
