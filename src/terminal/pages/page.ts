/** What a page over the workspace consists of. */
import type { Run } from '../../plot/run.ts';

/** A title and lines of text, each at most as wide as was asked. */
export type Page = { readonly title: string; readonly lines: readonly (readonly Run[])[] };
