/** One suite's figures as a table of text and as data. */
import type { SuiteName } from '../scenes/suites.ts';
import type { ScenePair } from './accuracy-worker.ts';
import { type Figure, figuresOf } from './figures.ts';
import type { SceneScore, Strictness } from './score.ts';

/** Worst seed's value and the value over all seeds; null where there was nothing to count. */
export type FigureValue = { readonly worst: number | null; readonly all: number | null };

export type FigureRow = {
  readonly label: string;
  readonly unit: Figure['unit'];
  readonly target: Figure['target'];
  readonly program: Readonly<Record<Strictness, FigureValue>>;
  readonly plain: FigureValue;
  /** Whether the worst seed meets the target, for each way of counting; null without a target. */
  readonly met: Readonly<Record<Strictness, boolean>> | null;
};

export type SuiteReport = {
  readonly text: string;
  readonly data: {
    readonly suite: SuiteName;
    readonly scenes: number;
    readonly figures: readonly FigureRow[];
  };
};

/** Works out the figures of a suite's scenes. */
export function suiteReport(
  suite: SuiteName,
  seeds: readonly number[],
  pairs: readonly ScenePair[],
): SuiteReport {
  const program = pairs.map((pair) => pair.program);
  const plain = pairs.map((pair) => pair.plain);
  const figures = figuresOf(suite).map((figure): FigureRow => {
    const values = {
      fault: figureValue(figure, seeds, program, 'fault'),
      'fault-or-watch': figureValue(figure, seeds, program, 'fault-or-watch'),
    };
    return {
      label: figure.label,
      unit: figure.unit,
      target: figure.target,
      program: values,
      plain: figureValue(figure, seeds, plain, 'fault'),
      met:
        figure.target === null
          ? null
          : { fault: meets(figure, values.fault), 'fault-or-watch': meets(figure, values['fault-or-watch']) },
    };
  });
  return {
    text: table(`suite ${suite} · ${pairs.length} scenes · worst seed (all)`, figures),
    data: { suite, scenes: pairs.length, figures },
  };
}

function figureValue(
  figure: Figure,
  seeds: readonly number[],
  scores: readonly SceneScore[],
  strictness: Strictness,
): FigureValue {
  const each = seeds
    .map((seed) =>
      figure.value(
        scores.filter((score) => score.seed === seed),
        strictness,
      ),
    )
    .filter((value) => value !== null);
  const all = figure.value(scores, strictness);
  if (each.length === 0) return { worst: null, all };
  return { worst: each.reduce((a, b) => (badness(figure, a) >= badness(figure, b) ? a : b)), all };
}

/** How far a value is on the wrong side; for a target with two sides, how far from their middle. */
function badness(figure: Figure, value: number): number {
  const { atLeast, atMost } = figure.target ?? {};
  if (atLeast !== undefined && atMost !== undefined) return Math.abs(value - (atLeast + atMost) / 2);
  if (atMost !== undefined) return value;
  const lessIsBetter = figure.unit !== 'percent';
  return lessIsBetter ? value : -value;
}

function meets(figure: Figure, { worst }: FigureValue): boolean {
  const { atLeast = Number.NEGATIVE_INFINITY, atMost = Number.POSITIVE_INFINITY } = figure.target ?? {};
  return worst !== null && worst >= atLeast && worst <= atMost;
}

function table(title: string, figures: readonly FigureRow[]): string {
  const rows = [
    ['', 'fault', 'fault or watch', 'plain recipe', 'target', ''],
    ...figures.map((row) => [
      row.label,
      valueText(row.program.fault, row.unit),
      valueText(row.program['fault-or-watch'], row.unit),
      valueText(row.plain, row.unit),
      targetText(row),
      row.met === null ? '' : metText(row.met),
    ]),
  ];
  const widths = rows[0]!.map((_, column) => Math.max(...rows.map((row) => row[column]!.length)));
  const lines = rows.map((row) =>
    row
      .map((cell, column) => (column === 0 ? cell.padEnd(widths[0]!) : cell.padStart(widths[column]!)))
      .join('  ')
      .trimEnd(),
  );
  return [title, ...lines].join('\n');
}

function metText(met: Readonly<Record<Strictness, boolean>>): string {
  if (met.fault && met['fault-or-watch']) return 'met';
  if (!met.fault && !met['fault-or-watch']) return 'NOT met';
  return met.fault ? 'met by faults alone' : 'met with watches';
}

function valueText({ worst, all }: FigureValue, unit: Figure['unit']): string {
  if (worst === null) return '–';
  return `${numberText(worst, unit)} (${all === null ? '–' : numberText(all, unit)})`;
}

function numberText(value: number, unit: Figure['unit']): string {
  switch (unit) {
    case 'percent':
      return `${(100 * value).toFixed(1)} %`;
    case 'a line':
    case 'ratio':
      return value.toFixed(3);
    case 'm':
      return `${value.toFixed(4)} m`;
    case 'dB':
      return `${value.toFixed(4)} dB`;
    case 'ms':
      return `${value.toFixed(0)} ms`;
    case 'count':
      return String(value);
  }
}

function targetText({ target, unit }: FigureRow): string {
  if (target === null) return '';
  const { atLeast, atMost } = target;
  if (atLeast !== undefined && atMost !== undefined)
    return `${numberText(atLeast, unit)} to ${numberText(atMost, unit)}`;
  return atLeast !== undefined ? `≥ ${numberText(atLeast, unit)}` : `≤ ${numberText(atMost ?? 0, unit)}`;
}
