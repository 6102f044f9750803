/** Are these three sweeps good standards? Asked before anyone climbs, for a correction is no better than they are. */
import { DB_PER_NEPER, SPEED_OF_LIGHT } from '../line/constants.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { quantile } from '../numerics/statistics.ts';
import { formatFrequency } from '../sweep/quantity-format.ts';
import type { Sweep } from '../sweep/sweep.ts';

export type StandardName = 'open' | 'short' | 'load';
export type StandardSweeps = Readonly<Record<StandardName, Sweep>>;

/** One thing looked at; `mend` says what to do about it where it is wrong. */
export type StandardCheck = {
  readonly check: 'grid' | 'level' | 'opposite' | 'length' | 'quiet';
  readonly standard: StandardName | 'all';
  readonly pass: boolean;
  /** What was found, with its figure. */
  readonly what: string;
  readonly mend: string | null;
};

export type StandardsVerdict = {
  readonly pass: boolean;
  readonly checks: readonly StandardCheck[];
};

/** Open and short reflect all within this, dB. @source references.md section 8 (±0.2 dB after calibration). */
const FULL_DB = 0.2;
/** Without calibration a short lead's loss may come on top, dB. Common practice. */
const LEAD_LOSS_DB = 3;
/** A good load returns no more than this. @source references.md section 8 (≥ 40 dB). */
const QUIET_DB = 40;
/** A load that is worse than this is none. Common practice. */
const NO_LOAD_DB = 20;
/** Open and short stand opposite within this, degrees: fringe and inductance of good standards stay well within. */
const OPPOSITE_DEG = 20;
/** So much length between open and short is more than their fringes explain, m one way. Common practice. */
const LENGTH_M = 0.004;
/** Share of points that a rare spike may spoil. */
const MOST_POINTS = 0.98;

/**
 * Judges three sweeps: that they were swept alike, that open and short reflect all, stand opposite and have no length
 * between them, and that the load is quiet.
 *
 * An instrument that was not calibrated shows its lead in all three. The loss that open and short have in common is then
 * taken for the lead's, and said; and the load, which shows no quieter than the lead's own reflection, only has to be one.
 */
export function checkStandards(sweeps: StandardSweeps): StandardsVerdict {
  const grid = gridCheck(sweeps);
  if (!grid.pass) return { pass: false, checks: [grid] };
  const checks = [
    grid,
    levelCheck('open', sweeps),
    levelCheck('short', sweeps),
    oppositeCheck(sweeps),
    lengthCheck(sweeps),
    quietCheck(sweeps),
  ];
  return { pass: checks.every((check) => check.pass), checks };
}

function gridCheck({ open, short, load }: StandardSweeps): StandardCheck {
  const off = ([short, load] as const).find(
    (sweep) =>
      sweep.frequencyHz.length !== open.frequencyHz.length ||
      sweep.portOhm !== open.portOhm ||
      sweep.frequencyHz.some((f, i) => Math.abs(f - open.frequencyHz[i]!) > 1e-6 * f),
  );
  const text = (sweep: Sweep): string =>
    `${formatFrequency(sweep.frequencyHz[0]!)} to ${formatFrequency(sweep.frequencyHz.at(-1)!)}, ` +
    `${sweep.frequencyHz.length} points, ${sweep.portOhm} Ω`;
  if (off === undefined)
    return {
      check: 'grid',
      standard: 'all',
      pass: true,
      what: `all three swept alike: ${text(open)}`,
      mend: null,
    };
  return {
    check: 'grid',
    standard: off === short ? 'short' : 'load',
    pass: false,
    what: `the open was swept ${text(open)}; the ${off === short ? 'short' : 'load'} ${text(off)}`,
    mend: 'sweep all three with the same start, stop, points and reference as the line',
  };
}

function levelCheck(name: 'open' | 'short', sweeps: StandardSweeps): StandardCheck {
  const own = levelsDb(sweeps[name].gamma);
  const other = levelsDb(sweeps[name === 'open' ? 'short' : 'open'].gamma);
  // What both lose alike is the lead's.
  const lead = own.map((db, i) => Math.min(LEAD_LOSS_DB, Math.max(0, -(db + other[i]!) / 2)));
  const offDb = own.map((db, i) => Math.abs(db + lead[i]!));
  const worst = quantile(offDb, MOST_POINTS);
  const lossDb = quantile(own, 0.5);
  const leadDb = quantile(lead, 0.5);
  const pass = worst <= FULL_DB;
  const withLead = leadDb > FULL_DB ? `, ${leadDb.toFixed(2)} dB of it the lead’s` : '';
  return {
    check: 'level',
    standard: name,
    pass,
    what: `the ${name} reads ${lossDb.toFixed(2)} dB${withLead}; off 0 dB by up to ${worst.toFixed(2)} dB`,
    mend: pass
      ? null
      : lossDb < -3
        ? `this is no ${name}: check that the ${name} standard was connected, and that the files are not mixed up`
        : `clean and re-torque the ${name} and the adaptor, then sweep again`,
  };
}

/** Phase of −Γopen/Γshort, rad: 0 where the two stand opposite at the same plane. */
function phaseBetween({ open, short }: StandardSweeps): Float64Array {
  return open.frequencyHz.map((_, i) => {
    const [a, b] = [open.gamma.re[i]!, open.gamma.im[i]!];
    const [c, d] = [-short.gamma.re[i]!, -short.gamma.im[i]!];
    return Math.atan2(b * c - a * d, a * c + b * d);
  });
}

function oppositeCheck(sweeps: StandardSweeps): StandardCheck {
  const phase = phaseBetween(sweeps);
  const { startRad } = slopeOf(sweeps.open.frequencyHz, phase);
  // A length between the two is another check's; what is left at 0 Hz is how they stand.
  const atZero = Math.abs(Math.atan2(Math.sin(startRad), Math.cos(startRad)));
  const low = Math.abs(phase[0]!);
  const deg = (Math.min(atZero, low) * 180) / Math.PI;
  const pass = deg <= OPPOSITE_DEG;
  return {
    check: 'opposite',
    standard: 'all',
    pass,
    what: pass
      ? `open and short stand opposite, ${deg.toFixed(0)}° off at the low end`
      : `open and short stand ${(180 - deg).toFixed(0)}° apart at the low end, where 180° are to be`,
    mend: pass ? null : 'check that the two files are an open and a short, and not the same standard twice',
  };
}

function lengthCheck(sweeps: StandardSweeps): StandardCheck {
  const phase = phaseBetween(sweeps);
  const { delayS } = slopeOf(sweeps.open.frequencyHz, phase);
  const lengthM = (delayS * SPEED_OF_LIGHT) / 2;
  const pass = Math.abs(lengthM) <= LENGTH_M;
  const longer = lengthM > 0 ? 'open' : 'short';
  const mm =
    Math.abs(lengthM) < 1
      ? `${(Math.abs(lengthM) * 1e3).toFixed(1)} mm`
      : `${Math.abs(lengthM).toFixed(1)} m`;
  return {
    check: 'length',
    standard: 'all',
    pass,
    what: pass
      ? `no length between open and short (${mm} in air)`
      : `the ${longer} lies ${mm} (in air) behind the other`,
    mend: pass ? null : `take the adaptor off the ${longer}, or use an open and a short of the same plane`,
  };
}

function quietCheck(sweeps: StandardSweeps): StandardCheck {
  const worst = -quantile(levelsDb(sweeps.load.gamma), MOST_POINTS);
  const isRaw = !isCalibrated(sweeps);
  const leastDb = isRaw ? NO_LOAD_DB : QUIET_DB;
  const pass = worst >= leastDb;
  const raw = isRaw ? ', seen through a lead or an instrument whose own reflection is in it' : '';
  return {
    check: 'quiet',
    standard: 'load',
    pass,
    what: `the load returns ${worst.toFixed(1)} dB at its worst${raw}`,
    mend: pass
      ? null
      : worst < NO_LOAD_DB
        ? 'this is no load: check that the load standard was connected, and that the lead is sound'
        : `${QUIET_DB} dB are to be had from a good load: clean and re-torque it, use another, or calibrate again`,
  };
}

/** True where the open reads as one at the reference plane: the instrument was calibrated there. */
function isCalibrated({ open: { gamma } }: StandardSweeps): boolean {
  return (
    quantile(
      gamma.re.map((re, i) => Math.hypot(re - 1, gamma.im[i]!)),
      0.5,
    ) < CALIBRATED_OFF
  );
}

/** An open's fringe turns it by some tens of degrees at most at the top of a band: |Γ − 1|. */
const CALIBRATED_OFF = 0.4;

/** Slope of a phase against frequency as a delay, and its value at 0 Hz; the phase is unwrapped along the way. */
function slopeOf(
  frequencyHz: Float64Array,
  phase: Float64Array,
): { readonly delayS: number; readonly startRad: number } {
  const n = phase.length;
  const unwrapped = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const before = i === 0 ? 0 : unwrapped[i - 1]!;
    unwrapped[i] = phase[i]! + 2 * Math.PI * Math.round((before - phase[i]!) / (2 * Math.PI));
  }
  const meanF = frequencyHz.reduce((sum, f) => sum + f / n, 0);
  const meanP = unwrapped.reduce((sum, p) => sum + p / n, 0);
  let top = 0;
  let bottom = 0;
  for (let i = 0; i < n; i++) {
    top += (frequencyHz[i]! - meanF) * (unwrapped[i]! - meanP);
    bottom += (frequencyHz[i]! - meanF) ** 2;
  }
  const slope = top / bottom;
  return { delayS: -slope / (2 * Math.PI), startRad: meanP - slope * meanF };
}

function levelsDb({ re, im }: ComplexArray): Float64Array {
  return re.map((value, i) => DB_PER_NEPER * Math.log(Math.max(Math.hypot(value, im[i]!), 1e-15)));
}
