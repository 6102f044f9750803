/** The pages that cover the workspace while they are read. */
import { assertNever } from '../../outcome.ts';
import { layoutOf } from '../layout.ts';
import type { PageName, State } from '../state.ts';
import { cautionsPage } from './cautions-page.ts';
import { findingPage } from './finding-page.ts';
import { helpPage } from './help-page.ts';
import { noticesPage } from './notices-page.ts';
import type { Page } from './page.ts';

/** Rows of a page that are not its text: title and footer. */
const AROUND_ROWS = 2;

/** Longest line of a page: longer ones are hard to read. */
const MEASURE = 100;
const MARGINS = 2;

/** A page's title and text at the terminal's width. */
export function pageOf(state: State, name: PageName): Page {
  const width = Math.min(MEASURE, layoutOf(state).columns - MARGINS);
  switch (name) {
    case 'help':
      return helpPage(width);
    case 'cautions':
      return cautionsPage(state.cautions, width);
    case 'notices':
      return noticesPage(state, width);
    case 'finding':
      return findingPage(state, width);
    default:
      return assertNever(name);
  }
}

/** Rows that a page's text has at once. */
export function pageRows(state: State): number {
  return layoutOf(state).height - AROUND_ROWS;
}

/** The farthest a page scrolls: its last line in the last row. */
export function mostScroll(state: State, name: PageName): number {
  return Math.max(0, pageOf(state, name).lines.length - pageRows(state));
}
