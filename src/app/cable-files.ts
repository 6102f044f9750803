/** The cable table from its files: what ships with the program, and the user's own over it. */
import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { type CableTable, createCableTable, type TableEntry } from '../line/cable-table.ts';
import { readCables } from '../line/read-cables.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { bundledPath } from './bundled.ts';
import { readText, shownName } from './files.ts';

/** Written by build.mjs into the folder of the bundle. */
const BUILT_CABLES = './built-cables.json';

/** Largest cable file that is read, bytes. */
const MOST_CABLE_BYTES = 4 * 1024 * 1024;

/**
 * Loads the bundled cables and those of further folders; each later folder wins over the earlier ones.
 *
 * @param folders Folders of `*.json` cable files.
 * @returns The joined table, or every problem of every file.
 */
export async function loadCableTable(folders: readonly string[] = []): Promise<Outcome<CableTable>> {
  const built = await builtEntries();
  const tables: (readonly TableEntry[])[] = built ? [built] : [];
  const problems: Problem[] = [];
  const sources = [
    // Named without the place where the program happens to be installed.
    ...(built ? [] : [{ folder: bundledPath('cables'), shown: 'cables' }]),
    ...folders.map((folder) => ({ folder, shown: folder })),
  ];
  for (const { folder, shown } of sources) {
    const entries = await readFolder(folder, shown);
    if (entries.ok) tables.push(entries.value);
    else problems.push(...entries.problems);
  }
  return problems.length > 0 ? fail(...problems) : succeed(createCableTable(...tables));
}

/**
 * The bundled cables as the build left them beside the program: read and checked once for all, since checking them at
 * every start costs more than the start itself. Null where there is no such file (running from source).
 */
async function builtEntries(): Promise<readonly TableEntry[] | null> {
  const text = await readFile(new URL(BUILT_CABLES, import.meta.url), 'utf8').catch(() => null);
  return text === null ? null : (JSON.parse(text) as TableEntry[]);
}

async function readFolder(folder: string, shown: string): Promise<Outcome<TableEntry[]>> {
  const names = await readdir(folder).catch(() => null);
  if (names === null)
    return fail({
      code: 'cables-folder',
      file: shownName(shown),
      what: 'there is no such folder of cable files',
      mend: 'give --cables the folder that holds your *.json cable files',
    });
  const entries: TableEntry[] = [];
  const problems: Problem[] = [];
  for (const name of names.filter((one) => one.endsWith('.json')).sort()) {
    const path = join(folder, name);
    const text = await readText(path, MOST_CABLE_BYTES);
    const cables = text.ok ? readCables(text.value, shownName(join(shown, name))) : text;
    if (cables.ok) entries.push(...cables.value);
    else problems.push(...cables.problems);
  }
  return problems.length > 0 ? fail(...problems) : succeed(entries);
}
