import { describe, expect, it } from 'vitest';
import { asDrawn, drawAsBuilt } from '../../src/app/as-built.ts';
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
