/** Trace and impedance profile as one CSV table against distance, for spreadsheets and scripts. */
import { interpolateLinear } from '../numerics/interpolate.ts';
import type { Analysis } from './analysis.ts';
import { traceWindow } from './trace-view.ts';

/** Columns, in order. Levels are dB relative to a full reflection. */
export const TRACE_COLUMNS = [
  'distanceM',
  'correctedDb',
  'correctedRe',
  'correctedIm',
  'apparentDb',
  'impedanceOhm',
] as const;

/** Digits of a cell: far below any instrument's noise, short enough to read. */
const DIGITS = 8;

/**
 * Makes the table over the distances of the analysis' own trace.
 *
 * @param windowSpec Window the analysis was made with; the apparent trace uses the same.
 * @returns CSV with a header row, LF line ends, a point as decimal sign; a cell is empty where nothing is known
 *   (no impedance profile there).
 */
export function traceCsv(analysis: Analysis, windowSpec: string): string {
  const { trace, impedance } = analysis;
  const { distanceM } = trace;
  const apparent = traceWindow(analysis, {
    fromM: distanceM[0]!,
    toM: distanceM.at(-1)!,
    points: distanceM.length,
    windowSpec,
    corrected: false,
  });
  const rows: string[] = [TRACE_COLUMNS.join(',')];
  distanceM.forEach((d, i) => {
    const re = trace.value.re[i]!;
    const im = trace.value.im[i]!;
    const cells = [
      d,
      levelDb(re, im),
      re,
      im,
      levelDb(apparent.value.re[i]!, apparent.value.im[i]!),
      impedance && covers(impedance.distanceM, d)
        ? interpolateLinear(impedance.distanceM, impedance.impedanceOhm, d)
        : Number.NaN,
    ];
    rows.push(cells.map(cell).join(','));
  });
  return `${rows.join('\n')}\n`;
}

function levelDb(re: number, im: number): number {
  return 20 * Math.log10(Math.hypot(re, im));
}

function covers(distanceM: Float64Array, d: number): boolean {
  return distanceM.length > 0 && d >= distanceM[0]! && d <= distanceM.at(-1)!;
}

function cell(value: number): string {
  return Number.isFinite(value) ? String(Number(value.toPrecision(DIGITS))) : '';
}
