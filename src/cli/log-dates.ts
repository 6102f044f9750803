/** When a sweep was taken: the wall time on site, as people write it and as files keep it. */
import { fail, type Outcome, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';

/**
 * Reads `2026-05-03`, `2026-05-03T14:30` or `2026-05-03 14:30`.
 *
 * @param flag For the problem.
 * @returns The date alone, or date and time with a T between.
 */
export function parseWallTime(text: string, flag: string): Outcome<string> {
  const found = /^(\d{4})-(\d{2})-(\d{2})(?:[T ](\d{2}):(\d{2}))?$/u.exec(text.trim());
  if (found) {
    const [, year, month, day, hour, minute] = found.map(Number);
    const date = new Date(Date.UTC(year!, month! - 1, day!));
    const real = date.getUTCMonth() === month! - 1 && date.getUTCDate() === day!;
    if (real && !(hour! > 23) && !(minute! > 59)) return succeed(text.trim().replace(' ', 'T'));
  }
  return fail({
    code: 'flag-value',
    what: 'this is not a date',
    found: cleanForDisplay(`--${flag} ${text}`, 60),
    mend: `write --${flag} 2026-05-03, or --${flag} 2026-05-03T14:30`,
  });
}

/** The first ten characters: the date alone. */
export function parseDate(text: string | null, flag: string): Outcome<string | null> {
  if (text === null) return succeed(null);
  const time = parseWallTime(text, flag);
  return time.ok ? succeed(time.value.slice(0, 10)) : time;
}
