/** The writer as a process of its own: bundled once, so that it starts as fast as the program does. */
import { type ChildProcess, spawn } from 'node:child_process';
import { mkdirSync, mkdtempSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const HERE = fileURLToPath(new URL('.', import.meta.url));
/** Beside the packages, so that the optional database is found from there. */
const CACHE = join(HERE, '../../node_modules/.cache/feedsonde-test');

/** Bundles writer.ts; gives the path of the script. */
export async function bundleWriter(): Promise<string> {
  mkdirSync(CACHE, { recursive: true });
  const outfile = join(mkdtempSync(join(CACHE, 'writer-')), 'writer.mjs');
  await build({
    entryPoints: [join(HERE, 'writer.ts')],
    outfile,
    bundle: true,
    platform: 'node',
    format: 'esm',
    target: 'node20',
    logLevel: 'error',
    // As build.mjs bundles the program.
    mainFields: ['module', 'main'],
    define: { __filename: 'bundleFilename' },
    banner: {
      js: [
        "import { createRequire as createRequireForBundle } from 'node:module';",
        'const require = createRequireForBundle(import.meta.url);',
        'const bundleFilename = "";',
      ].join('\n'),
    },
  });
  return outfile;
}

export type Writer = {
  readonly child: ChildProcess;
  /** Lines of standard output so far. */
  readonly lines: readonly string[];
  /** Settles with the exit status, null when killed. */
  readonly done: Promise<number | null>;
};

/**
 * Starts the script.
 *
 * @param options.user Runs it as this user id; only root can.
 * @param options.fileBlocks Largest file that it may write, in blocks of 512 or 1024 bytes as the shell counts them.
 */
export function startWriter(
  script: string,
  args: readonly string[],
  options: { readonly user?: number; readonly fileBlocks?: number; readonly onLine?: () => void } = {},
): Writer {
  const command = [process.execPath, script, ...args];
  const [program = '', ...rest] =
    options.fileBlocks === undefined
      ? command
      : ['/bin/sh', '-c', `ulimit -f ${options.fileBlocks}; exec "$@"`, 'sh', ...command];
  const child = spawn(program, rest, {
    stdio: ['ignore', 'pipe', 'inherit'],
    ...(options.user === undefined ? {} : { uid: options.user, gid: options.user }),
  });
  const lines: string[] = [];
  let pending = '';
  child.stdout?.on('data', (chunk: Buffer) => {
    const parts = (pending + chunk.toString()).split('\n');
    pending = parts.pop() ?? '';
    for (const line of parts) {
      lines.push(line);
      options.onLine?.();
    }
  });
  const done = new Promise<number | null>((resolve, reject) => {
    child.on('error', reject);
    child.on('close', (status) => resolve(status));
  });
  return { child, lines, done };
}
