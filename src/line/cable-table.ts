/** The cables and guides that can be named: the program's own table, and the user's over it. */
import type { Cable, CableEntry } from './cable.ts';
import type { Guide, GuideEntry } from './guide.ts';
import { nearestWords } from './nearest-word.ts';

/** One entry of a table. */
export type TableEntry = CableEntry | GuideEntry;

export type CableTable = {
  /** Every cable that can still be had, own table first, in the order of its files. */
  readonly entries: readonly CableEntry[];
  /** Every guide likewise. */
  readonly guides: readonly GuideEntry[];
  /** Finds a cable by id, alias or name; case, spaces and punctuation do not matter. */
  readonly find: (name: string) => CableEntry | undefined;
  /** Finds a guide likewise. */
  readonly findGuide: (name: string) => GuideEntry | undefined;
  /** Up to three ids of cables that a name which is not in the table may have meant, closest first. */
  readonly nearest: (name: string) => readonly string[];
  /** The same for guides. */
  readonly nearestGuide: (name: string) => readonly string[];
};

/**
 * Joins tables into one, in which each later table wins over the earlier ones: a user's entry whose id is
 * `rg-213`, or any other name of that cable, answers to all of its names, and the entry it replaces is gone.
 * Cables and guides are kept apart: a name is looked for among the one or the other.
 *
 * An entry of a later table that takes over a name only by an alias leaves the earlier cable in place under
 * its remaining names.
 */
export function createCableTable(...tables: readonly (readonly TableEntry[])[]): CableTable {
  const cables = joinTables(tables.map((table) => table.filter((entry) => isCable(entry))));
  const guides = joinTables(tables.map((table) => table.filter((entry) => isGuide(entry))));
  return {
    entries: cables.entries,
    guides: guides.entries,
    find: cables.find,
    findGuide: guides.find,
    nearest: cables.nearest,
    nearestGuide: guides.nearest,
  };
}

/** True for a cable of the table. */
export function isCable(entry: TableEntry): entry is CableEntry {
  return 'z0Ohm' in entry;
}

/** True for a guide of the table. */
export function isGuide(entry: TableEntry): entry is GuideEntry {
  return 'aMm' in entry;
}

type Named = { readonly id: string; readonly name: string; readonly aliases: readonly string[] };

function joinTables<Entry extends Named>(tables: readonly (readonly Entry[])[]) {
  const byId = new Map<string, Entry>();
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
  const find = (name: string): Entry | undefined => byId.get(idOfName.get(cableKey(name)) ?? '');
  return {
    entries: [...byId.values()],
    find,
    nearest: (name: string): readonly string[] => {
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

/** What the physics needs of a guide of the table. */
export function guideOf(entry: GuideEntry): Guide {
  return {
    id: entry.id,
    name: entry.name,
    aMm: entry.aMm,
    aToleranceMm: entry.aToleranceMm,
    bMm: entry.bMm,
    conductivitySPerM: entry.conductivitySPerM,
    lossDbPer100m: entry.lossDbPer100m,
    bandMHz: entry.bandMHz,
  };
}
