/** Roles to terminal styles. */
import type { ColourSet } from '../app/settings.ts';
import { type GlyphSet, inGlyphSet } from '../plot/glyph-sets.ts';
import type { Run } from '../plot/run.ts';
import { BARE_STYLES, MONOCHROME_STYLES, PALETTES, type Styles } from './palettes.ts';

/** How rows look: a style for each role, and the characters that the terminal has. */
export type Theme = { readonly styles: Styles; readonly glyphs: GlyphSet };

/** True where colours may be used: not where NO_COLOR is set to anything but nothing, nor on a dumb terminal. */
export function hasColour(env: Readonly<Record<string, string | undefined>>): boolean {
  return !env['NO_COLOR'] && env['TERM'] !== 'dumb';
}

/**
 * The theme for an environment: no colour where NO_COLOR is set, no styles on a dumb terminal.
 *
 * @source no-color.org (the convention of the NO_COLOR variable).
 */
export function themeFor(
  env: Readonly<Record<string, string | undefined>>,
  look: { readonly colours: ColourSet; readonly glyphs: GlyphSet } = { colours: 'usual', glyphs: 'braille' },
): Theme {
  if (env['TERM'] === 'dumb') return { styles: BARE_STYLES, glyphs: look.glyphs };
  return { styles: hasColour(env) ? PALETTES[look.colours] : MONOCHROME_STYLES, glyphs: look.glyphs };
}

/** A row of runs as text with escape codes; each run ends in a reset, so that rows stand alone. */
export function styledText(runs: readonly Run[], theme: Theme): string {
  let text = '';
  for (const { text: piece, role } of inGlyphSet(runs, theme.glyphs)) {
    const style = theme.styles[role];
    text += style.length === 0 || piece === '' ? piece : `\u001b[${style.join(';')}m${piece}\u001b[0m`;
  }
  return text;
}
