/** The figures of each suite, with the targets of design section 13. */
import { median, quantile } from '../../src/numerics/statistics.ts';
import type { SuiteName } from '../scenes/suites.ts';
import type { FigureKind } from './figure-text.ts';
import type { FaultScore, SceneScore, Strictness } from './score.ts';

export type Figure = FigureKind & {
  readonly label: string;
  /** Null where the suite gives nothing to count. */
  readonly value: (scores: readonly SceneScore[], strictness: Strictness) => number | null;
};

const faultsOf = (scores: readonly SceneScore[], strictness: Strictness): FaultScore[] =>
  scores.flatMap((score) => score.variants[strictness].faults);

/** Share of the items that pass; null for none. */
function share<T>(items: readonly T[], passes: (item: T) => boolean): number | null {
  return items.length === 0 ? null : items.filter(passes).length / items.length;
}

function middle(values: readonly number[]): number | null {
  return values.length === 0 ? null : median(values);
}

const isNarrow = (score: SceneScore) => score.plan.startsWith('narrow');

function found(
  atLeast: number | null,
  label = 'found',
  which: (fault: FaultScore) => boolean = () => true,
): Figure {
  return {
    label,
    unit: 'percent',
    target: atLeast === null ? null : { atLeast },
    value: (scores, s) => share(faultsOf(scores, s).filter(which), (fault) => fault.found),
  };
}

function kindRight(
  atLeast: number | null,
  label = 'kind right, of found',
  which: (score: SceneScore) => boolean = () => true,
): Figure {
  return {
    label,
    unit: 'percent',
    target: atLeast === null ? null : { atLeast },
    value: (scores, s) =>
      share(
        faultsOf(scores.filter(which), s).filter((fault) => fault.found),
        (fault) => fault.kindRight === true,
      ),
  };
}

function falsePerLine(atMost: number | null): Figure {
  return {
    label: 'false findings',
    unit: 'a line',
    target: atMost === null ? null : { atMost },
    value: (scores, s) =>
      scores.length === 0
        ? null
        : scores.reduce((sum, score) => sum + score.variants[s].false.length, 0) / scores.length,
  };
}

const jointRight: Figure = {
  label: 'place right (joint or cable), of found',
  unit: 'percent',
  target: null,
  value: (scores, s) =>
    share(
      faultsOf(scores, s).filter((fault) => fault.found),
      (fault) => fault.jointRight === true,
    ),
};

/** Share of true faults within 2σ of their finding. */
const coverage: Figure = {
  label: 'within 2σ, of found',
  unit: 'percent',
  target: { atLeast: 0.9, atMost: 0.98 },
  value: (scores, s) =>
    share(
      faultsOf(scores, s).filter((fault) => fault.errorM !== null && fault.sigmaM !== null),
      (fault) => fault.errorM! <= 2 * fault.sigmaM!,
    ),
};

const distanceError: Figure = {
  label: 'median distance error',
  unit: 'm',
  target: null,
  value: (scores, s) =>
    middle(faultsOf(scores, s).flatMap((fault) => (fault.errorM === null ? [] : [fault.errorM]))),
};

const solveTime: Figure = {
  label: 'median solve time',
  unit: 'ms',
  target: null,
  value: (scores) => middle(scores.map((score) => score.solveMs)),
};

const noAnswer: Figure = {
  label: 'lines without an answer',
  unit: 'count',
  target: { atMost: 0 },
  value: (scores) => scores.filter((score) => score.failed !== null).length,
};

const COMMON: readonly Figure[] = [
  jointRight,
  falsePerLine(null),
  coverage,
  distanceError,
  solveTime,
  noAnswer,
];

const weak = (fault: FaultScore) => fault.apparentReturnLossDb >= 34;

/** Share of the scenes chosen that pass. */
function lines(
  label: string,
  target: Figure['target'],
  which: (score: SceneScore) => boolean,
  passes: (score: SceneScore, strictness: Strictness) => boolean,
): Figure {
  return {
    label,
    unit: 'percent',
    target,
    value: (scores, s) => share(scores.filter(which), (score) => passes(score, s)),
  };
}

function lossError(label: string, at: number, atMost: number): Figure {
  return {
    label,
    unit: 'dB',
    target: { atMost },
    value: (scores) => {
      const errors = scores.flatMap((score) => (score.lossErrorDb === null ? [] : [score.lossErrorDb]));
      return errors.length === 0 ? null : quantile(Float64Array.from(errors), at);
    },
  };
}

const FIGURES: Readonly<Record<SuiteName, readonly Figure[]>> = {
  single: [found(0.98), found(null, 'found, of those of 34–45 dB', weak), kindRight(0.96), ...COMMON],
  pairs: [
    found(0.97),
    lines(
      'told apart, of those within one resolution',
      { atLeast: 0.92 },
      (score) => score.closePair,
      (score, s) => score.variants[s].faults.every((fault) => fault.found),
    ),
    kindRight(0.92),
    ...COMMON,
  ],
  'behind-strong': [
    found(0.98),
    {
      label: 'ghosts called faults',
      unit: 'a line',
      target: { atMost: 0.03 },
      value: (scores, s) =>
        scores.reduce((sum, score) => sum + score.variants[s].false.filter((f) => f.ghost).length, 0) /
        Math.max(1, scores.length),
    },
    kindRight(null),
    ...COMMON,
  ],
  joints: [
    found(null),
    {
      label: 'found at the right joint',
      unit: 'percent',
      target: { atLeast: 0.97 },
      value: (scores, s) => share(faultsOf(scores, s), (fault) => fault.jointRight === true),
    },
    kindRight(0.95, 'kind right in wide sweeps, of found', (score) => !isNarrow(score)),
    kindRight(0.85, 'kind right in narrow sweeps, of found', isNarrow),
    ...COMMON,
  ],
  'last-joint': [found(null), kindRight(null), ...COMMON],
  healthy: [
    falsePerLine(0.02),
    lines(
      'lines flagged',
      { atMost: 0.02 },
      () => true,
      (score, s) => score.variants[s].false.length > 0,
    ),
    solveTime,
    noAnswer,
  ],
  'unknown-length': [
    lines(
      'length and end kind right',
      { atLeast: 0.97 },
      () => true,
      (score) => score.end.lengthRight && score.end.kindRight,
    ),
    lines(
      'the same, load and antenna taken as one',
      null,
      () => true,
      (score) => score.end.lengthRight && score.end.classRight,
    ),
    lines(
      'length right',
      null,
      () => true,
      (score) => score.end.lengthRight,
    ),
    found(null),
    kindRight(null),
    ...COMMON,
  ],
  wet: [
    lines(
      'wet lines flagged where they are wet',
      { atLeast: 0.95 },
      (score) => score.trueStretch === 'wet',
      (score) => score.answeredStretch !== null,
    ),
    lines(
      'called wet, of flagged',
      null,
      (score) => score.trueStretch === 'wet' && score.answeredStretch !== null,
      (score) => score.answeredStretch === 'wet',
    ),
    lines(
      'dry lines flagged',
      { atMost: 0.03 },
      (score) => score.trueStretch === null,
      (score) => score.answeredStretch !== null,
    ),
    falsePerLine(null),
    solveTime,
    noAnswer,
  ],
  loss: [
    lossError('median loss error, one way', 0.5, 0.015),
    lossError('90th percentile', 0.9, 0.04),
    {
      label: 'loss within 2σ',
      unit: 'percent',
      target: { atLeast: 0.9, atMost: 0.98 },
      value: (scores) =>
        share(
          scores.filter((score) => score.lossErrorDb !== null && score.lossSigmaDb !== null),
          (score) => score.lossErrorDb! <= 2 * score.lossSigmaDb!,
        ),
    },
    lines(
      'lines without a loss',
      { atMost: 0 },
      () => true,
      (score) => score.lossErrorDb === null,
    ),
    solveTime,
    noAnswer,
  ],
  'wrong-cable': [
    lines(
      'flagged where it is',
      null,
      () => true,
      (score) => score.answeredStretch !== null,
    ),
    lines(
      'called wrong cable, of flagged',
      null,
      (score) => score.answeredStretch !== null,
      (score) => score.answeredStretch === 'wrong-cable',
    ),
    falsePerLine(null),
    solveTime,
    noAnswer,
  ],
  'off-length': [found(null), kindRight(null), ...COMMON],
  guide: [
    found(0.98),
    found(null, 'found, of those in a tube', (fault) => !fault.atJoint),
    kindRight(null),
    {
      label: 'false findings on sound runs',
      unit: 'a line',
      target: { atMost: 0.02 },
      value: (scores, s) => {
        const sound = scores.filter((score) => score.variants[s].faults.length === 0);
        return sound.length === 0
          ? null
          : sound.reduce((sum, score) => sum + score.variants[s].false.length, 0) / sound.length;
      },
    },
    ...COMMON,
  ],
  'lone-echo': [
    {
      label: 'RMS distance error over the Cramér–Rao bound',
      unit: 'ratio',
      target: { atMost: 0.7 },
      value: (scores) => {
        const ratios = scores.flatMap((score) =>
          score.errorOverBound === null ? [] : [score.errorOverBound],
        );
        return ratios.length === 0
          ? null
          : Math.sqrt(ratios.reduce((sum, r) => sum + r * r, 0) / ratios.length);
      },
    },
    found(null),
    kindRight(null),
    distanceError,
    solveTime,
    noAnswer,
  ],
};

/** The figures that are printed for a suite. */
export function figuresOf(suite: SuiteName): readonly Figure[] {
  return FIGURES[suite];
}

/** One row of the confidence table: findings given a confidence within the limits, and how often they were right. */
export type ConfidenceRow = {
  readonly from: number;
  readonly to: number;
  readonly findings: number;
  readonly meanConfidence: number;
  readonly right: number;
};

const CONFIDENCE_EDGES = [0, 0.5, 0.7, 0.85, 0.95, 1];

/** Over all findings with a confidence, false ones included: right means a true fault, there, of that kind. */
export function confidenceTable(scores: readonly SceneScore[], strictness: Strictness): ConfidenceRow[] {
  const given = scores.flatMap((score) => {
    const { faults, false: extra } = score.variants[strictness];
    return [
      ...faults.map((fault) => ({ confidence: fault.confidence, right: fault.kindRight === true })),
      ...extra.map((finding) => ({ confidence: finding.confidence, right: false })),
    ];
  });
  return CONFIDENCE_EDGES.slice(1).flatMap((to, i) => {
    const from = CONFIDENCE_EDGES[i]!;
    const inside = given.flatMap(({ confidence, right }) =>
      confidence !== null && confidence >= from && (confidence < to || to === 1)
        ? [{ confidence, right }]
        : [],
    );
    if (inside.length === 0) return [];
    const meanConfidence = inside.reduce((sum, g) => sum + g.confidence, 0) / inside.length;
    return [{ from, to, findings: inside.length, meanConfidence, right: share(inside, (g) => g.right) ?? 0 }];
  });
}
