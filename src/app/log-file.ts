/**
 * The logbook as a file: where it lies, how a new one comes to be, and what is no logbook at all.
 *
 * A file is looked at before SQLite may touch it, so that whatever it is, it stays as it was. A new logbook is made
 * beside its place and put there whole: an empty file in that place is always a logbook that was lost.
 */
import { link, mkdir, open, rename, rm, stat } from 'node:fs/promises';
import { dirname, join, resolve } from 'node:path';
import { type Logbook, openLogbook } from '../logbook/logbook.ts';
import { markProblem } from '../logbook/schema.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { diskProblem, fileExists, shownName } from './files.ts';
import { dataFolder } from './settings.ts';

/** Name of the logbook in the platform's data folder. */
const FILE_NAME = 'logbook.sqlite';

/** First bytes of a SQLite file, and where its marks lie. @source sqlite.org, "Database File Format", 1.3. */
const SQLITE_MAGIC = 'SQLite format 3\0';
const HEADER_BYTES = 100;
const VERSION_AT = 60;
const APPLICATION_AT = 68;

/** The logbook of this user on this machine. */
export function defaultLogbookPath(): string {
  return join(dataFolder(), FILE_NAME);
}

/**
 * Opens a logbook.
 *
 * @param path As typed; null for the one in the platform's data folder.
 * @param options.create Makes one where there is none.
 * @param options.patienceMs How long to wait for another program that writes; default 10 s.
 */
export async function openLogbookFile(
  path: string | null,
  options: { readonly create: boolean; readonly patienceMs?: number },
): Promise<Outcome<Logbook>> {
  const place = resolve(path ?? defaultLogbookPath());
  const file = shownName(path ?? place);
  if (!(await fileExists(place))) {
    if (!options.create) return fail(missing(file));
    const made = await makeLogbook(place, file, path === null);
    if (!made.ok) return made;
  }
  const refused = await looksWrong(place, file);
  return refused ? fail(refused) : openLogbook(place, { ...options, file });
}

/** The problem with what lies at this place, seen without SQLite; null when it is a logbook as far as one can see. */
async function looksWrong(place: string, file: string): Promise<Problem | null> {
  try {
    const handle = await open(place, 'r');
    try {
      if ((await handle.stat()).isDirectory())
        return { code: 'file-is-folder', file, what: 'this is a folder', mend: 'name a file inside it' };
      const header = Buffer.alloc(HEADER_BYTES);
      const { bytesRead } = await handle.read(header, 0, HEADER_BYTES, 0);
      if (bytesRead < HEADER_BYTES || header.toString('latin1', 0, SQLITE_MAGIC.length) !== SQLITE_MAGIC)
        return {
          code: 'logbook-not-one',
          file,
          what:
            bytesRead === 0
              ? 'the file is empty; a logbook never is'
              : 'this file is not a logbook, or was overwritten',
          mend: 'check the name; the file was left as it is',
        };
      return markProblem(header.readUInt32BE(APPLICATION_AT), header.readUInt32BE(VERSION_AT), file);
    } finally {
      await handle.close();
    }
  } catch (error) {
    return diskProblem(error, file, 'read');
  }
}

/** Makes an empty logbook at a place where nothing lies; when another program is faster, its logbook stays. */
async function makeLogbook(place: string, file: string, makeFolder: boolean): Promise<Outcome<null>> {
  const draft = join(dirname(place), `.${FILE_NAME}-${process.pid}.new`);
  try {
    if (makeFolder) await mkdir(dirname(place), { recursive: true });
    await stat(dirname(place));
    await (await open(draft, 'wx')).close();
    const made = openLogbook(draft, { file, fresh: true });
    if (!made.ok) return made;
    made.value.close();
    await putInPlace(draft, place);
    return succeed(null);
  } catch (error) {
    return fail(diskProblem(error, file, 'write'));
  } finally {
    await Promise.all(['', '-wal', '-shm', '-journal'].map((end) => rm(draft + end, { force: true })));
  }
}

/** A link never replaces what is there; disks without links (FAT) get a move. */
async function putInPlace(draft: string, place: string): Promise<void> {
  try {
    await link(draft, place);
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? error.code : null;
    if (code === 'EEXIST') return;
    if (await fileExists(place)) return;
    await rename(draft, place);
  }
}

function missing(file: string): Problem {
  return {
    code: 'logbook-missing',
    file,
    what: 'there is no logbook here yet',
    mend: '"feedsonde log add SWEEP" starts one; --logbook FILE names another',
  };
}
