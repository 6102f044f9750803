/**
 * Sweep files with mutations: whatever comes, a reader gives a sound sweep or says what is wrong, soon and harmlessly.
 * Seeds are fixed; a failure prints the text that broke it.
 */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { sweepQuality } from '../../src/sweep/quality.ts';
import { readSweep } from '../../src/sweep/read-sweep.ts';

/** Sound files of every kind, short, for mutations to break. */
const SOUND: readonly { readonly file: string; readonly text: string }[] = [
  { file: 'a.s1p', text: '! site\n# MHz S RI R 50\n1 0.1 0 ! one\n2 0.2 -0.1\n3 0.3 0\n' },
  { file: 'a.s1p', text: '#\n0.5  0.30  -45.0\n1.0  0.28  -91.5\n' },
  { file: 'a.s1p', text: '# s mhz r 75 db\n10 -26.02 12\n20 -25.10 -30\n' },
  {
    file: 'a.s2p',
    text: '# GHz S MA R 50\n1 0.5 -60 3 120 0.05 60 0.4 -40\n2 0.5 -90 2.5 90 0.06 50 0.4 -60\n1 0.6 0.45 30 0.3\n',
  },
  {
    file: 'a.s3p',
    text: '# GHz Z RI R 50\n1 1 0 0 0 0 0\n 0 0 1 0 0 0\n 0 0 0 0 1 0\n2 1 0 0 0 0 0\n 0 0 1 0 0 0\n 0 0 0 0 1 0\n',
  },
  {
    file: 'a.ts',
    text: '[Version] 2.0\n# Hz Y RI R 50\n[Number of Ports] 2\n[Two-Port Data Order] 12_21\n[Number of Frequencies] 2\n[Reference] 50 75\n[Matrix Format] Lower\n[Network Data]\n1e6 0.01 0\n 0.1 0 0.02 0\n2e6 0.01 0\n 0.1 0 0.02 0\n[End]\n',
  },
  { file: 'a.csv', text: 'frequency_mhz,real,imaginary\n1,0.1,0\n2,0.2,0.1\n3,0.3,0\n' },
  { file: '-', text: '# site 7\nmhz;"mag_db";phase_deg\n1,5;-20;90\n2,5;-21;-90\n' },
];

/** Pieces that have broken readers before: numbers at their limits, controls, keywords, marks, quotes. */
const PIECES = [
  '',
  ' ',
  '\n',
  '\r',
  '\t',
  '!',
  '#',
  '[',
  ']',
  ',',
  ';',
  '"',
  '-',
  '+',
  'e',
  'E9',
  'e-400',
  '1e308',
  '1e999',
  '0',
  '-0',
  '.',
  '1.2.3',
  'NaN',
  'inf',
  '0x10',
  '1D3',
  '9'.repeat(400),
  '\0',
  '\x1b[2J',
  '\x1a',
  '\ufeff',
  '\u202e',
  '°',
  'Hz',
  'THz',
  'RI',
  'R',
  'R 0',
  '[End]',
  '[Version] 2.1',
  '[Network Data]',
  '[Number of Ports] 99999',
  '[Number of Frequencies] 9007199254740993',
  '[Reference]',
  '[Begin Information]',
  'freq,re,im',
  '1,2,3',
];

/** One change of a text: something put in, cut out, doubled, or put in the place of a number. */
type Mutation = {
  readonly kind: 'insert' | 'cut' | 'double' | 'replace';
  readonly at: number;
  readonly length: number;
  readonly piece: string;
};

const mutation: fc.Arbitrary<Mutation> = fc.record({
  kind: fc.constantFrom('insert', 'cut', 'double', 'replace'),
  at: fc.double({ min: 0, max: 1, noNaN: true }),
  length: fc.integer({ min: 0, max: 40 }),
  piece: fc.oneof(fc.constantFrom(...PIECES), fc.string({ maxLength: 8 })),
});

function mutated(text: string, { kind, at, length, piece }: Mutation): string {
  const from = Math.floor(at * text.length);
  const [before, middle, after] = [
    text.slice(0, from),
    text.slice(from, from + length),
    text.slice(from + length),
  ];
  switch (kind) {
    case 'insert':
      return before + piece + text.slice(from);
    case 'cut':
      return before + after;
    case 'double':
      return before + middle + middle + after;
    case 'replace':
      return before + text.slice(from).replace(/[-+.\d][-+.\deE]*/, piece);
  }
}

/** True for text that a terminal shows as it stands. */
function isHarmless(text: string): boolean {
  return !/[\p{Cc}\u202a-\u202e\u2066-\u2069]/u.test(text);
}

/** Reads bytes and checks the promise of `readSweep`. */
function check(bytes: Uint8Array, file: string, port: number): void {
  const begin = performance.now();
  const outcome = readSweep(bytes, { file, port });
  // A file of some hundred bytes is a matter of microseconds; a hang is what this looks for.
  expect(performance.now() - begin).toBeLessThan(1000);
  if (!outcome.ok) {
    expect(outcome.problems.length).toBeGreaterThan(0);
    for (const { what, mend, found = '', file: shown = '' } of outcome.problems) {
      expect([what.length > 0, mend.length > 0]).toEqual([true, true]);
      expect([what, mend, found, shown].every(isHarmless)).toBe(true);
    }
    return;
  }
  const { frequencyHz, gamma, portOhm, transmission, comments } = outcome.value;
  const n = frequencyHz.length;
  expect(n).toBeGreaterThanOrEqual(2);
  const arrays = [gamma.re, gamma.im, ...(transmission ? [transmission.re, transmission.im] : [])];
  for (const values of arrays) expect([values.length, values.every(Number.isFinite)]).toEqual([n, true]);
  expect(frequencyHz.every((f, k) => f >= 0 && f <= 1e13 && (k === 0 || f > frequencyHz[k - 1]!))).toBe(true);
  expect(portOhm > 0 && Number.isFinite(portOhm)).toBe(true);
  expect([...comments, ...outcome.notices.map((notice) => notice.what)].every(isHarmless)).toBe(true);
  const quality = sweepQuality(outcome.value);
  expect([quality.noiseFloorDb, quality.maxGammaDb, quality.stepHz].every(Number.isFinite)).toBe(true);
}

describe('readSweep under mutation', () => {
  it.each(SOUND.map((sound, index) => ({ ...sound, index })))(
    'gives a sound sweep or says what is wrong: file $index, $file',
    ({ file, text, index }) => {
      fc.assert(
        fc.property(
          fc.array(mutation, { maxLength: 4 }),
          fc.integer({ min: 1, max: 3 }),
          (mutations, port) => {
            check(new TextEncoder().encode(mutations.reduce(mutated, text)), file, port);
          },
        ),
        { seed: 100 + index, numRuns: 400 },
      );
    },
  );

  it('never takes a version 2 file that was cut short for a whole one', () => {
    const { file, text } = SOUND[5]!;
    for (let length = 0; length < text.trimEnd().length; length++) {
      const outcome = readSweep(new TextEncoder().encode(text.slice(0, length)), { file });
      expect(
        outcome.ok ? outcome.notices.map((n) => n.code) : outcome.problems.map((p) => p.code),
      ).not.toEqual([]);
    }
  });

  it('takes any bytes under any name', () => {
    const name = fc.oneof(
      fc.constantFrom('a.s1p', 'a.s4p', 'a.ts', 'a.csv', '-'),
      fc.string({ maxLength: 20 }),
    );
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 300 }), name, (bytes, file) => check(bytes, file, 1)),
      { seed: 200, numRuns: 500 },
    );
  });

  it('takes any port', () => {
    fc.assert(
      fc.property(fc.double(), (port) => check(new TextEncoder().encode(SOUND[3]!.text), 'a.s2p', port)),
      { seed: 201, numRuns: 100 },
    );
  });

  it.each([
    ['one endless line', `# MHz S RI R 50\n${'1 0 0 '.repeat(200_000)}`],
    ['one endless token', `# MHz S RI R 50\n${'9'.repeat(2_000_000)} 0 0\n`],
    ['comments without end', '!\n'.repeat(500_000)],
    ['brackets without end', `[Version] 2.0\n${'[x'.repeat(500_000)}`],
    ['commas without end', `mhz,re,im\n${','.repeat(1_000_000)}`],
    ['quotes without end', `mhz,re,im\n${'"a,'.repeat(200_000)}`],
    ['a header without end', `${'mhz,'.repeat(300_000)}\n1,2,3\n`],
    ['a million rows too many', `# MHz S RI R 50\n${'x\n'.repeat(1_000_000)}`],
  ])('is soon done with %s', (_, text) => {
    const begin = performance.now();
    const outcome = readSweep(new TextEncoder().encode(text), { file: 'a.s1p' });
    expect(outcome.ok).toBe(false);
    expect(performance.now() - begin).toBeLessThan(3000);
  });
});
