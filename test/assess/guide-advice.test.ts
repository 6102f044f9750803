import { describe, expect, it } from 'vitest';
import { findingsOf, placesOf } from '../../src/assess/find-findings.ts';
import { guideAdviceFor } from '../../src/assess/guide-advice.ts';
import type { Section } from '../../src/line/line.ts';
import { makeEcho, makeEnd, makeLine, makeSolution } from './made-line.ts';

const PLACES = ['port', 'joint', 'cable', 'end'] as const;

describe('guideAdviceFor', () => {
  it.each(PLACES)(
    'has the transmitter off before anything is opened at the %s, and speaks of no coax part',
    (place) => {
      const { causes, checks, bring } = guideAdviceFor(place);
      for (const list of [causes, checks, bring]) expect(list.length).toBeGreaterThan(0);
      expect([...causes, ...checks, ...bring].join()).not.toMatch(
        /centre|pin depth|coupling nut|jacket|cable/u,
      );
      const opened = checks.findIndex((check) =>
        /\bwater at\b|gasket|last flange|in place of the antenna/u.test(check),
      );
      const off = checks.findIndex((check) => /transmitter locked off/u.test(check));
      if (opened >= 0) expect(off).toBeGreaterThanOrEqual(0);
      expect(off).toBeLessThanOrEqual(Math.max(0, opened));
    },
  );
});

describe('findingsOf', () => {
  const coax = makeLine();
  const guide: Section = {
    type: 'guide',
    guide: {
      id: 'made',
      name: 'made guide',
      aMm: 30,
      aToleranceMm: 0.1,
      bMm: 15,
      conductivitySPerM: 5.8e7,
      lossDbPer100m: null,
      bandMHz: null,
    },
    lengthM: 46,
    label: 'tube',
    jointAfter: coax.sections[0]!.jointAfter,
  };
  const line = { ...coax, sections: [coax.sections[0]!, guide, { ...guide, lengthM: 2 }] };
  const causesAt = (joint: number | null) => {
    const echo = makeEcho({ joint: joint === null ? null : { index: joint, name: 'x' }, section: 1 });
    const solution = makeSolution([echo, makeEnd()]);
    return findingsOf(line, solution, ['fault', 'sound'], placesOf(line, solution))[0]!.causes;
  };

  it('findingsOf gives the advice for a guide where both sides are guide, in it and at its flanges', () => {
    expect(causesAt(3)).toBe(guideAdviceFor('joint').causes);
    expect(causesAt(null)).toBe(guideAdviceFor('cable').causes);
    expect(causesAt(2)).not.toBe(guideAdviceFor('joint').causes);
    expect(causesAt(1)).not.toBe(guideAdviceFor('port').causes);
  });
});
