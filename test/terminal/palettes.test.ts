import { describe, expect, it } from 'vitest';
import { COLOUR_SETS } from '../../src/app/settings.ts';
import { PALETTES, paletteFor } from '../../src/terminal/palettes.ts';
import { styledText, themeFor } from '../../src/terminal/theme.ts';
import { press, readyState } from './made-state.ts';

describe('palettes', () => {
  it.each(COLOUR_SETS)('%s uses nothing beyond the sixteen colours of every terminal', (name) => {
    for (const style of Object.values(PALETTES[name]).flat())
      expect(style < 10 || (style >= 30 && style <= 37) || (style >= 90 && style <= 97), `SGR ${style}`).toBe(
        true,
      );
  });

  it('never tells a fault from what is sound by red against green for colour-blind eyes', () => {
    const used = Object.values(PALETTES['colour-blind']).flat();
    expect(used.filter((style) => [31, 32, 91, 92].includes(style))).toEqual([]);
  });

  it('has no yellow and nothing dim on a light background', () => {
    expect(
      Object.values(PALETTES.light)
        .flat()
        .filter((style) => [2, 33, 93].includes(style)),
    ).toEqual([]);
  });

  it.each([
    ['15;0', 'usual'],
    ['0;15', 'light'],
    ['0;default;7', 'light'],
    ['', 'usual'],
    ['garbage', 'usual'],
  ] as const)('takes COLORFGBG=%s as %s', (value, expected) => {
    expect(paletteFor({ COLORFGBG: value })).toBe(expected);
  });

  it('goes round at its key and says the name; says so where there is no colour', () => {
    let state = readyState({ columns: 80, rows: 24 });
    for (const expected of ['light', 'contrast', 'colour-blind', 'usual']) {
      state = press(state, 'p').state;
      expect(state.colours).toBe(expected);
      expect(state.remark).not.toBeNull();
    }
    const bare = press({ ...state, hasColour: false }, 'p').state;
    expect(bare.colours).toBe('usual');
    expect(bare.remark).toMatch(/NO_COLOR/);
  });
});

describe('themeFor', () => {
  it('draws the same row in the chosen colours, without any under NO_COLOR, without styles on a dumb terminal', () => {
    const row = [{ text: '×', role: 'fault' as const }];
    const look = { colours: 'contrast', glyphs: 'braille' } as const;
    expect(styledText(row, themeFor({}, look))).toBe('\u001b[1;7;91m×\u001b[0m');
    expect(styledText(row, themeFor({ NO_COLOR: '1' }, look))).toBe('\u001b[1m×\u001b[0m');
    expect(styledText(row, themeFor({ TERM: 'dumb' }, look))).toBe('×');
    expect(styledText(row, themeFor({ TERM: 'dumb' }, { ...look, glyphs: 'ascii' }))).toBe('x');
  });
});
