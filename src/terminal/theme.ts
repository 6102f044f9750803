/** Roles to terminal styles. Colours are the terminal's own sixteen, so they suit its background, dark or light. */
import type { Role, Run } from '../plot/run.ts';

/** SGR parameters of a role; empty for plain text. */
export type Theme = { readonly name: string; readonly styles: Readonly<Record<Role, readonly number[]>> };

const BOLD = 1;
const DIM = 2;
const INVERSE = 7;
const RED = 31;
const GREEN = 32;
const YELLOW = 33;
const MAGENTA = 35;
const CYAN = 36;

/** Weight and reversal only. */
const MONOCHROME: Theme = {
  name: 'monochrome',
  styles: {
    plain: [],
    dim: [DIM],
    strong: [BOLD],
    chosen: [INVERSE],
    key: [BOLD],
    axis: [DIM],
    line: [],
    trace: [],
    ohms: [],
    baseline: [DIM],
    difference: [BOLD],
    doubt: [DIM],
    guide: [DIM],
    cursor: [BOLD],
    fault: [BOLD],
    watch: [BOLD],
    sound: [],
    caution: [BOLD],
  },
};

/** The usual set. */
const COLOURS: Theme = {
  name: 'colours',
  styles: {
    ...MONOCHROME.styles,
    trace: [CYAN],
    ohms: [MAGENTA],
    difference: [YELLOW],
    fault: [BOLD, RED],
    watch: [BOLD, YELLOW],
    sound: [GREEN],
    caution: [YELLOW],
  },
};

/** Nothing but characters, for terminals that know no styles. */
export const BARE: Theme = {
  name: 'bare',
  styles: Object.fromEntries(Object.keys(MONOCHROME.styles).map((role) => [role, []])) as unknown as Record<
    Role,
    readonly number[]
  >,
};

/**
 * The theme for an environment: no colour where NO_COLOR is set to anything but nothing, no styles on a dumb terminal.
 *
 * @source no-color.org (the convention of the NO_COLOR variable).
 */
export function themeFor(env: Readonly<Record<string, string | undefined>>): Theme {
  if (env['TERM'] === 'dumb') return BARE;
  return env['NO_COLOR'] ? MONOCHROME : COLOURS;
}

/** A row of runs as text with escape codes; each run ends in a reset, so that rows stand alone. */
export function styledText(runs: readonly Run[], theme: Theme): string {
  let text = '';
  for (const { text: piece, role } of runs) {
    const style = theme.styles[role];
    text += style.length === 0 || piece === '' ? piece : `\u001b[${style.join(';')}m${piece}\u001b[0m`;
  }
  return text;
}
