/** An analysis with its words in the units that are shown; its numbers stay metres. */
import { findingsOf, placesOf } from '../assess/find-findings.ts';
import { fixedText, lengthPerMetre, type Units } from '../plot/quantity-text.ts';
import type { Analysis } from './analysis.ts';

/** The same analysis; where feet are wanted, places and findings speak of feet. */
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
  };
}
