/** The program's own cable table, read from cables/ as the program reads it. */
import { readdirSync, readFileSync } from 'node:fs';
import { type CableTable, createCableTable, type TableEntry } from '../../src/line/cable-table.ts';
import { readCables } from '../../src/line/read-cables.ts';
import type { Notice } from '../../src/outcome.ts';

const FOLDER = new URL('../../cables/', import.meta.url);

/** Every file of the table with its text. */
export function shippedFiles(): readonly { readonly file: string; readonly text: string }[] {
  return readdirSync(FOLDER)
    .filter((file) => file.endsWith('.json'))
    .map((file) => ({ file, text: readFileSync(new URL(file, FOLDER), 'utf8') }));
}

/** Every entry of the table, and what its readers doubted. */
export function shippedEntries(): {
  readonly entries: readonly TableEntry[];
  readonly notices: readonly Notice[];
} {
  const entries: TableEntry[] = [];
  const notices: Notice[] = [];
  for (const { file, text } of shippedFiles()) {
    const read = readCables(text, file);
    if (!read.ok) throw new Error(JSON.stringify(read.problems, null, 2));
    entries.push(...read.value);
    notices.push(...read.notices);
  }
  return { entries, notices };
}

/** The table itself. */
export function shippedTable(): CableTable {
  return createCableTable(shippedEntries().entries);
}
