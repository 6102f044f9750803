/**
 * Writes to a logbook until it is done, or is stopped: the other program in the tests of faults.
 *
 *   add PATH FROM COUNT [BYTES]   adds entries, a line `saved KEY` after each; `failed CODE` and status 2 at the first
 *   list PATH                     prints `listed N`, or `failed CODE`
 */
import { writeSync } from 'node:fs';
import { openLogbookFile } from '../../src/app/log-file.ts';
import type { Outcome } from '../../src/outcome.ts';
import { makeEntry } from './made-entry.ts';

const [action, path = '', from = '0', count = '0', bytes = '0'] = process.argv.slice(2);
const logbook = await openLogbookFile(path, { create: action === 'add' });
if (!logbook.ok) failed(logbook);
else if (action === 'list') {
  const listed = logbook.value.list({});
  if (listed.ok) say(`listed ${listed.value.length}`);
  else failed(listed);
  logbook.value.close();
} else {
  for (let index = Number(from); index < Number(from) + Number(count); index++) {
    const added = logbook.value.add(makeEntry(index, {}, Number(bytes)), { replace: false, baseline: false });
    if (!added.ok) {
      failed(added);
      break;
    }
    say(`saved ${added.value.key}`);
  }
  logbook.value.close();
}

function failed(outcome: Extract<Outcome<unknown>, { ok: false }>): void {
  say(`failed ${outcome.problems.map(({ code }) => code).join(' ')}`);
  process.exitCode = 2;
}

/** Said at once, whatever happens to this process next. */
function say(line: string): void {
  writeSync(1, `${line}\n`);
}
