/** A picture with the words that belong to it: what the workspace and every rendering of a report draw alike. */
import type { ChartSpec } from '../plot/chart.ts';
import type { Role } from '../plot/run.ts';

/** How something looks in a chart, and what it is. */
export type KeyEntry = {
  readonly role: Role;
  readonly look: 'line' | 'dotted' | 'area' | 'mark';
  /** The sign of a mark; '' for the others. */
  readonly glyph: string;
  readonly text: string;
};

/** A chart with its title and what its lines and marks are, most wanted first. */
export type Drawing = {
  readonly title: string;
  readonly chart: ChartSpec;
  readonly key: readonly KeyEntry[];
};

/** A line of the key for a curve. */
export function lineKey(role: Role, text: string): KeyEntry {
  return { role, look: 'line', glyph: '', text };
}

/** A line of the key for a dotted curve. */
export function dottedKey(role: Role, text: string): KeyEntry {
  return { role, look: 'dotted', glyph: '', text };
}

/** A line of the key for a sign. */
export function markKey(role: Role, glyph: string, text: string): KeyEntry {
  return { role, look: 'mark', glyph, text };
}
