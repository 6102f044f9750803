import { describe, expect, it } from 'vitest';
import { nearestWords, orList } from '../../src/line/nearest-word.ts';

const KEYS = ['cable', 'lengthM', 'lengthFt', 'label', 'jointAfter', 'k1', 'z0'];

describe('nearestWords', () => {
  it('nearestWords finds a word through a slip, a swap, other case, or a part of it', () => {
    expect(nearestWords('lenghtM', KEYS)).toEqual(['lengthM']);
    expect(nearestWords('lable', ['label', 'table-top'])).toEqual(['label']);
    expect(nearestWords('JOINTAFTER', KEYS)).toEqual(['jointAfter']);
    expect(nearestWords('length', KEYS, 2)).toEqual(['lengthM', 'lengthFt']);
    expect(nearestWords('cableType', KEYS)).toEqual(['cable']);
  });

  it('nearestWords puts the closest first and keeps to the count', () => {
    expect(nearestWords('rg214', ['rg-8', 'rg213', 'rg214b', 'rg223'], 2)).toEqual(['rg213', 'rg214b']);
  });

  it('nearestWords names nothing for a word that is like none, empty or endless', () => {
    for (const word of ['vf', '', 'temperature', 'x'.repeat(100_000)])
      expect(nearestWords(word, KEYS)).toEqual([]);
    expect(nearestWords('cable', [])).toEqual([]);
  });
});

describe('orList', () => {
  it('orList says words as a choice', () => {
    expect(orList(['a'])).toBe('"a"');
    expect(orList(['a', 'b'])).toBe('"a" or "b"');
    expect(orList(['a', 'b', 'c'])).toBe('"a", "b" or "c"');
  });
});
