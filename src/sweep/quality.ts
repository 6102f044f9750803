/** What a sweep is worth before anything is made of it: figures, and a notice for every doubt. */
import type { ComplexArray } from '../numerics/complex.ts';
import type { Notice } from '../outcome.ts';
import { LOWEST_LEVEL_DB, noiseFloorDb } from './noise-floor.ts';
import { formatFrequency } from './quantity-format.ts';
import { spacingOf } from './spacing.ts';
import type { Sweep } from './sweep.ts';

export type SweepQuality = {
  /** Highest minus lowest frequency, Hz. */
  readonly spanHz: number;
  /** Of an even sweep the step, of an uneven one the smallest step, Hz. */
  readonly stepHz: number;
  readonly even: boolean;
  /** Noise of one point, complex RMS, dB against a full reflection; −300 where there is none to see. */
  readonly noiseFloorDb: number;
  /** Largest |Γ|, dB; −300 for nothing but zeros. */
  readonly maxGammaDb: number;
  readonly notices: readonly Notice[];
};

/** |Γ| above this is more than a calibration's error, dB. @source references.md section 8 (±0.2 dB; common practice). */
const ACTIVE_DB = 0.2;

/** Below this many points a trace has hardly any distances. Common practice: sweeps have 101 points and more. */
const FEW_POINTS = 51;

/** Noise above this hides what a joint of ordinary quality returns. @source references.md section 8 (−30 to −40 dB). */
const NOISY_DB = -45;

/** Share of the sweep's power that is noise, above which nothing in it looks like a line. */
const NOISE_SHARE = 0.5;

/** A step below this share of the mean one is as good as a repeat. */
const NEAR_REPEAT = 1e-3;

/** Figures and notices of a sweep. Works for every sweep that a reader gives; never NaN. */
export function sweepQuality(sweep: Sweep): SweepQuality {
  const { frequencyHz, gamma } = sweep;
  const n = frequencyHz.length;
  const spanHz = frequencyHz[n - 1]! - frequencyHz[0]!;
  const { even, stepHz } = spacingOf(frequencyHz);
  const size = sizes(gamma);
  const noiseDb = noiseFloorDb(frequencyHz, gamma);
  const notices = [
    ...pointNotices(frequencyHz, even, stepHz, spanHz),
    ...(contentNotices(gamma, size) ?? [...activeNotices(frequencyHz, size), ...noiseNotices(size, noiseDb)]),
  ];
  return { spanHz, stepHz, even, noiseFloorDb: noiseDb, maxGammaDb: levelDb(largest(size)), notices };
}

function pointNotices(frequencyHz: Float64Array, even: boolean, stepHz: number, spanHz: number): Notice[] {
  const n = frequencyHz.length;
  const notices: Notice[] = [];
  if (n < FEW_POINTS) {
    notices.push({
      code: 'sweep-few-points',
      what: `the sweep has only ${n} points; a distance trace needs some hundreds`,
    });
  }
  if (even) return notices;
  const meanStep = spanHz / (n - 1);
  const near = frequencyHz.reduce(
    (count, f, i) => count + (i > 0 && f - frequencyHz[i - 1]! < NEAR_REPEAT * meanStep ? 1 : 0),
    0,
  );
  notices.push({
    code: 'sweep-uneven',
    what:
      `the frequencies are not evenly spaced (smallest step ${formatFrequency(stepHz, 4)}, ` +
      `mean ${formatFrequency(meanStep, 4)}); they are used as they are`,
  });
  if (near > 0) {
    notices.push({
      code: 'sweep-near-repeats',
      what: `${near === 1 ? 'one frequency lies' : `${near} frequencies lie`} almost on the one before`,
    });
  }
  return notices;
}

/** A sweep that says nothing at all; null when it says something. */
function contentNotices(gamma: ComplexArray, size: Float64Array): Notice[] | null {
  if (largest(size) === 0) {
    const what = 'every reflection in the sweep is zero; this port was probably not measured';
    return [{ code: 'sweep-all-zero', what }];
  }
  if (gamma.re.every((re) => re === gamma.re[0]) && gamma.im.every((im) => im === gamma.im[0])) {
    const level = levelDb(size[0]!).toFixed(1);
    const what = `every point of the sweep has the same value (${level} dB); it is no measured line`;
    return [{ code: 'sweep-constant', what }];
  }
  return null;
}

function activeNotices(frequencyHz: Float64Array, size: Float64Array): Notice[] {
  const most = largest(size);
  if (levelDb(most) <= ACTIVE_DB) return [];
  const over = size.reduce((count, value) => count + (levelDb(value) > ACTIVE_DB ? 1 : 0), 0);
  const where = formatFrequency(frequencyHz[size.indexOf(most)]!);
  return [
    {
      code: 'sweep-active',
      what:
        `|Γ| reaches ${most.toPrecision(3)} (+${levelDb(most).toFixed(1)} dB) at ${where} and is over 1 at ${over} of ` +
        `${size.length} points; a passive line returns no more than it gets: check the calibration`,
    },
  ];
}

function noiseNotices(size: Float64Array, noiseDb: number): Notice[] {
  const meanPower = size.reduce((sum, value) => sum + value * value, 0) / size.length;
  if (10 ** (noiseDb / 10) > NOISE_SHARE * meanPower) {
    const what =
      `the sweep looks like noise from end to end (${noiseDb.toFixed(0)} dB); no echo stands out: check the ` +
      'connection, the calibration and the columns of the file';
    return [{ code: 'sweep-noise-only', what }];
  }
  if (noiseDb <= NOISY_DB) return [];
  const what = `the sweep is noisy: ${noiseDb.toFixed(0)} dB at each point; weak echoes are hidden`;
  return [{ code: 'sweep-noisy', what }];
}

function sizes(gamma: ComplexArray): Float64Array {
  return gamma.re.map((re, i) => Math.hypot(re, gamma.im[i]!));
}

function levelDb(size: number): number {
  return size > 0 ? Math.max(LOWEST_LEVEL_DB, 20 * Math.log10(size)) : LOWEST_LEVEL_DB;
}

function largest(values: Float64Array): number {
  return values.reduce((most, value) => Math.max(most, value), 0);
}
