/** Quantities as text that `number-text.ts` reads back. */
import { METRES_PER_FOOT } from '../line/constants.ts';
import { readNumber } from './number-scan.ts';
import type { SweepRange } from './number-text.ts';

/** Digits that a frequency is shown with: enough for any channel raster, no more than a line can spare. */
const FREQUENCY_DIGITS = 7;

/** Frequency units, largest first, with their power of ten. */
const FREQUENCY_STEPS: readonly (readonly [string, number])[] = [
  ['GHz', 9],
  ['MHz', 6],
  ['kHz', 3],
  ['Hz', 0],
];

/**
 * Frequency in the largest unit that leaves a figure of at least 1: `1.7 GHz`, `40.25 MHz`, `0 Hz`.
 *
 * @param digits Significant digits, 7 unless given; trailing zeros are dropped.
 */
export function formatFrequency(frequencyHz: number, digits = FREQUENCY_DIGITS): string {
  const [unit, exponent] = FREQUENCY_STEPS.find(([, e]) => Math.abs(frequencyHz) >= Number(`1e${e}`)) ?? [
    'Hz',
    0,
  ];
  return `${trimmed(shifted(frequencyHz, -exponent), digits)} ${unit}`;
}

/** Frequency in full: the shortest text that `parseFrequencyHz` reads back to the very same number. */
export function formatFrequencyExactly(frequencyHz: number): string {
  for (const [unit, exponent] of FREQUENCY_STEPS) {
    const figure = String(shifted(frequencyHz, -exponent));
    const same = readNumber(figure, 0, figure.length, exponent) === frequencyHz;
    if (same && Math.abs(frequencyHz) >= Number(`1e${exponent}`)) return `${figure}${unit}`;
  }
  return `${frequencyHz}Hz`;
}

/** A sweep range in full, as `parseSweepRange` reads it: `2MHz-2700MHz:1350`. */
export function formatSweepRange(range: SweepRange): string {
  const start = formatFrequencyExactly(range.startHz);
  return `${start}-${formatFrequencyExactly(range.stopHz)}:${range.points}`;
}

/**
 * Length for people: `48.02 m` or `157.5 ft`.
 *
 * @param unit Metres are shown to the centimetre, feet to the tenth (about 3 cm), unless `decimals` says otherwise.
 */
export function formatLength(
  lengthM: number,
  unit: 'm' | 'ft' = 'm',
  decimals = unit === 'm' ? 2 : 1,
): string {
  return `${fixed(unit === 'm' ? lengthM : lengthM / METRES_PER_FOOT, decimals)} ${unit}`;
}

/** Temperature for people: `12 °C` or `54 °F`, to a tenth, a trailing zero dropped. */
export function formatTemperature(temperatureC: number, unit: 'C' | 'F' = 'C'): string {
  const figure = unit === 'C' ? temperatureC : (temperatureC * 9) / 5 + 32;
  return `${Number(fixed(figure, 1))} °${unit}`;
}

/** Resistance: `9.1 Ω`, three digits unless given. */
export function formatResistance(resistanceOhm: number, digits = 3): string {
  return `${trimmed(resistanceOhm, digits)} Ω`;
}

/** Inductance: `1.5 nH`, three digits unless given. */
export function formatInductance(inductanceNH: number, digits = 3): string {
  return `${trimmed(inductanceNH, digits)} nH`;
}

/** Capacitance: `0.6 pF`, three digits unless given. */
export function formatCapacitance(capacitancePF: number, digits = 3): string {
  return `${trimmed(capacitancePF, digits)} pF`;
}

/** The number times 10^exponent with a single rounding. */
function shifted(value: number, exponent: number): number {
  const text = String(value);
  return readNumber(text, 0, text.length, exponent);
}

/** Rounded to significant digits, plain notation, no trailing zeros, no minus zero. */
function trimmed(value: number, digits: number): string {
  const rounded = Number(value.toPrecision(digits));
  return rounded === 0 ? '0' : String(rounded);
}

function fixed(value: number, decimals: number): string {
  const text = value.toFixed(decimals);
  return Number(text) === 0 ? (0).toFixed(decimals) : text;
}
