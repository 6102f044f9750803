/** The cables that can be named: the program's own table, and the user's over it. */
import type { Cable, CableEntry } from './cable.ts';
import { nearestWords } from './nearest-word.ts';

export type CableTable = {
  /** Every cable that can still be had, own table first, in the order of its files. */
  readonly entries: readonly CableEntry[];
  /** Finds a cable by id, alias or name; case, spaces and punctuation do not matter. */
  readonly find: (name: string) => CableEntry | undefined;
  /** Up to three ids that a name which is not in the table may have meant, closest first. */
  readonly nearest: (name: string) => readonly string[];
};

/**
 * Joins tables into one, in which each later table wins over the earlier ones: a user's entry whose id is
 * `rg-213`, or any other name of that cable, answers to all of its names, and the entry it replaces is gone.
 *
 * An entry of a later table that takes over a name only by an alias leaves the earlier cable in place under
 * its remaining names.
 */
export function createCableTable(...tables: readonly (readonly CableEntry[])[]): CableTable {
  const byId = new Map<string, CableEntry>();
  const idOfName = new Map<string, string>();
  for (const table of tables) {
    for (const entry of table) {
      const id = cableKey(entry.id);
      const replaced = idOfName.get(id);
      if (replaced !== undefined && replaced !== id) {
        byId.delete(replaced);
        for (const [name, owner] of idOfName) if (owner === replaced) idOfName.set(name, id);
      }
      byId.set(id, entry);
      for (const name of [entry.name, ...entry.aliases, entry.id]) idOfName.set(cableKey(name), id);
    }
  }
  const find = (name: string): CableEntry | undefined => byId.get(idOfName.get(cableKey(name)) ?? '');
  return {
    entries: [...byId.values()],
    find,
    nearest: (name) => {
      const keys = nearestWords(cableKey(name), [...idOfName.keys()], idOfName.size);
      const ids = keys.map((key) => find(key)?.id ?? '');
      return [...new Set(ids)].slice(0, 3);
    },
  };
}

/** What is left of a name for comparing: its letters and digits. `RG-213/U` and `rg213u` are the same. */
export function cableKey(name: string): string {
  return name.toLowerCase().replace(/[^\p{L}\p{N}]/gu, '');
}

/** What the physics needs of a table entry, without what only people ask of it. */
export function cableOf(entry: CableEntry): Cable {
  return {
    id: entry.id,
    name: entry.name,
    z0Ohm: entry.z0Ohm,
    z0ToleranceOhm: entry.z0ToleranceOhm,
    velocityFactor: entry.velocityFactor,
    velocityFactorTolerance: entry.velocityFactorTolerance,
    k1: entry.k1,
    k2: entry.k2,
    fittedBandMHz: entry.fittedBandMHz,
    highestFrequencyMHz: entry.highestFrequencyMHz,
  };
}
