import { describe, expect, it } from 'vitest';
import { CABLE_FIGURES } from './cable-figures.ts';
import { coaxMedium, fourierResolutionM, tableLossDb, unambiguousM } from './coax-medium.ts';

const GRID = Float64Array.of(100e6, 1000e6, 2400e6);

describe('tableLossDb', () => {
  it('gives the printed attenuation of the cables', () => {
    // @source references.md table 3.2, columns A(100), A(1000), A(2400), printed to 0.001 dB/100 m.
    expect(Array.from(GRID, (f) => tableLossDb(CABLE_FIGURES['foam-half'], 100, f))).toEqual([
      expect.closeTo(2.171, 2),
      expect.closeTo(7.349, 2),
      expect.closeTo(11.984, 2),
    ]);
    expect(tableLossDb(CABLE_FIGURES['rg-213'], 100, 1000e6)).toBeCloseTo(25.685, 2);
  });
});

describe('coaxMedium', () => {
  it('loses what the table says, with the internal inductance and the dielectric angle below half a percent', () => {
    for (const cable of Object.values(CABLE_FIGURES)) {
      const medium = coaxMedium(cable, 20, GRID);
      for (let k = 0; k < GRID.length; k++) {
        const lossDb = medium.gammaRe[k]! * 100 * (20 / Math.LN10);
        expect(Math.abs(lossDb / tableLossDb(cable, 100, GRID[k]!) - 1)).toBeLessThan(0.005);
      }
    }
  });

  it('loses more when warm: conductor part 0.8742 at −40 °C and 1.0757 at 60 °C', () => {
    // @source references.md section 2, conductor loss against temperature with 0.00393/K; the scenes use 0.0039.
    const copper = { z0Ohm: 50, velocityFactor: 0.88, k1: 0.2, k2: 0 };
    const loss = (temperatureC: number) => coaxMedium(copper, temperatureC, GRID).gammaRe[1]!;
    expect(loss(-40) / loss(20)).toBeCloseTo(0.8742, 2);
    expect(loss(60) / loss(20)).toBeCloseTo(1.0757, 2);
  });

  it('makes a thin solid-dielectric cable about 0.6 % slower at 100 MHz than at the top of its band', () => {
    // @source Design section 4. RG-174: references.md table 3.2.
    const thin = { z0Ohm: 50, velocityFactor: 0.66, k1: 2.43836, k2: 0.033442 };
    const medium = coaxMedium(thin, 20, Float64Array.of(100e6, 1000e6));
    const slowness = [medium.gammaIm[0]! / 100e6, medium.gammaIm[1]! / 1000e6];
    const slower = slowness[0]! / slowness[1]! - 1;
    expect(slower).toBeGreaterThan(0.004);
    expect(slower).toBeLessThan(0.01);
  });

  it('has z0 and velocity of the table at high frequency when nothing is lost', () => {
    const medium = coaxMedium({ z0Ohm: 50, velocityFactor: 0.66, k1: 0, k2: 0 }, 20, GRID);
    // 5.0617 ns/m would be at 0.659; at 0.66: 1/(0.66·c). @source references.md section 2.
    expect(medium.gammaIm[1]! / (2 * Math.PI * 1e9)).toBeCloseTo(1 / (0.66 * 299_792_458), 15);
    expect(medium.impedanceRe[1]).toBeCloseTo(50, 9);
    expect(medium.impedanceIm[1]).toBeCloseTo(0, 9);
  });
});

describe('fourierResolutionM and unambiguousM', () => {
  it('give the printed cell and range of 1 GHz in 1001 points at velocity factor 0.88', () => {
    // @source references.md section 6: 0.131909 m a bin, 131.909 m range.
    const cable = { z0Ohm: 50, velocityFactor: 0.88, k1: 0, k2: 0 };
    const frequencyHz = Float64Array.from({ length: 1001 }, (_, k) => 1e9 + k * 1e6);
    expect(fourierResolutionM(cable, frequencyHz)).toBeCloseTo(0.131909, 6);
    expect(unambiguousM(cable, frequencyHz)).toBeCloseTo(131.909, 3);
  });
});
