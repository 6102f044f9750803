/**
 * Reading and writing files: the only place where the disk can go wrong, and where that becomes a Problem.
 *
 * What is read is bounded, whatever it is (a file, a pipe, a device that never ends); what is written is there whole
 * or not at all.
 */
import { lstat, open } from 'node:fs/promises';
import type { Readable } from 'node:stream';
import writeFileAtomic from 'write-file-atomic';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { STANDARD_INPUT } from './standard-input.ts';

/** Largest input that is read, bytes (the design's limit). */
export const MOST_FILE_BYTES = 256 * 1024 * 1024;

/**
 * Reads a whole file, or standard input for `-`.
 *
 * @param options.stdin Stream that `-` stands for; without it `-` is refused.
 * @param options.mostBytes Largest size read.
 * @returns The bytes, at least one; or a problem: missing, folder, not readable, too large, empty.
 */
export async function readBytes(
  path: string,
  options: { readonly stdin?: Readable; readonly mostBytes?: number } = {},
): Promise<Outcome<Uint8Array>> {
  const mostBytes = options.mostBytes ?? MOST_FILE_BYTES;
  const file = shownName(path);
  try {
    const bytes =
      path === STANDARD_INPUT && options.stdin
        ? await collect(options.stdin, mostBytes)
        : await readWhole(path, mostBytes);
    if (bytes === null) return fail(tooLarge(file, mostBytes));
    if (bytes.length === 0)
      return fail({
        code: 'file-empty',
        file,
        ...(path === STANDARD_INPUT
          ? { what: 'nothing came', mend: 'see that the command before the pipe writes the sweep' }
          : {
              what: 'the file is empty',
              mend: 'save it again from the instrument, and check that the copy was complete',
            }),
      });
    return succeed(bytes);
  } catch (error) {
    return fail(diskProblem(error, file, 'read'));
  }
}

/** Reads a text file as UTF-8 (a byte-order mark is dropped, foreign bytes become U+FFFD). */
export async function readText(path: string, mostBytes = MOST_FILE_BYTES): Promise<Outcome<string>> {
  const bytes = await readBytes(path, { mostBytes });
  return bytes.ok ? succeed(new TextDecoder('utf-8').decode(bytes.value)) : bytes;
}

/**
 * Writes a file whole or not at all.
 *
 * @param options.overwrite Without it a file that is already there is left alone and a problem comes back.
 */
export function writeText(
  path: string,
  text: string,
  options: { readonly overwrite: boolean },
): Promise<Outcome<null>> {
  return writeBytes(path, new TextEncoder().encode(text), options);
}

/** Writes bytes as they are, whole or not at all; otherwise like `writeText`. */
export async function writeBytes(
  path: string,
  bytes: Uint8Array,
  options: { readonly overwrite: boolean },
): Promise<Outcome<null>> {
  const file = shownName(path);
  const refused = await refuseTarget(path, options);
  if (refused) return fail(refused);
  try {
    await writeFileAtomic(path, Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength));
    return succeed(null);
  } catch (error) {
    return fail(diskProblem(error, file, 'write'));
  }
}

/** The problem that stands against writing to a path, seen before any work is done; null when there is none. */
export async function refuseTarget(
  path: string,
  options: { readonly overwrite: boolean },
): Promise<Problem | null> {
  const file = shownName(path);
  const existing = await lstat(path).catch(() => null);
  if (existing?.isDirectory())
    return {
      code: 'file-is-folder',
      file,
      what: 'this is a folder',
      mend: 'name a file inside it',
    };
  if (existing && !options.overwrite)
    return {
      code: 'file-exists',
      file,
      what: 'the file is already there',
      mend: 'choose another name, or give --force to replace it',
    };
  return null;
}

/** True when something is at this path. */
export async function fileExists(path: string): Promise<boolean> {
  return (await lstat(path).catch(() => null)) !== null;
}

/** A path made harmless for messages. */
export function shownName(path: string): string {
  return cleanForDisplay(path, 300);
}

async function readWhole(path: string, mostBytes: number): Promise<Uint8Array | null> {
  const handle = await open(path, 'r');
  try {
    const stat = await handle.stat();
    if (stat.isDirectory()) throw Object.assign(new Error('folder'), { code: 'EISDIR' });
    if (stat.size > mostBytes) return null;
    // The size of a pipe or device says nothing, so the reading itself is bounded too.
    return await collect(handle.createReadStream({ autoClose: false }), mostBytes);
  } finally {
    await handle.close();
  }
}

/** All bytes of a stream, or null once there are more than allowed. */
async function collect(stream: Readable, mostBytes: number): Promise<Uint8Array | null> {
  const chunks: Uint8Array[] = [];
  let size = 0;
  for await (const chunk of stream as AsyncIterable<Uint8Array | string>) {
    const bytes = typeof chunk === 'string' ? new TextEncoder().encode(chunk) : chunk;
    size += bytes.length;
    if (size > mostBytes) return null;
    chunks.push(bytes);
  }
  const all = new Uint8Array(size);
  let at = 0;
  for (const chunk of chunks) {
    all.set(chunk, at);
    at += chunk.length;
  }
  return all;
}

function tooLarge(file: string, mostBytes: number): Problem {
  const mebibytes = mostBytes / (1024 * 1024);
  const limit = mebibytes >= 1 ? `${mebibytes} MB` : `${mostBytes} bytes`;
  return {
    code: 'file-too-large',
    file,
    what: `the file is larger than ${limit}`,
    mend: 'check that this is the file you mean; a sweep of 100 000 points takes about 10 MB',
  };
}

/** What the system said, in words said on site. Anything that the system did not say is a bug, and goes on. */
export function diskProblem(error: unknown, file: string, act: 'read' | 'write'): Problem {
  if (!(error instanceof Error && 'code' in error)) throw error;
  const code = String(error.code);
  const known: Record<string, readonly [problem: string, what: string, mend: string]> = {
    ENOENT:
      act === 'read'
        ? ['file-missing', 'there is no such file', 'check the name and the folder']
        : ['folder-missing', 'the folder to write to is not there', 'make it first, or choose another'],
    ENOTDIR: ['file-missing', 'part of this path is a file, not a folder', 'check the path'],
    ENAMETOOLONG: ['file-name-too-long', 'the name is too long', 'give a shorter name'],
    EISDIR: ['file-is-folder', 'this is a folder', 'name a file inside it'],
    EACCES: [`file-not-${act}able`, `no permission to ${act} it`, 'check who owns the file and its folder'],
    EPERM: [`file-not-${act}able`, `no permission to ${act} it`, 'check who owns the file and its folder'],
    EROFS: ['disk-read-only', 'the disk is read-only', 'write to another disk'],
    ENOSPC: ['disk-full', 'the disk is full; nothing was written', 'make room, or write to another disk'],
    EDQUOT: ['disk-full', 'the quota is used up; nothing was written', 'make room, or write elsewhere'],
  };
  const [problem, what, mend] = known[code] ?? [
    `file-not-${act}able`,
    `it could not be ${act === 'read' ? 'read' : 'written'} (${cleanForDisplay(code, 40)})`,
    'check the disk and the permissions',
  ];
  return { code: problem, file, what, mend };
}
