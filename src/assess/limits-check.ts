/** Does the line pass its handover? Every limit with its figure, its margin and where it is worst. */
import { type Line, PLAIN_JOINT } from '../line/line.ts';
import { gammaOfReturnLoss, returnLossDb } from '../line/reflection.ts';
import type { Echo } from '../locate/echo.ts';
import { formatFrequency } from '../sweep/quantity-format.ts';
import { type EndReflection, endReflection } from './end-match.ts';
import type { Finding } from './finding.ts';
import { checkLoss, type LossCheck, type LossQuestion } from './loss-check.ts';

export type LimitKind = 'match-at-port' | 'match-at-end' | 'joint' | 'cable' | 'loss';

/** One limit; null where the sweep cannot tell. */
export type LimitResult = {
  readonly limit: LimitKind;
  /** Name of the band, where there is one. */
  readonly band: string | null;
  /** Return loss, dB, of matches, joints and cable, which must not be lower; loss, dB, which must not be higher. */
  readonly limitDb: number;
  readonly valueDb: number | null;
  /** How far the value is on the right side, dB. */
  readonly marginDb: number | null;
  /** Where in the band it is worst, Hz; null for levels over the whole sweep. */
  readonly atHz: number | null;
  /** Where on the line it is worst. */
  readonly where: string | null;
  readonly pass: boolean | null;
  /** True for a limit of common practice, which the line file did not set: what misses it is told, and fails nothing. */
  readonly isDefault: boolean;
  /** Why it could not be judged. */
  readonly why: string | null;
};

export type Verdict = {
  /** False where a limit of the line file is missed or a fault was found; null where nothing could be judged. */
  readonly pass: boolean | null;
  /** One line. */
  readonly text: string;
  readonly limits: readonly LimitResult[];
};

export type LimitsQuestion = LossQuestion & {
  /** One per echo of the solution. */
  readonly places: readonly string[];
  readonly findings: readonly Finding[];
};

/** Limits where the line file gives none. @source references.md section 8, every one common practice. */
export const USUAL_LIMITS = {
  /** Look at a connector whose echo is above −26 dB. */
  jointReturnLossDb: 26,
  /** What an ordinary connector returns at its best is too much for cable. */
  cableReturnLossDb: 32,
  /** A run with a good load at its far end. */
  loadedReturnLossDb: 18,
} as const;

/** Judges all limits. */
export function checkLimits(question: LimitsQuestion): Verdict {
  const limits = [
    ...matchResults(question),
    jointResult(question),
    cableResult(question),
    lossResult(checkLoss(question)),
  ];
  return { ...verdictOf(limits, question.findings), limits };
}

type Band = {
  readonly name: string;
  readonly fromHz: number;
  readonly toHz: number;
  readonly returnLossDb: number;
};

function matchResults({ sweep, line, solution }: LimitsQuestion): LimitResult[] {
  const isMatched = solution.end === 'load' || solution.end === 'antenna';
  const bands: readonly Band[] =
    line.limits.bands.length > 0 ? line.limits.bands : usualBands(sweep.frequencyHz, line);
  if (bands.length === 0) return [];
  const isDefault = line.limits.bands.length === 0;
  const why = solution.endsEarly
    ? 'the line stops before its end'
    : isMatched
      ? null
      : 'the far end is open or shorted; sweep it with its antenna or a load on';
  return bands.flatMap((band) => {
    const common = { band: band.name, limitDb: band.returnLossDb, isDefault, where: null };
    if (why !== null) return [unjudged({ ...common, limit: 'match-at-port', why })];
    const planes = [
      ['match-at-port', sweep],
      ['match-at-end', endReflection(sweep, line, solution, band)],
    ] as const;
    return planes.map(([limit, seen]) => {
      const worst = seen && worstWithin(seen, band);
      if (!worst) return unjudged({ ...common, limit, why: 'the band was not swept' });
      return judged({ ...common, limit, valueDb: worst.returnLossDb, atHz: worst.atHz });
    });
  });
}

/** A line with a load is judged over the whole sweep; where an antenna is matched, only the line file knows. */
function usualBands(frequencyHz: Float64Array, line: Line): Band[] {
  if (line.end !== 'load') return [];
  return [
    {
      name: 'whole sweep',
      fromHz: frequencyHz[0]!,
      toHz: frequencyHz[frequencyHz.length - 1]!,
      returnLossDb: USUAL_LIMITS.loadedReturnLossDb,
    },
  ];
}

/** Lowest return loss within a band; null where no point lies in it. */
function worstWithin(
  { frequencyHz, gamma }: EndReflection,
  { fromHz, toHz }: Pick<Band, 'fromHz' | 'toHz'>,
): { readonly returnLossDb: number; readonly atHz: number } | null {
  let worst = -1;
  let atHz = 0;
  for (let i = 0; i < frequencyHz.length; i++) {
    const f = frequencyHz[i]!;
    const size = Math.hypot(gamma.re[i]!, gamma.im[i]!);
    if (f < fromHz || f > toHz || size <= worst) continue;
    worst = size;
    atHz = f;
  }
  return worst < 0 ? null : { returnLossDb: returnLossDb(Math.max(worst, QUIETEST_GAMMA)), atHz };
}

/** Reflections below this are nothing: 200 dB. */
const QUIETEST_GAMMA = gammaOfReturnLoss(200);

/** The joint that comes nearest to its limit, or misses it by most. */
function jointResult({ line, solution, places }: LimitsQuestion): LimitResult {
  const limitOf = (echo: Echo): number =>
    (line.sections[(echo.joint?.index ?? 0) - 2]?.jointAfter ?? PLAIN_JOINT).returnLossDb ??
    line.limits.jointReturnLossDb ??
    USUAL_LIMITS.jointReturnLossDb;
  const joints = solution.echoes
    .map((echo, i) => ({ echo, place: places[i] ?? null }))
    .filter(({ echo }, i) => echo.joint !== null && i < solution.echoes.length - 1);
  const isDefault = line.limits.jointReturnLossDb === null;
  const common = { limit: 'joint', band: null, isDefault } as const;
  const limitDb = line.limits.jointReturnLossDb ?? USUAL_LIMITS.jointReturnLossDb;
  if (joints.length === 0) return { ...nothingFound(limitDb), ...common };
  const margin = (echo: Echo): number => echo.correctedReturnLossDb - limitOf(echo);
  const worst = joints.reduce((a, b) => (margin(b.echo) < margin(a.echo) ? b : a));
  return judged({
    ...common,
    limitDb: limitOf(worst.echo),
    valueDb: worst.echo.correctedReturnLossDb,
    atHz: null,
    where: worst.place,
  });
}

/** The strongest echo inside a cable. */
function cableResult({ line, solution, places }: LimitsQuestion): LimitResult {
  const isDefault = line.limits.cableReturnLossDb === null;
  const common = { limit: 'cable', band: null, isDefault } as const;
  const limitDb = line.limits.cableReturnLossDb ?? USUAL_LIMITS.cableReturnLossDb;
  const inside = solution.echoes
    .map((echo, i) => ({ echo, place: places[i] ?? null }))
    .filter(({ echo }, i) => echo.joint === null && i < solution.echoes.length - 1);
  if (inside.length === 0) return { ...nothingFound(limitDb), ...common };
  const worst = inside.reduce((a, b) =>
    b.echo.correctedReturnLossDb < a.echo.correctedReturnLossDb ? b : a,
  );
  return judged({
    ...common,
    limitDb,
    valueDb: worst.echo.correctedReturnLossDb,
    atHz: null,
    where: worst.place,
  });
}

function lossResult(loss: LossCheck): LimitResult {
  const worst = loss.bands.reduce((a, b) => ((b.marginDb ?? 0) < (a.marginDb ?? 0) ? b : a));
  const common = {
    limit: 'loss',
    band: worst.name,
    isDefault: loss.allowedIsDefault,
    limitDb: worst.limitDb,
  } as const;
  if (loss.pass === null || worst.marginDb === null)
    return unjudged({ ...common, where: null, why: 'it takes a sweep with the far end open or shorted' });
  const wet = loss.excess.find((one) => one.kind === 'wet');
  return {
    ...common,
    valueDb: worst.limitDb - worst.marginDb,
    marginDb: worst.marginDb,
    atHz: worst.atHz,
    where: wet?.where ?? loss.excess[0]?.where ?? null,
    pass: loss.pass,
    why: null,
  };
}

type Common = Pick<LimitResult, 'limit' | 'band' | 'limitDb' | 'isDefault' | 'where'>;

function judged(given: Common & { readonly valueDb: number; readonly atHz: number | null }): LimitResult {
  const marginDb = given.valueDb - given.limitDb;
  return { ...given, marginDb, pass: marginDb >= 0, why: null };
}

function unjudged(given: Common & { readonly why: string }): LimitResult {
  return { ...given, valueDb: null, marginDb: null, atHz: null, pass: null };
}

/** Nothing stood out: the limit is kept, with no figure to it. */
function nothingFound(limitDb: number): Omit<LimitResult, 'limit' | 'band' | 'isDefault'> {
  return { limitDb, valueDb: null, marginDb: null, atHz: null, where: null, pass: true, why: null };
}

/** Names of the limits, as they are said. */
export const LIMIT_WORDS: Readonly<Record<LimitKind, string>> = {
  'match-at-port': 'match at the port',
  'match-at-end': 'match at the end',
  joint: 'worst joint',
  cable: 'cable',
  loss: 'loss',
};

/** "passes: match 21.2 dB at least 14 …"; "fails: loss 0.6 dB over its limit at 2.17 GHz". */
function verdictOf(limits: readonly LimitResult[], findings: readonly Finding[]): Omit<Verdict, 'limits'> {
  const faults = findings.filter((finding) => finding.severity === 'fault').length;
  const missed = limits.filter((limit) => limit.pass === false);
  const failing = missed.filter((limit) => !limit.isDefault);
  const advised = missed.filter((limit) => limit.isDefault);
  const kept = limits.filter((limit) => limit.pass === true);
  const open = limits.filter((limit) => limit.pass === null);
  const parts = [
    ...(faults > 0 ? [`${faults} fault${faults === 1 ? '' : 's'}`] : []),
    ...failing.map(missText),
    ...advised.map((limit) => `${missText(limit)} (common practice)`),
    ...(missed.length === 0 && faults === 0 ? [`kept: ${names(kept)}`] : []),
    ...(open.length > 0 ? [`not judged: ${names(open)}`] : []),
  ];
  const pass = faults > 0 || failing.length > 0 ? false : kept.length === 0 ? null : true;
  const word = pass === null ? 'not judged' : pass ? 'passes' : 'fails';
  return { pass, text: `${word}: ${parts.join('; ')}` };
}

function missText({ limit, marginDb, atHz, where }: LimitResult): string {
  const by = `${Math.abs(marginDb ?? 0).toFixed(1)} dB`;
  const at = atHz === null ? (where === null ? '' : ` ${where}`) : ` at ${formatFrequency(atHz, 4)}`;
  return `${LIMIT_WORDS[limit]} misses its limit by ${by}${at}`;
}

function names(limits: readonly LimitResult[]): string {
  return [...new Set(limits.map(({ limit }) => LIMIT_WORDS[limit]))].join(', ');
}
