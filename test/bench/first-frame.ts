/** Time from the start of a process in a pseudo-terminal to the first frame with something in it. */
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { spawn } from '@lydell/node-pty';
import { build } from 'esbuild';
import { median } from '../../src/numerics/statistics.ts';

/** Escape sequences (CSI, OSC, two-character ones), which draw nothing themselves. */
const ESCAPES = /\u001b(?:\[[0-?]*[ -/]*[@-~]|\][^\u0007\u001b]*(?:\u0007|\u001b\\)|[@-Z\\-_=>])/g;

/** Longest wait for a frame, ms. */
const PATIENCE_MS = 20_000;

/** What counts as drawn: any visible character, or a cell of a braille plot. */
export type Drawn = 'text' | 'plot';

const PATTERNS: Readonly<Record<Drawn, RegExp>> = { text: /\S/, plot: /[\u2801-\u28ff]/ };

/**
 * Starts Node with these arguments in a terminal of 100 × 30 and waits until something is drawn.
 *
 * @throws Error When nothing is drawn in 20 s, or the process ends before.
 */
export function firstFrameMs(nodeArguments: readonly string[], drawn: Drawn): Promise<number> {
  const started = performance.now();
  const terminal = spawn(process.execPath, [...nodeArguments], {
    cols: 100,
    rows: 30,
    name: 'xterm-256color',
  });
  return new Promise((resolve, reject) => {
    let seen = '';
    const settle = (finish: () => void) => {
      clearTimeout(patience);
      data.dispose();
      exit.dispose();
      terminal.kill('SIGKILL');
      finish();
    };
    const patience = setTimeout(
      () => settle(() => reject(new Error(`nothing drawn by node ${nodeArguments.join(' ')}`))),
      PATIENCE_MS,
    );
    const data = terminal.onData((text) => {
      seen += text;
      if (PATTERNS[drawn].test(seen.replace(ESCAPES, ''))) settle(() => resolve(performance.now() - started));
    });
    const exit = terminal.onExit(({ exitCode }) =>
      settle(() =>
        reject(new Error(`node ${nodeArguments.join(' ')} ended with ${exitCode} before a frame`)),
      ),
    );
  });
}

/** Medians of several starts, in turns. */
export async function firstFrameMediansMs(
  repeats: number,
  starts: readonly { readonly nodeArguments: readonly string[]; readonly drawn: Drawn }[],
): Promise<number[]> {
  const times: number[][] = starts.map(() => []);
  for (let i = 0; i < repeats + 1; i++) {
    for (const [s, { nodeArguments, drawn }] of starts.entries()) {
      const took = await firstFrameMs(nodeArguments, drawn);
      if (i > 0) times[s]!.push(took);
    }
  }
  return times.map((list) => median(list));
}

/** Bundles the hello as the program is bundled, hands its path to `use`, and removes it. */
export async function withHelloBundle<T>(use: (path: string) => Promise<T>): Promise<T> {
  const folder = mkdtempSync(join(tmpdir(), 'feedsonde-hello-'));
  const here = (relative: string) => fileURLToPath(new URL(relative, import.meta.url));
  try {
    const outfile = join(folder, 'hello.mjs');
    await build({
      entryPoints: [here('./hello-frame.tsx')],
      outfile,
      bundle: true,
      format: 'esm',
      platform: 'node',
      target: 'node20',
      minify: true,
      keepNames: true,
      jsx: 'automatic',
      define: { 'process.env.NODE_ENV': '"production"' },
      alias: { 'react-devtools-core': here('../../src/terminal/no-devtools.ts') },
      banner: {
        js: "import { createRequire as createRequireForBundle } from 'node:module'; const require = createRequireForBundle(import.meta.url);",
      },
    });
    return await use(outfile);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
