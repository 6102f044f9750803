/** Where the files that ship with the program lie, seen from `src/` and from the bundle in `dist/` alike. */
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** `dist/` is one folder below the package, `src/app/` two. */
const ROOT_FROM_HERE = ['../', '../../'] as const;

/**
 * Path of a file or folder of the package, for example `cables` or `samples/north-1-later.s1p`.
 *
 * @throws Error When the installation is incomplete: the program itself is then broken, not its input.
 */
export function bundledPath(relative: string): string {
  return join(packageRoot(), relative);
}

/** Version of the program, as package.json gives it. */
export function programVersion(): string {
  const text = readFileSync(bundledPath('package.json'), 'utf8');
  return (JSON.parse(text) as { readonly version: string }).version;
}

function packageRoot(): string {
  for (const up of ROOT_FROM_HERE) {
    const root = fileURLToPath(new URL(up, import.meta.url));
    if (existsSync(join(root, 'cables')) && existsSync(join(root, 'package.json'))) return root;
  }
  throw new Error(`no cables folder above ${fileURLToPath(import.meta.url)}: install the program again`);
}
