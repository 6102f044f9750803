/** One polite line where the terminal is too small. */
import type { ReactElement } from 'react';
import { cutText } from '../../plot/cells.ts';
import { run } from '../../plot/run.ts';
import { SMALLEST } from '../layout.ts';
import { Rows } from '../parts/rows.tsx';
import type { State } from '../state.ts';
import type { Theme } from '../theme.ts';

/** Says how much room is needed; the first wording that fits, cut if none does. */
export function TooSmallView({
  state,
  theme,
}: {
  readonly state: State;
  readonly theme: Theme;
}): ReactElement {
  const { columns, rows } = SMALLEST;
  const wordings = [
    `The workspace needs ${columns} × ${rows}; this is ${state.columns} × ${state.rows}. Make it larger, or q to quit.`,
    `needs ${columns} × ${rows}, is ${state.columns} × ${state.rows}; q quits`,
    `needs ${columns} × ${rows}`,
  ];
  const text = wordings.find((wording) => wording.length < state.columns) ?? wordings.at(-1)!;
  return <Rows rows={[[run(cutText(text, Math.max(1, state.columns - 1)))]]} theme={theme} />;
}
