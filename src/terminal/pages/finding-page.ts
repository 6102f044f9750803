/** All that is known of the chosen one. */

import { SEVERITY_GLYPHS } from '../../plot/line-strip.ts';
import { lengthSpanText, lengthWithSigmaText, levelText, sureText } from '../../plot/quantity-text.ts';
import { chosenOf } from '../derived.ts';
import type { Found } from '../found.ts';
import { type Paragraph, paragraphRows } from '../parts/paragraph.ts';
import type { State } from '../state.ts';
import type { Page } from './page.ts';

const LABEL = 14;

const SEVERITY_WORDS: Readonly<Record<Found['severity'], string>> = {
  fault: 'fault: mend it',
  watch: 'watch: not a fault yet',
  sound: 'sound: as it should be',
};

/** Place, kind and size with their uncertainty, then causes, checks and what to bring, a line each. */
export function findingPage(state: State, width: number): Page {
  const found = chosenOf(state);
  if (!found) return { title: 'nothing found', lines: [] };
  const rowsOf = (paragraph: Paragraph) => paragraphRows(paragraph, width, LABEL);
  const { units } = state;
  const sigmaM = found.distanceSigmaM;
  const facts: readonly Paragraph[] = [
    {
      label: 'verdict',
      text: `${SEVERITY_GLYPHS[found.severity]} ${SEVERITY_WORDS[found.severity]}`,
      role: found.severity,
    },
    { label: 'what', text: `${found.what}, ${sureText(found.confidence)} sure`, role: 'strong' },
    { label: 'where', text: found.where },
    { label: 'distance', text: lengthWithSigmaText(found.distanceM, sigmaM, units) },
    { label: 'between', text: `${lengthSpanText(found.distanceM, sigmaM, units)}, 95 times in 100` },
    ...levels(found),
  ];
  return {
    title: found.what,
    lines: [
      ...facts.flatMap(rowsOf),
      ...listOf('likely', found.causes, rowsOf),
      ...listOf('check first', found.checks, rowsOf),
      ...listOf('bring', found.bring, rowsOf),
    ],
  };
}

function levels(found: Found): readonly Paragraph[] {
  if (found.returnLossDb === null || found.correctedReturnLossDb === null) return [];
  return [
    {
      label: 'level',
      text:
        `${levelText(found.returnLossDb)} as seen at the port, ${levelText(found.correctedReturnLossDb)} in itself, ` +
        'with the loss on the way taken off',
    },
  ];
}

/** A blank line, then the items, the label beside the first. */
function listOf<Row>(
  label: string,
  items: readonly string[],
  rowsOf: (paragraph: Paragraph) => readonly (readonly Row[])[],
): readonly (readonly Row[])[] {
  if (items.length === 0) return [];
  return [[], ...items.flatMap((text, i) => rowsOf({ label: i === 0 ? label : ' ', text }))];
}
