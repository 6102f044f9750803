/** The key table: what each key does, and the words for it in the footer and on the help page. Nothing else reads keys. */
import type { KeyEvent } from './events.ts';
import { analysisOf, type State } from './state.ts';
import { isTyped, type Stroke } from './strokes.ts';
import { VIEW_IDS } from './view-ids.ts';

/** A line of the key table. */
export type KeyRow = {
  readonly group: KeyGroup;
  /** How the keys are written: "↑ ↓". */
  readonly shown: string;
  /** What they do, for the help page. */
  readonly does: string;
  /** One word for the footer, most wanted first by `rank`; without one the footer leaves the row out. */
  readonly hint?: { readonly keys: string; readonly word: string; readonly rank: number };
  /** Works only while there is an answer on the screen. */
  readonly needsAnswer?: true;
  readonly strokes: Readonly<Record<Stroke, KeyEvent>>;
};

export type KeyGroup = 'what was found' | 'looking' | 'views' | 'changing' | 'program';

/** Where keys go: the workspace, a page over it, or a list to pick from. */
export type KeyMode = 'work' | 'page' | 'pick';

const ALWAYS: readonly KeyRow[] = [
  {
    group: 'program',
    shown: 'Ctrl-L',
    does: 'paint the screen anew',
    strokes: { 'ctrl+l': { type: 'redraw' } },
  },
  {
    group: 'program',
    shown: 'Ctrl-Z',
    does: 'back to the shell for a while; fg returns',
    strokes: { 'ctrl+z': { type: 'suspend' } },
  },
];

const WORK: readonly KeyRow[] = [
  {
    group: 'what was found',
    shown: '↑ ↓',
    does: 'choose what was found; the cursor goes there',
    hint: { keys: '↑↓', word: 'choose', rank: 1 },
    needsAnswer: true,
    strokes: { up: { type: 'choose', by: -1 }, down: { type: 'choose', by: 1 } },
  },
  {
    group: 'what was found',
    shown: 'PgUp PgDn',
    does: 'five further up or down',
    needsAnswer: true,
    strokes: { pageup: { type: 'choose', by: -5 }, pagedown: { type: 'choose', by: 5 } },
  },
  {
    group: 'what was found',
    shown: 'Enter',
    does: 'all that is known of the chosen one',
    hint: { keys: 'Enter', word: 'more', rank: 2 },
    needsAnswer: true,
    strokes: { enter: { type: 'openPage', page: 'finding' } },
  },
  {
    group: 'what was found',
    shown: 'n',
    does: 'what the answer rests on, and notices',
    needsAnswer: true,
    strokes: { n: { type: 'openPage', page: 'notices' } },
  },
  {
    group: 'looking',
    shown: '← →',
    does: 'move the cursor; with Shift ten cells at once',
    hint: { keys: '←→', word: 'cursor', rank: 3 },
    needsAnswer: true,
    strokes: {
      left: { type: 'moveCursor', cells: -1 },
      right: { type: 'moveCursor', cells: 1 },
      'shift+left': { type: 'moveCursor', cells: -10 },
      'shift+right': { type: 'moveCursor', cells: 10 },
    },
  },
  {
    group: 'looking',
    shown: 'Home End',
    does: 'cursor to the port, to the end of the line',
    needsAnswer: true,
    strokes: { home: { type: 'cursorTo', place: 'port' }, end: { type: 'cursorTo', place: 'end' } },
  },
  {
    group: 'looking',
    shown: '+ −',
    does: 'closer, farther, about the cursor',
    hint: { keys: '+−', word: 'zoom', rank: 4 },
    needsAnswer: true,
    strokes: {
      '+': { type: 'zoom', factor: 1.6 },
      '=': { type: 'zoom', factor: 1.6 },
      '-': { type: 'zoom', factor: 1 / 1.6 },
      _: { type: 'zoom', factor: 1 / 1.6 },
    },
  },
  {
    group: 'looking',
    shown: '< >',
    does: 'half a screen toward the port, toward the end',
    needsAnswer: true,
    strokes: {
      '<': { type: 'pan', screens: -0.5 },
      ',': { type: 'pan', screens: -0.5 },
      '>': { type: 'pan', screens: 0.5 },
      '.': { type: 'pan', screens: 0.5 },
    },
  },
  {
    group: 'looking',
    shown: '0',
    does: 'the whole line',
    hint: { keys: '0', word: 'whole line', rank: 8 },
    needsAnswer: true,
    strokes: { '0': { type: 'wholeLine' } },
  },
  {
    group: 'views',
    shown: VIEW_IDS.map((_, i) => i + 1).join(' '),
    does: VIEW_IDS.join(', '),
    needsAnswer: true,
    strokes: Object.fromEntries(VIEW_IDS.map((view, i) => [String(i + 1), { type: 'view', view }])),
  },
  {
    group: 'views',
    shown: 'Tab',
    does: 'the next view; with Shift the one before',
    needsAnswer: true,
    strokes: { tab: { type: 'nextView', by: 1 }, 'shift+tab': { type: 'nextView', by: -1 } },
  },
  {
    group: 'changing',
    shown: 'w',
    does: 'window: sharper echoes or calmer side lobes',
    hint: { keys: 'w', word: 'window', rank: 5 },
    needsAnswer: true,
    strokes: { w: { type: 'openPicker', what: 'window' } },
  },
  {
    group: 'changing',
    shown: 'c',
    does: 'another cable for the longest section; solves again',
    hint: { keys: 'c', word: 'cable', rank: 6 },
    strokes: { c: { type: 'openPicker', what: 'cable' } },
  },
  {
    group: 'changing',
    shown: 'l',
    does: "trace with the line's loss undone, or as measured",
    needsAnswer: true,
    strokes: { l: { type: 'toggleCorrected' } },
  },
  {
    group: 'changing',
    shown: 'u',
    does: 'metres or feet',
    hint: { keys: 'u', word: 'm/ft', rank: 7 },
    strokes: { u: { type: 'toggleUnits' } },
  },
  {
    group: 'changing',
    shown: 'r',
    does: 'read the sweep file again and solve',
    strokes: { r: { type: 'readAgain' } },
  },
  {
    group: 'program',
    shown: 'p',
    does: 'other colours: light, high contrast, colour-blind',
    strokes: { p: { type: 'nextColours' } },
  },
  {
    group: 'program',
    shown: '!',
    does: 'cautions: before you connect or climb',
    strokes: { '!': { type: 'openPage', page: 'cautions' } },
  },
  {
    group: 'program',
    shown: '?',
    does: 'this page',
    hint: { keys: '?', word: 'keys', rank: 0 },
    strokes: { '?': { type: 'openPage', page: 'help' } },
  },
  {
    group: 'program',
    shown: 'q Ctrl-C',
    does: 'quit',
    hint: { keys: 'q', word: 'quit', rank: 0 },
    strokes: { q: { type: 'quit' }, 'ctrl+c': { type: 'quit' } },
  },
  ...ALWAYS,
];

const PAGE: readonly KeyRow[] = [
  {
    group: 'looking',
    shown: '↑ ↓',
    does: 'read on',
    hint: { keys: '↑↓', word: 'read on', rank: 1 },
    strokes: {
      up: { type: 'scroll', lines: -1 },
      down: { type: 'scroll', lines: 1 },
      pageup: { type: 'scroll', lines: -10 },
      pagedown: { type: 'scroll', lines: 10 },
      ' ': { type: 'scroll', lines: 10 },
    },
  },
  {
    group: 'program',
    shown: 'Esc',
    does: 'back to the line',
    hint: { keys: 'Esc', word: 'back', rank: 0 },
    strokes: {
      esc: { type: 'closePanel' },
      enter: { type: 'closePanel' },
      '?': { type: 'closePanel' },
      '!': { type: 'closePanel' },
    },
  },
  {
    group: 'program',
    shown: 'q',
    does: 'quit',
    hint: { keys: 'q', word: 'quit', rank: 2 },
    strokes: { q: { type: 'quit' }, 'ctrl+c': { type: 'quit' } },
  },
  ...ALWAYS,
];

const PICK: readonly KeyRow[] = [
  {
    group: 'looking',
    shown: '↑ ↓',
    does: 'move',
    hint: { keys: '↑↓', word: 'move', rank: 1 },
    strokes: {
      up: { type: 'pickMove', by: -1 },
      down: { type: 'pickMove', by: 1 },
      pageup: { type: 'pickMove', by: -5 },
      pagedown: { type: 'pickMove', by: 5 },
      tab: { type: 'pickMove', by: 1 },
      'shift+tab': { type: 'pickMove', by: -1 },
    },
  },
  {
    group: 'changing',
    shown: 'Enter',
    does: 'take it',
    hint: { keys: 'Enter', word: 'take', rank: 2 },
    strokes: { enter: { type: 'pickTake' } },
  },
  {
    group: 'changing',
    shown: 'letters',
    does: 'narrow the list',
    hint: { keys: 'a–z', word: 'narrow', rank: 3 },
    strokes: { backspace: { type: 'pickErase' } },
  },
  {
    group: 'program',
    shown: 'Esc',
    does: 'leave it as it was',
    hint: { keys: 'Esc', word: 'leave it', rank: 0 },
    strokes: { esc: { type: 'closePanel' }, 'ctrl+c': { type: 'quit' } },
  },
  ...ALWAYS,
];

/** The key table, by where the keys go. */
export const KEY_TABLE: Readonly<Record<KeyMode, readonly KeyRow[]>> = { work: WORK, page: PAGE, pick: PICK };

/** Where keys go at the moment. */
export function keyModeOf(state: State): KeyMode {
  return state.panel === null ? 'work' : state.panel.type;
}

/** The event of a stroke, or null when it means nothing here. */
export function eventFor(state: State, stroke: Stroke): KeyEvent | null {
  const mode = keyModeOf(state);
  for (const row of KEY_TABLE[mode]) {
    if (!Object.hasOwn(row.strokes, stroke)) continue;
    return row.needsAnswer && !analysisOf(state) ? null : (row.strokes[stroke] ?? null);
  }
  return mode === 'pick' && isTyped(stroke) ? { type: 'pickType', text: stroke } : null;
}

/** The rows that have a word in the footer now, most wanted first. */
export function hintedKeys(state: State): readonly KeyRow[] {
  return KEY_TABLE[keyModeOf(state)]
    .filter((row) => row.hint && !(row.needsAnswer && !analysisOf(state)))
    .sort((a, b) => (a.hint?.rank ?? 0) - (b.hint?.rank ?? 0));
}
