/** Two traces of one line, what is left of one when the other is taken from it, and where it has changed. */
import type { Change } from '../assess/comparison.ts';
import { median } from '../numerics/statistics.ts';
import type { ChartMark } from '../plot/chart.ts';
import { lengthPerMetre, type Units } from '../plot/quantity-text.ts';
import type { Domain } from '../plot/scale.ts';
import { type Drawing, dottedKey, type KeyEntry, lineKey, markKey } from './drawing.ts';
import type { Curve } from './trace-curve.ts';

/** Signs of a change: something has come, or what was there has gone. */
export const CHANGE_GLYPHS = { come: '+', gone: '−' } as const;

export type ChangeCurves = {
  /** Levels against distance, dB. */
  readonly now: Curve;
  readonly before: Curve;
  /** Of later less earlier, with weather and instrument taken out. */
  readonly difference: Curve;
};

export type ChangeDrawingOptions = {
  /** Distances in view, m. */
  readonly domainM: Domain;
  readonly units: Units;
  /** Of levels, dB; by default as deep as the difference goes. */
  readonly levelDomainDb?: Domain | undefined;
};

const STEP_DB = 10;
const ROOM_BELOW_DB = 6;
const LEAST_DEPTH_DB = 40;
const MOST_DEPTH_DB = 120;

/** Draws it: the baseline under the later trace, the difference over both. */
export function changeDrawing(
  curves: ChangeCurves,
  changes: readonly Change[],
  options: ChangeDrawingOptions,
): Drawing {
  const { domainM, units } = options;
  return {
    title: 'what has changed along the line',
    chart: {
      x: { domain: domainM, unit: units, perUnit: lengthPerMetre(units) },
      y: { domain: options.levelDomainDb ?? differenceDepth(curves.difference), unit: 'dB' },
      series: [
        { ...curves.before, role: 'baseline', dotted: true },
        { ...curves.now, role: 'trace' },
        { ...curves.difference, role: 'difference' },
      ],
      levels: [],
      marks: changes.map(changeMark),
      cursor: null,
    },
    key: keyOf(changes),
  };
}

/** The sign of a change over the curves at its place. */
export function changeMark({ distanceM, gone }: Change): ChartMark {
  return {
    x: distanceM,
    y: null,
    glyph: gone ? CHANGE_GLYPHS.gone : CHANGE_GLYPHS.come,
    role: 'difference',
  };
}

/** From 0 dB to a little below the middle of the difference, at round levels. */
export function differenceDepth({ y }: Curve): Domain {
  const levels = y.filter(Number.isFinite);
  const lowest = levels.length > 0 ? median(levels) - ROOM_BELOW_DB : -LEAST_DEPTH_DB;
  const down = Math.max(-MOST_DEPTH_DB, Math.min(-LEAST_DEPTH_DB, lowest));
  return [STEP_DB * Math.floor(down / STEP_DB), 0];
}

function keyOf(changes: readonly Change[]): readonly KeyEntry[] {
  return [
    lineKey('trace', 'now'),
    dottedKey('baseline', 'baseline'),
    lineKey('difference', 'difference'),
    ...(changes.some(({ gone }) => !gone) ? [markKey('difference', CHANGE_GLYPHS.come, 'new')] : []),
    ...(changes.some(({ gone }) => gone) ? [markKey('difference', CHANGE_GLYPHS.gone, 'gone')] : []),
  ];
}
