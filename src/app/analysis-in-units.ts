/** An analysis with its words in the units that are shown; its numbers stay metres. */
import { findingsOf, placesOf } from '../assess/find-findings.ts';
import type { Notice } from '../outcome.ts';
import { fixedText, lengthPerMetre, lengthText, type Units } from '../plot/quantity-text.ts';
import type { Analysis } from './analysis.ts';

/** The same analysis; where feet are wanted, places, findings and notices speak of feet. */
export function analysisInUnits(analysis: Analysis, units: Units): Analysis {
  if (units === 'm') return analysis;
  const { line, solution, severities } = analysis;
  const lengthWords = (lengthM: number): string =>
    `${fixedText(lengthM * lengthPerMetre(units), 1)} ${units}`;
  const places = placesOf(line, solution, lengthWords);
  return {
    ...analysis,
    places,
    findings: findingsOf(line, solution, severities, places, lengthWords),
    notices: analysis.notices.map((notice) => noticeInUnits(notice, units)),
  };
}

/** Notices that speak of lengths and hold no text from outside, in which a length could be a name. */
const NOTICES_OF_LENGTH: ReadonlySet<string> = new Set(['length-differs', 'line-folds', 'band-narrow']);

/** The same notice; where feet are wanted, "45.72 m" in it becomes "150.0 ft". */
export function noticeInUnits(notice: Notice, units: Units): Notice {
  if (units === 'm' || !NOTICES_OF_LENGTH.has(notice.code)) return notice;
  const what = notice.what.replace(/(\d+)(?:\.(\d+))? m(?![a-z])/gu, (text, whole: string, part = '') =>
    lengthText(Number.parseFloat(text), units, part === '' && whole !== '' ? 1 : part.length),
  );
  return { ...notice, what };
}
