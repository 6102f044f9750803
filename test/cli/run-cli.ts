/** Runs the built program as a user would, in a clean environment. */
import { spawn } from 'node:child_process';
import { existsSync, mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The repository's folder, in which the README's commands are run. */
export const ROOT = fileURLToPath(new URL('../..', import.meta.url));
export const PROGRAM = join(ROOT, 'dist', 'cli.js');

export type CliResult = { readonly status: number | null; readonly stdout: string; readonly stderr: string };

/** A home without settings, shared by all runs of a test file. */
const HOME = mkdtempSync(join(tmpdir(), 'feedsonde-home-'));

/**
 * Runs `feedsonde` with these arguments.
 *
 * @param options.input Standard input; none by default.
 * @param options.cwd Folder to run in; the repository's by default.
 * @param options.closeEarly Close the reading end of standard output after its first bytes.
 */
export function runCli(
  args: readonly string[],
  options: {
    readonly input?: string | Uint8Array;
    readonly cwd?: string;
    readonly env?: Readonly<Record<string, string>>;
    readonly closeEarly?: boolean;
  } = {},
): Promise<CliResult> {
  if (!existsSync(PROGRAM)) throw new Error('dist/cli.js is missing: run "npm run build" first');
  const child = spawn(process.execPath, [PROGRAM, ...args], {
    cwd: options.cwd ?? ROOT,
    env: { PATH: process.env['PATH'] ?? '', HOME, XDG_CONFIG_HOME: join(HOME, 'config'), ...options.env },
  });
  const stdout: Buffer[] = [];
  const stderr: Buffer[] = [];
  child.stdout.on('data', (chunk: Buffer) => {
    stdout.push(chunk);
    if (options.closeEarly) child.stdout.destroy();
  });
  child.stderr.on('data', (chunk: Buffer) => stderr.push(chunk));
  // A program that does not read its input closes it; that is its right.
  child.stdin.on('error', () => {});
  child.stdin.end(options.input ?? '');
  return new Promise((resolve, reject) => {
    child.on('error', reject);
    child.on('close', (status) =>
      resolve({
        status,
        stdout: Buffer.concat(stdout).toString('utf8'),
        stderr: Buffer.concat(stderr).toString('utf8'),
      }),
    );
  });
}
