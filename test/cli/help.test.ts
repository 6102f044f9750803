import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { FAULT_FORMS } from '../../src/app/fault-text.ts';
import { FLAGS, type FlagName, TYPED_VERBS, VERBS, type VerbName, verbSpec } from '../../src/cli/commands.ts';
import { programHelp, verbHelp, verbsMarkdown } from '../../src/cli/help.ts';
import { parseArguments } from '../../src/cli/parse-arguments.ts';

const verbs = Object.keys(VERBS) as VerbName[];

describe('verbHelp', () => {
  it.each(TYPED_VERBS)('of %s names every flag and every example', (verb) => {
    const help = verbHelp(verb);
    for (const flag of verbSpec(verb).flags) expect(help).toContain(`--${flag}`);
    for (const { command } of verbSpec(verb).examples) expect(help).toContain(command);
  });

  it.each(verbs)('of %s fits 80 columns, but for commands to be copied', (verb) => {
    for (const line of verbHelp(verb).split('\n'))
      if (!line.startsWith('  feedsonde ')) expect(line.length, line).toBeLessThanOrEqual(80);
  });

  it('shows only examples that parse', () => {
    for (const verb of verbs)
      for (const { command } of verbSpec(verb).examples) {
        const parsed = parseArguments(command.split(' ').slice(1));
        expect(parsed.ok && parsed.value.verb, command).toBe(verb);
      }
  });
});

describe('verbHelp of simulate', () => {
  it('shows every form of fault that is read', () => {
    const words = verbHelp('simulate').replace(/\s+/gu, ' ');
    for (const form of Object.values(FAULT_FORMS)) expect(words).toContain(form);
  });
});

describe('programHelp', () => {
  it('lists every verb', () => {
    for (const verb of TYPED_VERBS) expect(programHelp()).toContain(`feedsonde ${verb}`);
  });
});

describe('FLAGS', () => {
  it('holds no flag that no verb takes', () => {
    const used = new Set<FlagName>(verbs.flatMap((verb) => verbSpec(verb).flags));
    for (const flag of Object.keys(FLAGS) as FlagName[])
      if (flag !== 'help' && flag !== 'version') expect(used, flag).toContain(flag);
  });
});

describe('README.md', () => {
  it('has the verb section that the table gives (paste verbsMarkdown() between its marks)', () => {
    const readme = readFileSync(new URL('../../README.md', import.meta.url), 'utf8');
    const section = /<!-- verbs -->\n\n(.*?)\n\n<!-- \/verbs -->/su.exec(readme)?.[1];
    expect(section).toBe(verbsMarkdown());
  });
});
