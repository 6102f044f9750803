import { describe, expect, it } from 'vitest';
import { LARGEST_SWEEP_BYTES, readSweep } from '../../src/sweep/read-sweep.ts';
import { problemsOf, sweepOf } from './read-text.ts';

const TOUCHSTONE = '# MHz S RI R 50\n1 0.1 0\n2 0.2 0\n';
const TABLE = 'mhz,re,im\n1,0.1,0\n2,0.2,0\n';

function codeOf(bytes: Uint8Array, file = 'line.s1p'): string | undefined {
  const outcome = readSweep(bytes, { file });
  return outcome.ok ? undefined : outcome.problems[0]!.code;
}

describe('readSweep', () => {
  it.each([
    ['line.s1p', TOUCHSTONE],
    ['-', TOUCHSTONE],
    ['line.txt', TOUCHSTONE],
    ['line.csv', TOUCHSTONE.replace('# MHz', '! by hand\n# MHz')],
    ['line.csv', TABLE],
    ['-', TABLE],
    ['line.txt', TABLE],
    ['table.txt', `# site 7\n${TABLE}`],
    ['table.txt', '# mhz re im\n1 0.1 0\n2 0.2 0\n'],
  ])('tells the format of %s by its content', (file, text) => {
    const sweep = sweepOf(text, { file });
    expect([sweep.frequencyHz[0], sweep.gamma.re[1], sweep.file]).toEqual([1e6, 0.2, file]);
  });

  it('reads UTF-16 by its mark, and Windows-1252 in comments', () => {
    const wide = new Uint8Array([
      0xff,
      0xfe,
      ...new Uint8Array(new Uint16Array([...TOUCHSTONE].map((c) => c.charCodeAt(0))).buffer),
    ]);
    expect(codeOf(wide)).toBeUndefined();
    const narrow = new Uint8Array([
      ...new TextEncoder().encode('! 25 '),
      0xb0,
      ...new TextEncoder().encode(`C\n${TOUCHSTONE}`),
    ]);
    const outcome = readSweep(narrow, { file: 'line.s1p' });
    expect(outcome.ok && outcome.value.comments).toEqual(['25 °C']);
  });

  it('drops an old end-of-file mark', () => {
    expect(sweepOf(`${TOUCHSTONE}\x1a`).frequencyHz.length).toBe(2);
  });

  it.each([
    ['nothing', '', 'sweep-empty'],
    ['blanks', ' \n\n\t\n', 'sweep-empty'],
    ['comments only', '! a\n! b\n', 'sweep-empty'],
    ['prose', 'Dear colleague,\nhere is the sweep.\n', 'sweep-format'],
  ])('refuses %s', (_, text, code) => {
    expect(problemsOf(text, { file: code === 'sweep-format' ? 'a.txt' : 'a.s1p' })[0]!.code).toBe(code);
  });

  it.each([
    ['a ZIP archive', [0x50, 0x4b, 3, 4, 0, 0]],
    ['a PNG picture', [0x89, 0x50, 0x4e, 0x47, 13, 10]],
    ['a gzip archive', [0x1f, 0x8b, 8, 0]],
    ['zero bytes', [0x31, 0, 0, 0, 0x32]],
    ['many control characters', Array.from({ length: 200 }, (_, i) => 1 + (i % 8))],
  ])('refuses %s as no text', (_, bytes) => {
    expect(codeOf(Uint8Array.from(bytes))).toBe('sweep-binary');
  });

  it('refuses a file beyond the limit without looking into it', () => {
    expect(codeOf({ length: LARGEST_SWEEP_BYTES + 1 } as Uint8Array)).toBe('sweep-too-large');
  });

  it('reads 100 000 points in well under a second', () => {
    const rows = Array.from({ length: 100_000 }, (_, k) => `${1e6 + 10 * k} ${Math.sin(k)} ${Math.cos(k)}`);
    const bytes = new TextEncoder().encode(`# Hz S RI R 50\n${rows.join('\n')}\n`);
    const begin = performance.now();
    expect(codeOf(bytes)).toBeUndefined();
    // Some 60 ms on this machine when it is free.
    expect(performance.now() - begin).toBeLessThan(1000);
  });

  it('gives every problem the name of the file, harmless and short', () => {
    const [problem] = problemsOf('# THz\n1 0 0\n2 0 0\n', { file: `\x1b]0;x\x07${'long'.repeat(200)}.s1p` });
    expect(problem!.file).toHaveLength(200);
    expect(problem!.file).not.toContain('\x1b');
  });
});
