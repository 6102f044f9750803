import { describe, expect, it } from 'vitest';
import { adviceFor } from '../../src/assess/advice.ts';
import type { FindingKind, PlaceKind } from '../../src/assess/advice-kinds.ts';
import { ADVICE_TABLE } from '../../src/assess/advice-table.ts';

const PLACES: readonly PlaceKind[] = ['port', 'joint', 'cable', 'end'];
const kinds = Object.keys(ADVICE_TABLE) as FindingKind[];
const rows = kinds.flatMap((kind) => PLACES.map((place) => [kind, place] as const));

/** Words said of what takes hands on a connector of the line. */
const HANDS_ON =
  /\binside\b|centre pin|pin depth|coupling nut|known load in place|both halves|what is connected/u;

describe('adviceFor', () => {
  it('speaks of every kind that an echo or a stretch can have', () => {
    expect(kinds.sort()).toEqual(
      [
        'open',
        'short',
        'termination',
        'series-resistance',
        'shunt-leakage',
        'series-inductance',
        'shunt-capacitance',
        'impedance-step',
        'joint',
        'unresolved',
        'wet',
        'wrong-cable',
      ].sort(),
    );
  });

  it.each(rows)('has causes, checks and something to bring for %s at the %s', (kind, place) => {
    const { causes, checks, bring } = adviceFor(kind, place);
    for (const list of [causes, checks, bring]) {
      expect(list.length).toBeGreaterThan(0);
      expect(new Set(list).size).toBe(list.length);
      for (const words of list) expect(words).toMatch(/^\S.*\S$/u);
    }
  });

  it.each(rows)('has the transmitter off before hands are on a connector: %s at the %s', (kind, place) => {
    const { checks } = adviceFor(kind, place);
    const opened = checks.findIndex((check) => HANDS_ON.test(check));
    if (opened < 0) return;
    const off = checks.findIndex((check) => /transmitter locked off and DC feed removed/u.test(check));
    expect(off).toBeGreaterThanOrEqual(0);
    expect(off).toBeLessThan(opened);
  });

  it.each(rows)('lets no insulation tester near connected equipment: %s at the %s', (kind, place) => {
    const { checks, bring } = adviceFor(kind, place);
    for (const check of checks.filter((words) => /insulation resistance/u.test(words))) {
      expect(check).toContain('only with both ends free');
      for (const equipment of ['radio', 'amplifier', 'arrestor', 'antenna', 'instrument'])
        expect(check).toContain(equipment);
      expect(check).toContain('discharged');
    }
    if (bring.includes('insulation tester')) expect(checks.join()).toContain('insulation resistance');
    if (checks.some((words) => /^resistance from centre/u.test(words)))
      expect(checks.join()).toMatch(/both ends free and no DC feed/u);
  });

  it('suspects the test set-up first at the port', () => {
    expect(adviceFor('series-resistance', 'port').causes[0]).toContain('test adaptor');
    expect(adviceFor('open', 'port').causes[0]).toContain('not connected');
    expect(adviceFor('short', 'port').causes[0]).toContain('short standard');
  });

  it('warns of a cut end that may be live, and of what may fall', () => {
    const [first, second] = adviceFor('open', 'cable').checks;
    expect(first).toContain('may be live');
    expect(second).toContain('before anyone stands or climbs below it');
  });
});
