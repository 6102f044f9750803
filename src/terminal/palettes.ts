/**
 * Sets of colours for the roles. All are the terminal's own sixteen, so they work everywhere and follow its background;
 * signs and words carry the meaning, colour only helps the eye.
 */
import type { ColourSet } from '../app/settings.ts';
import type { Role } from '../plot/run.ts';

/** SGR parameters of a role; empty for plain text. @source ECMA-48, SGR; 90–97 are the bright eight of common practice. */
export type Styles = Readonly<Record<Role, readonly number[]>>;

/** What each set is for. */
export const PALETTE_WORDS: Readonly<Record<ColourSet, string>> = {
  usual: 'for a dark background',
  light: 'for a light background',
  contrast: 'high contrast',
  'colour-blind': 'safe for colour-blind eyes',
};

const BOLD = 1;
const DIM = 2;
const INVERSE = 7;
const RED = 31;
const GREEN = 32;
const YELLOW = 33;
const BLUE = 34;
const MAGENTA = 35;
const CYAN = 36;
const BRIGHT_RED = 91;
const BRIGHT_GREEN = 92;
const BRIGHT_YELLOW = 93;
const BRIGHT_BLUE = 94;
const BRIGHT_MAGENTA = 95;
const BRIGHT_CYAN = 96;
const BRIGHT_WHITE = 97;

/** Weight and reversal only. */
export const MONOCHROME_STYLES: Styles = {
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
  tried: [BOLD],
  difference: [BOLD],
  doubt: [DIM],
  guide: [DIM],
  cursor: [BOLD],
  fault: [BOLD],
  watch: [BOLD],
  sound: [],
  caution: [BOLD],
};

/** Nothing but characters, for terminals that know no styles. */
export const BARE_STYLES: Styles = Object.fromEntries(
  Object.keys(MONOCHROME_STYLES).map((role) => [role, []]),
) as unknown as Styles;

const USUAL: Styles = {
  ...MONOCHROME_STYLES,
  trace: [CYAN],
  ohms: [MAGENTA],
  tried: [BOLD, MAGENTA],
  difference: [YELLOW],
  fault: [BOLD, RED],
  watch: [BOLD, YELLOW],
  sound: [GREEN],
  caution: [YELLOW],
};

/** No yellow, which is lost on white; nothing dimmed. */
const LIGHT: Styles = {
  ...MONOCHROME_STYLES,
  dim: [],
  axis: [],
  guide: [],
  baseline: [],
  trace: [BLUE],
  ohms: [MAGENTA],
  tried: [BOLD, MAGENTA],
  difference: [CYAN],
  doubt: [],
  fault: [BOLD, RED],
  watch: [BOLD, MAGENTA],
  sound: [GREEN],
  caution: [BOLD, RED],
};

/** Bright colours in full weight, nothing dimmed. */
const CONTRAST: Styles = {
  ...MONOCHROME_STYLES,
  dim: [],
  axis: [BRIGHT_WHITE],
  guide: [BRIGHT_WHITE],
  baseline: [BRIGHT_BLUE],
  trace: [BOLD, BRIGHT_CYAN],
  ohms: [BOLD, BRIGHT_MAGENTA],
  tried: [BOLD, BRIGHT_MAGENTA],
  difference: [BOLD, BRIGHT_MAGENTA],
  doubt: [],
  key: [BOLD, BRIGHT_WHITE],
  strong: [BOLD, BRIGHT_WHITE],
  fault: [BOLD, INVERSE, BRIGHT_RED],
  watch: [BOLD, INVERSE, BRIGHT_YELLOW],
  sound: [BOLD, BRIGHT_GREEN],
  caution: [BOLD, BRIGHT_YELLOW],
};

/** Yellow, blue and weight: what every common kind of colour blindness can tell apart; never red against green. */
const COLOUR_BLIND: Styles = {
  ...MONOCHROME_STYLES,
  baseline: [],
  trace: [BRIGHT_CYAN],
  ohms: [BRIGHT_CYAN],
  tried: [BOLD, BRIGHT_YELLOW],
  difference: [BRIGHT_YELLOW],
  fault: [BOLD, INVERSE, YELLOW],
  watch: [BOLD, YELLOW],
  sound: [BRIGHT_BLUE],
  caution: [YELLOW],
};

export const PALETTES: Readonly<Record<ColourSet, Styles>> = {
  usual: USUAL,
  light: LIGHT,
  contrast: CONTRAST,
  'colour-blind': COLOUR_BLIND,
};

/**
 * The set for a terminal that nobody has chosen one for: some terminals tell their colours as "text;background" in
 * COLORFGBG. @source common practice: backgrounds 7 and 9 to 15 are light.
 */
export function paletteFor(env: Readonly<Record<string, string | undefined>>): ColourSet {
  const background = /;(\d{1,2})$/.exec(env['COLORFGBG'] ?? '')?.[1];
  return background !== undefined && (background === '7' || Number(background) >= 9) ? 'light' : 'usual';
}
