import { describe, expect, it } from 'vitest';
import { TYPED_VERBS } from '../../src/cli/commands.ts';
import { type Invocation, parseArguments } from '../../src/cli/parse-arguments.ts';
import type { Problem } from '../../src/outcome.ts';

const parse = (...argv: string[]): Invocation => {
  const parsed = parseArguments(argv);
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.problems));
  return parsed.value;
};
const problemsOf = (...argv: string[]): readonly Problem[] => {
  const parsed = parseArguments(argv);
  return parsed.ok ? [] : parsed.problems;
};

describe('parseArguments', () => {
  it('opens the workspace when no verb is given', () => {
    expect(parse().verb).toBe('workspace');
    expect(parse()).toMatchObject({ verb: 'workspace', inputs: [] });
    expect(parse('run.s1p')).toMatchObject({ verb: 'workspace', inputs: ['run.s1p'] });
    expect(parse('-')).toMatchObject({ verb: 'workspace', inputs: ['-'] });
    expect(parse('--', 'locate')).toMatchObject({ verb: 'workspace', inputs: ['locate'] });
  });

  it('points to --help when asked for help as a verb', () => {
    expect(problemsOf('help')).toMatchObject([{ code: 'verb-unknown', mend: 'write feedsonde --help' }]);
  });

  it('finds the verb wherever it stands between the flags', () => {
    for (const argv of [
      ['locate', 'a.s1p', '--cable', 'rg-213'],
      ['--cable', 'rg-213', 'locate', 'a.s1p'],
      ['--cable=rg-213', 'locate', 'a.s1p'],
    ]) {
      const invocation = parse(...argv);
      expect(invocation).toMatchObject({ verb: 'locate', inputs: ['a.s1p'] });
      expect(invocation.text('cable')).toBe('rg-213');
    }
  });

  it('takes "-" as an argument, and values that begin with a minus sign as values', () => {
    const simulated = parse('simulate', 'a.line.json', '--noise', '-70', '--temperature', '-12C');
    expect(simulated.text('noise')).toBe('-70');
    expect(simulated.text('temperature')).toBe('-12C');
    expect(parse('locate', '-', '--offset', '-.4m').inputs).toEqual(['-']);
  });

  it('collects a flag that may be repeated, in order', () => {
    const { texts } = parse('simulate', 'a.line.json', '--fault', 'open@3m', '--fault=short@4m');
    expect(texts('fault')).toEqual(['open@3m', 'short@4m']);
  });

  it('knows short flags, and keeps values as they were typed', () => {
    const simulated = parse('simulate', 'a.line.json', '-o', '007.s1p', '--seed', '007');
    expect(simulated.text('output')).toBe('007.s1p');
    expect(simulated.text('seed')).toBe('007');
    expect(parse('locate', '-h').has('help')).toBe(true);
  });

  it('asks for no arguments where help is wanted', () => {
    expect(parse('locate', '--help').has('help')).toBe(true);
  });

  it.each([
    [['lcoate', 'a.s1p'], 'verb-unknown', 'did you mean "locate"?'],
    [
      ['xyzzy'],
      'verb-unknown',
      `the verbs are ${TYPED_VERBS.join(', ')}; to open a sweep of that name write ./xyzzy`,
    ],
    [['locate', 'a.s1p', '--lenght', '3m'], 'flag-unknown', 'did you mean --length?'],
    [['locate', 'a.s1p', '--fault', 'open@3m'], 'flag-unknown', 'feedsonde locate --help lists the flags'],
    [['locate', 'a.s1p', '-x'], 'flag-unknown', 'feedsonde locate --help lists the flags'],
    [['locate', 'a.s1p', '--cable'], 'flag-value', 'write --cable ID'],
    [['locate', 'a.s1p', '--cable', '--json'], 'flag-value', 'write --cable ID'],
    [['locate', 'a.s1p', '--cable='], 'flag-value', 'write --cable ID'],
    [['locate', 'a.s1p', '--json=yes'], 'flag-value', 'write --json alone'],
    [['locate', 'a.s1p', '--end', 'open', '--end', 'short'], 'flag-twice', 'keep one of them'],
    [['locate'], 'argument-missing', 'write feedsonde locate SWEEP'],
    [
      ['locate', 'a.s1p', 'b.s1p'],
      'argument-extra',
      'write feedsonde locate SWEEP; quote names that hold blanks',
    ],
  ])('refuses %j', (argv, code, mend) => {
    expect(problemsOf(...argv)).toMatchObject([{ code, mend }]);
  });

  it('names every wrong word at once', () => {
    expect(problemsOf('locate', 'a.s1p', '--lenght=3m', '--jsno').map((p) => p.mend)).toEqual([
      'did you mean --length?',
      'did you mean --json?',
    ]);
  });

  it('keeps escape codes of what was typed out of its messages', () => {
    for (const argv of [['\u001b[31mlocate'], ['locate', 'a.s1p', '--\u001b]0;x\u0007']])
      expect(JSON.stringify(problemsOf(...argv))).not.toMatch(/\\u00[01]/u);
  });
});
