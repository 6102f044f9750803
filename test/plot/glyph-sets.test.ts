import { describe, expect, it } from 'vitest';
import { brailleGlyph } from '../../src/plot/braille.ts';
import { cellWidth } from '../../src/plot/cells.ts';
import { asciiGlyph, blockGlyph, inGlyphSet } from '../../src/plot/glyph-sets.ts';
import { run, runsText } from '../../src/plot/run.ts';

const ALL = Array.from({ length: 256 }, (_, bits) => bits);

describe('blockGlyph', () => {
  it('fills exactly the quarters that hold a dot', () => {
    expect(blockGlyph(0)).toBe(' ');
    expect(blockGlyph(0x01)).toBe('▘');
    expect(blockGlyph(0x10)).toBe('▝');
    expect(blockGlyph(0x40)).toBe('▖');
    expect(blockGlyph(0x80)).toBe('▗');
    expect(blockGlyph(0x01 | 0x80)).toBe('▚');
    expect(blockGlyph(0xff)).toBe('█');
    expect(new Set(ALL.map(blockGlyph)).size).toBe(16);
  });
});

describe('asciiGlyph', () => {
  it('runs the way the dots run', () => {
    expect(asciiGlyph(0)).toBe(' ');
    // Left column from top to bottom; then a slope down, a slope up, a level at the top, in the middle, at the bottom.
    expect(asciiGlyph(0x47)).toBe('|');
    expect(asciiGlyph(0x01 | 0x02 | 0x20 | 0x80)).toBe('\\');
    expect(asciiGlyph(0x04 | 0x40 | 0x08 | 0x10)).toBe('/');
    expect(asciiGlyph(0x01 | 0x08)).toBe("'");
    expect(asciiGlyph(0x02 | 0x10)).toBe('-');
    expect(asciiGlyph(0x40 | 0x80)).toBe('_');
    expect(asciiGlyph(0xff)).toBe('#');
  });

  it('leaves no dot out', () => {
    for (const bits of ALL.slice(1)) expect(asciiGlyph(bits)).toMatch(/^[!-~]$/);
  });
});

describe('inGlyphSet', () => {
  const row = [
    run(' × 48.00 m ±0.06  ', 'fault'),
    run(`${brailleGlyph(0x47)}${brailleGlyph(0)}${brailleGlyph(0xff)} ═╪═ 9.0 Ω    `, 'trace'),
    run('12 °C  · 日本  e\u0301t\u00e9 ', 'plain'),
  ];

  it('keeps the width of a row in every set', () => {
    for (const set of ['braille', 'blocks', 'ascii'] as const)
      expect(cellWidth(runsText(inGlyphSet(row, set)))).toBe(cellWidth(runsText(row)));
  });

  it('writes nothing but ASCII where only that is there, units spelled out into the blanks behind them', () => {
    const text = runsText(inGlyphSet(row, 'ascii'));
    expect(text).toMatch(/^[ -~]*$/);
    expect(text).toContain('x 48.00 m +-0.06 ');
    expect(text).toContain('| # =+= 9.0 ohm  ');
    expect(text).toContain('????');
  });

  it('cuts at the end what finds no room', () => {
    expect(runsText(inGlyphSet([run('9.0 Ω at joint 3')], 'ascii'))).toBe('9.0 ohm at join~');
  });

  it('changes only the dots where blocks are there', () => {
    expect(runsText(inGlyphSet(row, 'blocks'))).toBe(runsText(row).replaceAll('⡇', '▌').replaceAll('⣿', '█'));
  });
});
