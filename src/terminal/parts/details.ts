/** What is known of the chosen one, in the room there is. */
import { fitRuns } from '../../plot/cells.ts';
import { lengthWithSigmaText } from '../../plot/quantity-text.ts';
import { type Run, run } from '../../plot/run.ts';
import { chosenOf } from '../derived.ts';
import type { Found } from '../found.ts';
import type { State } from '../state.ts';
import { type Paragraph, paragraphsWithin } from './paragraph.ts';

const MARGIN = 3;
const LABEL = 13;

/** `rows` rows on the chosen one. */
export function detailRows(state: State, width: number, rows: number): readonly (readonly Run[])[] {
  const chosen = chosenOf(state);
  const lines = chosen ? paragraphsWithin(paragraphsOf(chosen, state), width - MARGIN - 1, LABEL, rows) : [];
  return Array.from({ length: rows }, (_, i) =>
    fitRuns([run(' '.repeat(MARGIN)), ...(lines[i] ?? [])], width),
  );
}

function paragraphsOf(found: Found, { units }: State): readonly Paragraph[] {
  const where = found.where === '' ? '' : ` ${found.where}`;
  const distance = lengthWithSigmaText(found.distanceM, found.distanceSigmaM, units);
  if (found.severity === 'sound')
    return [{ label: '', text: `${found.what}${where}, ${distance}: as it should be`, role: 'plain' }];
  return [
    {
      label: '',
      text: `${found.what}${where}`,
      role: found.severity,
    },
    ...listParagraph('likely', found.causes),
    ...listParagraph('check first', found.checks),
    ...listParagraph('bring', found.bring),
  ];
}

function listParagraph(label: string, items: readonly string[]): readonly Paragraph[] {
  return items.length === 0 ? [] : [{ label, text: items.join('; ') }];
}
