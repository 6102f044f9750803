/** Shapes as SVG text, coloured by the page's style sheet: each role is a class of its name. */
import { harmless } from './cells.ts';
import type { Place, Shape, Sheet } from './sheet.ts';

export type SvgOptions = {
  /** Begins the ids of title and description; unique on the page, of letters, digits and hyphens. */
  readonly id: string;
  /** What the picture is, in a few words. */
  readonly title: string;
  /** What it shows, for those who do not see it. */
  readonly description: string;
  /** Further class of the whole picture. */
  readonly className?: string;
};

/**
 * Writes a sheet as one `<svg>` element that scales to the room it is given.
 *
 * Text classes are `t-ROLE`, strokes `s-ROLE`, patches `p-ROLE`; there is no script, no style and no link in it. All
 * text is escaped. The same sheet gives the same bytes.
 */
export function svgText(sheet: Sheet, { id, title, description, className }: SvgOptions): string {
  const { width, height, shapes } = sheet;
  return [
    `<svg${className === undefined ? '' : ` class="${escapeXml(className)}"`} viewBox="0 0 ${number(width)} ${number(height)}"` +
      ` role="img" aria-labelledby="${id}-title ${id}-desc" xmlns="http://www.w3.org/2000/svg">`,
    `<title id="${id}-title">${escapeXml(title)}</title>`,
    `<desc id="${id}-desc">${escapeXml(description)}</desc>`,
    ...shapes.map(shapeText),
    '</svg>',
  ].join('\n');
}

/** Text safe between tags and in quoted attributes of XML and HTML; what no document may hold is left out. */
export function escapeXml(text: string): string {
  return harmless(text)
    .replace(NOT_IN_XML, '\ufffd')
    .replace(/[&<>"']/g, (sign) => ENTITIES[sign] ?? sign);
}

const ENTITIES: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

/** Halves of surrogate pairs and the two non-characters. @source XML 1.0, production 2 (Char). */
const NOT_IN_XML = /[\ufffe\uffff]|\p{Surrogate}/gu;

function shapeText(shape: Shape): string {
  switch (shape.shape) {
    case 'stroke': {
      const dash = shape.dash === undefined ? '' : ` stroke-dasharray="${shape.dash.map(number).join(' ')}"`;
      return `<path class="s-${shape.role}" stroke-width="${number(shape.width)}"${dash} d="${pathText(shape.places)}"/>`;
    }
    case 'patch':
      return `<path class="p-${shape.role}" d="${pathText(shape.places)}Z"/>`;
    case 'letters': {
      const anchor = shape.anchor === 'start' ? '' : ` text-anchor="${shape.anchor}"`;
      const strong = shape.strong ? ' font-weight="bold"' : '';
      return `<text class="t-${shape.role}" x="${number(shape.at[0])}" y="${number(shape.at[1])}" font-size="${number(shape.size)}"${anchor}${strong}>${escapeXml(shape.text)}</text>`;
    }
  }
}

function pathText(places: readonly Place[]): string {
  return places.map(([x, y], i) => `${i === 0 ? 'M' : 'L'}${number(x)} ${number(y)}`).join('');
}

/** Two decimals at most: a hundredth of a text line's sixteenth is not seen. */
function number(value: number): string {
  return String(Math.round(value * 100) / 100);
}
