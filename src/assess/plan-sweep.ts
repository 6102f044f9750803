/** What to set an instrument to before a line is swept, and what such a sweep will be able to tell. */
import { DB_PER_NEPER } from '../line/constants.ts';
import { guideCutoffHz } from '../line/guide.ts';
import { hasGuide, type Line, referenceOhm } from '../line/line.ts';
import { sectionMedium } from '../line/medium.ts';
import {
  distanceOfDelay,
  groupDelaySPerM,
  type MediumRun,
  pathTo,
  runLengthM,
  runOfMedia,
  slowestGroupDelaySPerM,
} from '../line/medium-run.ts';
import { reachesZero } from '../locate/low-pass-spectrum.ts';
import { createWindow, type WindowSpec } from '../numerics/window.ts';
import { fail, type Outcome, succeed } from '../outcome.ts';
import type { SweepRange } from '../sweep/number-text.ts';
import { formatFrequency } from '../sweep/quantity-format.ts';
import { harmonicRange, roundStepHz, UNAMBIGUOUS_ROOM } from './sweep-steps.ts';

export type FarEnd = 'short' | 'load' | 'antenna';

export type PlannedSweep = {
  readonly end: FarEnd;
  /** What this sweep is for. */
  readonly why: string;
};

export type SweepPlan = {
  readonly range: SweepRange;
  readonly stepHz: number;
  readonly lengthM: number;
  /** 6 dB width of an echo with the window, m. */
  readonly resolutionM: number;
  readonly unambiguousM: number;
  /** Weakest echo at the far end that will show, dB, for a noise of −70 dB a point. */
  readonly weakestReturnLossDb: number;
  /** One-way loss by the table at the start and the stop, dB. */
  readonly lossDb: readonly [number, number];
  /** True when ohms against distance can be measured. */
  readonly ohms: boolean;
  /** Far ends to sweep with, in this order. */
  readonly sweeps: readonly PlannedSweep[];
  /** What limits the plan, and what would lift it. */
  readonly remarks: readonly string[];
};

export type PlanQuestion = {
  /** Every length known. */
  readonly line: Line;
  /** Band that may be swept, Hz; null for what line and habit allow. */
  readonly bandHz: readonly [number, number] | null;
  readonly window: WindowSpec;
};

/** Resolution that a plan aims at where nothing limits the band, m: two connectors a hand apart. Common practice. */
const WANTED_RESOLUTION_M = 0.1;
/** Loss, one way, that a plan stays below at its stop: beyond, the end hardly shows. Common practice. */
const MOST_LOSS_DB = 20;
/** Noise of one point that the weakest echo is given for, dB. Common practice for a field instrument. */
const USUAL_NOISE_DB = -70;
/** An echo counts as visible this far above the noise of the trace, dB; as in the reach of a sweep. */
const VISIBLE_DB = 12;
/** Usual band of a rectangular guide, as factors on its cut-off. @source Pozar, 4th ed., appendix I (1.25 to 1.9). */
const GUIDE_BAND = [1.25, 1.9] as const;
/** Highest frequency of a line of which nothing says one, Hz. */
const USUAL_TOP_HZ = 6e9;
/** Points at which a run is looked at before a sweep is chosen. */
const PROBE_POINTS = 65;
/** More points than this take an instrument long, or are not offered. Common practice. */
const MANY_POINTS = 4001;

/**
 * Plans a sweep.
 *
 * The step is the largest of 1, 2 or 5 times a power of ten with which the whole line is told apart, and some room
 * beyond. The start is a whole number of steps, the first where the band allows it, so that ohms can be measured.
 */
export function planSweep(question: PlanQuestion): Outcome<SweepPlan> {
  const { line, window } = question;
  const limits = bandLimits(question);
  const [lowHz, highHz] = limits;
  if (!(highHz > lowHz))
    return fail({
      code: 'plan-band',
      what: `the line carries nothing of this band: it allows ${formatFrequency(lowHz)} to ${formatFrequency(highHz)}`,
      mend: 'give a band within what its cables, guides and devices carry',
    });
  // Fine enough for a guide's slowest wave.
  const probeFromHz = Math.max(lowHz, highHz * 1e-3);
  const probe = Float64Array.from(
    { length: PROBE_POINTS },
    (_, i) => probeFromHz + ((highHz - probeFromHz) * i) / (PROBE_POINTS - 1),
  );
  const probeRun = runAt(line, probe);
  const lengthM = runLengthM(probeRun);
  const turnsPerM = slowestGroupDelaySPerM(probeRun, probe);
  // 1/Δf = round-trip delay of the run with room.
  const wholeS = turnsPerM.reduce(
    (sum, slow, s) => sum + slow * (probeRun.startM[s + 1]! - probeRun.startM[s]!),
    0,
  );
  const stepHz = Math.min(roundStepHz(1 / (2 * UNAMBIGUOUS_ROOM * wholeS)), (highHz - lowHz) / 8);
  const stopHz = question.bandHz === null && !hasGuide(line) ? usefulStopHz(line, highHz, window) : highHz;
  const range = harmonicRange(lowHz, stopHz, stepHz);
  const frequencyHz = Float64Array.from({ length: range.points }, (_, i) => range.startHz + i * stepHz);
  const run = runAt(line, frequencyHz);
  const delays = groupDelaySPerM(run, frequencyHz);
  const meanDelay =
    delays.reduce((sum, d, s) => sum + d * (run.startM[s + 1]! - run.startM[s]!), 0) / lengthM;
  const taper = createWindow(window, range.points);
  const resolutionM = taper.width6DbBins / (2 * (range.stopHz - range.startHz) * meanDelay);
  const { attenuation } = pathTo(run, lengthM);
  const middleDb = attenuation[range.points >> 1]! * DB_PER_NEPER;
  const ohms = !hasGuide(line) && resolutionM < lengthM && reachesZero(frequencyHz, run);
  return succeed({
    range,
    stepHz,
    lengthM,
    resolutionM,
    unambiguousM: distanceOfDelay(run, slowestGroupDelaySPerM(run, frequencyHz), 1 / stepHz),
    weakestReturnLossDb:
      -USUAL_NOISE_DB + 10 * Math.log10(range.points / taper.enbwBins) - VISIBLE_DB - 2 * middleDb,
    lossDb: [attenuation[0]! * DB_PER_NEPER, attenuation[range.points - 1]! * DB_PER_NEPER],
    ohms,
    sweeps: sweepsFor(line),
    remarks: remarksOn(line, { range, ohms, resolutionM, lengthM, stepHz }),
  });
}

/** What may be swept: the band asked for, within what every guide and device carries. */
function bandLimits({ line, bandHz }: PlanQuestion): readonly [number, number] {
  let [lowHz, highHz] = bandHz ?? [0, Number.POSITIVE_INFINITY];
  for (const section of line.sections) {
    if (section.type === 'device') {
      lowHz = Math.max(lowHz, section.passbandHz[0]);
      highHz = Math.min(highHz, section.passbandHz[1]);
    } else if (section.type === 'guide') {
      const cutoffHz = guideCutoffHz(section.guide);
      // A band that was asked for may go down to just above the cut-off.
      lowHz = Math.max(lowHz, cutoffHz * (bandHz === null ? GUIDE_BAND[0] : LEAST_OVER_CUTOFF));
      highHz = Math.min(highHz, cutoffHz * GUIDE_BAND[1]);
    } else if (bandHz === null)
      highHz = Math.min(highHz, (section.cable.highestFrequencyMHz ?? Infinity) * 1e6);
  }
  const isOpenEnded = bandHz === null && !hasGuide(line);
  return [lowHz, Math.min(highHz, isOpenEnded ? USUAL_TOP_HZ : Number.POSITIVE_INFINITY)];
}

/** So far above a cut-off a wave still travels well enough. */
const LEAST_OVER_CUTOFF = 1.05;

/** Where a wider band gains nothing: the resolution wanted is there, the line's bands are in, or the loss grows too large. */
function usefulStopHz(line: Line, highHz: number, window: WindowSpec): number {
  const probe = Float64Array.of(highHz * 0.5, highHz);
  const run = runAt(line, probe);
  const delays = groupDelaySPerM(run, probe);
  const lengthM = runLengthM(run);
  const meanDelay =
    delays.reduce((sum, d, s) => sum + d * (run.startM[s + 1]! - run.startM[s]!), 0) / lengthM;
  const widths = createWindow(window, 1001).width6DbBins;
  const fineHz = widths / (2 * WANTED_RESOLUTION_M * meanDelay);
  const bandsHz = Math.max(0, ...line.limits.bands.map((band) => band.toHz * 1.05));
  const seenHz = whereLossIs(line, MOST_LOSS_DB, highHz);
  return Math.min(highHz, Math.max(bandsHz, Math.min(fineHz, seenHz)));
}

/** Highest frequency at which the line loses no more than this, one way, Hz; `highHz` where it never does. */
function whereLossIs(line: Line, mostDb: number, highHz: number): number {
  const lossAt = (hz: number): number => {
    const run = runAt(line, Float64Array.of(hz));
    return pathTo(run, runLengthM(run)).attenuation[0]! * DB_PER_NEPER;
  };
  if (lossAt(highHz) <= mostDb) return highHz;
  let [low, high] = [0, highHz];
  for (let i = 0; i < 40; i++) {
    const middle = (low + high) / 2;
    if (lossAt(middle) > mostDb) high = middle;
    else low = middle;
  }
  return Math.max(low, highHz * 1e-4);
}

function runAt(line: Line, frequencyHz: Float64Array): MediumRun {
  const z0Ohm = referenceOhm(line, USUAL_PORT_OHM);
  const media = line.sections.map((section) =>
    sectionMedium(section, frequencyHz, { temperatureC: line.temperatureC, z0Ohm }),
  );
  return runOfMedia(
    media,
    line.sections.map((section) => section.lengthM ?? 0),
  );
}

/** Port impedance of the trade's instruments; only guides and devices of a line without cable lean on it. */
const USUAL_PORT_OHM = 50;

function sweepsFor(line: Line): PlannedSweep[] {
  const antenna = line.end === 'antenna' || line.end === 'unknown';
  return [
    { end: 'short', why: 'the loss check, and faults all the way to the end' },
    { end: 'load', why: 'the match of the line itself, and weak echoes near its end' },
    ...(antenna
      ? [{ end: 'antenna' as const, why: 'the match of the whole, within the antenna’s bands' }]
      : []),
  ];
}

type Planned = Pick<SweepPlan, 'range' | 'ohms' | 'resolutionM' | 'lengthM' | 'stepHz'>;

function remarksOn(line: Line, { range, ohms, resolutionM, lengthM, stepHz }: Planned): string[] {
  const missed = line.limits.bands.filter(
    ({ fromHz, toHz }) => fromHz < range.startHz || toHz > range.stopHz,
  );
  return [
    ...(range.points > MANY_POINTS
      ? [
          `${range.points} points are more than most instruments offer: sweep the band in parts, and keep the step`,
        ]
      : []),
    ...(resolutionM * FEW_RESOLUTIONS > lengthM
      ? [`the band parts little on this line: a wider one would, as far as line and instrument allow it`]
      : []),
    ...(ohms || hasGuide(line)
      ? []
      : [
          `ohms against distance need a start at the first step, ${formatFrequency(stepHz)}: ` +
            'with the antenna off, a short or load at the far end allows it',
        ]),
    ...missed.map(({ name }) => `the band ${name} of the line is not wholly swept`),
  ];
}

/** Resolutions on a line below which a sweep is called narrow for it; as in the notices of a sweep. */
const FEW_RESOLUTIONS = 10;
