/** The built program in a real terminal (a pseudo-terminal and a screen that understands it). */
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { spawn } from '@lydell/node-pty';
import { Terminal } from '@xterm/headless';
import { PROGRAM, ROOT } from '../cli/run-cli.ts';

/** Longest wait for something to appear, ms. */
const PATIENCE_MS = 30_000;
const LOOK_EVERY_MS = 20;

export type TerminalRun = {
  /** Its home folder, empty at the start. */
  readonly home: string;
  /** Rows of the screen now, trailing blanks off. */
  readonly rows: () => readonly string[];
  /** Waits until a row of the screen matches. @throws Error With the screen when it never does. */
  readonly until: (pattern: RegExp) => Promise<void>;
  /** Everything that was written to the terminal so far. */
  readonly written: () => string;
  readonly type: (keys: string) => void;
  readonly resize: (columns: number, rows: number) => void;
  /** True while the other buffer is shown. */
  readonly isFullScreen: () => boolean;
  readonly cursorIsHidden: () => boolean;
  readonly stop: () => void;
};

/**
 * Runs a shell command line in the repository's folder; `$PROGRAM` is the built program and `$NODE` this Node.
 *
 * @param options.env Added to a clean environment.
 */
export function runInTerminal(
  commandLine: string,
  options: {
    readonly columns?: number;
    readonly rows?: number;
    readonly env?: Readonly<Record<string, string>>;
  } = {},
): TerminalRun {
  const { columns = 100, rows = 30 } = options;
  const home = mkdtempSync(join(tmpdir(), 'feedsonde-home-'));
  const terminal = new Terminal({ cols: columns, rows, allowProposedApi: true });
  const shell = spawn('/bin/sh', ['-c', commandLine], {
    cols: columns,
    rows,
    name: 'xterm-256color',
    cwd: ROOT,
    env: {
      PATH: process.env['PATH'] ?? '',
      HOME: home,
      XDG_CONFIG_HOME: join(home, 'config'),
      TERM: 'xterm-256color',
      PROGRAM,
      NODE: process.execPath,
      ...options.env,
    },
  });
  let hidden = false;
  let written = '';
  shell.onData((text) => {
    for (const [, shown] of text.matchAll(/\u001b\[\?25([hl])/g)) hidden = shown === 'l';
    written += text;
    terminal.write(text);
  });
  const screenRows = (): readonly string[] => {
    const { active } = terminal.buffer;
    return Array.from(
      { length: terminal.rows },
      (_, i) => active.getLine(active.baseY + i)?.translateToString(true) ?? '',
    );
  };
  return {
    home,
    rows: screenRows,
    until: async (pattern) => {
      const startedMs = performance.now();
      while (!screenRows().some((row) => pattern.test(row))) {
        if (performance.now() - startedMs > PATIENCE_MS)
          throw new Error(`${pattern} never came; the screen:\n${screenRows().join('\n')}`);
        await new Promise((resolve) => setTimeout(resolve, LOOK_EVERY_MS));
      }
    },
    written: () => written,
    type: (keys) => shell.write(keys),
    resize: (newColumns, newRows) => {
      terminal.resize(newColumns, newRows);
      shell.resize(newColumns, newRows);
    },
    isFullScreen: () => terminal.buffer.active.type === 'alternate',
    cursorIsHidden: () => hidden,
    stop: () => {
      try {
        shell.kill('SIGKILL');
      } catch {
        // It has ended already.
      }
    },
  };
}
