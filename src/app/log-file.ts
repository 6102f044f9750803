/**
 * The logbook as a file: where it lies, how a new one comes to be, and what is no logbook at all.
 *
 * A file is looked at before SQLite may touch it, so that whatever it is, it stays as it was. A new logbook is made
 * beside its place and put there whole: an empty file in that place is always a logbook that was lost.
 */
import { randomUUID } from 'node:crypto';
import { link, mkdir, open, rename, rm, stat } from 'node:fs/promises';
import { dirname, join, resolve } from 'node:path';
import { setTimeout } from 'node:timers/promises';
import { type Logbook, openLogbook } from '../logbook/logbook.ts';
import { markProblem } from '../logbook/schema.ts';
import { faultProblem } from '../logbook/trouble.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { diskProblem, fileExists, shownName } from './files.ts';
import { dataFolder } from './settings.ts';

/** Name of the logbook in the platform's data folder. */
const FILE_NAME = 'logbook.sqlite';

/** First bytes of a SQLite file, and where its marks lie. @source sqlite.org, "Database File Format", 1.3. */
const SQLITE_MAGIC = 'SQLite format 3\0';
const HEADER_BYTES = 100;
const PAGE_SIZE_AT = 16;
const CHANGES_AT = 24;
const PAGES_AT = 28;
const VERSION_AT = 60;
const APPLICATION_AT = 68;
const PAGES_VALID_FOR_AT = 92;
/** Page size that is written as 1. */
const LARGEST_PAGE = 65_536;

/** How long another program may take to bring the file up to its head, ms. */
const SETTLE_MS = 100;

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
    const { sizeBytes, header } = await headOf(place);
    if (header === null)
      return {
        code: 'logbook-not-one',
        file,
        what:
          sizeBytes === 0
            ? 'the file is empty; a logbook never is'
            : 'this file is not a logbook, or was overwritten',
        mend: 'check the name; the file was left as it is',
      };
    const wrong = markProblem(header.readUInt32BE(APPLICATION_AT), header.readUInt32BE(VERSION_AT), file);
    if (wrong) return wrong;
    // A program that writes at this moment may be between the head and the rest.
    if (!(await isCutOff(place))) return null;
    await setTimeout(SETTLE_MS);
    return (await isCutOff(place)) ? faultProblem('corrupt', file) : null;
  } catch (error) {
    return diskProblem(error, file, 'read');
  }
}

/** Size of a file, and its head where that is the head of a SQLite file. */
async function headOf(
  place: string,
): Promise<{ readonly sizeBytes: number; readonly header: Buffer | null }> {
  const handle = await open(place, 'r');
  try {
    const stats = await handle.stat();
    if (stats.isDirectory()) throw Object.assign(new Error('folder'), { code: 'EISDIR' });
    const header = Buffer.alloc(HEADER_BYTES);
    const { bytesRead } = await handle.read(header, 0, HEADER_BYTES, 0);
    const isSqlite =
      bytesRead === HEADER_BYTES && header.toString('latin1', 0, SQLITE_MAGIC.length) === SQLITE_MAGIC;
    return { sizeBytes: stats.size, header: isSqlite ? header : null };
  } finally {
    await handle.close();
  }
}

/**
 * True when the file is shorter than its own head says. SQLite itself overlooks a last page that is cut. With a
 * write-ahead log beside it nothing can be said: the log may hold what the file lacks.
 */
async function isCutOff(place: string): Promise<boolean> {
  const log = await stat(`${place}-wal`).catch(() => null);
  if (log && log.size > 0) return false;
  const { sizeBytes, header } = await headOf(place);
  if (header === null || header.readUInt32BE(CHANGES_AT) !== header.readUInt32BE(PAGES_VALID_FOR_AT))
    return false;
  const written = header.readUInt16BE(PAGE_SIZE_AT);
  return sizeBytes < header.readUInt32BE(PAGES_AT) * (written === 1 ? LARGEST_PAGE : written);
}

/** Makes an empty logbook at a place where nothing lies; when another program is faster, its logbook stays. */
async function makeLogbook(place: string, file: string, makeFolder: boolean): Promise<Outcome<null>> {
  const draft = join(dirname(place), `.${FILE_NAME}-${randomUUID()}.new`);
  try {
    if (makeFolder) await mkdir(dirname(place), { recursive: true });
    await stat(dirname(place));
    await (await open(draft, 'wx')).close();
    const made = openLogbook(draft, { file, fresh: true });
    if (!made.ok) return made;
    made.value.close();
    await putInPlace(draft, place);
    await syncFolder(dirname(place));
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

/** The name of the file outlives a power cut too; where folders cannot be opened (Windows) nothing can be asked. */
async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, 'r').catch(() => null);
  if (!handle) return;
  await handle.sync().catch(() => {});
  await handle.close();
}

function missing(file: string): Problem {
  return {
    code: 'logbook-missing',
    file,
    what: 'there is no logbook here yet',
    mend: '"feedsonde log add SWEEP" starts one; --logbook FILE names another',
  };
}
