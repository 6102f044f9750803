/** The parts that cables and guides of a table file have in common. */
import * as v from 'valibot';
import { FIGURE_STATUSES, type FigureSource } from './cable.ts';
import { cableKey } from './cable-table.ts';
import { advice, closedObject, oneOf, visibleText } from './checked-json.ts';

export const source = visibleText();
export const status = oneOf(FIGURE_STATUSES);
export const figureSource = closedObject({ source, status });

/** `sources` of an entry: any of its figures, each with where it was read. */
export function sourcesOfFigures<const Figure extends string>(figures: readonly Figure[]) {
  return closedObject(
    Object.fromEntries(figures.map((figure) => [figure, v.optional(figureSource)])) as {
      [One in Figure]: v.OptionalSchema<typeof figureSource, undefined>;
    },
  );
}

/**
 * Source of each figure that an entry has: its own, the file where it stands without one, or what `filled` says of
 * those that the file leaves out.
 */
export function sourcesFound<Figure extends string>(
  figures: readonly Figure[],
  given: { readonly [One in Figure]?: unknown } & {
    readonly sources?: { readonly [One in Figure]?: FigureSource | undefined } | undefined;
  },
  values: { readonly [One in Figure]: unknown },
  file: string,
  filled: (figure: Figure) => FigureSource,
): Partial<Record<Figure, FigureSource>> {
  const found: Partial<Record<Figure, FigureSource>> = {};
  for (const figure of figures) {
    if (values[figure] === null) continue;
    found[figure] =
      given.sources?.[figure] ??
      (given[figure] === undefined ? filled(figure) : { source: file, status: 'as given' });
  }
  return found;
}

/** A name by which an entry is looked up: it needs a letter or digit to be compared by. */
export function namedText() {
  return v.pipe(
    visibleText(),
    v.check(
      (name) => cableKey(name) !== '',
      advice('empty-text', 'has no letter or digit', 'write a short name'),
    ),
  );
}

type Named = {
  readonly id: string;
  readonly name?: string | undefined;
  readonly aliases?: string[] | undefined;
};

/** Refuses a list in which two entries answer to one name; `what` is the word for an entry. */
export function distinctNames<const Entry extends Named>(what: 'cable' | 'guide') {
  return v.rawCheck<Entry[]>(({ dataset, addIssue }) => {
    if (!dataset.typed) return;
    const owners = new Map<string, number>();
    dataset.value.forEach((one, index) => {
      const keys = new Set([one.id, one.name ?? one.id, ...(one.aliases ?? [])].map(cableKey));
      for (const key of keys) {
        const owner = owners.get(key);
        owners.set(key, owner ?? index);
        if (owner === undefined) continue;
        addIssue({
          message: advice(
            `${what}-twice`,
            `answers to a name of ${what} ${owner + 1} too`,
            `give each ${what} its own id`,
          ),
          path: [{ type: 'array', origin: 'value', input: dataset.value, key: index, value: one }],
        });
        return;
      }
    });
  });
}
