/** What stands within a section: lumps and the edges of stretches, in order of distance. */
import { type LineModel, type Lump, lumpDistanceM, type StretchModel } from './line-model.ts';

/** Where a stretch begins or ends. */
export type EdgeEvent = {
  readonly type: 'edge';
  readonly stretch: StretchModel;
  readonly edge: 'from' | 'to';
};

/** One thing on the way through a section. */
export type Event = { readonly type: 'lump'; readonly lump: Lump } | EdgeEvent;

/** What stands in a section, in order of distance. */
export function eventsIn(model: LineModel, section: number): Event[] {
  const events: { readonly atM: number; readonly event: Event }[] = [];
  for (const lump of model.lumps)
    if (lump.section === section)
      events.push({ atM: lumpDistanceM(model, lump), event: { type: 'lump', lump } });
  for (const stretch of model.stretches) {
    if (stretch.section !== section) continue;
    for (const edge of ['from', 'to'] as const)
      events.push({ atM: stretch[placeKey(stretch, edge)], event: { type: 'edge', stretch, edge } });
  }
  return events.sort((a, b) => a.atM - b.atM).map(({ event }) => event);
}

/** Which of a stretch's places its nearer or farther edge is: a step of the search may have crossed them. */
export function placeKey(stretch: StretchModel, edge: 'from' | 'to'): 'fromM' | 'toM' {
  const crossed = stretch.toM < stretch.fromM;
  return (edge === 'from') === crossed ? 'toM' : 'fromM';
}
