/** Help for people and the README's verb section, both from the table of verbs. */
import { wrapText } from '../plot/cells.ts';
import {
  ANALYSIS_FLAGS,
  COMMON_FLAGS,
  type FlagName,
  flagSpec,
  TYPED_VERBS,
  type VerbName,
  type VerbSpec,
  verbSpec,
} from './commands.ts';

const WIDTH = 80;

/** Help of the whole program. */
export function programHelp(): string {
  const verbs = TYPED_VERBS.map((verb): [string, string] => [
    `feedsonde ${usageOf(verb)}`,
    verbSpec(verb).summary,
  ]);
  return [
    ...wrapText(
      'feedsonde finds where a feedline is bad, what the fault is, and how sure that is, from a reflection sweep.',
      WIDTH,
    ),
    '',
    ...columns([['feedsonde [SWEEP]', verbSpec('workspace').summary], ...verbs]),
    '',
    'feedsonde VERB --help tells more of each. Flags of the workspace:',
    '',
    ...flagRows(verbSpec('workspace').flags),
    '',
    'Examples, in the folder of the program:',
    '',
    ...exampleRows(verbSpec('workspace')),
    '',
    ...wrapText(
      'Exit status: 0 done and nothing wrong found, 1 a fault, 2 it could not be done (standard error says why). ' +
        'The workspace leaves with 0. NO_COLOR turns colour off.',
      WIDTH,
    ),
    '',
  ].join('\n');
}

/** Help of one verb. */
export function verbHelp(verb: VerbName): string {
  if (verb === 'workspace') return programHelp();
  const spec = verbSpec(verb);
  return [
    `feedsonde ${usageOf(verb)}: ${spec.summary}`,
    '',
    ...spec.description.flatMap((paragraph) => [...wrapText(paragraph, WIDTH), '']),
    ...flagRows(spec.flags),
    '',
    'Examples, in the folder of the program:',
    '',
    ...exampleRows(spec),
    '',
  ].join('\n');
}

/** The README's section on verbs, from its first heading to the end of its last table. */
export function verbsMarkdown(): string {
  const sections = (['workspace', ...TYPED_VERBS] as const).map((verb) => {
    const spec = verbSpec(verb);
    const shared = ANALYSIS_FLAGS.every((flag) => spec.flags.includes(flag));
    const own = shared ? spec.flags.filter((flag) => !isAnalysisFlag(flag)) : spec.flags;
    return [
      `### \`feedsonde ${verb === 'workspace' ? spec.arguments : usageOf(verb)}\`: ${spec.summary}`,
      ...spec.description,
      ['```sh', ...spec.examples.map(({ command, shows }) => `${command}   # ${shows}`), '```'].join('\n'),
      ...(own.length > 0 ? [flagTable(own)] : []),
      ...(shared ? [`${own.length > 0 ? 'And the' : 'The'} flags of the verbs that analyse, below.`] : []),
    ].join('\n\n');
  });
  return [...sections, '### Flags of the verbs that analyse a sweep', flagTable(ANALYSIS_FLAGS)].join('\n\n');
}

function flagTable(flags: readonly FlagName[]): string {
  return [
    '| flag | |',
    '| --- | --- |',
    ...flags.map((flag) => `| \`${flagText(flag).replace('|', '\\|')}\` | ${flagSpec(flag).help} |`),
  ].join('\n');
}

function isAnalysisFlag(flag: FlagName): boolean {
  return ANALYSIS_FLAGS.some((one) => one === flag);
}

function usageOf(verb: VerbName): string {
  return `${verb} ${verbSpec(verb).arguments}`;
}

function flagText(flag: FlagName): string {
  const { short, value } = flagSpec(flag);
  return `${short ? `-${short}, ` : ''}--${flag}${value === null ? '' : ` ${value}`}`;
}

function flagRows(flags: readonly FlagName[]): string[] {
  return columns([...flags, ...COMMON_FLAGS].map((flag) => [flagText(flag), flagSpec(flag).help]));
}

function exampleRows(spec: VerbSpec): string[] {
  return spec.examples.flatMap(({ command, shows }) => [`  ${command}`, `      ${shows}`]);
}

/** Two columns, the second one wrapped. */
function columns(rows: readonly (readonly [string, string])[]): string[] {
  const first = Math.max(...rows.map(([left]) => left.length)) + 2;
  return rows.flatMap(([left, right]) =>
    wrapText(right, WIDTH - 2 - first).map((text, i) => `  ${(i === 0 ? left : '').padEnd(first)}${text}`),
  );
}
