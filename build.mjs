// Bundles the program into dist/: one entry for the command line, one for the solve worker.
// Splitting keeps the workspace (Ink, React) out of the path of every other verb.
import { chmodSync, rmSync } from 'node:fs';
import { build } from 'esbuild';

rmSync('dist', { recursive: true, force: true });
await build({
  entryPoints: { cli: 'src/cli/main.ts', 'solve-worker': 'src/app/solve-worker.ts' },
  outdir: 'dist',
  bundle: true,
  splitting: true,
  format: 'esm',
  platform: 'node',
  target: 'node20',
  minify: true,
  keepNames: true,
  legalComments: 'linked',
  define: { 'process.env.NODE_ENV': '"production"' },
  // Ink loads its developer tools only when asked; they are no dependency of ours.
  alias: { 'react-devtools-core': './src/terminal/no-devtools.ts' },
  banner: {
    js: "import { createRequire as createRequireForBundle } from 'node:module'; const require = createRequireForBundle(import.meta.url);",
  },
});
chmodSync('dist/cli.js', 0o755);
