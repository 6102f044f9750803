/** What may follow the network data of Touchstone 2.0 and 2.1: noise data, information, the end. */
import type { Notice } from '../outcome.ts';
import type { ProblemList } from './problem-list.ts';
import { BRACKET, readKeyword, skipInformation } from './touchstone-keyword-line.ts';
import { afterEndNotice, looseLine, unknownKeyword } from './touchstone-keyword-problems.ts';
import type { TouchstoneLines } from './touchstone-lines.ts';

/**
 * Goes from the line after the network data to the end: noise data and information are skipped, anything unknown is
 * a problem, and a missing `[End]` is a notice.
 *
 * @param standing True when `lines` already stands on the keyword that ended the data.
 */
export function readVersion2Tail(
  lines: TouchstoneLines,
  standing: boolean,
  problems: ProblemList,
): readonly Notice[] {
  let inNoise = false;
  for (let has = standing; has; has = lines.next()) {
    if (problems.full) return [];
    if (lines.firstCode !== BRACKET) {
      if (!inNoise) problems.add(looseLine(lines));
      continue;
    }
    const keyword = readKeyword(lines, problems);
    if (keyword?.name === 'end') return lines.next() ? [afterEndNotice(lines.line)] : [];
    if (keyword?.name === 'noise data') inNoise = true;
    else if (keyword?.name === 'begin information') skipInformation(lines, problems);
    else if (keyword !== null) problems.add(unknownKeyword(lines, keyword));
  }
  return [
    {
      code: 'touchstone-no-end',
      what: 'the file has no [End] after its data; it may have been cut short',
    },
  ];
}
