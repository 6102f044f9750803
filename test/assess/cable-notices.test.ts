import { describe, expect, it } from 'vitest';
import { cableNotices } from '../../src/assess/cable-notices.ts';
import type { Cable } from '../../src/line/cable.ts';
import { MADE_CABLE } from '../app/made-analysis.ts';
import { makeLine } from './made-line.ts';

const codes = (fields: Partial<Cable>, stopHz: number) => {
  const line = makeLine();
  const cable = { ...MADE_CABLE, ...fields };
  const sections = line.sections.map((section) =>
    section.type === 'coax' ? { ...section, cable } : section,
  );
  return cableNotices({ ...line, sections }, stopHz).map(({ code }) => code);
};

describe('cableNotices', () => {
  it('cableNotices says once, for all sections, that a sweep goes above what a cable is for', () => {
    expect(codes({ highestFrequencyMHz: 1000, fittedBandMHz: [10, 1000] }, 7.9e9)).toEqual([
      'cable-highest-frequency',
    ]);
  });

  it('cableNotices says where a loss is known for much less than the sweep, and not where it is for nearly all', () => {
    const cable = { highestFrequencyMHz: 6000, fittedBandMHz: [30, 2500] } as const;
    expect(codes(cable, 3.4e9)).toEqual(['cable-band']);
    expect(codes(cable, 2.7e9)).toEqual([]);
    expect(codes({}, 20e9)).toEqual([]);
  });
});
