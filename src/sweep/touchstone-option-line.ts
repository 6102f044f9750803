/** The option line of a Touchstone file: frequency unit, parameter, number format, reference. */
import { readNumber } from './number-scan.ts';
import type { FileProblem } from './problem-list.ts';

export type NetworkParameter = 's' | 'y' | 'z' | 'g' | 'h';

/** How a complex number is written as two: real and imaginary, magnitude and degrees, dB and degrees. */
export type NumberFormat = 'ri' | 'ma' | 'db';

export type TouchstoneOptions = {
  /** Power of ten of the frequency unit: 0, 3, 6 or 9. */
  readonly frequencyExponent: number;
  readonly parameter: NetworkParameter;
  readonly format: NumberFormat;
  /** One reference for all ports, or one for each. */
  readonly referenceOhm: readonly number[];
};

/** What a lone `#` means. @source references.md section 7: GHz S MA R 50. */
const DEFAULT_OPTIONS: TouchstoneOptions = {
  frequencyExponent: 9,
  parameter: 's',
  format: 'ma',
  referenceOhm: [50],
};

const FREQUENCY_EXPONENTS: ReadonlyMap<string, number> = new Map([
  ['hz', 0],
  ['khz', 3],
  ['mhz', 6],
  ['ghz', 9],
]);
const PARAMETERS: ReadonlySet<string> = new Set(['s', 'y', 'z', 'g', 'h']);
const FORMATS: ReadonlySet<string> = new Set(['ri', 'ma', 'db']);

const EXAMPLE = 'write it like "# MHz S RI R 50"';

/**
 * Reads the text of an option line, `#` included. Fields stand in any order, in any case; a missing one takes its
 * default; one or more reference values follow their `R`.
 *
 * @returns The options, or the first problem.
 * @source references.md section 7, rows on the option line (Touchstone 1.1; several R values: 2.1).
 */
export function readOptionLine(text: string, line: number): TouchstoneOptions | FileProblem {
  const fields = text
    .slice(text.indexOf('#') + 1)
    .split(/\s+/)
    .filter(Boolean);
  let { frequencyExponent, parameter, format, referenceOhm } = DEFAULT_OPTIONS;
  const seen = new Set<string>();
  for (let i = 0; i < fields.length; i++) {
    const field = fields[i]!.toLowerCase();
    const kind = kindOf(field);
    if (kind === null) return unknownField(fields[i]!, line);
    if (seen.has(kind)) return optionProblem(line, `gives the ${kind} twice`, fields[i]!, EXAMPLE);
    seen.add(kind);
    if (kind === 'frequency unit') frequencyExponent = FREQUENCY_EXPONENTS.get(field)!;
    else if (kind === 'parameter') parameter = field as NetworkParameter;
    else if (kind === 'format') format = field as NumberFormat;
    else {
      const values: number[] = [];
      while (i + 1 < fields.length && kindOf(fields[i + 1]!.toLowerCase()) === null) {
        const value = readNumber(fields[++i]!);
        if (!(value > 0)) {
          return optionProblem(
            line,
            'has a reference that is no positive number of ohms',
            fields[i]!,
            EXAMPLE,
          );
        }
        values.push(value);
      }
      if (values.length === 0) return optionProblem(line, 'has an R without a value after it', 'R', EXAMPLE);
      referenceOhm = values;
    }
  }
  return { frequencyExponent, parameter, format, referenceOhm };
}

function kindOf(field: string): 'frequency unit' | 'parameter' | 'format' | 'reference' | null {
  if (FREQUENCY_EXPONENTS.has(field)) return 'frequency unit';
  if (PARAMETERS.has(field)) return 'parameter';
  if (FORMATS.has(field)) return 'format';
  return field === 'r' ? 'reference' : null;
}

function unknownField(field: string, line: number): FileProblem {
  if (/^[a-z]{0,2}hz$/i.test(field)) {
    return optionProblem(line, 'has a frequency unit that is none of Hz, kHz, MHz, GHz', field, EXAMPLE);
  }
  if (/^r[0-9.]+$/i.test(field)) {
    return optionProblem(line, 'has no blank between R and its value', field, EXAMPLE);
  }
  return optionProblem(line, 'has a field in its option line that has no meaning there', field, EXAMPLE);
}

function optionProblem(line: number, what: string, found: string, mend: string): FileProblem {
  return { code: 'touchstone-option-line', line, what, found, mend };
}
