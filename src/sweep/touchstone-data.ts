/** The network data of a Touchstone file: numbers into matrices, matrices into the reflection at one port. */
import type { Notice } from '../outcome.ts';
import { createNumberScanner } from './number-scan.ts';
import { createParameterConverter, type PortScattering } from './parameter-conversion.ts';
import type { ProblemList } from './problem-list.ts';
import type { SweepPointsBuilder } from './sweep-points.ts';
import {
  incomplete,
  keywordInVersion1,
  matrixProblem,
  negativeMagnitude,
  numberProblem,
  rowProblem,
  secondOptionLine,
} from './touchstone-data-problems.ts';
import type { MatrixFormat, TwoPortOrder } from './touchstone-keywords.ts';
import type { TouchstoneLines } from './touchstone-lines.ts';
import type { NetworkParameter, NumberFormat } from './touchstone-option-line.ts';

/** How the data are laid out and what they mean. */
export type NetworkLayout = {
  readonly version: 1 | 2;
  readonly ports: number;
  /** Counted from 1. */
  readonly port: number;
  readonly frequencyExponent: number;
  readonly parameter: NetworkParameter;
  readonly format: NumberFormat;
  /** One for each port. */
  readonly referenceOhm: readonly number[];
  readonly matrixFormat: MatrixFormat;
  readonly twoPortOrder: TwoPortOrder;
};

export type NetworkDataEnd = {
  /** Frequencies read, repeats counted. */
  readonly rows: number;
  /** True when `lines` stands on the keyword that ended the data. */
  readonly atKeyword: boolean;
  readonly notices: readonly Notice[];
};

/**
 * Reads matrices until a keyword or the end of the text, and gives the reflection at the chosen port to `points`.
 *
 * One- and two-ports have a frequency on one line; larger or triangular matrices may be broken anywhere, but begin on
 * a line of their own. A version 1 two-port's noise block is left out.
 *
 * @param standing True when `lines` already stands on the first line of data.
 * @source references.md section 7, rows on data lines, wrapping, two-port order, triangles and noise.
 */
export function readNetworkData(
  lines: TouchstoneLines,
  standing: boolean,
  layout: NetworkLayout,
  points: SweepPointsBuilder,
  problems: ProblemList,
): NetworkDataEnd {
  const { ports } = layout;
  const pairs = layout.matrixFormat === 'full' ? ports * ports : (ports * (ports + 1)) / 2;
  const length = 1 + 2 * pairs;
  if (length > lines.text.length) {
    problems.add(
      incomplete(lines.line, `fewer numbers than one frequency of ${ports} ports needs (${length})`),
    );
    return { rows: 0, atKeyword: false, notices: [] };
  }
  const oneLine = ports <= 2 && layout.matrixFormat === 'full';
  const scanner = createNumberScanner(lines.text);
  const record = new Float64Array(length);
  const emit = createEmitter(layout, points);
  const notices: Notice[] = [];
  let rows = 0;
  let filled = 0;
  let recordLine = 0;
  let lastFrequency = Number.NEGATIVE_INFINITY;
  let skipping = false;
  let inNoise = false;

  /** Numbers of the current line into the record; what came of it. */
  function take(): 'fits' | 'too long' | 'no number' {
    for (;;) {
      const value = scanner.next(filled === 0 ? layout.frequencyExponent : 0);
      if (value === undefined) return 'fits';
      if (Number.isNaN(value)) return 'no number';
      if (filled === length) return 'too long';
      record[filled++] = value;
    }
  }

  function seek(): void {
    scanner.seek(lines.start, lines.end);
  }

  function count(): number {
    seek();
    return scanner.countLeft();
  }

  function readLine(): void {
    if (inNoise) {
      if (count() !== NOISE_NUMBERS)
        problems.add(rowProblem(lines, count(), NOISE_NUMBERS, 'row of noise data'));
      return;
    }
    if (skipping && count() % 2 === 0) return;
    skipping = false;
    if (filled === 0) recordLine = lines.line;
    seek();
    const outcome = take();
    if (outcome === 'no number') {
      problems.add(numberProblem(lines.line, scanner.token()));
      drop();
    } else if (outcome === 'fits' && filled === length) {
      rows++;
      lastFrequency = record[0]!;
      emit(recordLine, record);
      filled = 0;
    } else if (oneLine) {
      if (opensNoise()) inNoise = true;
      else problems.add(rowProblem(lines, count(), length, `row of a ${ports === 1 ? 'one' : 'two'}-port`));
      drop();
    } else if (outcome === 'too long') {
      problems.add(matrixProblem(recordLine, lines.line, length));
      // A value may have been missing before: then this line begins the next matrix and is read again.
      const restart = lines.line !== recordLine && count() % 2 === 1;
      drop();
      if (restart) readLine();
    }
  }

  function drop(): void {
    filled = 0;
    skipping = !oneLine;
  }

  function opensNoise(): boolean {
    return (
      layout.version === 1 &&
      ports === 2 &&
      rows > 0 &&
      filled === NOISE_NUMBERS &&
      count() === NOISE_NUMBERS &&
      record[0]! <= lastFrequency
    );
  }

  for (let has = standing || lines.next(); has && !problems.full; has = lines.next()) {
    if (lines.firstCode === BRACKET) {
      if (layout.version === 2) return end(true);
      problems.add(keywordInVersion1(lines));
    } else if (lines.firstCode === HASH) {
      if (!notices.some((n) => n.code === 'touchstone-second-option-line'))
        notices.push(secondOptionLine(lines));
    } else readLine();
  }
  return end(false);

  function end(atKeyword: boolean): NetworkDataEnd {
    if (filled > 0) {
      problems.add(
        incomplete(recordLine, `a matrix of ${filled} numbers where ${length} are needed, and then ends`),
      );
    }
    return { rows, atKeyword, notices };
  }
}

/**
 * How many ports the data from the current line on look like: a line with an odd count of numbers begins a
 * frequency, and a frequency has 1 + 2·n² numbers. Null when they fit no n.
 *
 * @param firstLine Line of the file on which the data begin.
 * @source references.md section 7 (content count as a cross-check).
 */
export function guessPorts(lines: TouchstoneLines, firstLine: number): number | null {
  const scanner = createNumberScanner(lines.text);
  let numbers = 0;
  while (lines.next()) {
    if (lines.line < firstLine || lines.firstCode === HASH || lines.firstCode === BRACKET) continue;
    scanner.seek(lines.start, lines.end);
    const count = scanner.countLeft();
    if (numbers > 0 && count % 2 === 1) break;
    if (numbers === 0 && count % 2 === 0) return null;
    numbers += count;
  }
  const ports = Math.sqrt((numbers - 1) / 2);
  return Number.isInteger(ports) && ports > 0 ? ports : null;
}

/** Numbers in a row of version 1 noise data: frequency, noise figure, optimum source (two), resistance. */
const NOISE_NUMBERS = 5;

/** A function that turns one record into one point. */
function createEmitter(
  layout: NetworkLayout,
  points: SweepPointsBuilder,
): (line: number, record: Float64Array) => void {
  const { ports, format, parameter } = layout;
  const column = layout.port - 1;
  const other = ports === 2 ? 1 - column : column;
  const toComplex = COMPLEX_OF[format];
  const value: PortScattering = { re: 0, im: 0, throughRe: 0, throughIm: 0 };
  const place = (row: number, col: number) => 1 + 2 * pairIndex(layout, row, col);

  /** Reads the pair at `at` into `value`, as reflection or as transmission; false when it is no such pair. */
  function read(line: number, record: Float64Array, at: number): readonly [number, number] | null {
    const first = record[at]!;
    if (format === 'ma' && first < 0) {
      points.reject(negativeMagnitude(line, first));
      return null;
    }
    return toComplex(first, record[at + 1]!);
  }

  if (parameter === 's') {
    const reflection = place(column, column);
    const through = place(other, column);
    return (line, record) => {
      const gamma = read(line, record, reflection);
      const transmission = ports === 2 ? read(line, record, through) : ZERO;
      if (gamma && transmission) {
        points.add(line, record[0]!, gamma[0], gamma[1], transmission[0], transmission[1]);
      }
    };
  }

  const convert = createParameterConverter(parameter, layout.referenceOhm, {
    normalised: layout.version === 1,
    port: layout.port,
  });
  const matrixRe = new Float64Array(ports * ports);
  const matrixIm = new Float64Array(ports * ports);
  return (line, record) => {
    for (let row = 0; row < ports; row++) {
      for (let col = 0; col < ports; col++) {
        const pair = read(line, record, place(row, col));
        if (!pair) return;
        matrixRe[row * ports + col] = pair[0];
        matrixIm[row * ports + col] = pair[1];
      }
    }
    Object.assign(value, convert(matrixRe, matrixIm));
    points.add(line, record[0]!, value.re, value.im, value.throughRe, value.throughIm);
  };
}

const ZERO: readonly [number, number] = [0, 0];

/** Which pair of a record, counted from 0, is element (row, col), counted from 0. */
function pairIndex(layout: NetworkLayout, row: number, col: number): number {
  const n = layout.ports;
  if (layout.matrixFormat === 'full') {
    return n === 2 && layout.twoPortOrder === '21_12' ? col * n + row : row * n + col;
  }
  const low = Math.min(row, col);
  const high = Math.max(row, col);
  if (layout.matrixFormat === 'lower') return (high * (high + 1)) / 2 + low;
  return low * n - (low * (low - 1)) / 2 + (high - low);
}

const RADIANS = Math.PI / 180;

const COMPLEX_OF: Record<NumberFormat, (first: number, second: number) => readonly [number, number]> = {
  ri: (re, im) => [re, im],
  ma: (magnitude, degrees) => polar(magnitude, degrees),
  db: (db, degrees) => polar(10 ** (db / 20), degrees),
};

function polar(magnitude: number, degrees: number): readonly [number, number] {
  return [magnitude * Math.cos(degrees * RADIANS), magnitude * Math.sin(degrees * RADIANS)];
}

const BRACKET = 91;
const HASH = 35;
