/** The world as the command line sees it: streams and environment, handed in so that nothing needs mocking. */
import type { Environment } from '../app/settings.ts';

export type Io = {
  readonly stdin: NodeJS.ReadStream;
  readonly stdout: NodeJS.WriteStream;
  readonly stderr: NodeJS.WriteStream;
  readonly env: Environment & Readonly<Record<string, string | undefined>>;
};

/** 0 done and nothing wrong found, 1 a fault or a failed check, 2 could not do it. */
export type ExitStatus = 0 | 1 | 2;

/** Columns of text where standard output is not a terminal. */
const PLAIN_COLUMNS = 80;
const FEWEST_COLUMNS = 60;
const MOST_COLUMNS = 120;

/** Width that text is set to: the terminal's within reason, else 80. */
export function textColumns(io: Io): number {
  if (!io.stdout.isTTY) return PLAIN_COLUMNS;
  return Math.min(MOST_COLUMNS, Math.max(FEWEST_COLUMNS, io.stdout.columns ?? PLAIN_COLUMNS));
}

/** Writes text whole, waiting for a slow reader. */
export function write(stream: NodeJS.WriteStream, text: string): Promise<void> {
  return new Promise((resolve) => {
    stream.write(text, () => resolve());
  });
}
