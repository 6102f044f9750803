import { describe, expect, it } from 'vitest';
import type { Line } from '../../src/line/line.ts';
import { readLine } from '../../src/line/read-line.ts';
import { usableBand } from '../../src/line/usable-band.ts';
import { shippedTable } from './shipped-cables.ts';

const CABLES = shippedTable();

function line(...sections: readonly string[]): Line {
  const read = readLine(`{ "sections": [${sections.join(', ')}] }`, 'a.line.json', CABLES);
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  return read.value;
}

/** Points at these MHz. */
const sweep = (...mhz: readonly number[]): Float64Array => Float64Array.from(mhz, (f) => f * 1e6);
const evenly = (fromMHz: number, toMHz: number, points: number): Float64Array =>
  Float64Array.from({ length: points }, (_, i) => (fromMHz + ((toMHz - fromMHz) * i) / (points - 1)) * 1e6);

const COAX = '{ "cable": "rg-213", "lengthM": 3 }';
const GUIDE = '{ "guide": "WR-137", "lengthM": 3 }';
const NARROW_GUIDE = '{ "guide": "WR-112", "lengthM": 3 }';
const FILTER =
  '{ "device": "filter", "lengthM": 0.2, "lossDb": 0.4, "returnLossDb": 20, "passbandMHz": [1710, 2170] }';
const ARRESTOR =
  '{ "device": "arrestor", "lengthM": 0.1, "lossDb": 0.1, "returnLossDb": 26, "passbandMHz": [690, 2000] }';

describe('usableBand', () => {
  it('uses every point of a line of cable, without a word', () => {
    expect(usableBand(line(COAX), evenly(0, 2700, 10))).toEqual({
      carried: { from: 0, to: 10 },
      through: { from: 0, to: 10 },
      notices: [],
    });
  });

  it('drops what lies at or below the cut-off of a guide, and says how much', () => {
    // c/2a of WR-137: 4301.3 MHz. @source references.md section 4.
    const found = usableBand(line(COAX, GUIDE), sweep(4000, 4301, 4302, 5000, 6000));
    expect(found.carried).toEqual({ from: 2, to: 5 });
    expect(found.through).toEqual(found.carried);
    expect(found.notices).toEqual([
      {
        code: 'below-cutoff',
        what:
          '2 of 5 points lie at or below the cut-off of WR-137 waveguide, 4301.3 MHz, where nothing travels: ' +
          'they are left out',
      },
    ]);
  });

  it('drops the point that is the cut-off itself', () => {
    const own = line('{ "guide": { "id": "own", "aMm": 29.9792458, "lossDbPer100m": 5 }, "lengthM": 3 }');
    // c/2a is 5 GHz to the last digit that a length in mm can give.
    const found = usableBand(own, sweep(5000, 5000.1));
    expect(found.carried.from).toBe(1);
    expect(found.notices[0]?.what).toMatch(/^1 of 2 points lies .*: it is left out$/u);
  });

  it('goes by the narrowest guide of a line', () => {
    // WR-112: 5259.7 MHz.
    const found = usableBand(line(GUIDE, NARROW_GUIDE, GUIDE), sweep(4500, 5200, 5300));
    expect(found.carried).toEqual({ from: 2, to: 3 });
    expect(found.notices[0]?.what).toContain('WR-112');
  });

  it('says which part of the band sees through a device', () => {
    const found = usableBand(line(COAX, FILTER, COAX), evenly(1500, 2500, 101));
    // 1710 to 2170 MHz in steps of 10 MHz, both edges passed.
    expect(found).toEqual({
      carried: { from: 0, to: 101 },
      through: { from: 21, to: 68 },
      notices: [
        {
          code: 'outside-passband',
          what:
            '54 of 101 points lie outside what can be seen through filter (passes 1710–2170 MHz): ' +
            'what lies behind is judged by the 47 points at 1710–2170 MHz',
        },
      ],
    });
  });

  it('takes what two devices both pass, and names only those that take something away', () => {
    const found = usableBand(line(COAX, ARRESTOR, FILTER, COAX), evenly(1700, 2200, 51));
    expect(found.through).toEqual({ from: 1, to: 31 });
    expect(found.notices[0]?.what).toMatch(
      /arrestor \(passes 690–2000 MHz\) and filter \(passes 1710–2170 MHz\)/u,
    );
    const within = usableBand(line(COAX, ARRESTOR, FILTER, COAX), evenly(1650, 1990, 35));
    expect(within.notices[0]?.what).toContain('through filter');
    expect(within.notices[0]?.what).not.toContain('arrestor');
  });

  it('is silent about a device that passes the whole sweep', () => {
    expect(usableBand(line(COAX, FILTER), evenly(1710, 2170, 47)).notices).toEqual([]);
  });

  it('gives nothing and says so where the sweep lies wholly outside', () => {
    const outside = usableBand(line(COAX, FILTER), evenly(800, 960, 17));
    expect(outside.through.to - outside.through.from).toBe(0);
    expect(outside.notices[0]?.what).toMatch(/none of the sweep is left/u);
    const below = usableBand(line(GUIDE), evenly(1000, 4000, 17));
    expect(below.carried).toEqual({ from: 17, to: 17 });
    expect(below.through).toEqual({ from: 17, to: 17 });
    expect(below.notices).toHaveLength(1);
  });

  it('counts what a guide drops and what a device hides apart', () => {
    const wide = FILTER.replace('[1710, 2170]', '[6000, 7000]');
    const found = usableBand(line(GUIDE, wide), evenly(4000, 8000, 41));
    expect(found.carried).toEqual({ from: 4, to: 41 });
    expect(found.through).toEqual({ from: 20, to: 31 });
    expect(found.notices.map(({ code }) => code)).toEqual(['below-cutoff', 'outside-passband']);
    expect(found.notices[1]?.what).toMatch(/^26 of 41 points/u);
  });
});
