/** The bottom row: the views with their keys, and what else the keys do now. */
import { cellWidth, spreadRuns } from '../../plot/cells.ts';
import { type Run, run, runsText } from '../../plot/run.ts';
import { hintedKeys, keyModeOf } from '../keys.ts';
import { analysisOf, type State } from '../state.ts';
import { VIEW_IDS } from '../view-ids.ts';

const GAP = '  ';

/** Views (or a remark) at the left, as many keys as fit at the right, the most wanted last. */
export function footerRow(state: State, width: number): readonly Run[] {
  const left = [run(' '), ...leftRuns(state)];
  let room = width - cellWidth(runsText(left)) - 3;
  const chosen = hintedKeys(state).filter(({ hint }) => {
    if (!hint) return false;
    const cells = cellWidth(`${hint.keys} ${hint.word}${GAP}`);
    if (cells > room) return false;
    room -= cells;
    return true;
  });
  // The ones that are always wanted stand in the corner, where they stay put.
  const ordered = [
    ...chosen.filter(({ hint }) => hint?.rank !== 0),
    ...chosen.filter(({ hint }) => hint?.rank === 0),
  ];
  const right = ordered.flatMap(({ hint }): readonly Run[] =>
    hint ? [run(GAP), run(hint.keys, 'key'), run(` ${hint.word}`, 'dim')] : [],
  );
  return spreadRuns(left, [...right, run(' ')], width);
}

function leftRuns(state: State): readonly Run[] {
  if (state.remark !== null) return [run(state.remark, 'caution')];
  if (keyModeOf(state) !== 'work' || !analysisOf(state)) return [];
  return VIEW_IDS.flatMap((view, i): readonly Run[] =>
    view === state.view
      ? [run(`[${i + 1} ${view}]`, 'strong'), run(' ')]
      : [run(` ${i + 1}`, 'key'), run(` ${view} `), run(' ')],
  );
}
