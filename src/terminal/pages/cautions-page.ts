/** What people must be told before they connect anything. */
import { wrapText } from '../../plot/cells.ts';
import { run } from '../../plot/run.ts';
import type { Cautions } from '../config.ts';
import type { Page } from './page.ts';

/** The whole text, a blank line between its paragraphs. */
export function cautionsPage(cautions: Cautions, width: number): Page {
  return {
    title: 'cautions: before you connect or climb',
    lines: cautions.paragraphs.flatMap((paragraph, i) => [
      ...(i === 0 ? [] : [[]]),
      ...wrapText(paragraph, width).map((line) => [run(line)]),
    ]),
  };
}
