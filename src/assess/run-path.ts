/** The run from the port to its end as the loss check needs it: loss and phase of the cable, and what is lost between. */
import { DB_PER_NEPER } from '../line/constants.ts';
import { type Line, referenceOhm } from '../line/line.ts';
import { sectionMedium } from '../line/medium.ts';
import { gammaOfReturnLoss } from '../line/reflection.ts';
import type { Echo } from '../locate/echo.ts';
import type { Solution } from '../locate/solution.ts';
import { type ComplexArray, complexCopy, complexZeros } from '../numerics/complex.ts';

/** Arrays of length n over the frequencies asked for; Np and rad, one way. */
export type RunPath = {
  /** Of cables, guides and devices as described, at the line's temperature. */
  readonly path: ComplexArray;
  /** What a relative change of the conductor's and of the dielectric's loss adds; devices have none. */
  readonly perConductor: ComplexArray;
  readonly perDielectric: ComplexArray;
  /** Loss of cables and guides alone, by the table at the line's temperature, dB. */
  readonly tableLossDb: Float64Array;
  /** Path to the start of each section. */
  readonly startsAt: readonly ComplexArray[];
  /** Length of the run, m. */
  readonly lengthM: number;
  /** Where a section begins and ends, m. */
  boundsM(section: number): readonly [number, number];
};

/**
 * Builds the run up to the end that was found.
 *
 * Loss goes with the length of the cable as laid, phase with the distance of the model, which an error of velocity
 * stretches.
 */
export function runPath(
  line: Line,
  solution: Pick<Solution, 'lengthM' | 'distanceScale' | 'scaledTo'>,
  frequencyHz: Float64Array,
  portOhm: number,
): RunPath {
  const n = frequencyHz.length;
  const lengths = lengthsM(line, solution);
  const lengthM = lengths.reduce((sum, m) => sum + m, 0);
  const stretch = solution.lengthM / solution.distanceScale / lengthM;
  const boundsM = (section: number): readonly [number, number] => {
    const fromM = lengths.slice(0, section).reduce((sum, m) => sum + m, 0);
    return [fromM, fromM + lengths[section]!];
  };
  const path = complexZeros(n);
  const perConductor = complexZeros(n);
  const perDielectric = complexZeros(n);
  const tableLossDb = new Float64Array(n);
  const z0Ohm = referenceOhm(line, portOhm);
  const startsAt = line.sections.map((section, s) => {
    const start = complexCopy(path);
    const medium = sectionMedium(section, frequencyHz, { temperatureC: line.temperatureC, z0Ohm });
    const ownM = lengths[s]!;
    const ownDevice = section.type === 'device';
    for (let i = 0; i < n; i++) {
      path.re[i] = path.re[i]! + medium.gamma.re[i]! * ownM;
      path.im[i] = path.im[i]! + medium.gamma.im[i]! * ownM * stretch;
      if (ownDevice) continue;
      tableLossDb[i] = tableLossDb[i]! + medium.gamma.re[i]! * ownM * DB_PER_NEPER;
      add(perConductor, medium.gammaPerConductorLoss, i, ownM);
      add(perDielectric, medium.gammaPerDielectricLoss, i, ownM);
    }
    return start;
  });
  return { path, perConductor, perDielectric, tableLossDb, startsAt, lengthM, boundsM };
}

/** Lengths of the sections as laid, m: described where the description gives them, the rest up to the end. */
function lengthsM(line: Line, solution: Pick<Solution, 'lengthM' | 'scaledTo'>): number[] {
  let beforeM = 0;
  return line.sections.map(({ lengthM }) => {
    const own = lengthM ?? Math.max(SHORTEST_M, solution.lengthM - beforeM);
    beforeM += own;
    return own;
  });
}

/** Length of a last section that the end leaves no room for, m. */
const SHORTEST_M = 0.01;

function add(to: ComplexArray, per: ComplexArray, i: number, lengthM: number): void {
  to.re[i] = to.re[i]! + per.re[i]! * lengthM;
  to.im[i] = to.im[i]! + per.im[i]! * lengthM;
}

/** True for what takes power on the way, not only sends it back. */
export function isLossy(echo: Pick<Echo, 'kind'>): boolean {
  return echo.kind === 'series-resistance' || echo.kind === 'shunt-leakage';
}

/** Loss on passing discontinuities once, Np at each frequency: |S21| = 1 − |Γ| of lossy ones, |S21|² = 1 − |Γ|² of others. */
export function passingNp(echoes: readonly Echo[], frequencyHz: Float64Array): Float64Array {
  const sum = new Float64Array(frequencyHz.length);
  // A reactive one reflects in proportion to frequency, about its RMS over the band.
  const square = frequencyHz.reduce((total, f) => total + f * f, 0) / frequencyHz.length;
  for (const echo of echoes) {
    const size = Math.min(LARGEST_GAMMA, gammaOfReturnLoss(echo.correctedReturnLossDb));
    for (let i = 0; i < sum.length; i++) {
      const law = echo.kind === 'impedance-step' ? 1 : frequencyHz[i]! ** 2 / square;
      const left = isLossy(echo) ? 1 - size : Math.sqrt(Math.max(LEAST_PASSED, 1 - size * size * law));
      sum[i] = sum[i]! - Math.log(left);
    }
  }
  return sum;
}

/** A fault that passes less than these passes nothing that the end could be seen by. */
const LARGEST_GAMMA = 0.95;
const LEAST_PASSED = 0.1;
