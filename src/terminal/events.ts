/** What can happen: keys after the key table has read them, and answers to effects. */
import type { Analysis } from '../app/analysis.ts';
import type { DistanceTrace } from '../locate/distance-trace.ts';
import type { Outcome } from '../outcome.ts';
import type { Choice, PageName } from './state.ts';
import type { ViewId } from './view-ids.ts';

/** Wishes of the person at the keys. */
export type KeyEvent =
  | { readonly type: 'choose'; readonly by: number }
  | { readonly type: 'moveCursor'; readonly cells: number }
  | { readonly type: 'cursorTo'; readonly place: 'port' | 'end' }
  | { readonly type: 'zoom'; readonly factor: number }
  | { readonly type: 'pan'; readonly screens: number }
  | { readonly type: 'wholeLine' }
  | { readonly type: 'view'; readonly view: ViewId }
  | { readonly type: 'nextView'; readonly by: 1 | -1 }
  | { readonly type: 'toggleUnits' }
  | { readonly type: 'nextColours' }
  | { readonly type: 'toggleCorrected' }
  | { readonly type: 'openPage'; readonly page: PageName }
  | { readonly type: 'scroll'; readonly lines: number }
  | { readonly type: 'openPicker'; readonly what: Choice }
  | { readonly type: 'pickMove'; readonly by: number }
  | { readonly type: 'pickType'; readonly text: string }
  | { readonly type: 'pickErase' }
  | { readonly type: 'pickTake' }
  | { readonly type: 'closePanel' }
  | { readonly type: 'readAgain' }
  | { readonly type: 'redraw' }
  | { readonly type: 'suspend' }
  | { readonly type: 'quit' };

/** What the world answers. */
export type WorldEvent =
  | { readonly type: 'started' }
  | { readonly type: 'resized'; readonly columns: number; readonly rows: number }
  | { readonly type: 'progress'; readonly id: number; readonly stage: string; readonly fraction: number }
  | { readonly type: 'looked'; readonly id: number; readonly trace: DistanceTrace }
  | { readonly type: 'solved'; readonly id: number; readonly outcome: Outcome<Analysis> }
  | { readonly type: 'sweepRead'; readonly id: number; readonly outcome: Outcome<Uint8Array> }
  | { readonly type: 'traced'; readonly id: number; readonly trace: DistanceTrace };

export type Event = KeyEvent | WorldEvent;
