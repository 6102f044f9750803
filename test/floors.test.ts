/** The floors of src and what each may import, held by this table (DEVELOPERS.md explains it). */
import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const SRC = fileURLToPath(new URL('../src', import.meta.url));

/** Lowest first. `packages`: what may come from outside; a trailing * stands for any ending. */
const FLOORS: Readonly<
  Record<string, { readonly floors: readonly string[]; readonly packages: readonly string[] }>
> = {
  'outcome.ts': { floors: [], packages: [] },
  numerics: { floors: ['outcome.ts'], packages: ['fft.js', 'ml-matrix'] },
  line: {
    floors: ['numerics', 'outcome.ts'],
    packages: ['valibot', 'jsonc-parser', 'fastest-levenshtein'],
  },
  sweep: { floors: ['line', 'numerics', 'outcome.ts'], packages: ['csv-parse', 'csv-parse/*'] },
  locate: { floors: ['sweep', 'line', 'numerics', 'outcome.ts'], packages: [] },
  assess: { floors: ['locate', 'sweep', 'line', 'numerics', 'outcome.ts'], packages: [] },
  plot: { floors: ['numerics', 'outcome.ts'], packages: ['d3-array', 'string-width'] },
  logbook: {
    floors: ['assess', 'locate', 'sweep', 'line', 'numerics', 'outcome.ts'],
    packages: ['valibot', 'node:*'],
  },
  report: {
    floors: ['assess', 'plot', 'locate', 'sweep', 'line', 'numerics', 'outcome.ts'],
    packages: [],
  },
  app: {
    floors: ['report', 'logbook', 'plot', 'assess', 'locate', 'sweep', 'line', 'numerics', 'outcome.ts'],
    packages: ['env-paths', 'write-file-atomic', 'valibot', 'node:*'],
  },
  cli: {
    floors: [
      'app',
      'report',
      'logbook',
      'plot',
      'assess',
      'locate',
      'sweep',
      'line',
      'numerics',
      'outcome.ts',
    ],
    packages: ['meow', 'node:*'],
  },
  terminal: {
    floors: [
      'app',
      'report',
      'logbook',
      'plot',
      'assess',
      'locate',
      'sweep',
      'line',
      'numerics',
      'outcome.ts',
    ],
    packages: ['ink', 'react', 'react/*', 'string-width', 'node:*'],
  },
};

/** The one way from the command line to the terminal: a lazy import in one file. */
const LAZY = { from: 'cli/main.ts', to: 'terminal/start.tsx' };

/** Libraries that only one file of ours may know. */
const SINGLE_DOORS: Readonly<Record<string, string>> = {
  'fft.js': 'numerics/fft.ts',
  meow: 'cli/parse-arguments.ts',
  'write-file-atomic': 'app/files.ts',
  'env-paths': 'app/settings.ts',
  'fastest-levenshtein': 'line/nearest-word.ts',
};

type Import = {
  readonly file: string;
  readonly specifier: string;
  readonly lazy: boolean;
};

const files = readdirSync(SRC, { recursive: true, encoding: 'utf8' })
  .map((path) => path.replaceAll('\\', '/'))
  .filter((path) => /\.tsx?$/u.test(path))
  .sort();
const imports = files.flatMap(importsOf);

describe('the floors of src', () => {
  it('are all in the table', () => {
    expect([...new Set(files.map(floorOf))].filter((floor) => !(floor in FLOORS))).toEqual([]);
  });

  it('import only floors and packages of their row', () => {
    expect(imports.map(complaintOf).filter((complaint) => complaint !== null)).toEqual([]);
  });

  it('know each of certain libraries in one file only', () => {
    const wrong = imports.filter(
      ({ file, specifier }) => specifier in SINGLE_DOORS && SINGLE_DOORS[specifier] !== file,
    );
    expect(wrong).toEqual([]);
  });

  it('ask for a SQLite in one file only', () => {
    // Both are asked for at run time, where no import shows.
    const asks = files.filter((file) =>
      /\(\s*['"](?:node:sqlite|better-sqlite3)['"]/u.test(withoutComments(textOf(file))),
    );
    expect(asks).toEqual(['logbook/driver.ts']);
  });

  it('leave stopping the process to cli/main.ts', () => {
    const wrong = files.filter(
      (file) => file !== 'cli/main.ts' && /\bprocess\.exit\s*\(/u.test(withoutComments(textOf(file))),
    );
    expect(wrong).toEqual([]);
  });
});

describe('importsOf', () => {
  it('sees static, type, side-effect, re-exporting and lazy imports, but none in comments and texts', () => {
    const text = `
      import { a } from './a.ts';
      import type { B } from "./b.ts";
      import {
        c,
        type D,
      } from './c.ts';
      import './e.ts';
      export { f } from './f.ts';
      export * from './g.ts';
      const h = await import('./h.ts');
      type I = typeof import('./i.ts');
      // import { no } from './no.ts';
      /* import './no.ts'; */
      const text = 'https://x'; // './no.ts'
    `;
    expect(specifiersIn(text).map((found) => found.specifier)).toEqual([
      './a.ts',
      './b.ts',
      './c.ts',
      './e.ts',
      './f.ts',
      './g.ts',
      './h.ts',
      './i.ts',
    ]);
  });
});

function complaintOf({ file, specifier, lazy }: Import): string | null {
  const row = FLOORS[floorOf(file)];
  if (!row) return `${file} is on no known floor`;
  if (!specifier.startsWith('.'))
    return row.packages.some((allowed) => matches(allowed, specifier))
      ? null
      : `${file} may not import ${specifier}`;
  const target = relative(SRC, resolve(SRC, dirname(file), specifier)).replaceAll('\\', '/');
  if (!files.includes(target)) return `${file} imports ${specifier}, which is no file of src`;
  if (file === LAZY.from && target === LAZY.to && lazy) return null;
  const floor = floorOf(target);
  return floor === floorOf(file) || row.floors.includes(floor) ? null : `${file} may not import ${target}`;
}

function matches(allowed: string, specifier: string): boolean {
  return allowed.endsWith('*') ? specifier.startsWith(allowed.slice(0, -1)) : specifier === allowed;
}

/** First folder of a path; a file that lies directly in src is a floor of its own. */
function floorOf(path: string): string {
  return path.split('/')[0] ?? path;
}

function importsOf(file: string): Import[] {
  return specifiersIn(textOf(file)).map((found) => ({ file, ...found }));
}

function specifiersIn(text: string): { readonly specifier: string; readonly lazy: boolean }[] {
  const pattern =
    /(?:^|[;}\n])\s*(?:(?:import|export)\b[^'"`;=()]*?\bfrom\s*|import\s*)(['"])([^'"\n]+)\1|\bimport\s*\(\s*(['"])([^'"\n]+)\3/gu;
  return [...withoutComments(text).matchAll(pattern)].map((match) => ({
    specifier: match[2] ?? match[4] ?? '',
    lazy: match[4] !== undefined,
  }));
}

function textOf(file: string): string {
  return readFileSync(join(SRC, file), 'utf8');
}

/** Comments become blanks; texts stay whole, so that a `//` in them opens none. */
function withoutComments(text: string): string {
  return text.replace(
    /('(?:\\.|[^'\\\n])*'|"(?:\\.|[^"\\\n])*"|`(?:\\.|[^`\\])*`)|\/\*[\s\S]*?\*\/|\/\/[^\n]*/gu,
    (_, kept: string | undefined) => kept ?? ' ',
  );
}
