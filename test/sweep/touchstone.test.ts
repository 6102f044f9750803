/** Touchstone 1.1: every rule of references.md section 7 that holds for version 1. */
import { describe, expect, it } from 'vitest';
import { portsFromName } from '../../src/sweep/touchstone.ts';
import { pairsOf, problemsOf, sweepAndNotices, sweepOf } from './read-text.ts';

const TWO_ROWS = '1 0.1 0\n2 0.2 0\n';

/** Reflection of magnitude and degrees. */
function polar(magnitude: number, degrees: number): number[] {
  return [magnitude * Math.cos((degrees * Math.PI) / 180), magnitude * Math.sin((degrees * Math.PI) / 180)];
}

/** First reflection of a text. */
function first(text: string, file?: string, port?: number): number[] {
  const { gamma } = sweepOf(text, { ...(file ? { file } : {}), ...(port ? { port } : {}) });
  return [gamma.re[0]!, gamma.im[0]!];
}

function expectClose(found: readonly number[], wanted: readonly number[]): void {
  expect(Math.hypot(found[0]! - wanted[0]!, found[1]! - wanted[1]!)).toBeLessThan(1e-12);
}

describe('readTouchstone: option line', () => {
  it('takes GHz S MA R 50 for a lone #', () => {
    const sweep = sweepOf('! all defaults\n#\n0.5  0.30  -45.0\n1.0  0.28  -91.5   ! trailing comment\n');
    expect(Array.from(sweep.frequencyHz)).toEqual([0.5e9, 1e9]);
    expect(sweep.portOhm).toBe(50);
    expectClose([sweep.gamma.re[0]!, sweep.gamma.im[0]!], polar(0.3, -45));
    expectClose([sweep.gamma.re[1]!, sweep.gamma.im[1]!], polar(0.28, -91.5));
  });

  it.each([
    ['Hz', 1],
    ['kHz', 1e3],
    ['MHz', 1e6],
    ['GHz', 1e9],
  ])('reads frequencies in %s', (unit, factor) => {
    expect(Array.from(sweepOf(`# ${unit} S RI R 50\n${TWO_ROWS}`).frequencyHz)).toEqual([factor, 2 * factor]);
  });

  it('scales 40.1 MHz to the very double 40100000', () => {
    expect(sweepOf('# MHz S RI R 50\n40.1 0 0\n40.3 0 0.1\n').frequencyHz[0]).toBe(40_100_000);
  });

  it('takes its fields in any order and any case', () => {
    const sweep = sweepOf('# s mhz r 75 db\n10   -26.02   12\n20   -25.10  -30\n');
    expect(sweep.portOhm).toBe(75);
    expect(sweep.frequencyHz[0]).toBe(10e6);
    // 10^(−26.02/20) = 0.05000 (references.md section 7)
    expectClose([sweep.gamma.re[0]!, sweep.gamma.im[0]!], polar(10 ** (-26.02 / 20), 12));
    expect(Math.hypot(sweep.gamma.re[0]!, sweep.gamma.im[0]!)).toBeCloseTo(0.05, 5);
  });

  it.each([
    ['RI', '1 0.3 -0.4', [0.3, -0.4]],
    ['MA', '1 0.5 90', [0, 0.5]],
    ['DB', '1 -20 180', [-0.1, 0]],
  ])('reads format %s', (format, row, wanted) => {
    expectClose(first(`# MHz S ${format} R 50\n${row}\n2 0 0\n`), wanted);
  });

  it('tells a unit that is none of the four', () => {
    expect(problemsOf(`# THz S RI R 50\n${TWO_ROWS}`)[0]).toMatchObject({
      code: 'touchstone-option-line',
      line: 1,
      found: 'THz',
      what: expect.stringContaining('none of Hz, kHz, MHz, GHz'),
    });
  });

  it.each(['R 0', 'R -50', 'R fifty', 'R', 'R50', 'X', 'S Y', 'R nan'])('refuses the field %s', (field) => {
    const problems = problemsOf(`# MHz ${field}\n${TWO_ROWS}`);
    expect(problems[0]).toMatchObject({ code: 'touchstone-option-line', line: 1 });
  });

  it('must stand before the data', () => {
    expect(problemsOf(TWO_ROWS)[0]).toMatchObject({ code: 'touchstone-no-option-line', line: 1 });
    expect(problemsOf(`${TWO_ROWS}# MHz S RI R 50\n3 0.3 0\n`)[0]!.code).toBe('touchstone-no-option-line');
  });

  it('counts once: a later one is left out, aloud', () => {
    const { sweep, notices } = sweepAndNotices('# MHz S RI R 50\n1 0.1 0\n# GHz S MA R 75\n2 0.2 0\n');
    expect(Array.from(sweep.frequencyHz)).toEqual([1e6, 2e6]);
    expect(sweep.portOhm).toBe(50);
    expect(notices.map((n) => n.code)).toEqual(['touchstone-second-option-line']);
  });

  it('takes one reference a port (2.1), and one for all', () => {
    const rows = '1 0.01 0  0.8 0  0.1 0  0.02 0\n2 0.01 0  0.7 0  0.1 0  0.02 0\n';
    expect(sweepOf(`# MHz S RI R 50 75\n${rows}`, { file: 'a.s2p', port: 2 }).portOhm).toBe(75);
    expect(sweepOf(`# MHz S RI R 60\n${rows}`, { file: 'a.s2p', port: 2 }).portOhm).toBe(60);
    expect(problemsOf(`# MHz S RI R 50 75 50\n${rows}`, { file: 'a.s2p' })[0]!.code).toBe(
      'touchstone-reference',
    );
  });
});

describe('readTouchstone: lines and numbers', () => {
  it.each([
    ['LF', '\n'],
    ['CR LF', '\r\n'],
    ['CR', '\r'],
  ])('reads line ends %s', (_, end) => {
    expect(pairsOf(sweepOf(['# MHz S RI R 50', '1 0.1 0', '2 0.2 0'].join(end)))).toEqual([
      [0.1, 0],
      [0.2, 0],
    ]);
  });

  it('reads a file without a last line end, with tabs, blank lines and blanks before and after', () => {
    expect(pairsOf(sweepOf('\n  # MHz\tS RI R 50 \n\n\t1\t0.1   0  \n\n   2 0.2\t-0.5'))).toEqual([
      [0.1, 0],
      [0.2, -0.5],
    ]);
  });

  it('leaves comments out, whole lines and after data, and keeps them for show', () => {
    const sweep = sweepOf('! site 7\n# MHz S RI R 50 ! fifty\n1 0.1 0 ! 9 9 9\n! between\n2 0.2 0\n');
    expect(pairsOf(sweep)).toEqual([
      [0.1, 0],
      [0.2, 0],
    ]);
    expect(sweep.comments).toEqual(['site 7', 'between']);
  });

  it('tolerates a UTF-8 mark and 8-bit bytes in comments', () => {
    const bytes = [0xef, 0xbb, 0xbf, ...new TextEncoder().encode('! ')];
    const text = new TextDecoder().decode(Uint8Array.from(bytes));
    expect(sweepOf(`\ufeff${text}25 °C\n# MHz S RI R 50\n${TWO_ROWS}`).frequencyHz.length).toBe(2);
  });

  it('reads whole, decimal and exponent numbers', () => {
    expect(pairsOf(sweepOf('# Hz S RI R 50\n1e6 .5 -1.5E-1\n+2000000 5. 0\n3.0E+06 1e-3 +0\n'))).toEqual([
      [0.5, -0.15],
      [5, 0],
      [0.001, 0],
    ]);
  });

  it.each(['0,1', '1.5D-1', '0x10', 'abc', 'NaN', 'inf', '1e', '--1', '1.2.3'])(
    'refuses %s where a number belongs, with its line',
    (token) => {
      const problems = problemsOf(`# MHz S RI R 50\n1 0.1 0\n2 ${token} 0\n3 0.1 0\n`);
      expect(problems).toHaveLength(1);
      expect(problems[0]).toMatchObject({ code: 'touchstone-number', line: 3, found: token });
    },
  );

  it('refuses a number too large for a double', () => {
    expect(problemsOf('# MHz S RI R 50\n1 1e999 0\n2 0 0\n')[0]!.code).toBe('touchstone-number');
  });

  it.each(['1 0.1', '1 0.1 0 5', '1 0.1 0 0 0'])('refuses the row %s of a one-port', (row) => {
    expect(problemsOf(`# MHz S RI R 50\n0.5 0 0\n${row}\n2 0.2 0\n`)[0]).toMatchObject({
      code: 'touchstone-row',
      line: 3,
    });
  });

  it('refuses a magnitude below zero, since the format is then wrong', () => {
    expect(problemsOf('# MHz S MA R 50\n1 -20 5\n2 -21 6\n')[0]).toMatchObject({
      code: 'touchstone-magnitude',
      line: 2,
      mend: expect.stringContaining('DB'),
    });
  });
});

describe('readTouchstone: frequencies', () => {
  it('reports a repeated frequency and averages its rows', () => {
    const { sweep, notices } = sweepAndNotices('# MHz S RI R 50\n1 0.1 0\n2 0.2 0\n2 0.4 0\n3 0.3 0\n');
    expect(Array.from(sweep.frequencyHz)).toEqual([1e6, 2e6, 3e6]);
    expect(sweep.gamma.re[1]).toBeCloseTo(0.3, 12);
    expect(notices[0]).toMatchObject({
      code: 'sweep-repeated-frequency',
      what: expect.stringMatching(/line 4 .*up to 0\.20/),
    });
  });

  it('refuses frequencies that fall', () => {
    expect(problemsOf('# MHz S RI R 50\n1 0.1 0\n3 0.2 0\n2 0.4 0\n')[0]).toMatchObject({
      code: 'sweep-frequency-falls',
      line: 4,
      what: expect.stringContaining('from 3 MHz to 2 MHz'),
    });
  });

  it('refuses a frequency below zero and takes 0', () => {
    expect(problemsOf('# MHz S RI R 50\n-1 0.1 0\n3 0.2 0\n')[0]!.code).toBe('sweep-frequency-negative');
    expect(sweepOf('# MHz S RI R 50\n0 0.1 0\n3 0.2 0\n').frequencyHz[0]).toBe(0);
  });

  it('suspects the unit where hertz were read as gigahertz', () => {
    expect(problemsOf('#\n1000000 0.1 0\n2000000 0.2 0\n')[0]).toMatchObject({
      code: 'sweep-frequency-unit',
      mend: expect.stringContaining('GHz'),
    });
  });

  it.each(['', '1 0.1 0\n', '1 0.1 0\n1 0.2 0\n'])('refuses too little data: %j', (rows) => {
    expect(problemsOf(`# MHz S RI R 50\n${rows}`)[0]!.code).toBe('sweep-too-few-points');
  });
});

describe('readTouchstone: ports', () => {
  const TWO_PORT =
    '# Hz S RI R 50\n1000000  0.01 0  0.8 0  0.1 0  0.02 0\n2000000  0.01 0  0.7 0  0.1 0  0.03 0\n';
  const THREE_PORT = `# GHz S MA R 50
1.0  0.11 0  0.12 0  0.13 0
     0.21 0  0.22 0  0.23 0
     0.31 0  0.32 0  0.33 0
2.0  0.11 0  0.12 0  0.13 0
     0.21 0  0.22 0  0.23 0
     0.31 0  0.32 0  0.33 0
`;

  it.each([
    ['a.s1p', 1],
    ['A.S2P', 2],
    ['dir.s3p/b.s12p', 12],
    ['a.s0p', null],
    ['a.ts', null],
    ['s1p', null],
    ['a.csv', null],
  ])('portsFromName tells the ports of %s', (name, ports) => {
    expect(portsFromName(name)).toBe(ports);
  });

  it('reads S11 and S21 of a two-port from port 1, S22 and S12 from port 2', () => {
    const one = sweepOf(TWO_PORT, { file: 'a.s2p' });
    expect([one.gamma.re[0], one.transmission?.re[0], one.ports, one.port]).toEqual([0.01, 0.8, 2, 1]);
    const two = sweepOf(TWO_PORT, { file: 'a.s2p', port: 2 });
    expect([two.gamma.re[0], two.gamma.re[1], two.transmission?.re[0]]).toEqual([0.02, 0.03, 0.1]);
  });

  it('gives no transmission for one port and for three', () => {
    expect(sweepOf(`# MHz S RI R 50\n${TWO_ROWS}`).transmission).toBeUndefined();
    expect(sweepOf(THREE_PORT, { file: 'a.s3p' }).transmission).toBeUndefined();
  });

  it('reads three ports, one matrix row a line', () => {
    for (const port of [1, 2, 3])
      expect(sweepOf(THREE_PORT, { file: 'a.s3p', port }).gamma.re[1]).toBeCloseTo(0.11 * port, 12);
  });

  it('reads five ports, each row wrapped after four pairs', () => {
    const row = (r: number) => `${[1, 2, 3, 4].map((c) => `0.${r}${c} 0`).join('  ')}\n     0.${r}5 0\n`;
    const matrix = [1, 2, 3, 4, 5].map(row).join('     ');
    const text = `# GHz S RI R 50\n1.0  ${matrix}2.0  ${matrix}`;
    for (const port of [1, 5]) expect(first(text, 'a.s5p', port)[0]).toBeCloseTo(port * 0.11, 12);
  });

  it('collects a matrix whatever its line breaks', () => {
    const numbers = [1, ...Array.from({ length: 9 }, (_, i) => [(i + 1) / 100, 0]).flat()];
    const wrapped = `${numbers.slice(0, 3).join(' ')}\n${numbers.slice(3, 17).join(' ')}\n${numbers.slice(17).join(' ')}\n`;
    const text = `# GHz S RI R 50\n${wrapped}${wrapped.replace(/^1/, '2')}`;
    expect(first(text, 'a.s3p', 2)[0]).toBeCloseTo(0.05, 12);
  });

  it('refuses a port the file has not', () => {
    expect(problemsOf(TWO_PORT, { file: 'a.s2p', port: 3 })[0]).toMatchObject({
      code: 'sweep-port',
      mend: 'choose a port from 1 to 2',
    });
  });

  it('refuses rows that fit another number of ports than the name says', () => {
    expect(problemsOf(TWO_PORT, { file: 'a.s1p' })[0]).toMatchObject({
      code: 'touchstone-ports',
      mend: expect.stringContaining('.s2p'),
    });
    expect(problemsOf(`# MHz S RI R 50\n${TWO_ROWS}`, { file: 'a.s4p' })[0]!.code).toBe('touchstone-ports');
  });

  it('tells the ports by the rows where the name does not', () => {
    expect(sweepOf(TWO_PORT, { file: '-' }).ports).toBe(2);
    expect(sweepOf(THREE_PORT, { file: 'sweep.txt' }).ports).toBe(3);
  });

  it('refuses a matrix that is cut short, with the line it begins on', () => {
    const cut = THREE_PORT.split('\n').slice(0, -2).join('\n');
    expect(problemsOf(cut, { file: 'a.s3p' })[0]).toMatchObject({ code: 'touchstone-incomplete', line: 5 });
  });

  it('refuses a matrix with a number too few, and reads on behind it', () => {
    const broken = THREE_PORT.replace('0.22 0  0.23 0\n', '0.22 0  0.23\n');
    const problems = problemsOf(broken, { file: 'a.s3p' });
    expect(problems[0]).toMatchObject({ code: 'touchstone-row', line: 2 });
    expect(problems).toHaveLength(1);
  });

  it('refuses a count of ports that no file could hold', () => {
    expect(problemsOf(`# MHz S RI R 50\n${TWO_ROWS}`, { file: 'a.s999999p' }).length).toBeGreaterThan(0);
  });
});

describe('readTouchstone: noise data', () => {
  const NETWORK = `# GHz S MA R 50
1.0  0.5 -60  3.0 120  0.05 60  0.4 -40
2.0  0.5 -90  2.5  90  0.06 50  0.4 -60
3.0  0.5 -99  2.0  70  0.07 45  0.4 -70
`;

  it('begin where the frequency drops back, and are left out', () => {
    const sweep = sweepOf(`${NETWORK}1.0  0.6  0.45  30  0.30\n2.0  0.8  0.40  55  0.28\n`, {
      file: 'a.s2p',
    });
    expect(Array.from(sweep.frequencyHz)).toEqual([1e9, 2e9, 3e9]);
  });

  it('may begin below the first network frequency', () => {
    expect(sweepOf(`${NETWORK}0.5  0.6  0.45  30  0.30\n`, { file: 'a.s2p' }).frequencyHz.length).toBe(3);
  });

  it('must have rows of five', () => {
    const problems = problemsOf(`${NETWORK}1.0  0.6  0.45  30  0.30\n2.0  0.8  0.40  55\n`, {
      file: 'a.s2p',
    });
    expect(problems[0]).toMatchObject({ code: 'touchstone-row', line: 6 });
  });

  it('are no noise data when their frequency goes on rising', () => {
    expect(problemsOf(`${NETWORK}4.0  0.6  0.45  30  0.30\n`, { file: 'a.s2p' })[0]!.code).toBe(
      'touchstone-row',
    );
  });
});

describe('readTouchstone: Y, Z, G and H', () => {
  it('reads normalised Z and Y of one port in version 1', () => {
    // z = 1.5 is 75 Ω in 50 Ω: Γ = 0.2; y = 1/1.5 the same.
    expectClose(first('# MHz Z RI R 50\n1 1.5 0\n2 1 0\n'), [0.2, 0]);
    expectClose(first(`# MHz Y RI R 50\n1 ${1 / 1.5} 0\n2 1 0\n`), [0.2, 0]);
    expectClose(first('# MHz Z MA R 75\n1 1 90\n2 1 0\n'), [0, 1]);
  });

  it('reads all of a series resistance as a two-port: S11 = r/(r + 2), S21 = 2/(r + 2)', () => {
    // Series r (relative): Y = [[g, −g], [−g, g]] with g = 1/r. Order 11, 21, 12, 22.
    const g = 1 / 0.2;
    const row = `${g} 0 ${-g} 0 ${-g} 0 ${g} 0`;
    const sweep = sweepOf(`# MHz Y RI R 50\n1 ${row}\n2 ${row}\n`, { file: 'a.s2p' });
    expect(sweep.gamma.re[0]).toBeCloseTo(0.2 / 2.2, 12);
    expect(sweep.transmission?.re[0]).toBeCloseTo(2 / 2.2, 12);
  });

  it('reads H and G of an ideal transformer and tells its sides apart', () => {
    // v1 = n·v2, i2 = −n·i1 with n = 2: H = [[0, n], [−n, 0]]; seen from port 1 the load 1 is n² = 4: Γ = 3/5.
    const h = '0 0  -2 0  2 0  0 0';
    expect(first(`# MHz H RI R 50\n1 ${h}\n2 ${h}\n`, 'a.s2p', 1)[0]).toBeCloseTo(0.6, 12);
    expect(first(`# MHz H RI R 50\n1 ${h}\n2 ${h}\n`, 'a.s2p', 2)[0]).toBeCloseTo(-0.6, 12);
    // G = H⁻¹ = [[0, −1/n], [1/n, 0]]
    const g = '0 0  0.5 0  -0.5 0  0 0';
    expect(first(`# MHz G RI R 50\n1 ${g}\n2 ${g}\n`, 'a.s2p', 1)[0]).toBeCloseTo(0.6, 12);
  });

  it('refuses H and G for other than two ports', () => {
    expect(problemsOf(`# MHz H RI R 50\n${TWO_ROWS}`)[0]).toMatchObject({ code: 'touchstone-parameter' });
  });

  it('refuses normalised Z with references that differ', () => {
    const rows = '1 1 0 0 0 0 0 1 0\n2 1 0 0 0 0 0 1 0\n';
    expect(problemsOf(`# MHz Z RI R 50 75\n${rows}`, { file: 'a.s2p' })[0]!.code).toBe(
      'touchstone-parameter',
    );
  });
});

describe('readTouchstone: trouble', () => {
  it('names every problem, up to a limit, and then says that there are more', () => {
    const rows = Array.from({ length: 50 }, (_, i) => `${i + 1} x 0`).join('\n');
    const problems = problemsOf(`# MHz S RI R 50\n${rows}\n`);
    expect(problems).toHaveLength(21);
    expect(problems[20]!.code).toBe('more-problems');
    expect(problems.slice(0, 20).map((p) => p.line)).toEqual(Array.from({ length: 20 }, (_, i) => i + 2));
  });

  it('says one fault of many rows once, with a count', () => {
    const rows = Array.from({ length: 50 }, (_, i) => `${50 - i} 0 0`).join('\n');
    const problems = problemsOf(`# MHz S RI R 50\n${rows}\n`);
    expect(problems).toHaveLength(1);
    expect(problems[0]!.what).toContain('so do 48 more rows');
  });

  it('refuses a keyword in a file of version 1', () => {
    expect(problemsOf('# MHz S RI R 50\n[Number of Ports] 1\n1 0 0\n2 0 0\n')[0]).toMatchObject({
      code: 'touchstone-keyword',
      line: 2,
    });
  });

  it('cleans what it quotes', () => {
    // Long enough that two control characters do not make it binary.
    const rows = Array.from({ length: 40 }, (_, i) => `${i + 2} 0 0`).join('\n');
    const text = `# MHz S RI R 50\n1 \x1b[31mred\x1b[0m 0\n${rows}\n`;
    const [problem] = problemsOf(text, { file: 'a\x1b[2J.s1p' });
    expect(problem!.found).toBe('red');
    expect(problem!.file).toBe('a.s1p');
  });

  it('refuses values that no reflection can have', () => {
    expect(problemsOf('# MHz S DB R 50\n1 400 0\n2 -3 0\n')[0]).toMatchObject({
      code: 'sweep-value',
      line: 2,
    });
  });
});
