/**
 * Numbers with units as people write them on a command line or in a field: `46m`, `150 ft`, `1.7GHz`, `54F`.
 * Each reader answers with SI-like units of our own choice, or says how to write it. The counterparts that write
 * quantities are in `quantity-format.ts`.
 */
import { METRES_PER_FOOT } from '../line/constants.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from './clean-text.ts';
import { readNumber } from './number-scan.ts';

/** Longest text taken for one quantity, characters. */
const LONGEST_QUANTITY = 60;

/** Most points that a sweep range may ask for. */
const MOST_SWEEP_POINTS = 1_000_000;

/** A sweep that an instrument could be set to. */
export type SweepRange = { readonly startHz: number; readonly stopHz: number; readonly points: number };

/** What a unit does to the number before it: times 10^exponent exactly, plus an offset, then times a factor. */
type Unit = { readonly exponent: number; readonly offset?: number; readonly factor?: number };

/** How one kind of quantity is written. */
type Kind = {
  readonly name: string;
  readonly units: ReadonlyMap<string, Unit>;
  readonly example: string;
  /** Unit of a bare number; null where a unit must be given. */
  readonly bare: string | null;
  readonly least: number;
  readonly leastText: string;
};

const LENGTH_UNITS = units([
  [['m', 'meter', 'meters', 'metre', 'metres'], { exponent: 0 }],
  [['km'], { exponent: 3 }],
  [['cm'], { exponent: -2 }],
  [['mm'], { exponent: -3 }],
  [['ft', 'foot', 'feet', "'", '′'], { exponent: 0, factor: METRES_PER_FOOT }],
  [['in', 'inch', 'inches', '"', '″'], { exponent: 0, factor: METRES_PER_FOOT / 12 }],
]);

const FREQUENCY_UNITS = units([
  [['hz'], { exponent: 0 }],
  [['khz', 'k'], { exponent: 3 }],
  [['mhz', 'm'], { exponent: 6 }],
  [['ghz', 'g'], { exponent: 9 }],
]);

const TEMPERATURE_UNITS = units([
  [['c', '°c', 'degc', 'celsius'], { exponent: 0 }],
  [['f', '°f', 'degf', 'fahrenheit'], { exponent: 0, offset: -32, factor: 5 / 9 }],
]);

const RESISTANCE_UNITS = units([
  [['ohm', 'ohms', 'ω', 'r'], { exponent: 0 }],
  [['kohm', 'kohms', 'kω', 'k'], { exponent: 3 }],
]);

const INDUCTANCE_UNITS = units([
  [['nh'], { exponent: 0 }],
  [['ph'], { exponent: -3 }],
  [['uh', 'µh', 'μh'], { exponent: 3 }],
]);

const CAPACITANCE_UNITS = units([
  [['pf'], { exponent: 0 }],
  [['ff'], { exponent: -3 }],
  [['nf'], { exponent: 3 }],
]);

const TIME_UNITS = units([
  [['s'], { exponent: 0 }],
  [['us', 'µs', 'μs'], { exponent: -6 }],
  [['ns'], { exponent: -9 }],
  [['ps'], { exponent: -12 }],
]);

const LEVEL_UNITS = units([[['db'], { exponent: 0 }]]);

/**
 * Length in metres: `46m`, `150ft`, `46 m`, `150 feet`, `20cm`.
 *
 * @param options.defaultUnit Unit of a bare number; without it a bare number is refused.
 * @param options.signed Take lengths below zero too (an offset).
 */
export function parseLengthM(
  text: string,
  options: { readonly defaultUnit?: 'm' | 'ft'; readonly signed?: boolean } = {},
): Outcome<number> {
  return parseQuantity(text, {
    name: 'length',
    units: LENGTH_UNITS,
    example: '46m or 150ft',
    bare: options.defaultUnit ?? null,
    least: options.signed ? Number.NEGATIVE_INFINITY : 0,
    leastText: '0 m',
  });
}

/** Frequency in Hz: `1.7GHz`, `900MHz`, `2e9` (a bare number is in Hz). */
export function parseFrequencyHz(text: string): Outcome<number> {
  return parseQuantity(text, {
    name: 'frequency',
    units: FREQUENCY_UNITS,
    example: '1.7GHz or 900MHz',
    bare: 'hz',
    least: 0,
    leastText: '0 Hz',
  });
}

/**
 * Temperature in °C: `12`, `12C`, `54F`.
 *
 * @param options.defaultUnit Unit of a bare number, °C unless given.
 */
export function parseTemperatureC(
  text: string,
  options: { readonly defaultUnit?: 'C' | 'F' } = {},
): Outcome<number> {
  return parseQuantity(text, {
    name: 'temperature',
    units: TEMPERATURE_UNITS,
    example: '12C or 54F',
    bare: options.defaultUnit === 'F' ? 'f' : 'c',
    least: -273.15,
    leastText: 'absolute zero, −273.15 °C',
  });
}

/** Resistance in Ω: `9ohm`, `400 Ω`, `1.2kohm`. */
export function parseResistanceOhm(text: string): Outcome<number> {
  return parseQuantity(text, positive('resistance', RESISTANCE_UNITS, '9ohm', '0 Ω'));
}

/** Inductance in nH: `1.5nH`. */
export function parseInductanceNH(text: string): Outcome<number> {
  return parseQuantity(text, positive('inductance', INDUCTANCE_UNITS, '1.5nH', '0 nH'));
}

/** Capacitance in pF: `0.6pF`. */
export function parseCapacitancePF(text: string): Outcome<number> {
  return parseQuantity(text, positive('capacitance', CAPACITANCE_UNITS, '0.6pF', '0 pF'));
}

/** Delay in seconds: `30ps`, `0.1ns`; may be below zero. */
export function parseDelayS(text: string): Outcome<number> {
  const kind = positive('delay', TIME_UNITS, '30ps', '');
  return parseQuantity(text, { ...kind, least: Number.NEGATIVE_INFINITY });
}

/** Level in dB: `-70`, `-70dB`. */
export function parseLevelDb(text: string): Outcome<number> {
  const kind = positive('level', LEVEL_UNITS, '-70dB', '');
  return parseQuantity(text, { ...kind, bare: 'db', least: Number.NEGATIVE_INFINITY });
}

/**
 * What to sweep: `2MHz-2700MHz:1350` is start, stop and number of points. A start without a unit takes the stop's.
 *
 * @returns Start ≥ 0, stop above start, 2 to 1 000 000 points.
 */
export function parseSweepRange(text: string): Outcome<SweepRange> {
  const parts = /^(.{1,60}?)(?<!e)[-–](.{1,60}):(.{1,20})$/i.exec(tidy(text));
  const [, startText = '', stopText = '', pointsText = ''] = parts ?? [];
  if (!parts) return fail(rangeProblem(text, 'is no sweep range'));
  const unit = /[a-z]+\s*$/i.exec(stopText)?.[0] ?? '';
  const start = parseFrequencyHz(Number.isNaN(readNumber(startText.trim())) ? startText : startText + unit);
  const stop = parseFrequencyHz(stopText);
  if (!start.ok || !stop.ok) {
    return fail(...(start.ok ? [] : start.problems), ...(stop.ok ? [] : stop.problems));
  }
  const points = readNumber(pointsText.trim());
  if (!Number.isInteger(points) || points < 2 || points > MOST_SWEEP_POINTS) {
    return fail(rangeProblem(text, `must have a whole number of points from 2 to ${MOST_SWEEP_POINTS}`));
  }
  if (!(start.value < stop.value)) return fail(rangeProblem(text, 'must stop above its start'));
  return succeed({ startHz: start.value, stopHz: stop.value, points });
}

function parseQuantity(text: string, kind: Kind): Outcome<number> {
  const tidied = tidy(text);
  const numberText = /^[-+]?[0-9.]+(?:e[-+]?[0-9]+)?/i.exec(tidied)?.[0] ?? '';
  const rest = tidied.slice(numberText.length).trim();
  if (/^[-+]?[0-9.]*,[0-9]/.test(tidied)) {
    return fail(
      quantityProblem(text, kind, `the ${kind.name} has a comma in its number`, 'write a decimal point'),
    );
  }
  if (tidied.length > LONGEST_QUANTITY || Number.isNaN(readNumber(numberText))) {
    return fail(quantityProblem(text, kind, `this is no ${kind.name}`, 'write a number and its unit'));
  }
  if (rest === '' && kind.bare === null) {
    return fail(
      quantityProblem(text, kind, `the ${kind.name} has no unit`, 'write the unit after the number'),
    );
  }
  const unit = kind.units.get(rest === '' ? (kind.bare ?? '') : rest.toLowerCase());
  if (!unit) {
    return fail(
      quantityProblem(text, kind, `the unit is not one of ${unitNames(kind)}`, 'use one of these units'),
    );
  }
  const figure = readNumber(numberText, 0, numberText.length, unit.exponent);
  const value = (figure + (unit.offset ?? 0)) * (unit.factor ?? 1);
  if (!Number.isFinite(value)) {
    return fail(quantityProblem(text, kind, `the ${kind.name} is too large a number`, 'write a smaller one'));
  }
  if (value < kind.least) {
    return fail(
      quantityProblem(text, kind, `the ${kind.name} lies below ${kind.leastText}`, 'write a larger one'),
    );
  }
  return succeed(value);
}

/** Trimmed, with the typographer's minus and blanks as the keyboard's. */
function tidy(text: string): string {
  return text
    .slice(0, 4 * LONGEST_QUANTITY)
    .replace(/−/g, '-')
    .replace(/\s+/g, ' ')
    .trim();
}

function positive(name: string, table: ReadonlyMap<string, Unit>, example: string, leastText: string): Kind {
  return { name, units: table, example, bare: null, least: 0, leastText };
}

function units(rows: readonly (readonly [readonly string[], Unit])[]): ReadonlyMap<string, Unit> {
  return new Map(rows.flatMap(([names, unit]) => names.map((name) => [name, unit] as const)));
}

function unitNames(kind: Kind): string {
  return [...kind.units.keys()].filter((name) => /^[a-z]+$/.test(name)).join(', ');
}

function quantityProblem(text: string, kind: Kind, what: string, mend: string): Problem {
  const found = cleanForDisplay(text, LONGEST_QUANTITY);
  return { code: `${kind.name}-text`, what, found, mend: `${mend}, for example ${kind.example}` };
}

function rangeProblem(text: string, what: string): Problem {
  return {
    code: 'sweep-range-text',
    what: `the sweep ${what}`,
    found: cleanForDisplay(text, LONGEST_QUANTITY),
    mend: 'write start, stop and number of points, for example 2MHz-2700MHz:1350',
  };
}
