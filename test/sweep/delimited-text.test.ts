import { describe, expect, it } from 'vitest';
import { pairsOf, problemsOf, sweepAndNotices, sweepOf } from './read-text.ts';

const CSV = { file: 'line.csv' };

/** A table with these column names, and rows. */
function table(header: string, ...rows: readonly string[]): string {
  return `${[header, ...rows].join('\n')}\n`;
}

describe('readDelimitedText: columns', () => {
  it('reads frequency, real and imaginary, relative to 50 Ω', () => {
    const sweep = sweepOf(table('frequency_hz,real,imaginary', '1e6,0.1,-0.2', '2e6,0.3,0'), CSV);
    expect(Array.from(sweep.frequencyHz)).toEqual([1e6, 2e6]);
    expect(pairsOf(sweep)).toEqual([
      [0.1, -0.2],
      [0.3, 0],
    ]);
    expect([sweep.portOhm, sweep.port, sweep.ports]).toEqual([50, 1, 1]);
  });

  it.each([
    ['Freq. [MHz];Re(S11);Im(S11)', '1;0.1;0.2', '2;0;0'],
    ['freqMHz\tS11 Real\tS11 Imag', '1\t0.1\t0.2', '2\t0\t0'],
    ['"Frequency (MHz)","S(1,1) re","S(1,1) im"', '1,0.1,0.2', '2,0,0'],
    ['f_MHz re im', '1 0.1 0.2', '2 0 0'],
    ['"Frequency, MHz","Real","Imaginary"', '1,0.1,0.2', '2,0,0'],
    ['# f[MHz], re, im', '1,0.1,0.2', '2,0,0'],
    ['index,MHz,note,real,imag', '0,1,7,0.1,0.2', '1,2,8,0,0'],
  ])('finds its columns by the header %s', (...lines) => {
    const sweep = sweepOf(table(lines[0]!, ...lines.slice(1)), CSV);
    expect(sweep.frequencyHz[0]).toBe(1e6);
    expect(pairsOf(sweep)[0]).toEqual([0.1, 0.2]);
  });

  it.each([
    ['mhz,magnitude,phase_deg', '1,0.5,90', [0, 0.5]],
    ['mhz,magnitude_db,phase_deg', '1,-20,180', [-0.1, 0]],
    ['mhz,return_loss_db,phase_deg', '1,20,0', [0.1, 0]],
    ['mhz,vswr,phase_deg', '1,1.5,0', [0.2, 0]],
    ['Freq [MHz];S11 dB;S11 deg', '1;-20;180', [-0.1, 0]],
    ['Freq [MHz],S11 [dB],S11 [deg]', '1,-20,180', [-0.1, 0]],
    ['Frequency MHz\tReturn loss dB\tPhase deg', '1\t20\t0', [0.1, 0]],
    ['# Freq [MHz];S11 lin mag;S11 deg', '1;0.5;90', [0, 0.5]],
    ['mhz,linmag,phase_rad', `1,0.5,${Math.PI / 2}`, [0, 0.5]],
  ])('reads size and phase by %s', (header, row, wanted) => {
    const [found] = pairsOf(sweepOf(table(header, row, row.replace(/^1/, '2')), CSV));
    expect(found![0]).toBeCloseTo(wanted[0]!, 12);
    expect(found![1]).toBeCloseTo(wanted[1]!, 12);
  });

  it('reads port 2 and its transmission from a table of a two-port', () => {
    const text = table(
      'mhz,s11 re,s11 im,s21 re,s21 im,s12 re,s12 im,s22 re,s22 im',
      '1,0.1,0,0.8,0,0.7,0,0.2,0',
      '2,0.1,0,0.8,0,0.7,0,0.2,0',
    );
    const one = sweepOf(text, CSV);
    expect([one.gamma.re[0], one.transmission?.re[0], one.ports]).toEqual([0.1, 0.8, 2]);
    const two = sweepOf(text, { ...CSV, port: 2 });
    expect([two.gamma.re[0], two.transmission?.re[0]]).toEqual([0.2, 0.7]);
    expect(problemsOf(text, { ...CSV, port: 3 })[0]!.code).toBe('sweep-port');
  });

  it('finds the header below what an instrument writes above it', () => {
    const sweep = sweepOf(`Site: 7\nDate, 2031-01-01\n\n${table('mhz,re,im', '1,0.1,0', '2,0,0')}`, CSV);
    expect(sweep.frequencyHz.length).toBe(2);
  });
});

describe('readDelimitedText: numbers', () => {
  it('reads decimal commas where the delimiter is no comma', () => {
    expect(pairsOf(sweepOf(table('mhz;re;im', '1,5;0,1;-0,2', '2,5;0,3;0'), CSV))[0]).toEqual([0.1, -0.2]);
  });

  it('refuses decimal commas between commas, and both kinds in one table', () => {
    expect(problemsOf(table('mhz,re,im', '1,5,0,1,0', '2,5,0,1,0'), CSV)[0]).toMatchObject({
      code: 'delimited-row',
      line: 2,
      mend: expect.stringContaining('decimal commas'),
    });
    expect(problemsOf(table('mhz;re;im', '1.5;0,1;0', '2.5;0;0'), CSV)[0]!.code).toBe('delimited-decimals');
  });

  it.each(['', 'x', 'NaN', 'inf', '#REF!'])('refuses the cell %j with its line', (cell) => {
    const problems = problemsOf(table('mhz,re,im', '1,0.1,0', `2,${cell},0`, '3,0,0'), CSV);
    expect(problems[0]!.line).toBe(3);
  });

  it('refuses a row with a column too few', () => {
    expect(problemsOf(table('mhz,re,im', '1,0.1,0', '2,0.1', '3,0,0'), CSV)[0]).toMatchObject({
      code: 'delimited-row',
      line: 3,
      what: expect.stringContaining('2 of 3'),
    });
  });

  it('takes a comma at the end of every row, blank lines and comments', () => {
    const text = table('mhz,re,im,', '1,0.1,0,', '', '# half time', '2,0.2,0,');
    const sweep = sweepOf(text, CSV);
    expect(sweep.frequencyHz.length).toBe(2);
    expect(sweep.comments).toEqual(['half time']);
  });

  it('says what it took for granted: unit of frequency, of size, of phase', () => {
    const rows = [1, 2, 3].map((k) => `${k}00000000,0.${k},${40 * k}`);
    const { sweep, notices } = sweepAndNotices(table('frequency,magnitude,phase', ...rows), CSV);
    expect(notices.map((n) => n.what)).toEqual([
      'the table names no reference; Γ was taken relative to 50 Ω',
      'column "frequency" was taken as Hz',
      'column "magnitude" was taken as linear',
      'column "phase" was taken as degrees',
    ]);
    expect(sweep.gamma.re[0]).toBeCloseTo(0.1 * Math.cos((40 * Math.PI) / 180), 12);
  });

  it('takes a return loss below zero for the level of the reflection, aloud', () => {
    const { sweep, notices } = sweepAndNotices(table('mhz,rl_db,deg', '1,-20,0', '2,-20,0'), CSV);
    expect(sweep.gamma.re[0]).toBeCloseTo(0.1, 12);
    expect(notices.map((n) => n.code)).toEqual(['delimited-port', 'delimited-return-loss-unit']);
  });

  it.each([
    ['sizes open to doubt', 'mhz,magnitude,phase_deg', '1,20,90', '2,21,0'],
    ['phases open to doubt', 'mhz,magnitude_db,phase', '1,-20,1', '2,-21,2'],
    ['decibels above zero', 'mhz,magnitude_db,phase_deg', '1,20,1', '2,21,2'],
    ['a linear size below zero', 'mhz,magnitude_linear,phase_deg', '1,-0.2,1', '2,0.1,2'],
    ['a VSWR below 1', 'mhz,vswr,phase_deg', '1,0.9,1', '2,1.1,2'],
  ])('refuses %s', (_, ...lines) => {
    expect(problemsOf(table(lines[0]!, ...lines.slice(1)), CSV)[0]!.code).toBe('delimited-unit');
  });

  it('refuses a frequency without unit whose numbers leave it open', () => {
    expect(problemsOf(table('frequency,re,im', '100,0.1,0', '200,0.1,0'), CSV)[0]).toMatchObject({
      code: 'delimited-unit',
    });
  });

  it('keeps the rules on frequencies that hold for every format', () => {
    expect(problemsOf(table('mhz,re,im', '2,0.1,0', '1,0.1,0'), CSV)[0]!.code).toBe('sweep-frequency-falls');
    const { notices } = sweepAndNotices(table('mhz,re,im', '1,0.1,0', '1,0.3,0', '2,0.1,0'), CSV);
    expect(notices.map((n) => n.code)).toContain('sweep-repeated-frequency');
  });
});

describe('readDelimitedText: refusals', () => {
  it.each([
    ['no header', '1,0.1,0\n2,0.1,0\n', 'delimited-no-header'],
    ['no phase', table('mhz,magnitude_db', '1,-20', '2,-20'), 'delimited-no-phase'],
    ['no reflection', table('mhz,re', '1,0.1', '2,0.1'), 'delimited-no-reflection'],
    ['a quantity twice', table('mhz,re,re,im', '1,0,0,0', '2,0,0,0'), 'delimited-column-twice'],
    ['no frequency', table('re,im', '1,0.1', '2,0.1'), 'delimited-no-frequency'],
    ['no rows', table('mhz,re,im'), 'sweep-too-few-points'],
  ])('refuses a table with %s', (_, text, code) => {
    expect(problemsOf(text, CSV)[0]!.code).toBe(code);
  });

  it('refuses power levels, which are no reflection', () => {
    expect(problemsOf(table('mhz,level_dbm,phase_deg', '1,-20,0', '2,-20,0'), CSV)[0]!.code).toMatch(
      /^delimited-/,
    );
  });

  it('reads quoted cells, with delimiters and quotes in them', () => {
    const sweep = sweepOf(table('mhz,note,re,im', '1,"a, ""b""",0.1,0', '2,"",0.2,0'), CSV);
    expect(pairsOf(sweep).map(([re]) => re)).toEqual([0.1, 0.2]);
  });
});
