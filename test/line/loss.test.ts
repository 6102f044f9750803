import { describe, expect, it } from 'vitest';
import type { Cable } from '../../src/line/cable.ts';
import {
  aboveHighestFrequency,
  attenuationDbPer100m,
  conductorDbPer100m,
  conductorTemperatureFactor,
  dielectricDbPer100m,
  outsideFittedBand,
} from '../../src/line/loss.ts';

const CABLE: Cable = {
  id: 'trial',
  name: 'trial cable',
  z0Ohm: 50,
  z0ToleranceOhm: 2,
  velocityFactor: 0.66,
  velocityFactorTolerance: 0.0066,
  k1: 0.6,
  k2: 0.0067,
  fittedBandMHz: [10, 1000],
  highestFrequencyMHz: 1000,
};

describe('conductorTemperatureFactor', () => {
  it('conductorTemperatureFactor follows copper over the climates of a mast', () => {
    // references.md section 2: √(1 + 0.00393(T − 20)), coefficient from NBS Handbook 100 (1966). The program
    // uses 0.0039: at −40 °C that moves the factor by 0.1 %, hence the tolerance of 0.0015.
    const published: readonly (readonly [number, number])[] = [
      [-40, 0.8742],
      [-20, 0.918],
      [0, 0.9599],
      [40, 1.0386],
      [60, 1.0757],
    ];
    for (const [temperatureC, factor] of published) {
      expect(Math.abs(conductorTemperatureFactor(temperatureC) - factor)).toBeLessThan(0.0015);
    }
    expect(conductorTemperatureFactor(20)).toBe(1);
  });

  it('conductorTemperatureFactor refuses temperatures at which the law of resistance has ended', () => {
    expect(() => conductorTemperatureFactor(-240)).toThrow(RangeError);
    expect(() => conductorTemperatureFactor(Number.NaN)).toThrow(RangeError);
  });
});

describe('attenuationDbPer100m', () => {
  it('attenuationDbPer100m is k1·√f + k2·f at 20 °C', () => {
    // 0.6·√100 + 0.0067·100 = 6.67
    expect(attenuationDbPer100m(CABLE, 100e6, 20)).toBeCloseTo(6.67, 12);
    expect(attenuationDbPer100m(CABLE, 0, 20)).toBe(0);
  });

  it('attenuationDbPer100m warms the conductor part only', () => {
    const warm = attenuationDbPer100m(CABLE, 400e6, 60);
    expect(warm).toBeCloseTo(0.6 * 20 * Math.sqrt(1 + 0.0039 * 40) + 2.68, 12);
    expect(conductorDbPer100m(CABLE, 400e6, 60) + dielectricDbPer100m(CABLE, 400e6)).toBe(warm);
  });

  it('attenuationDbPer100m agrees with the whole-cable rule of 0.2 % per kelvin', () => {
    // references.md section 2: A(T) = A20·(1 + 0.002(T − 20)), IEC 61196-1, from memory. The rule rounds over
    // all cables: half a per cent over ±40 K for one whose loss is nearly all conductor.
    const foam = { k1: 0.2, k2: 0 };
    for (const temperatureC of [-20, 0, 40, 60]) {
      const ratio = attenuationDbPer100m(foam, 1e9, temperatureC) / attenuationDbPer100m(foam, 1e9, 20);
      expect(Math.abs(ratio - (1 + 0.002 * (temperatureC - 20)))).toBeLessThan(0.005);
    }
  });
});

describe('outsideFittedBand', () => {
  it('outsideFittedBand is silent within the band and for figures that claim none', () => {
    expect(outsideFittedBand(CABLE, 10e6, 1000e6)).toBeNull();
    expect(outsideFittedBand({ ...CABLE, fittedBandMHz: null }, 1, 1e12)).toBeNull();
  });

  it('outsideFittedBand names the cable, the band and the side', () => {
    expect(outsideFittedBand(CABLE, 2e6, 900e6)?.what).toContain(
      'trial cable is known for 10–1000 MHz; below',
    );
    expect(outsideFittedBand(CABLE, 20e6, 2700e6)?.what).toContain('above it');
    expect(outsideFittedBand(CABLE, 2e6, 2700e6)).toMatchObject({ code: 'cable-band' });
    expect(outsideFittedBand(CABLE, 2e6, 2700e6)?.what).toContain('outside it');
  });
});

describe('aboveHighestFrequency', () => {
  it('aboveHighestFrequency speaks only above a known highest frequency', () => {
    expect(aboveHighestFrequency(CABLE, 1000e6)).toBeNull();
    expect(aboveHighestFrequency({ ...CABLE, highestFrequencyMHz: null }, 1e12)).toBeNull();
    expect(aboveHighestFrequency(CABLE, 1001e6)?.what).toContain('1000 MHz');
  });
});
