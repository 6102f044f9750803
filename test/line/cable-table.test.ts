import { describe, expect, it } from 'vitest';
import type { CableEntry } from '../../src/line/cable.ts';
import { cableKey, cableOf, createCableTable, guideOf, isCable } from '../../src/line/cable-table.ts';
import { GUIDE_FIGURES } from '../../src/line/guide.ts';
import { readCables } from '../../src/line/read-cables.ts';
import { shippedTable } from './shipped-cables.ts';

function entry(id: string, name: string, aliases: readonly string[], velocityFactor: number): CableEntry {
  const cable = { id, name, aliases, z0Ohm: 50, velocityFactor, k1: 0.5, k2: 0.001 };
  const read = readCables(JSON.stringify({ cables: [cable] }), 'own.json');
  const only = read.ok ? read.value.find(isCable) : undefined;
  if (only === undefined) throw new Error(JSON.stringify(read));
  return only;
}

describe('createCableTable', () => {
  it('createCableTable finds a cable by id, alias or name, whatever the case and punctuation', () => {
    const table = shippedTable();
    for (const name of ['rg-213', 'RG-213/U', 'rg213', 'Rg 213', 'm17/74-rg213']) {
      expect(table.find(name)?.id).toBe('rg-213');
    }
    expect(table.find('RG-402')?.id).toBe('semi-rigid-141');
    expect(table.find('foam-1/2')?.id).toBe('foam-half');
    expect(table.find('7/8 in foam')?.id).toBe('foam-7-8');
    expect(table.find('RG-6')?.id).toBe('rg-6-foam');
  });

  it('createCableTable finds nothing under a name it does not have, odd ones included', () => {
    const table = shippedTable();
    for (const name of ['', '-', 'rg-999', '__proto__', 'constructor', 'rg-59']) {
      expect(table.find(name)).toBeUndefined();
    }
  });

  it('createCableTable names the nearest ids for a slip, and none for a word far from all', () => {
    const table = shippedTable();
    expect(table.nearest('rg-231')[0]).toBe('rg-213');
    expect(table.nearest('foam-7-8s')).toContain('foam-7-8');
    // The designation alone does not say which of the two constructions it is.
    expect(table.nearest('rg-59')).toEqual(expect.arrayContaining(['rg-59b', 'rg-59-foam']));
    expect(table.nearest('rg-11')).toEqual(expect.arrayContaining(['rg-11a', 'rg-11-foam']));
    expect(table.nearest('wet string of unknown make')).toEqual([]);
    expect(table.nearest('x'.repeat(100_000))).toEqual([]);
  });

  it("createCableTable lets a user's datasheet win under every name of the cable it replaces", () => {
    for (const id of ['RG213', 'rg-213/u']) {
      const own = entry(id, 'own reel', [], 0.672);
      const table = createCableTable(shippedTable().entries, [own]);
      for (const name of ['rg-213', 'RG-213/U', 'M17/74-RG213', 'own reel']) {
        expect(table.find(name)?.velocityFactor).toBe(0.672);
      }
      expect(table.entries.filter((one) => cableKey(one.id).startsWith('rg213'))).toEqual([own]);
      expect(table.entries).toHaveLength(shippedTable().entries.length);
    }
  });

  it('createCableTable gives an alias to the later table and leaves the earlier cable its other names', () => {
    const first = entry('long-run', 'long run', ['feeder'], 0.88);
    const second = entry('short-run', 'short run', ['feeder'], 0.81);
    const table = createCableTable([first], [second]);
    expect(table.find('feeder')).toBe(second);
    expect(table.find('long-run')).toBe(first);
    expect(table.entries).toEqual([first, second]);
  });
});

describe('createCableTable with guides', () => {
  const table = shippedTable();

  it('createCableTable finds guides by id, IEC code or name, and keeps them apart from cables', () => {
    for (const name of ['WR-137', 'wr137', 'R 70', 'r70', 'WR-137 waveguide'])
      expect(table.findGuide(name)?.id).toBe('WR-137');
    expect(table.find('WR-137')).toBeUndefined();
    expect(table.findGuide('rg-213')).toBeUndefined();
    expect(table.guides).toHaveLength(8);
    expect(table.entries.some((entry) => 'aMm' in entry)).toBe(false);
    expect(table.nearestGuide('WR-138')).toContain('WR-137');
    expect(table.nearest('WR-138')).not.toContain('WR-137');
  });

  it("createCableTable lets a user's own guide win, and gives every figure a source", () => {
    const text = '{ "guides": [{ "id": "R 70", "aMm": 34.85, "lossDbPer100m": 7.4 }] }';
    const read = readCables(text, 'own.json');
    const own = createCableTable(shippedTable().guides, read.ok ? read.value : []);
    expect(own.findGuide('WR-137')?.lossDbPer100m).toBe(7.4);
    expect(own.guides).toHaveLength(8);
    for (const guide of table.guides)
      for (const figure of GUIDE_FIGURES)
        expect([guide.id, figure, guide.sources[figure] !== undefined]).toEqual([
          guide.id,
          figure,
          guide[figure] !== null,
        ]);
  });

  it('guideOf keeps what the physics needs and nothing else', () => {
    const guide = table.findGuide('WR-137');
    expect(guide && guideOf(guide)).toEqual({
      id: 'WR-137',
      name: 'WR-137 waveguide',
      aMm: 34.8488,
      aToleranceMm: 0.102,
      bMm: 15.7988,
      conductivitySPerM: 5.813e7,
      lossDbPer100m: null,
      bandMHz: [5850, 8200],
    });
  });
});

describe('cableOf', () => {
  it('cableOf keeps what the physics needs and nothing else', () => {
    const foam = shippedTable().find('foam-7-8');
    expect(foam && cableOf(foam)).toEqual({
      id: 'foam-7-8',
      name: '7/8 in corrugated foam',
      z0Ohm: 50,
      z0ToleranceOhm: 1,
      velocityFactor: 0.89,
      velocityFactorTolerance: 0.0089,
      k1: 0.11457,
      k2: 0.000462,
      fittedBandMHz: [10, 2320],
      highestFrequencyMHz: 5000,
    });
  });
});
