/**
 * From the texts of a sweep and the description of its line to everything the program concludes of them.
 *
 * The page to read first: the pipeline in reading order. It is pure; files, terminal and workers stay outside.
 */
import { findingsOf, placesOf } from '../assess/find-findings.ts';
import { severitiesOf } from '../assess/severity.ts';
import { sweepNotices } from '../assess/sweep-notices.ts';
import { SPEED_OF_LIGHT } from '../line/constants.ts';
import { hasGuide, type Line } from '../line/line.ts';
import { sectionMedium } from '../line/medium.ts';
import { type MediumRun, runLengthM, runOfMedia, slowestGroupDelaySPerM } from '../line/medium-run.ts';
import { usableBand } from '../line/usable-band.ts';
import { planCorrectedTrace } from '../locate/distance-trace.ts';
import { type ImpedanceProfile, measuredProfile } from '../locate/impedance-profile.ts';
import { modelledProfile } from '../locate/modelled-profile.ts';
import { type Reach, type ReachOptions, reachOf } from '../locate/reach.ts';
import type { Solution } from '../locate/solution.ts';
import { solveLine } from '../locate/solve-line.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { parseWindow } from '../numerics/window.ts';
import { assertNever, fail, type Notice, type Outcome, succeed } from '../outcome.ts';
import { correctSweep } from '../sweep/error-correction.ts';
import { sweepQuality } from '../sweep/quality.ts';
import { readSweep } from '../sweep/read-sweep.ts';
import type { Sweep } from '../sweep/sweep.ts';
import type { Analysis } from './analysis.ts';
import type { AnalyseRequest, SolveProgress } from './solver.ts';

/** Analyses one sweep. Notices travel in the analysis. */
export function analyse(
  request: AnalyseRequest,
  onProgress: (progress: SolveProgress) => void = () => {},
): Outcome<Analysis> {
  onProgress({ stage: 'reading the sweep', fraction: 0 });
  const window = parseWindow(request.windowSpec);
  if (!window.ok) return window;
  const read = readSweep(request.sweepBytes, fileOptions(request.sweepFile, request.port));
  if (!read.ok) return read;
  const corrected = correct(request, read.value);
  if (!corrected.ok) return corrected;
  const moved = moveReferencePlane(corrected.value, request.offsetM);
  const usable = usablePoints(moved, request.line);
  if (!usable.ok) return usable;
  const sweep = usable.value;
  const quality = sweepQuality(sweep);

  onProgress({ stage: 'solving for the line', fraction: 0.1 });
  const resolution = firstResolutionM(request.line, sweep);
  const solution = solveLine(
    {
      sweep,
      line: request.line,
      lineDescribed: request.lineDescribed,
      resolutionM: resolution.resolutionM,
      unambiguousM: resolution.unambiguousM,
      delaySPerM: resolution.delaySPerM,
    },
    (stage, fraction) => onProgress({ stage, fraction: 0.1 + 0.8 * fraction }),
  );

  onProgress({ stage: 'putting it into words', fraction: 0.95 });
  const scale = solution.distanceScale;
  const run = runOf(request.line, sweep, solution.lengthM / scale, scale);
  const reach = reachOn(request.line, { sweep, run, window: window.value });
  const traceToM = runLengthM(run) + 4 * reach.resolutionM;
  const modelTrace = planCorrectedTrace({
    frequencyHz: sweep.frequencyHz,
    run,
    window: window.value,
    fromM: 0,
    toM: traceToM,
    points: TRACE_POINTS,
  }).trace(sweep.gamma);
  const trace = { ...modelTrace, distanceM: modelTrace.distanceM.map((m) => m * scale) };
  const severities = severitiesOf(request.line, solution);
  const places = placesOf(request.line, solution);
  return succeed({
    sweep,
    line: request.line,
    lineDescribed: request.lineDescribed,
    reach,
    trace,
    impedance: request.skipImpedance
      ? null
      : impedanceOf(request.line, sweep, reach.impedanceProfile, solution),
    solution,
    severities,
    places,
    findings: findingsOf(request.line, solution, severities, places),
    notices: [
      ...read.notices,
      ...corrected.notices,
      ...usable.notices,
      ...quality.notices,
      ...sweepNotices({ frequencyHz: sweep.frequencyHz, reach, lengthM: solution.lengthM }),
      ...solution.notices,
    ],
  });
}

/** Distances of the trace kept with an analysis. */
const TRACE_POINTS = 1024;

function fileOptions(file: string, port: number | null): { readonly file: string; readonly port?: number } {
  return port === null ? { file } : { file, port };
}

/** Takes the test lead and the instrument's own errors out, when standards were given. */
function correct(request: AnalyseRequest, raw: Sweep): Outcome<Sweep> {
  if (request.standards === null) return succeed(raw);
  const open = readSweep(request.standards.open, { file: 'the open standard' });
  const short = readSweep(request.standards.short, { file: 'the short standard' });
  const load = readSweep(request.standards.load, { file: 'the load standard' });
  if (!open.ok || !short.ok || !load.ok)
    return fail(...[open, short, load].flatMap((read) => (read.ok ? [] : read.problems)));
  return correctSweep(raw, { open: open.value, short: short.value, load: load.value });
}

/** Moves the reference plane toward the line through air: Γ·e^{+2jωd/c}. */
function moveReferencePlane(sweep: Sweep, offsetM: number): Sweep {
  if (offsetM === 0) return sweep;
  const gamma: ComplexArray = { re: new Float64Array(sweep.gamma.re), im: new Float64Array(sweep.gamma.im) };
  for (let i = 0; i < gamma.re.length; i++) {
    const angle = (4 * Math.PI * sweep.frequencyHz[i]! * offsetM) / SPEED_OF_LIGHT;
    const re = sweep.gamma.re[i]!;
    const im = sweep.gamma.im[i]!;
    gamma.re[i] = re * Math.cos(angle) - im * Math.sin(angle);
    gamma.im[i] = re * Math.sin(angle) + im * Math.cos(angle);
  }
  return { ...sweep, gamma };
}

/** Fewest points of which anything can be made. */
const FEWEST_POINTS = 8;

/** The points that can say something of the line: above 0 Hz and any cut-off, within every device's pass band. */
function usablePoints(sweep: Sweep, line: Line): Outcome<Sweep> {
  const first = sweep.frequencyHz.findIndex((f) => f > 0);
  const aboveZero = first < 0 ? pointsOf(sweep, 0, 0) : pointsOf(sweep, first, sweep.frequencyHz.length);
  const band = usableBand(line, aboveZero.frequencyHz);
  const used = pointsOf(aboveZero, band.through.from, band.through.to);
  const points = used.frequencyHz.length;
  if (points < FEWEST_POINTS)
    return fail({
      code: 'sweep-too-short',
      file: sweep.file,
      what: `the sweep has ${points} usable point${points === 1 ? '' : 's'}; ${FEWEST_POINTS} are the least`,
      mend: 'save a sweep of some hundreds of points in the band that the line carries',
    });
  const notices = [...(first > 0 ? [ZERO_FREQUENCY] : []), ...band.notices];
  return succeed(used, notices);
}

/** The line is solved from the points above 0 Hz, for its waves are not defined there. */
const ZERO_FREQUENCY: Notice = {
  code: 'zero-frequency',
  what: 'the point at 0 Hz is left out: the line is solved from the points above it',
};

function pointsOf(sweep: Sweep, from: number, to: number): Sweep {
  if (from === 0 && to === sweep.frequencyHz.length) return sweep;
  const { re, im } = sweep.gamma;
  const { transmission } = sweep;
  return {
    ...sweep,
    frequencyHz: sweep.frequencyHz.slice(from, to),
    gamma: { re: re.slice(from, to), im: im.slice(from, to) },
    ...(transmission && {
      transmission: { re: transmission.re.slice(from, to), im: transmission.im.slice(from, to) },
    }),
  };
}

function reachOn(line: Line, options: ReachOptions): Reach {
  const reach = reachOf(options);
  return hasGuide(line) ? { ...reach, impedanceProfile: 'no' } : reach;
}

/** Ohms along the line, from the sweep itself where it reaches down to 0 Hz, else from the solved line. */
function impedanceOf(
  line: Line,
  sweep: Sweep,
  origin: Reach['impedanceProfile'],
  solution: Solution,
): ImpedanceProfile | null {
  // A guide has no ohms, and no way down to 0 Hz.
  if (hasGuide(line)) return null;
  const { lengthM, distanceScale } = solution;
  switch (origin) {
    case 'measured':
      return measuredProfile({ sweep, line, lengthM, distanceScale });
    case 'modelled':
      return modelledProfile({ line, solution, portOhm: sweep.portOhm });
    case 'no':
      return null;
    default:
      return assertNever(origin);
  }
}

/**
 * The described line at the sweep's frequencies; an unknown last length takes what is left of `toM`.
 *
 * @param scale Physical over model distance: described lengths are physical, the run is the model's.
 */
function runOf(line: Line, sweep: Sweep, toM: number, scale = 1): MediumRun {
  const reference = line.sections.find((section) => section.type === 'coax');
  const z0Ohm = reference?.type === 'coax' ? reference.cable.z0Ohm : sweep.portOhm;
  const media = line.sections.map((section) =>
    sectionMedium(section, sweep.frequencyHz, { temperatureC: line.temperatureC, z0Ohm }),
  );
  let startM = 0;
  const lengths = line.sections.map(({ lengthM }) => {
    const own = lengthM === null ? Math.max(SHORTEST_UNKNOWN_M, toM - startM) : lengthM / scale;
    startM += own;
    return own;
  });
  return runOfMedia(media, lengths);
}

/** Length given to a section of unknown length before anything is known, m. */
const SHORTEST_UNKNOWN_M = 0.1;

/** What the solver's own taper resolves, and where distances fold, on the line as described. */
function firstResolutionM(
  line: Line,
  sweep: Sweep,
): { resolutionM: number; unambiguousM: number; delaySPerM: number } {
  const run = runOf(line, sweep, SHORTEST_UNKNOWN_M);
  const reach = reachOf({
    sweep,
    run,
    window: { kind: 'kaiser', beta: 5 },
  });
  const delaySPerM = Math.max(...slowestGroupDelaySPerM(run, sweep.frequencyHz));
  return { resolutionM: reach.resolutionM, unambiguousM: reach.unambiguousM, delaySPerM };
}
