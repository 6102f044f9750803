/** Faults as they are asked for on the command line: `series-resistance:9ohm@joint3`. */
import { nearestWords } from '../line/nearest-word.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import {
  parseCapacitancePF,
  parseInductanceNH,
  parseLengthM,
  parseResistanceOhm,
} from '../sweep/number-text.ts';

/** Where a fault sits: at a joint counted from 1 (the port), or at a distance. */
export type FaultPlace =
  | { readonly at: 'joint'; readonly joint: number }
  | { readonly at: 'distance'; readonly distanceM: number };

export type LumpedFaultKind =
  | 'series-resistance'
  | 'shunt-leakage'
  | 'series-inductance'
  | 'shunt-capacitance';

export type LumpedFault =
  /** `value` in Ω, Ω, H or F by kind. */
  | { readonly kind: LumpedFaultKind; readonly value: number; readonly place: FaultPlace }
  /** r, g, x or b by kind, relative to the line it sits in; x and b at the middle of the swept band. */
  | { readonly kind: LumpedFaultKind; readonly normalised: number; readonly place: FaultPlace };

export type Fault =
  | LumpedFault
  | { readonly kind: 'open' | 'short'; readonly place: FaultPlace }
  /** A stretch of another impedance. */
  | {
      readonly kind: 'section';
      readonly impedanceOhm: number;
      readonly fromM: number;
      readonly toM: number;
    }
  /** A stretch with water in it: dielectric loss and permittivity times these factors. */
  | {
      readonly kind: 'wet';
      readonly k2Factor: number;
      readonly permittivityFactor: number;
      readonly fromM: number;
      readonly toM: number;
    };

/** Each form once, as help and messages show it. */
export const FAULT_FORMS: Readonly<Record<Fault['kind'], string>> = {
  'series-resistance': 'series-resistance:9ohm@joint3',
  'shunt-leakage': 'shunt-leakage:400ohm@12.5m',
  'series-inductance': 'series-inductance:1.5nH@joint2',
  'shunt-capacitance': 'shunt-capacitance:0.6pF@31.4m',
  section: 'section:75ohm@20m-23m',
  open: 'open@17.4m',
  short: 'short@17.4m',
  wet: 'wet:k2x12,er1.03@20m-28m',
};

/** The forms without a unit, for a guide above all, which has no ohms of its own. */
export const NORMALISED_FORMS: Readonly<Record<LumpedFaultKind, string>> = {
  'series-resistance': 'series-resistance:r0.2@joint3',
  'shunt-leakage': 'shunt-leakage:g0.2@12.5m',
  'series-inductance': 'series-inductance:x0.2@joint2',
  'shunt-capacitance': 'shunt-capacitance:b0.2@31.4m',
};

/** Letter of a normalised size. */
const LETTERS: Readonly<Record<LumpedFaultKind, string>> = {
  'series-resistance': 'r',
  'shunt-leakage': 'g',
  'series-inductance': 'x',
  'shunt-capacitance': 'b',
};
/** Largest normalised size: far beyond it a fault is an open or a short. */
const LARGEST_NORMALISED = 1000;

/** True for a fault at one place that has a size. */
export function isLump(fault: Fault): fault is LumpedFault {
  return 'value' in fault || 'normalised' in fault;
}

/** Largest factor that a wet stretch may ask for: beyond it nothing comes back at all. */
const LARGEST_WET_FACTOR = 10_000;

/** Reads one `KIND:SIZE@PLACE`. */
export function parseFault(text: string): Outcome<Fault> {
  const shown = cleanForDisplay(text, 80);
  const match = /^([a-z0-9-]+)(?::([^@]*))?@(.*)$/iu.exec(text.trim());
  if (!match) return fail(wrongFault(shown, 'a fault is KIND:SIZE@PLACE', FAULT_FORMS['series-resistance']));
  const kind = (match[1] ?? '').toLowerCase();
  if (!isFaultKind(kind)) {
    const kinds = Object.keys(FAULT_FORMS);
    const [near] = nearestWords(kind, kinds);
    return fail({
      code: 'fault-kind',
      what: `there is no fault of the kind "${cleanForDisplay(kind, 40)}"`,
      found: shown,
      mend: near === undefined ? `the kinds are ${kinds.join(', ')}` : `did you mean "${near}"?`,
    });
  }
  const size = match[2];
  const place = match[3] ?? '';
  const bare = /^([a-z])(\d.*)$/iu.exec((size ?? '').trim());
  if (bare && isLumpedKind(kind)) return normalised(kind, bare[1] ?? '', bare[2] ?? '', place, shown);
  switch (kind) {
    case 'series-resistance':
    case 'shunt-leakage':
      return lumped(kind, parseResistanceOhm(size ?? ''), 1, place, shown);
    case 'series-inductance':
      return lumped(kind, parseInductanceNH(size ?? ''), 1e-9, place, shown);
    case 'shunt-capacitance':
      return lumped(kind, parseCapacitancePF(size ?? ''), 1e-12, place, shown);
    case 'open':
    case 'short': {
      if (size !== undefined) return fail(wrongFault(shown, `an ${kind} has no size`, FAULT_FORMS[kind]));
      const at = parsePlace(place, shown, kind);
      return at.ok ? succeed({ kind, place: at.value }) : at;
    }
    case 'section': {
      const ohm = parseResistanceOhm(size ?? '');
      if (!ohm.ok) return ohm;
      if (ohm.value === 0) return fail(wrongFault(shown, 'an impedance is above 0 Ω', FAULT_FORMS[kind]));
      const span = parseSpan(place, shown, kind);
      return span.ok ? succeed({ kind, impedanceOhm: ohm.value, ...span.value }) : span;
    }
    case 'wet':
      return wet(size ?? '', place, shown);
  }
}

function lumped(
  kind: LumpedFaultKind,
  size: Outcome<number>,
  unit: number,
  place: string,
  shown: string,
): Outcome<Fault> {
  if (!size.ok) return size;
  if (kind === 'shunt-leakage' && size.value === 0)
    return fail(wrongFault(shown, 'a leakage of 0 Ω is a short', FAULT_FORMS.short));
  const at = parsePlace(place, shown, kind);
  return at.ok ? succeed({ kind, value: size.value * unit, place: at.value }) : at;
}

/** A size without a unit: its letter and a number, `x0.2`. */
function normalised(
  kind: LumpedFaultKind,
  letter: string,
  digits: string,
  place: string,
  shown: string,
): Outcome<Fault> {
  const wrong = (what: string): Outcome<Fault> =>
    fail(wrongFault(shown, what, NORMALISED_FORMS[kind], FAULT_FORMS[kind]));
  if (letter.toLowerCase() !== LETTERS[kind])
    return wrong(`${kind.replace('-', ' ')} without a unit is "${LETTERS[kind]}" and a number`);
  const size = /^\d+(?:\.\d+)?$/u.test(digits) ? Number(digits) : Number.NaN;
  if (!(size > 0 && size <= LARGEST_NORMALISED))
    return wrong(`"${LETTERS[kind]}" is a number above 0 and at most ${LARGEST_NORMALISED}`);
  const at = parsePlace(place, shown, kind);
  return at.ok ? succeed({ kind, normalised: size, place: at.value }) : at;
}

function wet(size: string, place: string, shown: string): Outcome<Fault> {
  let k2Factor = 1;
  let permittivityFactor = 1;
  for (const part of size.split(',')) {
    const match = /^(k2x|er)(\d+(?:\.\d+)?)$/u.exec(part.trim().toLowerCase());
    const factor = Number(match?.[2]);
    if (!match || !(factor >= 1 && factor <= LARGEST_WET_FACTOR))
      return fail(wrongFault(shown, 'a wet stretch gives factors of 1 or more', FAULT_FORMS.wet));
    if (match[1] === 'er') permittivityFactor = factor;
    else k2Factor = factor;
  }
  const span = parseSpan(place, shown, 'wet');
  return span.ok ? succeed({ kind: 'wet', k2Factor, permittivityFactor, ...span.value }) : span;
}

function parsePlace(text: string, shown: string, kind: Fault['kind']): Outcome<FaultPlace> {
  const joint = /^joint\s*(\d{1,4})$/iu.exec(text.trim());
  if (joint) {
    const index = Number(joint[1]);
    return index >= 1
      ? succeed({ at: 'joint', joint: index })
      : fail(wrongFault(shown, 'joints are counted from 1, the one at the port', FAULT_FORMS[kind]));
  }
  const distance = parseLengthM(text);
  return distance.ok
    ? succeed({ at: 'distance', distanceM: distance.value })
    : fail(wrongFault(shown, 'a place is a joint or a distance with its unit', FAULT_FORMS[kind]));
}

function parseSpan(
  text: string,
  shown: string,
  kind: 'section' | 'wet',
): Outcome<{ readonly fromM: number; readonly toM: number }> {
  const [first, second, ...more] = text.split('-');
  const from = parseLengthM(first ?? '');
  const to = parseLengthM(second ?? '');
  if (!from.ok || !to.ok || more.length > 0 || !(to.value > from.value))
    return fail(wrongFault(shown, 'a stretch goes from one distance to a larger one', FAULT_FORMS[kind]));
  return succeed({ fromM: from.value, toM: to.value });
}

function isFaultKind(word: string): word is Fault['kind'] {
  return Object.hasOwn(FAULT_FORMS, word);
}

function isLumpedKind(kind: Fault['kind']): kind is LumpedFaultKind {
  return Object.hasOwn(LETTERS, kind);
}

function wrongFault(found: string, what: string, ...examples: readonly string[]): Problem {
  return { code: 'fault-text', what, found, mend: `write it like ${examples.join(' or ')}` };
}
