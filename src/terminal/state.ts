/** What is on the screen, as plain data. What follows from it is in `derived.ts`, never stored twice. */
import type { Analysis } from '../app/analysis.ts';
import type { ColourSet } from '../app/settings.ts';
import type { AnalyseRequest } from '../app/solver.ts';
import type { Cable } from '../line/cable.ts';
import type { DistanceTrace } from '../locate/distance-trace.ts';
import type { Notice, Problem } from '../outcome.ts';
import type { GlyphSet } from '../plot/glyph-sets.ts';
import type { Units } from '../plot/quantity-text.ts';
import type { Domain } from '../plot/scale.ts';
import type { Cautions } from './config.ts';
import type { ViewId } from './view-ids.ts';

/** How far the answer to the present question is. Each question has its own number. */
export type Solve =
  | { readonly phase: 'idle' }
  | {
      readonly phase: 'running';
      readonly id: number;
      readonly stage: string;
      readonly fraction: number;
      /** The trace along the described line, for a first look; null until it is there, or when there is none. */
      readonly look: DistanceTrace | null;
    }
  | {
      readonly phase: 'ready';
      readonly id: number;
      readonly analysis: Analysis;
      readonly notices: readonly Notice[];
    }
  | { readonly phase: 'failed'; readonly id: number; readonly problems: readonly Problem[] };

/** Pages that cover the workspace while they are read. */
export type PageName = 'help' | 'cautions' | 'notices' | 'finding';

/** What can be chosen in place. */
export type Choice = 'window' | 'cable';

/** What lies over the workspace, if anything. */
export type Panel =
  | { readonly type: 'page'; readonly page: PageName; readonly scroll: number }
  | { readonly type: 'pick'; readonly what: Choice; readonly filter: string; readonly row: number };

export type State = {
  readonly columns: number;
  readonly rows: number;
  /** The present question; null before anything was opened. */
  readonly request: AnalyseRequest | null;
  readonly solve: Solve;
  /** Number of the latest question; answers to earlier ones are dropped. */
  readonly lastId: number;
  readonly view: ViewId;
  /** Distances in view, m; null for the whole line. */
  readonly span: Domain | null;
  readonly cursorM: number;
  /** Row chosen in the list of what was found. */
  readonly chosen: number;
  readonly windowSpec: string;
  /** Loss and dispersion undone in the trace. */
  readonly corrected: boolean;
  /** The trace as last computed, and the number of the wish it answers. */
  readonly trace: { readonly id: number; readonly trace: DistanceTrace } | null;
  /** Number of the latest wish for a trace. */
  readonly lastTraceId: number;
  readonly units: Units;
  readonly colours: ColourSet;
  /** False under NO_COLOR and where the terminal has none. */
  readonly hasColour: boolean;
  readonly glyphs: GlyphSet;
  readonly panel: Panel | null;
  /** The cautions' one line is shown until they were opened once. */
  readonly cautionsRead: boolean;
  /** A short word on the last key that could not do anything, shown until the next key. */
  readonly remark: string | null;
  /** What can be chosen; never changes. */
  readonly cables: readonly Cable[];
  readonly cautions: Cautions;
  /** What was decided without being asked before the first question; belongs to every answer. */
  readonly openingNotices: readonly Notice[];
};

/** The state before the first event. */
export function initialState(start: {
  readonly columns: number;
  readonly rows: number;
  readonly request: AnalyseRequest | null;
  readonly units: Units;
  readonly colours?: ColourSet;
  readonly hasColour?: boolean;
  readonly glyphs?: GlyphSet;
  readonly cables: readonly Cable[];
  readonly cautions: Cautions;
  readonly openingNotices?: readonly Notice[];
}): State {
  return {
    columns: start.columns,
    rows: start.rows,
    request: start.request,
    solve: start.request
      ? { phase: 'running', id: 1, stage: 'starting', fraction: 0, look: null }
      : { phase: 'idle' },
    lastId: start.request ? 1 : 0,
    view: 'trace',
    span: null,
    cursorM: 0,
    chosen: 0,
    windowSpec: start.request?.windowSpec ?? 'kaiser:6',
    corrected: true,
    trace: null,
    lastTraceId: 0,
    units: start.units,
    colours: start.colours ?? 'usual',
    hasColour: start.hasColour ?? true,
    glyphs: start.glyphs ?? 'braille',
    panel: null,
    cautionsRead: false,
    remark: null,
    cables: start.cables,
    cautions: start.cautions,
    openingNotices: start.openingNotices ?? [],
  };
}

/** The answer on the screen, or null while there is none. */
export function analysisOf(state: State): Analysis | null {
  return state.solve.phase === 'ready' ? state.solve.analysis : null;
}
