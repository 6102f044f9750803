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
};

/** Flags as typed; null where not given. */
export type SettingFlags = {
  readonly units: string | null;
  readonly window: string | null;
  readonly cables: string | null;
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
  if (flags.units !== null && !isUnits(flags.units)) problems.push(unknownUnits(flags.units));
  if (problems.length > 0) return fail(...problems);

  const ownCables = join(folder, 'cables');
  const cableFolders = [
    ...((await fileExists(ownCables)) ? [ownCables] : []),
    ...(file.value.cables === undefined ? [] : [file.value.cables]),
    ...(flags.cables === null ? [] : [flags.cables]),
  ];
  return succeed({
    units: flags.units !== null && isUnits(flags.units) ? flags.units : (file.value.units ?? 'm'),
    windowSpec,
    cableFolders,
    colour: !environment.NO_COLOR && environment.TERM !== 'dumb',
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
    },
    items: {},
  });
}

function isUnits(text: string): text is Units {
  return UNITS.some((units) => units === text);
}

function unknownUnits(found: string): Problem {
  const [near] = nearestWords(found, UNITS);
  return {
    code: 'flag-value',
    what: 'these are not units of length known here',
    found: cleanForDisplay(`--units ${found}`, 60),
    mend: near === undefined ? `use ${orList(UNITS)}` : `did you mean "${near}"?`,
  };
}
