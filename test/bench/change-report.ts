/** The figures of a suite of comparisons as a table of text and as data. */
import { CHANGE_FIGURES } from './change-figures.ts';
import type { ChangeSuiteName } from './change-suites.ts';
import {
  alignedRows,
  type FigureKind,
  type FigureValue,
  meets,
  overSeeds,
  targetText,
  valueText,
} from './figure-text.ts';
import type { ChangeScore } from './score-change.ts';

export type ChangeRow = FigureKind & {
  readonly label: string;
  readonly value: FigureValue;
  /** Pairs that were counted. */
  readonly counted: number;
  /** Whether the worst seed, and whether all seeds together meet the target; null without a target. */
  readonly met: { readonly worst: boolean; readonly all: boolean } | null;
};

export type ChangeReport = {
  readonly text: string;
  readonly data: {
    readonly suite: ChangeSuiteName;
    readonly pairs: number;
    readonly figures: readonly ChangeRow[];
  };
};

/** Works out the figures of a suite's pairs. */
export function changeReport(
  suite: ChangeSuiteName,
  seeds: readonly number[],
  scores: readonly ChangeScore[],
): ChangeReport {
  const figures = CHANGE_FIGURES.map((figure): ChangeRow => {
    const counted = scores.filter(figure.which);
    const value = overSeeds(figure, seeds, (seed) =>
      figure.value(seed === null ? counted : counted.filter((score) => score.seed === seed)),
    );
    const { label, unit, target } = figure;
    const all = meets(figure, { worst: value.all, all: value.all });
    return {
      label,
      unit,
      target,
      value,
      counted: counted.length,
      met: target && { worst: meets(figure, value), all },
    };
  });
  const rows = [
    ['', 'program', 'of', 'target', ''],
    ...figures.map((row) => [
      row.label,
      valueText(row.value, row.unit),
      String(row.counted),
      targetText(row),
      row.met === null ? '' : row.met.worst ? 'met' : row.met.all ? 'met over all seeds' : 'NOT met',
    ]),
  ];
  return {
    text: [`suite ${suite} · ${scores.length} pairs of sweeps · worst seed (all)`, ...alignedRows(rows)].join(
      '\n',
    ),
    data: { suite, pairs: scores.length, figures },
  };
}
