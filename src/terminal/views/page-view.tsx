/** A page over the workspace: its title, its text from where it was scrolled to, and the keys. */
import type { ReactElement } from 'react';
import { fitRuns, spreadRuns } from '../../plot/cells.ts';
import { type Run, run } from '../../plot/run.ts';
import { layoutOf } from '../layout.ts';
import { mostScroll, pageOf, pageRows } from '../pages/pages.ts';
import { footerRow } from '../parts/footer.ts';
import { Rows } from '../parts/rows.tsx';
import type { Panel, State } from '../state.ts';
import type { Theme } from '../theme.ts';

/** Draws the page that is open. */
export function PageView({
  state,
  panel,
  theme,
}: {
  readonly state: State;
  readonly panel: Extract<Panel, { type: 'page' }>;
  readonly theme: Theme;
}): ReactElement {
  const { columns } = layoutOf(state);
  const { title, lines } = pageOf(state, panel.page);
  const rows = pageRows(state);
  const first = Math.min(panel.scroll, mostScroll(state, panel.page));
  const more: readonly Run[] =
    lines.length > rows
      ? [run(`${first + 1}–${Math.min(lines.length, first + rows)} of ${lines.length} `, 'dim')]
      : [];
  return (
    <Rows
      rows={[
        spreadRuns([run(` ${title}`, 'strong')], more, columns),
        ...Array.from({ length: rows }, (_, i) => fitRuns([run(' '), ...(lines[first + i] ?? [])], columns)),
        footerRow(state, columns),
      ]}
      theme={theme}
    />
  );
}
