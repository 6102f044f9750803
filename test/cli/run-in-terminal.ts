/** Runs the built program in a pseudo-terminal, where it may show colour. */
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { spawn } from '@lydell/node-pty';
import { PROGRAM, ROOT } from './run-cli.ts';

/** A home without settings. */
const HOME = mkdtempSync(join(tmpdir(), 'feedsonde-home-'));

/** Everything that was written (standard output and error are one here), and the exit status. */
export function runInTerminal(
  args: readonly string[],
  env: Readonly<Record<string, string>> = {},
): Promise<{ readonly output: string; readonly status: number }> {
  const terminal = spawn(process.execPath, [PROGRAM, ...args], {
    cols: 100,
    rows: 30,
    name: 'xterm-256color',
    cwd: ROOT,
    env: { PATH: process.env['PATH'] ?? '', HOME, XDG_CONFIG_HOME: join(HOME, 'config'), ...env },
  });
  let output = '';
  terminal.onData((text) => {
    output += text;
  });
  return new Promise((resolve) => {
    terminal.onExit(({ exitCode }) => resolve({ output, status: exitCode }));
  });
}
