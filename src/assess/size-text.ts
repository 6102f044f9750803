/** What an echo is, in words: its kind and its size with the doubt in it. */
import type { EchoKind, EchoValue, Stretch } from '../locate/echo.ts';

const KIND_TEXT: Readonly<Record<EchoKind, string>> = {
  open: 'open',
  short: 'short',
  termination: 'termination',
  'series-resistance': 'series resistance',
  'shunt-leakage': 'shunt leakage',
  'series-inductance': 'series inductance',
  'shunt-capacitance': 'shunt capacitance',
  'impedance-step': 'impedance step',
  joint: 'joint',
  unresolved: 'fault of unresolved kind',
};

const UNIT_TEXT: Readonly<Record<EchoValue['unit'], string>> = {
  ohm: 'Ω',
  nH: 'nH',
  pF: 'pF',
  dB: 'dB return loss',
};

/** "series resistance 9.1 ± 0.6 Ω"; the kind alone where no size is known. */
export function sizeText(kind: EchoKind, value: EchoValue | null): string {
  const name = KIND_TEXT[kind];
  if (value === null || !Number.isFinite(value.value)) return name;
  return `${name} ${withSigma(value.value, value.sigma)} ${UNIT_TEXT[value.unit]}`;
}

/** "wet cable over 8.0 m, 1.4 ± 0.1 dB more loss one way". */
export function stretchText(stretch: Stretch): string {
  const name = stretch.kind === 'wet' ? 'wet cable' : 'another cable';
  const over = `${name} over ${(stretch.toM - stretch.fromM).toFixed(1)} m`;
  const excess = withSigma(stretch.excessLossDb, stretch.excessLossSigmaDb);
  return `${over}, ${excess} dB more loss than described, one way at band centre`;
}

/** A number with as many decimals as its doubt deserves. */
function withSigma(value: number, sigma: number | null): string {
  if (sigma === null || !Number.isFinite(sigma) || sigma <= 0) return value.toPrecision(2);
  const decimals = Math.min(4, Math.max(0, Math.ceil(-Math.log10(2 * sigma))));
  return `${value.toFixed(decimals)} ± ${sigma.toFixed(decimals)}`;
}
