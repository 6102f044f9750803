// Bundles the program into dist/: one entry for the command line, one for each worker.
// Splitting keeps the workspace (Ink, React) out of the path of every other verb.
import { chmodSync, rmSync, writeFileSync } from 'node:fs';
import { resolve } from 'node:path';
import { build } from 'esbuild';

const TEXT_WIDTH = resolve('src/plot/text-width.ts');

/** Whoever measures text, the UI library too, asks our own front to string-width; only that asks string-width. */
const textWidthOnce = {
  name: 'text-width-once',
  setup(bundle) {
    bundle.onResolve({ filter: /^string-width$/ }, ({ importer }) =>
      importer === TEXT_WIDTH ? undefined : { path: TEXT_WIDTH },
    );
  },
};

const common = {
  bundle: true,
  format: 'esm',
  platform: 'node',
  target: 'node20',
  // Some libraries' "main" is a loader that no bundler sees through; their "module" is plain.
  mainFields: ['module', 'main'],
  define: {
    'process.env.NODE_ENV': '"production"',
    // Libraries of the older module kind ask for their own file's name and for require.
    __filename: 'bundleFilename',
    // Nothing here goes to the network. The layout engine under Ink would have Node load its whole HTTP client, 15 ms
    // of every start, to unpack a text it holds itself; without fetch it does so on its own.
    fetch: 'undefined',
  },
  // Ink loads its developer tools only when asked; they are no dependency of ours.
  alias: { 'react-devtools-core': './src/terminal/no-devtools.ts' },
  plugins: [textWidthOnce],
  banner: {
    js: [
      "import { createRequire as createRequireForBundle } from 'node:module';",
      "import { fileURLToPath as fileURLToPathForBundle } from 'node:url';",
      'const require = createRequireForBundle(import.meta.url);',
      'const bundleFilename = fileURLToPathForBundle(import.meta.url);',
    ].join('\n'),
  },
};

rmSync('dist', { recursive: true, force: true });
await build({
  ...common,
  entryPoints: {
    cli: 'src/cli/main.ts',
    'solve-worker': 'src/app/solve-worker.ts',
    'study-worker': 'src/app/study-worker.ts',
  },
  outdir: 'dist',
  splitting: true,
  minify: true,
  keepNames: true,
  legalComments: 'linked',
});
await writeCables();
chmodSync('dist/cli.js', 0o755);

/** Reads and checks cables/ once and for all, so that no start has to. */
async function writeCables() {
  const reader = 'dist/read-cables.js';
  await build({ ...common, entryPoints: ['src/app/cable-files.ts'], outfile: reader });
  const { loadCableTable } = await import(`./${reader}`);
  const table = await loadCableTable();
  rmSync(reader);
  if (!table.ok)
    throw new Error(table.problems.map(({ file, line, what }) => `${file}:${line} ${what}`).join('\n'));
  writeFileSync('dist/built-cables.json', JSON.stringify([...table.value.entries, ...table.value.guides]));
}
