/** What every key does, from the key table. */
import { cutText, fitText } from '../../plot/cells.ts';
import { run } from '../../plot/run.ts';
import { KEY_TABLE } from '../keys.ts';
import type { Page } from './page.ts';

const GROUP = 16;
const KEYS = 10;

/** One line a row of the table; a group is named beside its first. */
export function helpPage(width: number): Page {
  const rows = KEY_TABLE.work;
  return {
    title: 'keys',
    lines: rows.map((row, i) => [
      run(fitText(row.group === rows[i - 1]?.group ? '' : row.group, GROUP), 'dim'),
      run(fitText(row.shown, KEYS), 'key'),
      run(cutText(row.does, width - GROUP - KEYS)),
    ]),
  };
}
