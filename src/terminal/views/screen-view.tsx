/** Which view the state calls for. */
import type { ReactElement } from 'react';
import { tooSmall } from '../layout.ts';
import type { State } from '../state.ts';
import type { Theme } from '../theme.ts';
import { PageView } from './page-view.tsx';
import { TooSmallView } from './too-small-view.tsx';
import { WorkView } from './work-view.tsx';

/** The whole screen of a state. */
export function ScreenView({ state, theme }: { readonly state: State; readonly theme: Theme }): ReactElement {
  if (tooSmall(state)) return <TooSmallView state={state} theme={theme} />;
  if (state.panel?.type === 'page') return <PageView state={state} panel={state.panel} theme={theme} />;
  return <WorkView state={state} theme={theme} />;
}
