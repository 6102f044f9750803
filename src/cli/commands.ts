/**
 * The one table of verbs and flags: the parser, the help and the README's verb section all come from it.
 */

export type FlagSpec = {
  /** Stands for the value in help; null for a switch. */
  readonly value: string | null;
  readonly short?: string;
  /** May be given several times. */
  readonly repeatable?: true;
  readonly help: string;
};

export const FLAGS = {
  line: { value: 'FILE', help: 'line description; by default NAME.line.json beside NAME.s1p' },
  cable: {
    value: 'ID',
    help: 'no line file but one cable of this type; without --length its end is searched for',
  },
  length: { value: 'LENGTH', help: 'length of that cable, like 46m or 150ft' },
  end: { value: 'END', help: 'what terminates the line: open, short, load, antenna or unknown' },
  temperature: { value: 'DEGREES', help: 'temperature of the line, like 12C or 54F' },
  'velocity-factor': { value: 'NUMBER', help: 'velocity factor of the longest section, like 0.88' },
  offset: { value: 'LENGTH', help: 'moves the reference plane that far from the instrument toward the line' },
  port: { value: 'NUMBER', help: 'which port of a file with several' },
  window: { value: 'NAME', help: 'kaiser:6 (default), hann, hamming, blackman, dolph-chebyshev:60, ...' },
  'standard-open': { value: 'FILE', help: 'sweep of an open at the reference plane; with the next two' },
  'standard-short': { value: 'FILE', help: 'sweep of a short there' },
  'standard-load': { value: 'FILE', help: 'sweep of a load there; the sweep is corrected with all three' },
  cables: { value: 'FOLDER', help: 'your own cable files, which win over the table' },
  units: { value: 'm|ft', help: 'metres and °C (default), or feet and °F' },
  json: { value: null, help: 'one JSON document instead of text' },
  trace: { value: 'FILE', help: 'also write trace and impedance profile as CSV' },
  at: { value: 'FREQUENCY', help: 'frequency for loss and delay, like 900MHz' },
  fault: { value: 'FAULT', repeatable: true, help: 'KIND:SIZE@PLACE, like series-resistance:9ohm@joint3' },
  sweep: { value: 'RANGE', help: 'start, stop and points: 2MHz-2700MHz:1350' },
  noise: { value: 'DB', help: 'noise, complex RMS per point, like -70; none by default' },
  residue: { value: 'DB', help: 'residual directivity within the first nanosecond, RMS, like -42' },
  'as-built': { value: 'SEED', help: 'a line as built: ripple, ordinary connectors, samples off their type' },
  seed: { value: 'NUMBER', help: 'seed of noise and residue; 1 by default' },
  output: { value: 'FILE', short: 'o', help: 'file to write' },
  force: { value: null, help: 'replace files that are already there' },
  help: { value: null, short: 'h', help: 'this text' },
  version: { value: null, help: 'the version of the program' },
} as const satisfies Readonly<Record<string, FlagSpec>>;

export type FlagName = keyof typeof FLAGS;

export type Example = { readonly command: string; readonly shows: string };

export type VerbSpec = {
  /** Positional arguments, for example `SWEEP`; brackets where they may be left out. */
  readonly arguments: string;
  readonly mostArguments: number;
  readonly fewestArguments: number;
  readonly summary: string;
  /** A paragraph each. */
  readonly description: readonly string[];
  readonly flags: readonly FlagName[];
  /** Run from the program's own folder, on the samples that come with it. */
  readonly examples: readonly Example[];
};

/** Flags of every verb that analyses a sweep. */
export const ANALYSIS_FLAGS = [
  'line',
  'cable',
  'length',
  'end',
  'temperature',
  'velocity-factor',
  'offset',
  'port',
  'window',
  'standard-open',
  'standard-short',
  'standard-load',
  'cables',
  'units',
] as const satisfies readonly FlagName[];

export const VERBS = {
  workspace: {
    arguments: '[SWEEP]',
    fewestArguments: 0,
    mostArguments: 1,
    summary: 'open the workspace',
    description: [
      'Opens a sweep in the full-screen workspace; without one, the sample that comes with the program. This is what ' +
        'happens when no verb is given. Where standard output is not a terminal the located echoes are printed as text.',
    ],
    flags: ANALYSIS_FLAGS,
    examples: [
      { command: 'feedsonde', shows: 'the bundled sample' },
      { command: 'feedsonde samples/south-3.s1p', shows: 'a sweep with its line file beside it' },
    ],
  },
  locate: {
    arguments: 'SWEEP',
    fewestArguments: 1,
    mostArguments: 1,
    summary: 'echoes and findings',
    description: [
      'Solves for the line: every discontinuity with distance, size, kind and uncertainty, and what it means. ' +
        'SWEEP is a Touchstone or delimited-text file, or - for standard input.',
      'Exit status 0: nothing wrong found; 1: a fault; 2: it could not be done.',
    ],
    flags: [...ANALYSIS_FLAGS, 'json', 'trace', 'force'],
    examples: [
      { command: 'feedsonde locate samples/north-1-later.s1p', shows: 'a corroded joint' },
      { command: 'feedsonde locate samples/south-3.s1p --units ft', shows: 'a cut cable, in feet' },
      {
        command: 'feedsonde locate samples/south-3.s1p --cable foam-half --json',
        shows: 'the same without its line file, for a script',
      },
    ],
  },
  cables: {
    arguments: '[ID]',
    fewestArguments: 0,
    mostArguments: 1,
    summary: 'the cable table',
    description: [
      'Lists the cables and guides, or shows one with its figures and where each was read. With --at and --length it gives loss ' +
        'and delay.',
    ],
    flags: ['at', 'length', 'temperature', 'cables', 'units', 'json'],
    examples: [
      { command: 'feedsonde cables', shows: 'all of them' },
      { command: 'feedsonde cables rg-213 --at 900MHz --length 46m', shows: 'loss and delay of a run' },
      { command: 'feedsonde cables WR-137 --at 6.5GHz --length 20m', shows: 'the same of a waveguide' },
    ],
  },
  simulate: {
    arguments: 'LINE',
    fewestArguments: 1,
    mostArguments: 1,
    summary: 'make a sweep',
    description: [
      'Computes the sweep that a described line would give, with the faults you choose: what would 10 Ω at joint 3 look ' +
        'like? LINE is a line file. The sweep goes to standard output, or to a file with -o.',
      'Faults: series-resistance:9ohm@joint3, shunt-leakage:400ohm@12.5m, series-inductance:1.5nH@joint2, ' +
        'shunt-capacitance:0.6pF@31.4m, section:75ohm@20m-23m, open@17.4m, short@17.4m, wet:k2x12,er1.03@20m-28m ' +
        '(dielectric loss and permittivity times these factors). Joint 1 is the one at the port. A size without a unit is ' +
        'relative to the line it sits in, at the middle of the swept band: r0.2, g0.2, x0.2 or b0.2 in the order of the ' +
        'first four kinds. In a guide, which has no ohms of its own, only such sizes mean something.',
    ],
    flags: [
      'fault',
      'sweep',
      'noise',
      'residue',
      'as-built',
      'seed',
      'end',
      'temperature',
      'velocity-factor',
      'cables',
      'output',
      'force',
    ],
    examples: [
      {
        command:
          'feedsonde simulate samples/north-1.line.json --fault series-resistance:10ohm@joint3 -o what-if.s1p',
        shows: 'a what-if, to be opened with --line samples/north-1.line.json',
      },
    ],
  },
} as const satisfies Readonly<Record<string, VerbSpec>>;

export type VerbName = keyof typeof VERBS;

/** Names of the verbs that are typed; the workspace has none. */
export const TYPED_VERBS = (Object.keys(VERBS) as VerbName[]).filter((verb) => verb !== 'workspace');

/** The flags that every verb takes. */
export const COMMON_FLAGS = ['help', 'version'] as const satisfies readonly FlagName[];

/** What a verb or flag is, with the optional fields of its kind. */
export function verbSpec(verb: VerbName): VerbSpec {
  return VERBS[verb];
}

export function flagSpec(flag: FlagName): FlagSpec {
  return FLAGS[flag];
}
