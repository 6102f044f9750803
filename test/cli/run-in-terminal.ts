/** Runs the built program in a pseudo-terminal, where it may show colour. */
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { spawn } from '@lydell/node-pty';
import { PROGRAM, ROOT } from './run-cli.ts';

/** A home without settings. */
const HOME = mkdtempSync(join(tmpdir(), 'feedsonde-home-'));

/** Longest wait for what is awaited, ms. */
const PATIENCE_MS = 20_000;

/**
 * Everything that was written (standard output and error are one here), and the exit status.
 *
 * @param then Once `seen` matches what was written so far: keys to type, or a signal to send.
 */
export function runInTerminal(
  args: readonly string[],
  env: Readonly<Record<string, string>> = {},
  then: { readonly seen: RegExp; readonly keys?: string; readonly signal?: string } | null = null,
): Promise<{ readonly output: string; readonly status: number }> {
  const terminal = spawn(process.execPath, [PROGRAM, ...args], {
    cols: 100,
    rows: 30,
    name: 'xterm-256color',
    cwd: ROOT,
    env: { PATH: process.env['PATH'] ?? '', HOME, XDG_CONFIG_HOME: join(HOME, 'config'), ...env },
  });
  let output = '';
  let awaited = then;
  terminal.onData((text) => {
    output += text;
    if (!awaited?.seen.test(output)) return;
    if (awaited.keys !== undefined) terminal.write(awaited.keys);
    if (awaited.signal !== undefined) terminal.kill(awaited.signal);
    awaited = null;
  });
  return new Promise((resolve, reject) => {
    const patience = setTimeout(() => {
      terminal.kill('SIGKILL');
      reject(new Error(`feedsonde ${args.join(' ')} did not end; it wrote ${JSON.stringify(output)}`));
    }, PATIENCE_MS);
    terminal.onExit(({ exitCode }) => {
      clearTimeout(patience);
      resolve({ output, status: exitCode });
    });
  });
}
