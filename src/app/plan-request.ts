/** From what was typed to the line and the band that a sweep is planned for. */
import type { CableTable } from '../line/cable-table.ts';
import { describedLengthM, type Line } from '../line/line.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { parseSweepRange } from '../sweep/number-text.ts';
import { type LineFlags, requestLine } from './line-request.ts';
import { STANDARD_INPUT } from './standard-input.ts';

export type PlanRequest = { readonly line: Line; readonly bandHz: readonly [number, number] | null };

/**
 * The line and the band.
 *
 * @param band As typed, `1.7GHz-2.2GHz`; null where none was given.
 */
export async function requestPlan(
  flags: LineFlags,
  band: string | null,
  cables: CableTable,
): Promise<Outcome<PlanRequest>> {
  const line: Outcome<{ readonly line: Line }> =
    flags.line === null && flags.cable === null
      ? fail({
          code: 'line-missing',
          what: 'nothing says what line the sweep is planned for',
          mend: 'give --line FILE, or --cable ID --length 46m; "feedsonde cables" lists the ids',
        })
      : await requestLine(flags, STANDARD_INPUT, cables);
  const range = band === null ? succeed(null) : parseBand(band);
  const problems: Problem[] = [line, range].flatMap((one) => (one.ok ? [] : one.problems));
  if (line.ok && describedLengthM(line.value.line) === null)
    problems.push({
      code: 'length-missing',
      what: 'a sweep can only be planned for a line of known length',
      mend: 'give --length 46m, or a rough one: a sweep that reaches too far does no harm',
    });
  if (problems.length > 0 || !line.ok || !range.ok) return fail(...problems);
  return succeed({ line: line.value.line, bandHz: range.value }, line.notices);
}

/** A band, `1.7GHz-2.2GHz`; a start without a unit takes the stop's. */
function parseBand(text: string): Outcome<readonly [number, number]> {
  const range = parseSweepRange(`${text}:2`);
  if (range.ok) return succeed([range.value.startHz, range.value.stopHz]);
  return fail({
    code: 'flag-value',
    what: 'this is no band',
    found: cleanForDisplay(`--band ${text}`, 60),
    mend: 'write where it starts and stops, --band 1.7GHz-2.2GHz',
  });
}
