import { describe, expect, it } from 'vitest';
import { cleanForDisplay, decodeText } from '../../src/sweep/clean-text.ts';

describe('cleanForDisplay', () => {
  it.each([
    ['plain text', 'north 1', 'north 1'],
    ['colours', '\x1b[1;31mred\x1b[0m', 'red'],
    ['cursor moves and clearing', 'a\x1b[2J\x1b[10;10Hb', 'ab'],
    ['a window title', 'a\x1b]0;owned\x07b', 'ab'],
    ['a title ended by ST', 'a\x1b]0;owned\x1b\\b', 'ab'],
    ['device control strings', 'a\x1bPq#0\x1b\\b', 'ab'],
    ['eight-bit controls', 'a\x9b31mb', 'ab'],
    ['an escape cut short', 'a\x1b[', 'a'],
    ['line ends and tabs', 'a\r\n\tb', 'a b'],
    ['bells and deletes', 'a\x07b\x7fc', 'a b c'],
    ['bidirectional overrides', 'a\u202eb\u2066c', 'abc'],
    ['zero-width blanks', 'a\u200bb\ufeffc', 'abc'],
    ['line separators', 'a\u2028b', 'a b'],
    ['half a surrogate pair', 'a\ud800b', 'a\ufffdb'],
    ['accents and signs', 'Überlänge 25 °C Ω 天', 'Überlänge 25 °C Ω 天'],
  ])('makes %s harmless', (_, text, wanted) => {
    expect(cleanForDisplay(text)).toBe(wanted);
  });

  it('bounds the length, whole characters at a time', () => {
    expect(cleanForDisplay('😀'.repeat(30), 10)).toBe(`${'😀'.repeat(9)}…`);
    expect(cleanForDisplay('x'.repeat(1_000_000), 20)).toHaveLength(20);
  });
});

describe('decodeText', () => {
  it('gives LF whatever the line ends were', () => {
    const outcome = decodeText(new TextEncoder().encode('a\r\nb\rc\nd'), 'x');
    expect(outcome.ok && outcome.value).toBe('a\nb\nc\nd');
  });

  it('names the file in its problem', () => {
    const outcome = decodeText(Uint8Array.of(0x25, 0x50, 0x44, 0x46, 0x2d), 'plan.s1p');
    expect(!outcome.ok && outcome.problems[0]).toMatchObject({
      code: 'sweep-binary',
      file: 'plan.s1p',
      what: 'is a PDF document, not text',
    });
  });
});
