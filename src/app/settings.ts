/**
 * What the user set once and for all: defaults, then the settings file, then the environment, then flags; each
 * later one wins.
 *
 * The settings file is `settings.json` in the platform's configuration folder; `cables/` beside it holds the user's
 * own cable files.
 */
import { join } from 'node:path';
import envPaths from 'env-paths';
import * as v from 'valibot';
import { closedObject, oneOf, readCheckedJson, visibleText } from '../line/checked-json.ts';
import { nearestWords, orList } from '../line/nearest-word.ts';
import { parseWindow } from '../numerics/window.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { GLYPH_SETS, type GlyphSet } from '../plot/glyph-sets.ts';
import type { Units } from '../plot/quantity-text.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { fileExists, readText, shownName } from './files.ts';

export type Settings = {
  readonly units: Units;
  /** Window by name, for example `kaiser:6`. */
  readonly windowSpec: string;
  /** The user's folders of cable files, later ones winning. */
  readonly cableFolders: readonly string[];
  /** False when colour must not be used even on a terminal. */
  readonly colour: boolean;
  /** Set of colours of the workspace; null where none was chosen. */
  readonly colours: ColourSet | null;
  /** Characters that plots are drawn with. */
  readonly plot: GlyphSet;
};

/** Sets of colours that the workspace has. */
export const COLOUR_SETS = ['usual', 'light', 'contrast', 'colour-blind'] as const;

export type ColourSet = (typeof COLOUR_SETS)[number];

/** Flags as typed; null where not given. */
export type SettingFlags = {
  readonly units: string | null;
  readonly window: string | null;
  readonly cables: string | null;
  readonly colours?: string | null;
  readonly plot?: string | null;
};

/** The variables that are looked at. */
export type Environment = {
  readonly NO_COLOR?: string | undefined;
  readonly TERM?: string | undefined;
};

const UNITS = ['m', 'ft'] as const;
const DEFAULT_WINDOW = 'kaiser:6';
const MOST_SETTINGS_BYTES = 65_536;

/** The form of settings.json. */
const settingsFile = closedObject({
  units: v.optional(oneOf(UNITS)),
  window: v.optional(visibleText()),
  cables: v.optional(visibleText(1000)),
  colours: v.optional(oneOf(COLOUR_SETS)),
  plot: v.optional(oneOf(GLYPH_SETS)),
});

/** The platform's folder for this program's settings. */
function configFolder(): string {
  return envPaths('feedsonde', { suffix: '' }).config;
}

/** The platform's folder for what this program keeps: the logbook. */
export function dataFolder(): string {
  return envPaths('feedsonde', { suffix: '' }).data;
}

/**
 * Puts the settings together.
 *
 * @param environment NO_COLOR (not empty) turns colour off (no-color.org); TERM=dumb too.
 * @param folder Configuration folder; need not exist.
 * @returns The settings, or every problem of file and flags.
 */
export async function loadSettings(
  flags: SettingFlags,
  environment: Environment,
  folder: string = configFolder(),
): Promise<Outcome<Settings>> {
  const file = await readSettingsFile(join(folder, 'settings.json'));
  if (!file.ok) return file;
  const problems: Problem[] = [];
  const windowSpec = flags.window ?? file.value.window ?? DEFAULT_WINDOW;
  const window = parseWindow(windowSpec);
  if (!window.ok) problems.push(...window.problems);
  const units = chosen('units', flags.units, UNITS, problems);
  const colours = chosen('colours', flags.colours ?? null, COLOUR_SETS, problems);
  const plot = chosen('plot', flags.plot ?? null, GLYPH_SETS, problems);
  if (problems.length > 0) return fail(...problems);

  const ownCables = join(folder, 'cables');
  const cableFolders = [
    ...((await fileExists(ownCables)) ? [ownCables] : []),
    ...(file.value.cables === undefined ? [] : [file.value.cables]),
    ...(flags.cables === null ? [] : [flags.cables]),
  ];
  return succeed({
    units: units ?? file.value.units ?? 'm',
    windowSpec,
    cableFolders,
    colour: !environment.NO_COLOR && environment.TERM !== 'dumb',
    colours: colours ?? file.value.colours ?? null,
    plot: plot ?? file.value.plot ?? 'braille',
  });
}

async function readSettingsFile(path: string): Promise<Outcome<v.InferOutput<typeof settingsFile>>> {
  if (!(await fileExists(path))) return succeed({});
  const text = await readText(path, MOST_SETTINGS_BYTES);
  if (!text.ok) return text;
  return readCheckedJson(text.value, shownName(path), settingsFile, {
    hints: {
      units: '"m" or "ft"',
      window: 'a window by name, for example "kaiser:6"',
      cables: 'the path of a folder of cable files',
      colours: orList(COLOUR_SETS),
      plot: orList(GLYPH_SETS),
    },
    items: {},
  });
}

/** One of the words that a flag takes; null where it was not given, or is none of them: then there is a problem too. */
function chosen<Word extends string>(
  flag: string,
  given: string | null,
  words: readonly Word[],
  problems: Problem[],
): Word | null {
  const word = words.find((one) => one === given);
  if (word !== undefined || given === null) return word ?? null;
  const [near] = nearestWords(given, words);
  problems.push({
    code: 'flag-value',
    what:
      flag === 'units' ? 'these are not units of length known here' : `--${flag} takes one of its own words`,
    found: cleanForDisplay(`--${flag} ${given}`, 60),
    mend: near === undefined ? `use ${orList(words)}` : `did you mean "${near}"?`,
  });
  return null;
}
