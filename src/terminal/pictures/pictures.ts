/** The picture of each view. */
import type { Analysis } from '../../app/analysis.ts';
import type { State } from '../state.ts';
import type { ViewId } from '../view-ids.ts';
import { ohmsPicture } from './ohms-picture.ts';
import type { Picture } from './picture.ts';
import { tracePicture } from './trace-picture.ts';

const PICTURES: Readonly<Record<ViewId, (state: State, analysis: Analysis) => Picture>> = {
  trace: tracePicture,
  ohms: ohmsPicture,
};

/** The picture of the view that is on. */
export function pictureOf(state: State, analysis: Analysis): Picture {
  return PICTURES[state.view](state, analysis);
}
