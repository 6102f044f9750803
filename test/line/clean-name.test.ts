import { describe, expect, it } from 'vitest';
import { cleanName, LONGEST_NAME } from '../../src/line/clean-name.ts';

describe('cleanName', () => {
  it('cleanName leaves ordinary names of any script as they are', () => {
    for (const name of ['main run', '7/8 in foam, 46 m', 'Mast Süd ½″', '主馈线', 'כבל', 'קו 3 → 4']) {
      expect(cleanName(name)).toBe(name);
    }
  });

  it('cleanName removes escape sequences whole', () => {
    expect(cleanName('\u001b[31;1mred\u001b[0m run')).toBe('red run');
    expect(cleanName('\u009b2Jwiped')).toBe('wiped');
    expect(cleanName('a\u001b]0;new title\u0007b')).toBe('ab');
    expect(cleanName('a\u001b]52;c;bGF0ZXI=\u001b\\b')).toBe('ab');
    expect(cleanName('a\u001bP+q\u009cb')).toBe('ab');
    expect(cleanName('a\u001b]never closed')).toBe('a');
    expect(cleanName('a\u001bcb')).toBe('ab');
  });

  it('cleanName removes control characters, direction marks and hidden characters', () => {
    expect(cleanName('a\u0000b\u0008c\u007fd\u0085e')).toBe('abcd e');
    expect(cleanName('run \u202egnol\u2069')).toBe('run gnol');
    expect(cleanName('x\u200by\ufeffz\u{e0041}')).toBe('xyz');
  });

  it('cleanName makes one line of several and trims it', () => {
    expect(cleanName('  main\r\n\trun\u2028up  ')).toBe('main run up');
    expect(cleanName('\u0000 \u001b[0m')).toBe('');
  });

  it('cleanName cuts a long name and says so, without splitting a character', () => {
    const cut = cleanName('😀'.repeat(10_000));
    expect(Array.from(cut)).toHaveLength(LONGEST_NAME);
    expect(cut.endsWith('😀…')).toBe(true);
    expect(cleanName('abcdef', 4)).toBe('abc…');
  });

  it('cleanName replaces half a surrogate pair', () => {
    expect(cleanName('a\ud800b')).toBe('a\ufffdb');
  });
});
