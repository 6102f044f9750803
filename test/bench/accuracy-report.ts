/** One suite's figures as a table of text and as data. */
import type { SuiteName } from '../scenes/suites.ts';
import type { ScenePair } from './accuracy-worker.ts';
import { alignedRows, type FigureValue, meets, overSeeds, targetText, valueText } from './figure-text.ts';
import { type Figure, figuresOf } from './figures.ts';
import type { SceneScore, Strictness } from './score.ts';

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
  return overSeeds(figure, seeds, (seed) =>
    figure.value(seed === null ? scores : scores.filter((score) => score.seed === seed), strictness),
  );
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
  return [title, ...alignedRows(rows)].join('\n');
}

function metText(met: Readonly<Record<Strictness, boolean>>): string {
  if (met.fault && met['fault-or-watch']) return 'met';
  if (!met.fault && !met['fault-or-watch']) return 'NOT met';
  return met.fault ? 'met by faults alone' : 'met with watches';
}
