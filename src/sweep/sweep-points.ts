/**
 * Takes the rows of a file one by one and makes the arrays of a sweep, with the rules that hold whatever the format:
 * frequencies rise, repeats are merged and said, nothing that is no reflection gets through.
 */
import type { ComplexArray } from '../numerics/complex.ts';
import type { Notice } from '../outcome.ts';
import { createFloatColumn } from './float-column.ts';
import type { FileProblem, ProblemList } from './problem-list.ts';
import { formatFrequency } from './quantity-format.ts';

/** Highest frequency taken, Hz. Above it a unit is wrong: Hz read as the default GHz lands far higher. */
const HIGHEST_FREQUENCY_HZ = 1e13;

/** Largest |Γ| taken: 180 dB. Beyond it the columns are not what the header says, and squares would overflow. */
export const LARGEST_GAMMA = 1e9;

/** The arrays of a sweep. */
export type SweepPoints = {
  readonly frequencyHz: Float64Array;
  readonly gamma: ComplexArray;
  readonly transmission: ComplexArray | null;
  readonly notices: readonly Notice[];
};

/** Collects rows; `finish` gives the arrays, or null after adding what is wrong to the list of problems. */
export type SweepPointsBuilder = {
  /** One row: line in the file, frequency, reflection, and transmission (ignored unless the builder keeps it). */
  add(line: number, frequencyHz: number, re: number, im: number, throughRe: number, throughIm: number): void;
  /** A row that cannot be one; the same fault on many rows is reported once, with a count. */
  reject(problem: FileProblem): void;
  finish(): SweepPoints | null;
};

/**
 * A builder that reports to `problems`.
 *
 * Rows of one frequency that follow each other (where sweep segments join) become their mean, with a notice that
 * names the first such line and the largest difference. A fault that repeats on many rows is one problem with a count.
 *
 * @param options.transmission Keep the transmission column.
 * @param options.scaleHint What to check when frequencies come out absurd.
 * @source references.md section 7 (frequencies increase; reject or report repeats and drops).
 */
export function createSweepPoints(
  problems: ProblemList,
  options: { readonly transmission: boolean; readonly scaleHint: string },
): SweepPointsBuilder {
  const frequency = createFloatColumn();
  const columns = options.transmission
    ? [0, 1, 2, 3].map(() => createFloatColumn())
    : [0, 1].map(() => createFloatColumn());
  const faults = new Map<string, { problem: FileProblem; more: number }>();
  const repeats = { firstLine: 0, frequencyHz: 0, rows: 0, largest: 0 };
  let rows = 0;
  let last = Number.NEGATIVE_INFINITY;
  let merged = 1;

  function blame(problem: FileProblem): void {
    const known = faults.get(problem.code);
    if (known) known.more++;
    else faults.set(problem.code, { problem, more: 0 });
  }

  function merge(values: readonly number[], line: number, frequencyHz: number): void {
    merged++;
    const at = frequency.length - 1;
    const difference = Math.hypot(values[0]! - columns[0]!.get(at), values[1]! - columns[1]!.get(at));
    if (repeats.rows === 0) Object.assign(repeats, { firstLine: line, frequencyHz });
    repeats.rows++;
    repeats.largest = Math.max(repeats.largest, difference);
    columns.forEach((column, c) => {
      column.set(at, column.get(at) + (values[c]! - column.get(at)) / merged);
    });
  }

  return {
    add(line, frequencyHz, re, im, throughRe, throughIm) {
      rows++;
      const size = Math.hypot(re, im) + (options.transmission ? Math.hypot(throughRe, throughIm) : 0);
      if (!(size <= LARGEST_GAMMA)) return blame(absurdValue(line, size));
      if (!(frequencyHz >= 0)) return blame(negativeFrequency(line, frequencyHz));
      if (frequencyHz > HIGHEST_FREQUENCY_HZ) {
        return blame(absurdFrequency(line, frequencyHz, options.scaleHint));
      }
      if (frequencyHz < last) {
        blame(fallingFrequency(line, last, frequencyHz));
        last = frequencyHz;
        return;
      }
      if (frequencyHz === last && frequency.length > 0) {
        return merge([re, im, throughRe, throughIm], line, frequencyHz);
      }
      last = frequencyHz;
      merged = 1;
      frequency.push(frequencyHz);
      columns[0]!.push(re);
      columns[1]!.push(im);
      if (options.transmission) {
        columns[2]!.push(throughRe);
        columns[3]!.push(throughIm);
      }
    },
    reject: blame,
    finish() {
      for (const { problem, more } of faults.values()) {
        problems.add(more === 0 ? problem : { ...problem, what: `${problem.what}; so do ${more} more rows` });
      }
      if (problems.problems.length > 0) return null;
      if (frequency.length < 2) {
        problems.add(tooFewRows(rows, frequency.length));
        return null;
      }
      const [re, im, throughRe, throughIm] = columns.map((column) => column.values());
      return {
        frequencyHz: frequency.values(),
        gamma: { re: re!, im: im! },
        transmission: throughRe && throughIm ? { re: throughRe, im: throughIm } : null,
        notices: repeats.rows === 0 ? [] : [repeatNotice(repeats)],
      };
    },
  };
}

function absurdValue(line: number, size: number): FileProblem {
  const what = Number.isFinite(size) ? `has a value of size ${size.toPrecision(3)}` : 'has no finite value';
  return {
    code: 'sweep-value',
    line,
    what: `${what}, which no reflection can have`,
    mend: 'check that the columns and their format (real/imaginary, linear, dB) are what the header says',
  };
}

function negativeFrequency(line: number, frequencyHz: number): FileProblem {
  return {
    code: 'sweep-frequency-negative',
    line,
    what: 'has a frequency below zero',
    found: String(frequencyHz),
    mend: 'check that the first column is the frequency',
  };
}

function absurdFrequency(line: number, frequencyHz: number, scaleHint: string): FileProblem {
  return {
    code: 'sweep-frequency-unit',
    line,
    what: `has a frequency of ${formatFrequency(frequencyHz, 4)}, which no analyzer can sweep`,
    mend: scaleHint,
  };
}

function fallingFrequency(line: number, before: number, frequencyHz: number): FileProblem {
  return {
    code: 'sweep-frequency-falls',
    line,
    what: `has a frequency that falls, from ${formatFrequency(before)} to ${formatFrequency(frequencyHz)}`,
    mend: 'keep one sweep in the file, its rows in order of rising frequency',
  };
}

function tooFewRows(rows: number, frequencies: number): FileProblem {
  const what =
    rows === 0
      ? 'holds no data'
      : `holds ${rows === 1 ? 'one row' : `${rows} rows`}, ${frequencies === 1 ? 'one frequency' : 'no frequency'} in all`;
  return {
    code: 'sweep-too-few-points',
    what: `${what}; a sweep needs at least two frequencies`,
    mend: 'save the sweep again; if the file was cut short, copy it again',
  };
}

function repeatNotice(repeats: {
  firstLine: number;
  frequencyHz: number;
  rows: number;
  largest: number;
}): Notice {
  const rows = repeats.rows === 1 ? 'a row repeats' : `${repeats.rows} rows repeat`;
  return {
    code: 'sweep-repeated-frequency',
    what:
      `${rows} the frequency before it, first on line ${repeats.firstLine} (${formatFrequency(repeats.frequencyHz)}); ` +
      `such rows were averaged, their reflections differ by up to ${repeats.largest.toPrecision(2)}`,
  };
}
