/** Compares an answer with the truth of its scene. */
import type { Scene, SceneTruth, TrueFault } from '../scenes/scene.ts';
import type { Answer, AnsweredFinding } from './answer.ts';

/** Which findings count: faults alone, or watches too. */
export type Strictness = 'fault' | 'fault-or-watch';

export type FaultScore = {
  readonly kind: string;
  readonly apparentReturnLossDb: number;
  readonly atJoint: boolean;
  readonly found: boolean;
  /** The rest is null when it wasn't found. */
  readonly answeredKind: string | null;
  readonly kindRight: boolean | null;
  readonly jointRight: boolean | null;
  readonly errorM: number | null;
  readonly sigmaM: number | null;
  readonly confidence: number | null;
};

export type FalseFinding = AnsweredFinding & { readonly ghost: boolean };

export type VariantScore = {
  readonly faults: readonly FaultScore[];
  readonly false: readonly FalseFinding[];
};

export type EndScore = {
  readonly kindRight: boolean;
  /** Load and antenna taken as one. */
  readonly classRight: boolean;
  readonly lengthRight: boolean;
  readonly lengthErrorM: number | null;
  readonly lengthSigmaM: number | null;
};

export type SceneScore = {
  readonly suite: string;
  readonly seed: number;
  readonly index: number;
  readonly plan: string;
  readonly points: number;
  readonly solveMs: number;
  readonly failed: string | null;
  readonly variants: Readonly<Record<Strictness, VariantScore>>;
  /** Two faults within one Fourier resolution. */
  readonly closePair: boolean;
  readonly end: EndScore;
  readonly trueStretch: string | null;
  /** Kind of the stretch that is answered where the true one lies, or anywhere when there is none. */
  readonly answeredStretch: string | null;
  /** Distance error over the Cramér–Rao bound for free amplitude and phase; null where the bound doesn't apply. */
  readonly errorOverBound: number | null;
  /** Error of the cable's one-way loss at the middle of the sweep, and its σ; null where there is none, or it was cut. */
  readonly lossErrorDb: number | null;
  readonly lossSigmaDb: number | null;
};

/** Scores one answer. */
export function scoreScene(scene: Scene, answer: Answer): SceneScore {
  const { truth } = scene;
  const variants = {
    fault: scoreVariant(
      truth,
      answer.findings.filter((f) => f.severity === 'fault'),
    ),
    'fault-or-watch': scoreVariant(truth, answer.findings),
  };
  const [first, second] = truth.faults;
  return {
    suite: scene.suite,
    seed: scene.seed,
    index: scene.index,
    plan: truth.plan,
    points: truth.points,
    solveMs: answer.solveMs,
    failed: answer.failed,
    variants,
    closePair:
      first !== undefined &&
      second !== undefined &&
      second.distanceM - first.distanceM <= truth.resolutionM * 1.02,
    end: scoreEnd(truth, answer),
    trueStretch: truth.stretches[0]?.kind ?? null,
    answeredStretch: answeredStretch(truth, answer),
    errorOverBound: errorOverBound(scene, variants['fault-or-watch']),
    ...scoreLoss(truth, answer),
  };
}

/**
 * How far a finding may lie from a truth: half a resolution, 0.15 m or 3σ, the latter at most 1 % of the line.
 */
function toleranceM(truth: SceneTruth, sigmaM: number | null): number {
  return Math.max(0.5 * truth.resolutionM, 0.15, Math.min(3 * (sigmaM ?? 0), 0.01 * truth.lengthM));
}

function scoreVariant(truth: SceneTruth, findings: readonly AnsweredFinding[]): VariantScore {
  const lumped = findings.filter((f) => f.kind !== 'wet' && f.kind !== 'wrong-cable');
  const partners = matchInOrder(truth, lumped);
  const faults = truth.faults.map((fault, i) => scoreFault(fault, partners[i] ?? null));
  const taken = new Set(partners.filter((p) => p !== null));
  const extra = findings.filter((f) => !taken.has(f) && !insideStretch(truth, f));
  return { faults, false: extra.map((f) => ({ ...f, ghost: isGhost(truth, f) })) };
}

/** Pairs truths and findings, each at most once: most pairs first, then the least sum of distances. */
function matchInOrder(truth: SceneTruth, findings: readonly AnsweredFinding[]): (AnsweredFinding | null)[] {
  const faults = truth.faults;
  const sorted = [...findings].sort((a, b) => a.distanceM - b.distanceM);
  // best[i][j]: pairs and cost from fault i and finding j on. Both lists rise, so the best pairing does not cross.
  type Best = { readonly pairs: number; readonly costM: number; readonly take: 'pair' | 'fault' | 'finding' };
  const best: Best[][] = Array.from({ length: faults.length + 1 }, () =>
    Array.from({ length: sorted.length + 1 }, () => ({ pairs: 0, costM: 0, take: 'fault' })),
  );
  const better = (a: Best, b: Best) =>
    b.pairs > a.pairs || (b.pairs === a.pairs && b.costM < a.costM) ? b : a;
  for (let i = faults.length - 1; i >= 0; i--) {
    for (let j = sorted.length - 1; j >= 0; j--) {
      const apartM = Math.abs(faults[i]!.distanceM - sorted[j]!.distanceM);
      let choice: Best = { ...best[i + 1]![j]!, take: 'fault' };
      choice = better(choice, { ...best[i]![j + 1]!, take: 'finding' });
      if (apartM <= toleranceM(truth, sorted[j]!.sigmaM)) {
        const rest = best[i + 1]![j + 1]!;
        choice = better(choice, { pairs: rest.pairs + 1, costM: rest.costM + apartM, take: 'pair' });
      }
      best[i]![j] = choice;
    }
  }
  const partners: (AnsweredFinding | null)[] = faults.map(() => null);
  for (let i = 0, j = 0; i < faults.length && j < sorted.length; ) {
    const { take } = best[i]![j]!;
    if (take === 'pair') partners[i] = sorted[j]!;
    if (take !== 'finding') i++;
    if (take !== 'fault') j++;
  }
  return partners;
}

function scoreFault(fault: TrueFault, partner: AnsweredFinding | null): FaultScore {
  const base = {
    kind: fault.kind,
    apparentReturnLossDb: fault.apparentReturnLossDb,
    atJoint: fault.joint !== null,
  };
  if (partner === null)
    return {
      ...base,
      found: false,
      answeredKind: null,
      kindRight: null,
      jointRight: null,
      errorM: null,
      sigmaM: null,
      confidence: null,
    };
  return {
    ...base,
    found: true,
    answeredKind: partner.kind,
    kindRight: partner.kind === fault.kind,
    jointRight: partner.joint === fault.joint,
    errorM: Math.abs(partner.distanceM - fault.distanceM),
    sigmaM: partner.sigmaM,
    confidence: partner.confidence,
  };
}

/** A finding in or at the edge of a true stretch belongs to it. */
function insideStretch(truth: SceneTruth, finding: AnsweredFinding): boolean {
  const slack = toleranceM(truth, finding.sigmaM) + truth.resolutionM;
  return truth.stretches.some(
    (s) => finding.distanceM > s.fromM - slack && finding.distanceM < s.toM + slack,
  );
}

function isGhost(truth: SceneTruth, finding: AnsweredFinding): boolean {
  const near = toleranceM(truth, finding.sigmaM) + 0.5 * truth.resolutionM;
  return truth.ghostsM.some((ghostM) => Math.abs(ghostM - finding.distanceM) < near);
}

function scoreEnd(truth: SceneTruth, answer: Answer): EndScore {
  const cut = truth.faults.find((fault) => fault.kind === 'open' || fault.kind === 'short');
  const trueM = cut?.distanceM ?? truth.lengthM;
  const trueKind = cut?.kind ?? truth.end;
  const errorM = answer.lengthM === null ? null : Math.abs(answer.lengthM - trueM);
  const quiet = (kind: string) => (kind === 'load' || kind === 'antenna' ? 'termination' : kind);
  return {
    kindRight: answer.end === trueKind,
    classRight: quiet(answer.end) === quiet(trueKind),
    lengthRight: errorM !== null && errorM <= Math.max(toleranceM(truth, answer.lengthSigmaM), 0.005 * trueM),
    lengthErrorM: errorM,
    lengthSigmaM: answer.lengthSigmaM,
  };
}

function scoreLoss(
  { cableLossDb }: SceneTruth,
  { loss }: Answer,
): Pick<SceneScore, 'lossErrorDb' | 'lossSigmaDb'> {
  const middle = cableLossDb.length >> 1;
  if (loss === null || cableLossDb.length === 0) return { lossErrorDb: null, lossSigmaDb: null };
  return {
    lossErrorDb: Math.abs(loss.lossDb[middle]! - cableLossDb[middle]!),
    lossSigmaDb: loss.sigmaDb?.[middle] ?? null,
  };
}

/** Kind of an answered stretch that overlaps the true one by half of the shorter; of any when none is true. */
function answeredStretch(truth: SceneTruth, answer: Answer): string | null {
  const flagged = answer.findings.some((f) => f.kind === 'wet' || f.kind === 'wrong-cable');
  if (!flagged) return null;
  const [real] = truth.stretches;
  if (real === undefined) return answer.stretches[0]?.kind ?? 'stretch';
  const overlapping = answer.stretches.find((s) => {
    const commonM = Math.min(s.toM, real.toM) - Math.max(s.fromM, real.fromM);
    return commonM >= 0.5 * Math.min(s.toM - s.fromM, real.toM - real.fromM);
  });
  return overlapping?.kind ?? null;
}

/** Velocity of light over the two ways of a reflection, m/s. @source SI definition of the metre. */
const HALF_LIGHT_M_S = 299_792_458 / 2;

/**
 * Error over the bound var(τ) ≥ 6/[(2πΔf)²·η·N(N² − 1)] of the lone-echo suite.
 *
 * @source Rife & Boorstyn, IEEE Trans. IT-20(5), 591–598, 1974; references.md section 6.
 */
function errorOverBound(scene: Scene, score: VariantScore): number | null {
  const [fault] = score.faults;
  if (scene.suite !== 'lone-echo' || fault?.errorM == null) return null;
  const { truth } = scene;
  const n = truth.points;
  const ratio = 10 ** ((-fault.apparentReturnLossDb - truth.noiseDb) / 10);
  // Resolution is c·vf/(2·B), and B = (N − 1)·Δf.
  const metresPerSecond = truth.resolutionM * truth.spanHz;
  const stepHz = truth.spanHz / (n - 1);
  const boundS = Math.sqrt(6 / ((2 * Math.PI * stepHz) ** 2 * ratio * n * (n * n - 1)));
  if (metresPerSecond > HALF_LIGHT_M_S) throw new RangeError(`faster than light: ${metresPerSecond} m/s`);
  return fault.errorM / (boundS * metresPerSecond);
}
