import stringWidth from 'string-width';
import { describe, expect, it } from 'vitest';
import {
  cellWidth,
  cutText,
  fitRuns,
  fitText,
  harmless,
  spreadRuns,
  wrapText,
} from '../../src/plot/cells.ts';
import { run, runsText } from '../../src/plot/run.ts';

describe('cellWidth', () => {
  it('cellWidth counts wide characters as two and combining ones as none', () => {
    expect(cellWidth('main run')).toBe(8);
    expect(cellWidth('山頂')).toBe(4);
    expect(cellWidth('e\u0301')).toBe(1);
    expect(cellWidth('⣿×▲●═')).toBe(5);
  });
});

describe('harmless', () => {
  it('harmless takes out escape codes and direction marks, and leaves other text as it is', () => {
    expect(harmless('a\u001b[2Jb\u202ec\u0007')).toBe('a[2Jbc');
    expect(harmless('Ω − × 山')).toBe('Ω − × 山');
  });
});

describe('cutText', () => {
  it('cutText leaves what fits and closes what does not with an ellipsis', () => {
    expect(cutText('main run', 8)).toBe('main run');
    expect(cutText('main run', 7)).toBe('main r…');
    expect(cutText('main run', 1)).toBe('…');
    expect(cutText('main run', 0)).toBe('');
  });

  it('cutText never splits a wide character', () => {
    expect(cutText('山頂局舎', 6)).toBe('山頂…');
    expect(cellWidth(cutText('山頂局舎', 5))).toBe(5);
    expect(cellWidth(cutText('山頂局舎', 4))).toBe(3);
  });
});

describe('fitText', () => {
  it('fitText gives exactly the width, to the left, the right or the middle', () => {
    expect(fitText('ab', 5)).toBe('ab   ');
    expect(fitText('ab', 5, 'right')).toBe('   ab');
    expect(fitText('ab', 5, 'centre')).toBe(' ab  ');
    for (const text of ['', 'abc', '山頂局舎', 'e\u0301e\u0301e\u0301'])
      for (let width = 0; width < 9; width++) expect(stringWidth(fitText(text, width))).toBe(width);
  });
});

describe('fitRuns', () => {
  it('fitRuns gives exactly the width for every width', () => {
    const runs = [run('× ', 'fault'), run('山頂'), run(' joint', 'dim'), run(''), run(' 3')];
    for (let width = 0; width < 20; width++) expect(stringWidth(runsText(fitRuns(runs, width)))).toBe(width);
  });

  it('fitRuns shows by an ellipsis that a later run was lost', () => {
    expect(runsText(fitRuns([run('abc'), run('def', 'dim')], 3))).toBe('ab…');
    expect(runsText(fitRuns([run('abc'), run('def', 'dim')], 5))).toBe('abcd…');
    expect(runsText(fitRuns([run('abc'), run('def', 'dim')], 6))).toBe('abcdef');
  });
});

describe('spreadRuns', () => {
  it('spreadRuns puts one text at each side and cuts the left one first', () => {
    expect(runsText(spreadRuns([run('left')], [run('right')], 16))).toBe('left       right');
    expect(runsText(spreadRuns([run('a long left text')], [run('right')], 16))).toBe('a long le… right');
  });

  it('spreadRuns drops the right text where there is no room for both', () => {
    expect(runsText(spreadRuns([run('left')], [run('right')], 10))).toBe('left      ');
  });
});

describe('wrapText', () => {
  it('wrapText keeps a figure with its unit and its uncertainty', () => {
    expect(wrapText('toward the end, 48.3 m ±0.5', 22)).toEqual(['toward the end,', '48.3 m ±0.5']);
    expect(wrapText('reads 9.0 ± 0.4 Ω; -22 dB at 2 GHz, 12 °C', 14)).toEqual([
      'reads',
      '9.0 ± 0.4 Ω;',
      '-22 dB at',
      '2 GHz, 12 °C',
    ]);
    expect(wrapText('joint 3 main run', 9)).toEqual(['joint 3', 'main run']);
    expect(wrapText('48.3 m ±0.5', 6)).toEqual(['48.3 m', ' ±0.5']);
  });

  it('wrapText breaks at blanks and never passes the width', () => {
    expect(wrapText('water or corrosion at the joint', 12)).toEqual([
      'water or',
      'corrosion at',
      'the joint',
    ]);
  });

  it('wrapText breaks a word longer than the line, and gives one empty line for nothing', () => {
    expect(wrapText('abcdefgh ij', 3)).toEqual(['abc', 'def', 'gh', 'ij']);
    expect(wrapText('', 10)).toEqual(['']);
    expect(wrapText('山頂', 1)).toEqual(['山', '頂']);
  });

  it('wrapText refuses a width below one cell', () => {
    expect(() => wrapText('a', 0)).toThrow(RangeError);
  });
});
