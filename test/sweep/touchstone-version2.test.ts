/** Touchstone 2.0 and 2.1: every rule of references.md section 7 that holds for version 2. */
import { describe, expect, it } from 'vitest';
import { problemsOf, sweepAndNotices, sweepOf } from './read-text.ts';

type Header = { readonly [keyword: string]: string | null };

/** A two-port of version 2; `change` replaces keywords, null removes one. */
function twoPort(
  change: Header = {},
  { option = '# Hz S RI R 50', rows = ROWS, end = '[End]\n' } = {},
): string {
  const keywords: Header = {
    'Number of Ports': '2',
    'Two-Port Data Order': '12_21',
    'Number of Frequencies': '2',
    Reference: '50 75',
    'Matrix Format': 'Full',
    ...change,
  };
  const header = Object.entries(keywords).flatMap(([name, value]) =>
    value === null ? [] : [`[${name}] ${value}`.trimEnd()],
  );
  return `[Version] 2.0\n${option}\n${header.join('\n')}\n[Network Data]\n${rows}${end}`;
}

const ROWS = '1000000  0.01 0  0.1 0  0.8 0  0.02 0\n2000000  0.01 0  0.1 0  0.7 0  0.02 0\n';
const FILE = { file: 'a.s2p' };

/** A three-port whose element (r, c) is 0.rc, given as a triangle. */
function threePort(format: 'Lower' | 'Upper', rows: string): string {
  return `[Version] 2.0
# MHz S RI R 50
[Number of Ports] 3
[Number of Frequencies] 2
[Matrix Format] ${format}
[Network Data]
100  ${rows}
200  ${rows}
[End]
`;
}

describe('readTouchstone: version 2 header', () => {
  it('reads the two-port example with 12_21 and a reference for each port', () => {
    const one = sweepOf(twoPort(), FILE);
    expect([one.gamma.re[0], one.transmission?.re[0], one.portOhm, one.ports]).toEqual([0.01, 0.8, 50, 2]);
    const two = sweepOf(twoPort(), { ...FILE, port: 2 });
    expect([two.gamma.re[0], two.transmission?.re[0], two.portOhm]).toEqual([0.02, 0.1, 75]);
  });

  it('reads 21_12 as N11 N21 N12 N22', () => {
    const sweep = sweepOf(twoPort({ 'Two-Port Data Order': '21_12' }), FILE);
    expect(sweep.transmission?.re[0]).toBe(0.1);
  });

  it.each(['2.0', '2.1'])('takes version %s', (version) => {
    expect(sweepOf(twoPort().replace('2.0', version), FILE).frequencyHz.length).toBe(2);
  });

  it.each(['1.1', '3.0', ''])('refuses version %j', (version) => {
    expect(problemsOf(twoPort().replace('2.0', version), FILE)[0]).toMatchObject({
      code: 'touchstone-version',
      line: 1,
    });
  });

  it('refuses a keyword before [Version]', () => {
    expect(problemsOf(`[Number of Ports] 2\n${twoPort()}`, FILE)[0]!.code).toBe('touchstone-version');
  });

  it('is read by its [Version] line under any name, case and spacing', () => {
    const text = twoPort().replaceAll('[Number of Ports]', '[NUMBER  OF ports]');
    for (const file of ['a.ts', 'a.s2p', 'sweep.txt', '-']) expect(sweepOf(text, { file }).ports).toBe(2);
    expect(sweepOf(twoPort({ 'Matrix Format': 'FULL' }), FILE).ports).toBe(2);
  });

  it('believes the file where the name says another number of ports, aloud', () => {
    const { sweep, notices } = sweepAndNotices(twoPort(), { file: 'a.s3p' });
    expect(sweep.ports).toBe(2);
    expect(notices.map((n) => n.code)).toContain('touchstone-ports-name');
  });

  it.each([['Number of Ports'], ['Number of Frequencies'], ['Two-Port Data Order']])(
    'needs [%s]',
    (keyword) => {
      const problems = problemsOf(twoPort({ [keyword]: null }), FILE);
      expect(problems[0]).toMatchObject({ code: 'touchstone-keyword-missing' });
      expect(problems[0]!.what).toContain(keyword);
    },
  );

  it('needs an option line', () => {
    const text = twoPort({}, { option: '! none' });
    expect(problemsOf(text, FILE)[0]).toMatchObject({
      code: 'touchstone-keyword-missing',
      what: expect.stringContaining('option line'),
    });
  });

  it.each([
    ['Number of Ports', '0'],
    ['Number of Ports', '2.5'],
    ['Number of Ports', 'two'],
    ['Number of Frequencies', '-1'],
    ['Number of Frequencies', '0'],
    ['Two-Port Data Order', '11_22'],
    ['Matrix Format', 'Half'],
  ])('refuses [%s] %s', (keyword, value) => {
    expect(problemsOf(twoPort({ [keyword]: value }), FILE)[0]!.code).toBe('touchstone-keyword');
  });

  it('has a two-port order for two ports only', () => {
    const text = `[Version] 2.0\n# MHz S RI R 50\n[Number of Ports] 1\n[Two-Port Data Order] 21_12
[Number of Frequencies] 2\n[Network Data]\n1 0 0\n2 0 0\n[End]\n`;
    expect(problemsOf(text)[0]).toMatchObject({ code: 'touchstone-keyword', line: 4 });
  });

  it('takes references over several lines, and R of the option line for all ports without them', () => {
    expect(sweepOf(twoPort({ Reference: '50\n75' }), { ...FILE, port: 2 }).portOhm).toBe(75);
    const text = twoPort({ Reference: null }, { option: '# Hz S RI R 60' });
    expect(sweepOf(text, { ...FILE, port: 2 }).portOhm).toBe(60);
  });

  it.each(['50', '50 75 50', '50 -75', '50 0', '50 x'])('refuses the references %s of two ports', (value) => {
    expect(problemsOf(twoPort({ Reference: value }), FILE).map((p) => p.code)).toContain(
      'touchstone-reference',
    );
  });

  it('refuses a keyword twice, and one it does not know', () => {
    const twice = twoPort().replace('[Matrix', '[Number of Ports] 2\n[Matrix');
    expect(problemsOf(twice, FILE)[0]).toMatchObject({ code: 'touchstone-keyword', line: 7 });
    const unknown = twoPort().replace('[Matrix', '[Colour] red\n[Matrix');
    expect(problemsOf(unknown, FILE)[0]).toMatchObject({
      code: 'touchstone-keyword-unknown',
      line: 7,
      found: '[Colour] red',
    });
  });

  it('refuses mixed-mode data', () => {
    expect(problemsOf(twoPort({ 'Mixed-Mode Order': 'D1,2 C1,2' }), FILE)[0]!.code).toBe(
      'touchstone-mixed-mode',
    );
  });

  it('skips an information block, and refuses one that never ends', () => {
    const block = '[Begin Information]\nanything [Here]\n[End Information]\n';
    expect(sweepOf(twoPort().replace('[Matrix', `${block}[Matrix`), FILE).ports).toBe(2);
    const open = twoPort().replace('[Matrix', '[Begin Information]\n[Matrix');
    expect(problemsOf(open, FILE).map((p) => p.code)).toContain('touchstone-information');
  });

  it('refuses loose text and a header that ends before its data', () => {
    expect(problemsOf(twoPort().replace('[Matrix', 'hello\n[Matrix'), FILE)[0]).toMatchObject({
      code: 'touchstone-loose-line',
      found: 'hello',
    });
    expect(problemsOf(twoPort().split('[Network')[0]!, FILE)[0]!.code).toBe('touchstone-no-data');
  });
});

describe('readTouchstone: version 2 data', () => {
  it('reads a lower triangle, S13 = S31', () => {
    const rows = '0.11 0\n     0.21 0  0.22 0\n     0.31 0  0.32 0  0.33 0';
    for (const port of [1, 2, 3])
      expect(sweepOf(threePort('Lower', rows), { file: 'a.ts', port }).gamma.re[1]).toBe(
        [0.11, 0.22, 0.33][port - 1],
      );
  });

  it('reads an upper triangle', () => {
    const rows = '0.11 0  0.12 0  0.13 0\n     0.22 0  0.23 0\n     0.33 0';
    for (const port of [1, 2, 3])
      expect(sweepOf(threePort('Upper', rows), { file: 'a.ts', port }).gamma.re[0]).toBe(
        [0.11, 0.22, 0.33][port - 1],
      );
  });

  it('takes both halves of a two-port from a triangle', () => {
    const text = twoPort(
      { 'Matrix Format': 'Lower' },
      { rows: '1 0.01 0\n 0.8 0 0.02 0\n2 0.01 0\n 0.7 0 0.02 0\n' },
    );
    expect(sweepOf(text, FILE).transmission?.re[0]).toBe(0.8);
    expect(sweepOf(text, { ...FILE, port: 2 }).transmission?.re[1]).toBe(0.7);
  });

  it('takes more than four pairs on a line, as version 2 allows', () => {
    const matrix = Array.from({ length: 9 }, (_, i) => `0.0${i + 1} 0`).join(' ');
    const text = `[Version] 2.0\n# MHz S RI R 50\n[Number of Ports] 3\n[Number of Frequencies] 2
[Network Data]\n1 ${matrix}\n2 ${matrix}\n[End]\n`;
    expect(sweepOf(text, { file: 'a.ts', port: 3 }).gamma.re[0]).toBe(0.09);
  });

  it('holds Z and Y unnormalised', () => {
    const text = (parameter: string, value: number) =>
      `[Version] 2.0\n# MHz ${parameter} RI R 50\n[Number of Ports] 1\n[Number of Frequencies] 2
[Network Data]\n1 ${value} 0\n2 50 0\n[End]\n`;
    expect(sweepOf(text('Z', 75)).gamma.re[0]).toBeCloseTo(0.2, 12);
    expect(sweepOf(text('Y', 1 / 75)).gamma.re[0]).toBeCloseTo(0.2, 12);
  });

  it('normalises Z to the own reference of each port', () => {
    // Two ports not joined: Z11 = 100 against 50 is 1/3, Z22 = 25 against 75 is −1/2.
    const rows = '1 100 0  0 0  0 0  25 0\n2 100 0  0 0  0 0  25 0\n';
    const text = twoPort({}, { option: '# MHz Z RI R 50', rows });
    expect(sweepOf(text, FILE).gamma.re[0]).toBeCloseTo(1 / 3, 12);
    expect(sweepOf(text, { ...FILE, port: 2 }).gamma.re[0]).toBeCloseTo(-0.5, 12);
  });

  it('refuses another number of frequencies than the header says', () => {
    expect(problemsOf(twoPort({ 'Number of Frequencies': '3' }), FILE)[0]).toMatchObject({
      code: 'touchstone-frequency-count',
      what: expect.stringMatching(/3.*holds 2/),
    });
  });

  it('skips noise data that are announced', () => {
    const noise = '[Noise Data]\n500000 0.6 0.45 30 0.3\n900000 0.8 0.4 55 0.28\n[End]\n';
    const { sweep, notices } = sweepAndNotices(
      twoPort({ 'Number of Noise Frequencies': '2' }, { end: noise }),
      FILE,
    );
    expect([sweep.frequencyHz.length, notices.length]).toEqual([2, 0]);
  });

  it('has no unannounced noise rows as version 1 has', () => {
    const rows = `${ROWS}1000000 0.6 0.45 30 0.3\n`;
    expect(problemsOf(twoPort({}, { rows }), FILE)[0]!.code).toBe('touchstone-row');
  });

  it('reads on without [End], aloud, and leaves out what follows it, aloud', () => {
    expect(sweepAndNotices(twoPort({}, { end: '' }), FILE).notices.map((n) => n.code)).toEqual([
      'touchstone-no-end',
    ]);
    const after = sweepAndNotices(twoPort({}, { end: '[End]\n3 4 5\n' }), FILE);
    expect(after.notices.map((n) => n.code)).toEqual(['touchstone-after-end']);
    expect(after.sweep.frequencyHz.length).toBe(2);
  });
});
