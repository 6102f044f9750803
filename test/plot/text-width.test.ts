import stringWidth from 'string-width';
import { describe, expect, it } from 'vitest';
import { textWidth } from '../../src/plot/text-width.ts';

describe('textWidth', () => {
  it('textWidth says of every character below U+3000, alone and between letters, what the library says', () => {
    const differ: string[] = [];
    for (let code = 0x20; code < 0x3000; code++) {
      const character = String.fromCodePoint(code);
      for (const text of [character, `a${character}b`])
        if (textWidth(text) !== stringWidth(text)) differ.push(code.toString(16));
    }
    expect(differ).toEqual([]);
  });

  it('textWidth joins what belongs together: accents, emoji, keycaps, presentation selectors', () => {
    for (const text of [
      'e\u0301',
      '👩‍🚒 lift',
      '3\ufe0f\u20e3',
      '↔\ufe0f',
      '©\ufe0f',
      '▶\ufe0f',
      '山頂',
      'a\u00adb',
      '',
    ])
      expect(textWidth(text), JSON.stringify(text)).toBe(stringWidth(text));
  });

  it('textWidth leaves escape sequences out, colours and others', () => {
    const row = '\u001b[31m× fault\u001b[0m \u001b[38;2;1;2;3m⣿⣿\u001b[39m';
    expect(textWidth(row)).toBe('× fault ⣿⣿'.length);
    expect(textWidth('\u001b]8;;https://example.org\u0007link\u001b]8;;\u0007')).toBe(4);
    expect(textWidth('\u001b[2Kab')).toBe(2);
  });

  it('textWidth hands options on to the library', () => {
    expect(textWidth('×', { ambiguousIsNarrow: false })).toBe(2);
  });
});
