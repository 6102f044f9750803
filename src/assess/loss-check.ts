/**
 * The loss check of a handover: what the cable of a run loses, against its table at the line's temperature.
 *
 * Of a line with an open or shorted far end the end's echo tells it; of a two-port file the transmission does. A load
 * swallows what would tell, and an antenna shows no more than what the loss can be at most.
 */
import { DB_PER_NEPER } from '../line/constants.ts';
import { hasGuide, type Line } from '../line/line.ts';
import type { Solution } from '../locate/solution.ts';
import type { Notice } from '../outcome.ts';
import type { Sweep } from '../sweep/sweep.ts';
import { fitEndLoss, type LossPriors } from './end-loss.ts';
import { jointAllowanceDb, jointsWithLoss } from './joint-allowance.ts';
import { type BandLoss, bandLosses, worstBand } from './loss-bands.ts';
import { lossAtMostDb } from './loss-bound.ts';
import { type Excess, excessOf } from './loss-excess.ts';
import { inMetres, type LengthWords } from './place-text.ts';
import { isLossy, passingNp, type RunPath, runPath } from './run-path.ts';

/** What the loss was read from; `bound`: only what it can be at most. */
export type LossMethod = 'end-echo' | 'transmission' | 'bound' | 'none';

/** What is checked: a solved sweep of a line. */
export type LossQuestion = {
  readonly sweep: Sweep;
  readonly line: Line;
  /** False when only a cable type was given. */
  readonly lineDescribed: boolean;
  readonly solution: Solution;
  /** Writes lengths in words. */
  readonly lengthWords?: LengthWords;
};

export type LossCheck = {
  readonly method: LossMethod;
  /** The sweep's frequencies, length n. */
  readonly frequencyHz: Float64Array;
  /** One way, of cables and guides alone, length n; null where the sweep cannot tell. */
  readonly lossDb: Float64Array | null;
  readonly sigmaDb: Float64Array | null;
  /** The same as the line is described, at its temperature. */
  readonly tableLossDb: Float64Array;
  /** The most that the loss can be; only where nothing better is known. */
  readonly atMostDb: Float64Array | null;
  /** Joints that the allowance counts. */
  readonly joints: number;
  /** Allowance for them at `atHz`, dB. */
  readonly jointsDb: number;
  /** What the loss may be over table and joints, dB, and whether that is common practice rather than the line's own. */
  readonly allowedDb: number;
  readonly allowedIsDefault: boolean;
  readonly bands: readonly BandLoss[];
  /** Where the margin is smallest, Hz. */
  readonly atHz: number;
  /** Limit less loss there, dB; null where the sweep cannot tell. */
  readonly marginDb: number | null;
  readonly pass: boolean | null;
  /** Where loss beyond the table sits, as far as it can be told. */
  readonly excess: readonly Excess[];
  readonly notices: readonly Notice[];
};

/** What the loss may be over the calculated one. @source references.md section 8: calculated + 0.5 dB. */
export const USUAL_LOSS_MARGIN_DB = 0.5;

/** Samples differ from their type by ±5 %. Common practice; tables of one type differ by up to 15 %. */
const DESCRIBED_SIGMA = 0.03;
const TYPE_ONLY_SIGMA = 0.1;
/** Conductor loss beside that: of a temperature that was read, good to 3 °C, and of one that nobody gave. */
const TEMPERATURE_SIGMA = 0.006;
const NO_TEMPERATURE_SIGMA = 0.025;
/** What the dielectric of sound cable varies by on its own. Common practice. */
const DIELECTRIC_SIGMA = 0.02;

/** Doubt of a reading that no fit knows of, dB: connectors' own mismatch, rounding. */
const LEAST_SIGMA_DB = 0.003;
/** Doubt of a transmission: what a field correction of two ports leaves over, dB. Common practice. */
const TRANSMISSION_SIGMA_DB = 0.05;

/** Checks the loss of a line. */
export function checkLoss(question: LossQuestion): LossCheck {
  const { sweep, line, solution } = question;
  const run = runPath(line, solution, sweep.frequencyHz, sweep.portOhm);
  const joints = jointsWithLoss(line);
  const allowedDb = line.limits.lossMarginDb ?? USUAL_LOSS_MARGIN_DB;
  const read = readLoss(question, run);
  const { bands, notices } = bandLosses({
    line,
    frequencyHz: sweep.frequencyHz,
    lossDb: read.lossDb ?? read.atMostDb,
    sigmaDb: read.sigmaDb,
    faultsDb: read.faultsDb ?? new Float64Array(sweep.frequencyHz.length),
    tableLossDb: run.tableLossDb,
    limitDb: run.tableLossDb.map((db, i) => db + jointAllowanceDb(joints, sweep.frequencyHz[i]!) + allowedDb),
  });
  const worst = worstBand(bands);
  // The most that the loss can be may show that it passes, never that it fails.
  const decides = read.lossDb !== null || (read.atMostDb !== null && (worst.marginDb ?? -1) >= 0);
  return {
    method: read.method,
    frequencyHz: sweep.frequencyHz,
    lossDb: read.lossDb,
    sigmaDb: read.sigmaDb,
    tableLossDb: run.tableLossDb,
    atMostDb: read.atMostDb,
    joints,
    jointsDb: jointAllowanceDb(joints, worst.atHz),
    allowedDb,
    allowedIsDefault: line.limits.lossMarginDb === null,
    bands: read.lossDb === null ? bands.map(undecided(decides)) : bands,
    atHz: worst.atHz,
    marginDb: decides ? worst.marginDb : null,
    pass: decides ? worst.pass : null,
    excess:
      read.lossDb === null
        ? []
        : excessOf({
            line,
            solution,
            overTableDb: (worst.lossDb ?? 0) - worst.tableLossDb,
            sigmaDb: worst.sigmaDb ?? 0,
            tableLossDb: worst.tableLossDb,
            growing: read.growing,
            lengthWords: question.lengthWords ?? inMetres,
          }),
    notices: [...notices, ...read.notices],
  };
}

/** Bands judged by the most that the loss can be: passed, or not decided. */
function undecided(decides: boolean): (band: BandLoss) => BandLoss {
  return (band) => ({
    ...band,
    lossDb: null,
    sigmaDb: null,
    marginDb: decides ? band.marginDb : null,
    pass: decides ? band.pass : null,
  });
}

type Reading = Pick<LossCheck, 'method' | 'lossDb' | 'sigmaDb' | 'atMostDb' | 'notices'> & {
  /** What faults on the way add, one way, dB; null where it is in the loss already, or not known. */
  readonly faultsDb: Float64Array | null;
  /** True where the loss grows with frequency as water's does. */
  readonly growing: boolean;
};

const NOTHING_READ: Reading = {
  method: 'none',
  lossDb: null,
  sigmaDb: null,
  atMostDb: null,
  notices: [],
  faultsDb: null,
  growing: false,
};

function readLoss(question: LossQuestion, run: RunPath): Reading {
  const { sweep, solution } = question;
  if (sweep.transmission) return readTransmission(sweep, run);
  if (solution.endsEarly) return NOTHING_READ;
  if (solution.end === 'open' || solution.end === 'short') return readEndEcho(question, run) ?? NOTHING_READ;
  // The loss of a guide follows no such law.
  const atMostDb = hasGuide(question.line) ? null : lossAtMostDb(sweep, run.tableLossDb);
  return atMostDb === null ? NOTHING_READ : { ...NOTHING_READ, method: 'bound', atMostDb };
}

function readEndEcho(question: LossQuestion, run: RunPath): Reading | null {
  const { sweep, line, solution } = question;
  const { frequencyHz } = sweep;
  const before = solution.echoes.slice(0, -1);
  const faultsNp = passingNp(before.filter(isLossy), frequencyHz);
  const found = fitEndLoss(
    {
      frequencyHz,
      measured: sweep.gamma,
      sign: solution.end === 'open' ? 1 : -1,
      path: run.path,
      perConductor: run.perConductor,
      perDielectric: run.perDielectric,
      passedNp: passingNp(
        before.filter((echo) => !isLossy(echo)),
        frequencyHz,
      ).map((np) => 2 * np),
      faultsNp,
      neighbours: neighboursOf(solution, run),
    },
    priorsOf(line, question.lineDescribed),
  );
  if (found === null) return null;
  const { conductor, dielectric, covariance, faults } = found;
  const [cc, cd, dd] = covariance;
  const lossDb = new Float64Array(frequencyHz.length);
  const sigmaDb = new Float64Array(frequencyHz.length);
  for (let i = 0; i < frequencyHz.length; i++) {
    const c = run.perConductor.re[i]! * DB_PER_NEPER;
    const d = run.perDielectric.re[i]! * DB_PER_NEPER;
    lossDb[i] = run.tableLossDb[i]! + c * conductor + d * dielectric;
    const variance = cc * c * c + 2 * cd * c * d + dd * d * d;
    sigmaDb[i] = Math.hypot(Math.sqrt(Math.max(0, variance)), LEAST_SIGMA_DB);
  }
  const faultsDb = faultsNp.map((np) => np * faults * DB_PER_NEPER);
  return { ...NOTHING_READ, method: 'end-echo', lossDb, sigmaDb, faultsDb, growing: found.growing };
}

/** Level of an ordinary joint that was not found. @source references.md section 8: −30 to −40 dB (common practice). */
const USUAL_JOINT_GAMMA = 0.018;
/** Levels below this are as good as this. */
const LEAST_GAMMA = 0.01;

/** The joints before the end, with the sizes that were found. */
function neighboursOf(solution: Solution, run: RunPath) {
  return run.startsAt.map((path, section) => {
    const echo = solution.echoes.find((one) => one.joint?.index === section + 1);
    const gamma = echo === undefined ? USUAL_JOINT_GAMMA : 10 ** (-echo.correctedReturnLossDb / 20);
    return { path, gamma: Math.max(LEAST_GAMMA, gamma) };
  });
}

function priorsOf(line: Line, lineDescribed: boolean): LossPriors {
  return {
    common: lineDescribed ? DESCRIBED_SIGMA : TYPE_ONLY_SIGMA,
    conductor: line.temperatureKnown ? TEMPERATURE_SIGMA : NO_TEMPERATURE_SIGMA,
    dielectric: DIELECTRIC_SIGMA,
  };
}

/**
 * Loss of what was sent through: −10·log10(|S21|²/(1 − |S11|²)), which takes the mismatch at the port off; devices as
 * described. The joints' own loss is in it, for nothing tells it from the cable's.
 */
function readTransmission(sweep: Sweep, run: RunPath): Reading {
  const through = sweep.transmission!;
  const n = sweep.frequencyHz.length;
  const lossDb = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const passed = through.re[i]! ** 2 + through.im[i]! ** 2;
    const entered = Math.max(1e-6, 1 - sweep.gamma.re[i]! ** 2 - sweep.gamma.im[i]! ** 2);
    const devicesDb = run.path.re[i]! * DB_PER_NEPER - run.tableLossDb[i]!;
    lossDb[i] = -10 * Math.log10(Math.max(1e-30, passed / entered)) - devicesDb;
  }
  return {
    ...NOTHING_READ,
    method: 'transmission',
    lossDb,
    sigmaDb: new Float64Array(n).fill(TRANSMISSION_SIGMA_DB),
  };
}
