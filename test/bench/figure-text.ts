/** Figures of suites over seeds: the worst seed's, against the target, and as text. */

export type FigureUnit = 'percent' | 'a line' | 'm' | 'ms' | 'ratio' | 'count' | 'dB' | 'ppm';

/** What a figure is measured in, and what is asked of it; null when it is only shown. */
export type FigureKind = {
  readonly unit: FigureUnit;
  readonly target: { readonly atLeast?: number; readonly atMost?: number } | null;
};

/** Worst seed's value and the value over all seeds; null where there was nothing to count. */
export type FigureValue = { readonly worst: number | null; readonly all: number | null };

/** A figure of each seed, and of all of them together (`null`). */
export function overSeeds(
  figure: FigureKind,
  seeds: readonly number[],
  figureOf: (seed: number | null) => number | null,
): FigureValue {
  const each = seeds.map(figureOf).filter((value) => value !== null);
  const all = figureOf(null);
  if (each.length === 0) return { worst: null, all };
  return { worst: each.reduce((a, b) => (badness(figure, a) >= badness(figure, b) ? a : b)), all };
}

/** How far a value is on the wrong side; for a target with two sides, how far from their middle. */
function badness(figure: FigureKind, value: number): number {
  const { atLeast, atMost } = figure.target ?? {};
  if (atLeast !== undefined && atMost !== undefined) return Math.abs(value - (atLeast + atMost) / 2);
  if (atMost !== undefined) return value;
  const lessIsBetter = figure.unit !== 'percent';
  return lessIsBetter ? value : -value;
}

/** Whether the worst seed meets the target. */
export function meets(figure: FigureKind, { worst }: FigureValue): boolean {
  const { atLeast = Number.NEGATIVE_INFINITY, atMost = Number.POSITIVE_INFINITY } = figure.target ?? {};
  return worst !== null && worst >= atLeast && worst <= atMost;
}

/** "96.0 % (97.2 %)": the worst seed's, that of all seeds in brackets. */
export function valueText({ worst, all }: FigureValue, unit: FigureUnit): string {
  if (worst === null) return '–';
  return `${numberText(worst, unit)} (${all === null ? '–' : numberText(all, unit)})`;
}

/** A figure with its unit. */
export function numberText(value: number, unit: FigureUnit): string {
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
    case 'ppm':
      return `${value.toFixed(1)} ppm`;
    case 'count':
      return String(value);
  }
}

/** What is asked of a figure; empty where nothing is. */
export function targetText({ target, unit }: FigureKind): string {
  if (target === null) return '';
  const { atLeast, atMost } = target;
  if (atLeast !== undefined && atMost !== undefined)
    return `${numberText(atLeast, unit)} to ${numberText(atMost, unit)}`;
  return atLeast !== undefined ? `≥ ${numberText(atLeast, unit)}` : `≤ ${numberText(atMost ?? 0, unit)}`;
}

/** Rows in columns as wide as their widest cell: the first to the left, the others to the right. */
export function alignedRows(rows: readonly (readonly string[])[]): string[] {
  const widths = rows[0]!.map((_, column) => Math.max(...rows.map((row) => row[column]!.length)));
  return rows.map((row) =>
    row
      .map((cell, column) => (column === 0 ? cell.padEnd(widths[0]!) : cell.padStart(widths[column]!)))
      .join('  ')
      .trimEnd(),
  );
}
