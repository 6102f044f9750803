/** From words typed to a verb, its arguments and its flags; every wrong word at once, each with the nearest right one. */
import meow from 'meow';
import { nearestWords } from '../line/nearest-word.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import {
  COMMON_FLAGS,
  FLAGS,
  type FlagName,
  type FlagSpec,
  flagSpec,
  TYPED_VERBS,
  type VerbName,
  verbSpec,
} from './commands.ts';

export type Invocation = {
  readonly verb: VerbName;
  readonly inputs: readonly string[];
  /** The value of a flag; null where not given. */
  text(flag: FlagName): string | null;
  texts(flag: FlagName): readonly string[];
  has(flag: FlagName): boolean;
};

/**
 * Reads the command line.
 *
 * @param argv What was typed after the program's name.
 */
export function parseArguments(argv: readonly string[]): Outcome<Invocation> {
  const words = joinValues(argv);
  const { verb: typed, rest } = takeVerb(words);
  const verb = typed === null ? 'workspace' : TYPED_VERBS.find((one) => one === typed);
  if (verb === undefined) return fail(unknownVerb(typed ?? ''));
  const spec = verbSpec(verb);
  const allowed: readonly FlagName[] = [...spec.flags, ...COMMON_FLAGS];
  const problems = wrongWords(rest, verb, allowed);
  if (problems.length > 0) return fail(...problems);

  const { input, flags } = meow({
    importMeta: import.meta,
    argv: rest,
    // The table is the help; meow only parses.
    pkg: {},
    autoHelp: false,
    autoVersion: false,
    flags: Object.fromEntries(allowed.map((flag) => [camelCase(flag), meowFlag(flagSpec(flag))])),
  });
  const valuesOf = (flag: FlagName): string[] => {
    const value: unknown = flags[camelCase(flag)];
    return Array.isArray(value) ? value.map(String) : [];
  };
  const has = (flag: FlagName): boolean =>
    flagSpec(flag).value === null ? flags[camelCase(flag)] === true : valuesOf(flag).length > 0;
  if (!has('help') && !has('version')) {
    problems.push(...wrongCounts(verb, input, (flag) => valuesOf(flag).length, allowed));
    if (problems.length > 0) return fail(...problems);
  }
  return succeed({
    verb,
    inputs: input,
    text: (flag) => valuesOf(flag)[0] ?? null,
    texts: valuesOf,
    has,
  });
}

/**
 * Joins each flag with its value (`--noise -70` becomes `--noise=-70`) and writes short flags long, so that a value
 * that begins with a minus sign is taken for what it is.
 */
function joinValues(argv: readonly string[]): string[] {
  const words: string[] = [];
  for (let i = 0; i < argv.length; i++) {
    const word = argv[i]!;
    if (word === '--') return [...words, ...argv.slice(i)];
    const flag = flagOf(word);
    if (flag === null) {
      words.push(word);
      continue;
    }
    const next = argv[i + 1];
    const takesNext =
      FLAGS[flag].value !== null && !word.includes('=') && next !== undefined && !looksLikeFlag(next);
    words.push(takesNext ? `--${flag}=${next}` : word.replace(/^-+[^=]*/u, `--${flag}`));
    if (takesNext) i++;
  }
  return words;
}

function looksLikeFlag(word: string): boolean {
  return word !== '-' && word.startsWith('-') && !/^-[.\d]/u.test(word);
}

/** The flag that a word names, whatever the verb; null for any other word. */
function flagOf(word: string): FlagName | null {
  const long = /^--([^=]+)/u.exec(word)?.[1];
  const short = /^-([A-Za-z])(?:=|$)/u.exec(word)?.[1];
  for (const flag of Object.keys(FLAGS) as FlagName[])
    if (flag === long || (short !== undefined && flagSpec(flag).short === short)) return flag;
  return null;
}

/** The first word that is no flag names the verb, unless it is a file. */
function takeVerb(words: readonly string[]): {
  readonly verb: string | null;
  readonly rest: readonly string[];
} {
  const index = words.findIndex((word) => word === '-' || !word.startsWith('-'));
  const word = words[index];
  const marker = words.indexOf('--');
  if (word === undefined || (marker >= 0 && marker < index) || looksLikeFile(word))
    return { verb: null, rest: words };
  return { verb: word, rest: words.filter((_, i) => i !== index) };
}

/** No verb has a dot or a slash in it, and no sweep lacks both. */
function looksLikeFile(word: string): boolean {
  return word === '-' || /[./\\]/u.test(word);
}

function unknownVerb(word: string): Problem {
  if (word === 'help')
    return { code: 'verb-unknown', what: 'help is a flag of this program', mend: 'write feedsonde --help' };
  const [near] = nearestWords(word, TYPED_VERBS);
  return {
    code: 'verb-unknown',
    what: `"${cleanForDisplay(word, 40)}" is not a verb of this program`,
    mend:
      near === undefined
        ? `the verbs are ${TYPED_VERBS.join(', ')}; to open a sweep of that name write ./${cleanForDisplay(word, 40)}`
        : `did you mean "${near}"?`,
  };
}

function wrongWords(words: readonly string[], verb: VerbName, allowed: readonly FlagName[]): Problem[] {
  const problems: Problem[] = [];
  for (const word of words) {
    if (word === '--') break;
    if (word === '-' || !word.startsWith('-')) continue;
    const flag = flagOf(word);
    if (flag === null || !allowed.includes(flag)) {
      problems.push(unknownFlag(word, flag, verb, allowed));
      continue;
    }
    const value = /=(.*)$/su.exec(word)?.[1];
    const { value: wanted } = flagSpec(flag);
    if (wanted !== null && (value === undefined || value === ''))
      problems.push({
        code: 'flag-value',
        what: `--${flag} needs a value`,
        mend: `write --${flag} ${wanted}`,
      });
    if (wanted === null && value !== undefined)
      problems.push({ code: 'flag-value', what: `--${flag} takes no value`, mend: `write --${flag} alone` });
  }
  return problems;
}

function unknownFlag(
  word: string,
  known: FlagName | null,
  verb: VerbName,
  allowed: readonly FlagName[],
): Problem {
  const name = word.replace(/^-+|=.*$/gsu, '');
  const [near] = nearestWords(name, allowed);
  const help = verb === 'workspace' ? 'feedsonde --help' : `feedsonde ${verb} --help`;
  return {
    code: 'flag-unknown',
    what:
      known === null
        ? `there is no flag ${cleanForDisplay(word.replace(/=.*$/su, ''), 40)}`
        : `--${known} is not a flag of ${verb === 'workspace' ? 'the workspace' : verb}`,
    mend: near === undefined || near === known ? `${help} lists the flags` : `did you mean --${near}?`,
  };
}

function wrongCounts(
  verb: VerbName,
  input: readonly string[],
  countOf: (flag: FlagName) => number,
  allowed: readonly FlagName[],
): Problem[] {
  const spec = verbSpec(verb);
  const usage = `feedsonde ${verb === 'workspace' ? '' : `${verb} `}${spec.arguments}`;
  const problems: Problem[] = [];
  if (input.length < spec.fewestArguments)
    problems.push({
      code: 'argument-missing',
      what: `${verb} needs ${spec.arguments}`,
      mend: `write ${usage}`,
    });
  if (input.length > spec.mostArguments)
    problems.push({
      code: 'argument-extra',
      what: 'there is one word too many',
      found: cleanForDisplay(input[spec.mostArguments] ?? '', 60),
      mend: `write ${usage}; quote names that hold blanks`,
    });
  for (const flag of allowed)
    if (countOf(flag) > 1 && !flagSpec(flag).repeatable)
      problems.push({
        code: 'flag-twice',
        what: `--${flag} is given more than once`,
        mend: 'keep one of them',
      });
  return problems;
}

function meowFlag(spec: FlagSpec): { type: 'boolean' } | { type: 'string'; isMultiple: true } {
  return spec.value === null ? { type: 'boolean' } : { type: 'string', isMultiple: true };
}

function camelCase(flag: FlagName): string {
  return flag.replace(/-(.)/gu, (_, letter: string) => letter.toUpperCase());
}
