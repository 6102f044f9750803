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
  line: {
    value: 'FILE|NAME',
    help: 'line description, or the name of a logged line; by default NAME.line.json beside NAME.s1p',
  },
  logbook: { value: 'FILE', help: 'another logbook than the one in your data folder' },
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
  colours: {
    value: 'SET',
    help: 'colours of the workspace: usual, light (background), contrast or colour-blind',
  },
  plot: { value: 'SET', help: 'characters of the plots: braille (default), blocks or ascii' },
  json: { value: null, help: 'one JSON document instead of text' },
  trace: { value: 'FILE', help: 'also write trace and impedance profile as CSV' },
  at: { value: 'FREQUENCY', help: 'frequency for loss and delay, like 900MHz' },
  band: { value: 'BAND', help: 'band that may be swept, like 1.7GHz-2.2GHz' },
  fault: { value: 'FAULT', repeatable: true, help: 'KIND:SIZE@PLACE, like series-resistance:9ohm@joint3' },
  sweep: { value: 'RANGE', help: 'start, stop and points: 2MHz-2700MHz:1350' },
  noise: { value: 'DB', help: 'noise, complex RMS per point, like -70; none by default' },
  residue: { value: 'DB', help: 'residual directivity within the first nanosecond, RMS, like -42' },
  'as-built': { value: 'SEED', help: 'a line as built: ripple, ordinary connectors, samples off their type' },
  seed: { value: 'NUMBER', help: 'seed of noise and residue; 1 by default' },
  output: { value: 'FILE', short: 'o', help: 'file to write' },
  when: { value: 'DATE', help: 'when the sweep was taken: 2026-05-03 or 2026-05-03T14:30' },
  who: { value: 'TEXT', help: 'who took the sweep' },
  instrument: { value: 'TEXT', help: 'what it was taken with' },
  weather: { value: 'TEXT', help: 'rain, frost, ...' },
  note: { value: 'TEXT', help: 'anything worth knowing later' },
  name: { value: 'NAME', help: 'name of the line where its description gives none' },
  site: { value: 'SITE', help: 'its site; with list and export: only of this site' },
  baseline: {
    value: null,
    help: 'with log: later sweeps of the line are compared with this one; with compare: BEFORE names a logged line',
  },
  replace: { value: null, help: 'a sweep that is there already gets the new line, results and remarks' },
  since: { value: 'DATE', help: 'only sweeps taken on this day or later' },
  until: { value: 'DATE', help: 'only sweeps taken on this day or before' },
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
  'logbook',
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
    flags: [...ANALYSIS_FLAGS, 'colours', 'plot'],
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
  loss: {
    arguments: 'SWEEP',
    fewestArguments: 1,
    mostArguments: 1,
    summary: 'loss check',
    description: [
      'Says what the cable of a line loses, one way, against its table at the line’s temperature: from the echo of a far ' +
        'end that is open or shorted, or from the transmission of a two-port file. The limit is the table, an allowance ' +
        'for the joints and the lossMarginDb of the line file (0.5 dB where it gives none), at the line’s bands, or in the ' +
        'middle of the sweep where it names none. Loss beyond it is placed where the sweep tells where it sits.',
      'A load or an antenna at the far end hides the loss: what the sweep can tell is said, and how to get the rest.',
      'Exit status 0: it passes, or cannot be judged by this end; 1: it fails, or the line is wet, faulty or cut; 2: ' +
        'nothing could be told.',
    ],
    flags: [...ANALYSIS_FLAGS, 'json'],
    examples: [
      { command: 'feedsonde loss samples/south-1.s1p', shows: 'shorted at the top: passes' },
      { command: 'feedsonde loss samples/south-2.s1p', shows: 'a wet jumper: fails, and says where' },
      {
        command: 'feedsonde loss samples/north-1.s1p',
        shows: 'an antenna on: what can be told all the same',
      },
    ],
  },
  plan: {
    arguments: '--line FILE',
    fewestArguments: 0,
    mostArguments: 0,
    summary: 'choose a sweep',
    description: [
      'What to set the instrument to before the line is swept: start, stop and points, what resolution and reach that ' +
        'gives, whether ohms against distance can be measured, and with what at the far end to sweep. Instead of --line, ' +
        '--cable ID with --length describes a line of one cable; --band limits the sweep to ' +
        'what instrument or antenna allow.',
    ],
    flags: [
      'line',
      'cable',
      'length',
      'band',
      'temperature',
      'velocity-factor',
      'window',
      'cables',
      'logbook',
      'units',
      'json',
    ],
    examples: [
      { command: 'feedsonde plan --line samples/north-1.line.json', shows: 'for a described line' },
      {
        command: 'feedsonde plan --cable foam-half --length 46m --band 1.7GHz-2.2GHz',
        shows: 'within the band of an antenna that stays on',
      },
    ],
  },
  'check-standards': {
    arguments: 'OPEN SHORT LOAD',
    fewestArguments: 3,
    mostArguments: 3,
    summary: 'are these good standards?',
    description: [
      'Judges sweeps of an open, a short and a load before anyone climbs: open and short opposite and near 0 dB, no ' +
        'length between them, the load quiet, all three swept alike. What is wrong is said with how to mend it.',
      'Exit status 0: good; 1: something is wrong; 2: a file could not be read.',
    ],
    flags: ['json'],
    examples: [
      {
        command: 'feedsonde check-standards samples/south-3.s1p samples/south-1.s1p samples/north-1.s1p',
        shows: 'three lines, which are no standards',
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
  log: {
    arguments: 'ACTION ...',
    fewestArguments: 1,
    mostArguments: Number.POSITIVE_INFINITY,
    summary: 'the logbook: sweeps and results by site and line',
    description: [
      'add SWEEP... analyses sweeps and saves each whole, with its line, its results and what you say about it; a ' +
        'line file among them is stored as a line. list [LINE] shows the entries, show ENTRY|LINE one of them (a ' +
        'line: its latest; -o FILE gives back its sweep byte for byte). baseline LINE [ENTRY] tells or chooses what ' +
        'later sweeps are compared with. trend LINE follows each echo, the loss and the match over the years. ' +
        'export FOLDER [LINE] writes sweeps and JSON, import FOLDER takes them into another logbook. check compares ' +
        'every entry with the hashes taken when it was saved.',
      'ENTRY is the beginning of its key, LINE the name of a line, also with hyphens for blanks: ' +
        'ansel-ridge-north-1. The same sweep added twice is one entry.',
      'Exit status: 0 done; 1: a sweep that was added shows a fault (it is saved all the same), or check found damage; ' +
        '2: it could not be done.',
    ],
    flags: [
      ...ANALYSIS_FLAGS,
      'when',
      'who',
      'instrument',
      'weather',
      'note',
      'name',
      'site',
      'baseline',
      'replace',
      'since',
      'until',
      'output',
      'force',
      'json',
    ],
    examples: [
      {
        command: 'feedsonde log add samples/north-1.s1p --when 2024-05-03 --who Mara --baseline',
        shows: 'a sweep as the baseline of its line',
      },
      { command: 'feedsonde log add samples/north-1-later.s1p --when 2026-05-11', shows: 'two years later' },
      { command: 'feedsonde log list', shows: 'all entries' },
      { command: 'feedsonde log trend ansel-ridge-north-1', shows: 'how the line has changed' },
      { command: 'feedsonde log show ansel-ridge-north-1', shows: 'its latest entry' },
      { command: 'feedsonde log export logged', shows: 'a folder for another logbook' },
      { command: 'feedsonde log check', shows: 'whether everything is as it was saved' },
    ],
  },
  compare: {
    arguments: 'BEFORE AFTER',
    fewestArguments: 2,
    mostArguments: 2,
    summary: 'what has changed between two sweeps of a line',
    description: [
      'Takes out what the weather and the instrument do, subtracts the two sweeps, and places and names what is left: ' +
        'where the line has changed, how large that looks from the port, and of what kind it is. Also how much longer ' +
        'and lossier the line has become, and its match over the bands of its limits.',
      'Both sweeps are read by the line of BEFORE; standards, when given, correct both. With --baseline, BEFORE is the ' +
        'name of a line in the logbook, and its baseline is compared with AFTER. Sweeps taken with other settings are ' +
        'compared over what they share.',
      'Exit status 0: unchanged; 1: changed; 2: it could not be done.',
    ],
    flags: [...ANALYSIS_FLAGS, 'baseline', 'json'],
    examples: [
      {
        command: 'feedsonde compare samples/north-1.s1p samples/north-1-later.s1p',
        shows: 'a joint that has corroded',
      },
      {
        command: 'feedsonde compare --baseline ansel-ridge-north-1 samples/north-1-later.s1p',
        shows: 'the same against the baseline in the logbook',
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
