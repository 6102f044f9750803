/** A number with its unit and sensible digits, as it is said on site. */

/** Real minus sign, as wide as a plus. */
export const MINUS = '−';

/** Metres in one foot, exact. @source International yard and pound agreement, 1959. */
const METRES_PER_FOOT = 0.3048;

/** Units of length (and of temperature) on the screen. */
export type Units = 'm' | 'ft';

/** Text for what is not known. */
const UNKNOWN = '–';

/** Fixed decimals with a real minus sign; no "−0.0"; "–" when not finite. */
export function fixedText(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return UNKNOWN;
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? MINUS + text : text;
}

/** About `digits` significant digits without an exponent: 9.1, 412, 0.062. */
export function digitsText(value: number, digits: number): string {
  if (!Number.isFinite(value)) return UNKNOWN;
  if (value === 0) return '0';
  const magnitude = Math.floor(Math.log10(Math.abs(value)));
  return fixedText(value, Math.min(6, Math.max(0, digits - 1 - magnitude)));
}

/** Shown units of length in one metre. */
export function lengthPerMetre(units: Units): number {
  return units === 'ft' ? 1 / METRES_PER_FOOT : 1;
}

/**
 * A length with its unit: "48.02 m", "157.5 ft".
 *
 * @param decimals In metres; feet show one fewer, being about three times finer. Default 2.
 */
export function lengthText(lengthM: number, units: Units, decimals = 2): string {
  const shown = lengthM * lengthPerMetre(units);
  return `${fixedText(shown, units === 'ft' ? Math.max(0, decimals - 1) : decimals)} ${units}`;
}

/** A length with its 1σ: "48.02 m ±0.07". Decimals follow the uncertainty. */
export function lengthWithSigmaText(lengthM: number, sigmaM: number, units: Units): string {
  const perMetre = lengthPerMetre(units);
  const decimals = decimalsFor(sigmaM * perMetre);
  const value = fixedText(lengthM * perMetre, decimals);
  return Number.isFinite(sigmaM)
    ? `${value} ${units} ±${fixedText(sigmaM * perMetre, decimals)}`
    : `${value} ${units}`;
}

/** Where a length lies 95 times in 100: "between" "47.90 m and 48.10 m". Decimals follow the uncertainty. */
export function lengthSpanText(lengthM: number, sigmaM: number, units: Units): string {
  const perMetre = lengthPerMetre(units);
  const decimals = decimalsFor(sigmaM * perMetre);
  const ends = [lengthM - 2 * sigmaM, lengthM + 2 * sigmaM];
  return ends.map((endM) => `${fixedText(endM * perMetre, decimals)} ${units}`).join(' and ');
}

/** A size of reflection from a positive return loss: 27.1 becomes "−27.1 dB". */
export function levelText(returnLossDb: number): string {
  return `${fixedText(-returnLossDb, 1)} dB`;
}

/** Decibels as they are: "−27.1 dB". */
export function decibelText(valueDb: number): string {
  return `${fixedText(valueDb, 1)} dB`;
}

/** Ohms with one decimal below 100: "50.3 Ω", "412 Ω". */
export function ohmText(valueOhm: number): string {
  return `${fixedText(valueOhm, Math.abs(valueOhm) < 99.95 ? 1 : 0)} Ω`;
}

/** A share as a percentage: 0.973 becomes "97 %". Never rounds doubt away: at most 99 % below 1. */
export function percentText(share: number): string {
  if (!Number.isFinite(share)) return UNKNOWN;
  const percent = Math.round(share * 100);
  return `${share < 1 ? Math.min(99, percent) : percent} %`;
}

/** How sure an estimate is, as a percentage; none is surer than 99 %. */
export function sureText(confidence: number): string {
  return percentText(Math.min(0.99, confidence));
}

/** Degrees Celsius, or Fahrenheit where feet are shown: "12 °C", "54 °F". */
export function temperatureText(temperatureC: number, units: Units): string {
  return units === 'ft' ? `${fixedText(temperatureC * 1.8 + 32, 0)} °F` : `${fixedText(temperatureC, 0)} °C`;
}

/** A frequency in the unit that suits it: "900 MHz", "2.7 GHz". */
export function frequencyText(frequencyHz: number): string {
  const [scale, unit] = frequencyUnit(frequencyHz);
  return `${shortNumber(frequencyHz / scale)} ${unit}`;
}

/** A span of frequencies under one unit: "2–2700 MHz". */
export function frequencySpanText(startHz: number, stopHz: number): string {
  const [scale, unit] = frequencyUnit(startHz < 1e9 && stopHz >= 1e6 ? 1e6 : startHz);
  return `${shortNumber(startHz / scale)}–${shortNumber(stopHz / scale)} ${unit}`;
}

/** Up to five significant digits, trailing zeros dropped. */
function shortNumber(value: number): string {
  if (!Number.isFinite(value)) return UNKNOWN;
  const text = String(Number(value.toPrecision(5)));
  return text.startsWith('-') ? MINUS + text.slice(1) : text;
}

function frequencyUnit(frequencyHz: number): readonly [number, string] {
  const size = Math.abs(frequencyHz);
  if (size >= 1e9) return [1e9, 'GHz'];
  if (size >= 1e6) return [1e6, 'MHz'];
  if (size >= 1e3) return [1e3, 'kHz'];
  return [1, 'Hz'];
}

/** Decimals that show an uncertainty with one digit, or two when it begins with 1; from 0 to 3. */
function decimalsFor(sigma: number): number {
  if (!(sigma > 0) || !Number.isFinite(sigma)) return 2;
  const magnitude = Math.floor(Math.log10(sigma));
  const leading = Math.floor(sigma / 10 ** magnitude);
  return Math.min(3, Math.max(0, -magnitude + (leading === 1 ? 1 : 0)));
}
