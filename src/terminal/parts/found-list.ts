/** The list of what was found: a heading and rows, the chosen one among them. */
import type { Analysis } from '../../app/analysis.ts';
import { fitRuns, fitText } from '../../plot/cells.ts';
import { SEVERITY_GLYPHS } from '../../plot/line-strip.ts';
import { fixedText, lengthWithSigmaText, sureText, type Units } from '../../plot/quantity-text.ts';
import { type Run, run } from '../../plot/run.ts';
import { type Found, foundIn } from '../found.ts';
import type { State } from '../state.ts';

/** Widths of the columns; the place takes what is left. */
const POINTER = 3;
const DISTANCE = 17;
const LEVEL = 8;
const WORDS = 26;
const SURE = 6;
const GAP = '  ';
/** Cells at the right for an arrow where the list goes on. */
const ARROW = 2;

/** From this width on, the level as seen at the port stands beside the corrected one. */
const BOTH_LEVELS_FROM = 92;

/** From this width on the place is written out. */
const WHOLE_PLACE_FROM = 96;

/** Names of the columns, as far as they go. */
export function foundHeading(width: number): readonly Run[] {
  const titles = columnsOf(width - ARROW, {
    distance: 'distance',
    seen: 'seen',
    corrected: width - ARROW >= BOTH_LEVELS_FROM ? 'corrected' : 'level',
    words: 'what',
    sure: 'sure',
    place: width - ARROW >= WHOLE_PLACE_FROM ? 'where' : 'at',
  });
  return [run(' '.repeat(POINTER) + titles, 'dim')];
}

/** `rows` rows of the list about the chosen one. */
export function foundRows(
  state: State,
  analysis: Analysis,
  width: number,
  rows: number,
): readonly (readonly Run[])[] {
  const found = foundIn(analysis, state.units);
  const nothing = run(`${' '.repeat(POINTER)}nothing stands out along this line`);
  if (found.length === 0) return blankTo(rows, [fitRuns([nothing], width)], width);
  const first = firstShown(found.length, state.chosen, rows);
  const shown = found.slice(first, first + rows).map((row, i) => {
    const more = i === 0 && first > 0 ? '↑' : i === rows - 1 && first + rows < found.length ? '↓' : ' ';
    return [
      ...foundRow(row, first + i === state.chosen, state.units, width - ARROW),
      run(fitText(more, ARROW, 'right'), 'key'),
    ];
  });
  return blankTo(rows, shown, width);
}

/** First row shown so that the chosen one is in view, with a row beyond it where there is one. */
export function firstShown(count: number, chosen: number, rows: number): number {
  return Math.max(0, Math.min(count - rows, chosen - Math.floor(rows / 2)));
}

function foundRow(row: Found, chosen: boolean, units: Units, width: number): readonly Run[] {
  const text = columnsOf(width, {
    distance: lengthWithSigmaText(row.distanceM, row.distanceSigmaM, units),
    seen: levelOf(row.returnLossDb),
    corrected: levelOf(row.correctedReturnLossDb),
    words: row.short,
    sure: sureText(row.confidence),
    place: width >= WHOLE_PLACE_FROM ? row.where.replace(/^at /u, '') : row.place,
  });
  const glyph = SEVERITY_GLYPHS[row.severity];
  if (chosen) return fitRuns([run(fitText(`›${glyph} ${text}`, width), 'chosen')], width);
  return fitRuns([run(' '), run(glyph, row.severity), run(` ${text}`)], width);
}

function columnsOf(
  width: number,
  cells: {
    readonly distance: string;
    readonly seen: string;
    readonly corrected: string;
    readonly words: string;
    readonly sure: string;
    readonly place: string;
  },
): string {
  return (
    fitText(cells.distance, DISTANCE) +
    (width >= BOTH_LEVELS_FROM ? fitText(cells.seen, LEVEL + 1, 'right') : '') +
    fitText(cells.corrected, width >= BOTH_LEVELS_FROM ? LEVEL + 3 : LEVEL, 'right') +
    GAP +
    fitText(cells.words, WORDS) +
    fitText(cells.sure, SURE, 'right') +
    GAP +
    cells.place
  );
}

function levelOf(returnLossDb: number | null): string {
  return returnLossDb === null ? '' : `${fixedText(-returnLossDb, 1)} dB`;
}

function blankTo(
  count: number,
  rows: readonly (readonly Run[])[],
  width: number,
): readonly (readonly Run[])[] {
  return Array.from({ length: count }, (_, i) => rows[i] ?? fitRuns([], width));
}
