import { describe, expect, it } from 'vitest';
import { asDrawn, drawAsBuilt } from '../../src/app/as-built.ts';
import { PLAIN_JOINT } from '../../src/line/line.ts';
import { median } from '../../src/numerics/statistics.ts';
import { makeLine } from '../assess/made-line.ts';

const BAND = { startHz: 2e6, stopHz: 2.7e9 };
const line = makeLine();
const seeds = Array.from({ length: 40 }, (_, seed) => seed);
const built = seeds.map((seed) => drawAsBuilt(line, BAND, seed));

describe('drawAsBuilt', () => {
  it('draws the same line from the same seed and another from another', () => {
    expect(drawAsBuilt(line, BAND, 7)).toEqual(drawAsBuilt(line, BAND, 7));
    expect(drawAsBuilt(line, BAND, 8)).not.toEqual(drawAsBuilt(line, BAND, 7));
  });

  it('keeps the length of every section, in slabs of 5 to 30 cm', () => {
    for (const { sections } of built)
      sections.forEach(({ slabs }, i) => {
        const sumM = slabs.reduce((sum, slab) => sum + slab.lengthM, 0);
        expect(sumM).toBeCloseTo(line.sections[i]!.lengthM!, 9);
        for (const slab of slabs) {
          expect(slab.lengthM).toBeGreaterThanOrEqual(0.05);
          expect(slab.lengthM).toBeLessThan(0.3 + 1e-9);
        }
      });
  });

  it('gives connectors 30 to 40 dB of return loss at the top of the band, inductive ones and capacitive ones', () => {
    const nets = built.flatMap(({ joints }) => joints.map((joint) => joint.inductiveS - joint.capacitiveS));
    for (const net of nets) {
      // |Γ| = ω·|L/z0 − C·z0|/2
      const db = -20 * Math.log10(Math.PI * BAND.stopHz * Math.abs(net));
      expect(db).toBeGreaterThanOrEqual(30);
      expect(db).toBeLessThanOrEqual(40);
    }
    const inductive = nets.filter((net) => net > 0).length / nets.length;
    expect(inductive).toBeGreaterThan(0.3);
    expect(inductive).toBeLessThan(0.7);
  });

  it('takes the return loss that a joint is described to have', () => {
    const [first, ...others] = line.sections;
    const described = {
      ...line,
      sections: [{ ...first!, jointAfter: { name: null, returnLossDb: 26 } }, ...others],
    };
    for (const seed of seeds.slice(0, 5)) {
      const joint = drawAsBuilt(described, BAND, seed).joints[1]!;
      const net = Math.abs(joint.inductiveS - joint.capacitiveS);
      expect(-20 * Math.log10(Math.PI * BAND.stopHz * net)).toBeCloseTo(26, 6);
    }
  });

  it('lets samples differ from their type by little: no fault is drawn', () => {
    for (const { sections } of built)
      for (const { velocity, impedance, loss } of sections) {
        // Five standard deviations of 0.2 %, 0.6 % and 2 %.
        expect(Math.abs(velocity - 1)).toBeLessThan(0.01);
        expect(Math.abs(impedance - 1)).toBeLessThan(0.03);
        expect(Math.abs(loss - 1)).toBeLessThan(0.1);
      }
  });

  it('draws ripple of one size along the run: a short jumper is as even as the cable it was cut from', () => {
    const rmsOf = (section: number): number => {
      const logs = built.flatMap(({ sections }) =>
        sections[section]!.slabs.map((slab) => Math.log(slab.ratio)),
      );
      return Math.sqrt(logs.reduce((sum, r) => sum + r * r, 0) / logs.length);
    };
    expect(rmsOf(0) / rmsOf(1)).toBeGreaterThan(0.8);
    expect(rmsOf(0) / rmsOf(1)).toBeLessThan(1.25);
  });

  it('draws ripple that is mostly very small and now and then large', () => {
    const ratios = built.flatMap(({ sections }) =>
      sections[1]!.slabs.map((slab) => Math.abs(Math.log(slab.ratio))),
    );
    const rms = Math.sqrt(ratios.reduce((sum, r) => sum + r * r, 0) / ratios.length);
    // A double exponential has a median of ln 2/√2 = 0.49 of its RMS, a normal draw 0.67.
    expect(median(ratios) / rms).toBeLessThan(0.6);
    expect(Math.max(...ratios)).toBeLessThan(0.1);
  });
});

describe('drawAsBuilt of a guide', () => {
  const guide = {
    id: 'own',
    name: 'own guide',
    aMm: 34.8488,
    aToleranceMm: 0.1,
    bMm: null,
    conductivitySPerM: null,
    lossDbPer100m: 6,
    bandMHz: null,
  };
  const tubes = makeLine({
    sections: [1.5, 4, 4].map((lengthM) => ({
      type: 'guide' as const,
      guide,
      lengthM,
      label: 'tube',
      jointAfter: PLAIN_JOINT,
    })),
  });
  const guideBand = { startHz: 5.9e9, stopHz: 7.9e9 };
  const all = seeds.map((seed) => drawAsBuilt(tubes, guideBand, seed));

  it('gives flanges 36 to 46 dB of return loss at the top of the band', () => {
    for (const { joints } of all)
      for (const { inductiveS, capacitiveS } of joints) {
        const db = -20 * Math.log10(Math.PI * guideBand.stopHz * Math.abs(inductiveS - capacitiveS));
        expect(db).toBeGreaterThanOrEqual(36);
        expect(db).toBeLessThanOrEqual(46);
      }
  });

  it('draws tubes of one lot, which hold their width to a few tenths of a per cent, and short plates that add no length', () => {
    for (const { sections, endStrayS } of all) {
      // Five standard deviations of 0.05 % for the lot, of 0.003 % for a tube in it.
      const [first] = sections;
      for (const { velocity } of sections) {
        expect(Math.abs(velocity - 1)).toBeLessThan(0.0027);
        expect(Math.abs(velocity - first!.velocity)).toBeLessThan(0.0003);
      }
      expect(endStrayS).toBeLessThan(0.03e-12 + 1e-18);
    }
  });

  it('leaves the cables of a mixed run the ripple that they would have without the guide', () => {
    const [jumper] = line.sections;
    const mixed = drawAsBuilt({ ...line, sections: [jumper!, tubes.sections[1]!] }, guideBand, 5);
    const alone = drawAsBuilt({ ...line, sections: [jumper!] }, guideBand, 5);
    // The draws of the slabs are the same; the level of the ripple is drawn after them.
    const lengthsOf = (drawn: typeof alone): number[] => drawn.sections[0]!.slabs.map((slab) => slab.lengthM);
    expect(lengthsOf(mixed)).toEqual(lengthsOf(alone));
    const rms = (ratios: readonly number[]): number =>
      Math.sqrt(ratios.reduce((sum, r) => sum + Math.log(r) ** 2, 0) / ratios.length);
    const cableRms = rms(mixed.sections[0]!.slabs.map((slab) => slab.ratio));
    expect(cableRms).toBeGreaterThan(2 * rms(mixed.sections[1]!.slabs.map((slab) => slab.ratio)));
  });
});

describe('asDrawn', () => {
  it('is exactly the description', () => {
    const drawn = asDrawn(line);
    expect(drawn.sections.map((section) => section.slabs)).toEqual(
      line.sections.map((section) => [{ lengthM: section.lengthM, ratio: 1 }]),
    );
    expect(drawn.joints).toHaveLength(4);
    for (const joint of drawn.joints) expect(joint).toEqual({ inductiveS: 0, capacitiveS: 0 });
  });
});
