import { describe, expect, it } from 'vitest';
import { CABLE_FIGURES } from '../../src/line/cable.ts';
import { cableKey } from '../../src/line/cable-table.ts';
import { fitAttenuation, worstResidual } from '../../src/line/fit-attenuation.ts';
import { attenuationDbPer100m } from '../../src/line/loss.ts';
import { shippedEntries, shippedFiles, shippedTable } from './shipped-cables.ts';

const TABLE = shippedTable();

/** id, k1, k2, attenuation at 100 and 1000 MHz in dB/100 m. @source references.md, table 3.2 (computed there with another program's least squares). */
const FITTED: readonly (readonly [id: string, k1: number, k2: number, at100: number, at1000: number])[] = [
  ['rg-58', 1.09509, 0.013446, 12.295, 48.076],
  ['rg-58c', 1.3364, 0.028075, 16.172, 70.336],
  ['rg-213', 0.59912, 0.006739, 6.665, 25.685],
  ['rg-214', 0.64976, 0.006641, 7.162, 27.188],
  ['rg-223', 1.23967, 0.00918, 13.315, 48.382],
  ['rg-59b', 1.0655, 0.005134, 11.168, 38.828],
  ['rg-59-foam', 0.84736, 0.0, 8.474, 26.796],
  ['rg-6-foam', 0.68359, 0.0, 6.836, 21.617],
  ['rg-11a', 0.62047, 0.003673, 6.572, 23.294],
  ['rg-11-foam', 0.41249, 0.00088, 4.213, 13.924],
  ['rg-174', 2.43836, 0.033442, 27.728, 110.55],
  ['rg-316', 2.56009, 0.004565, 26.057, 85.522],
  ['rg-400', 1.35585, 0.00526, 14.085, 48.136],
  ['rg-142b', 1.15843, 0.005329, 12.117, 41.962],
  ['rg-217', 0.40647, 0.004297, 4.494, 17.151],
  ['rg-218', 0.22232, 0.004071, 2.63, 11.101],
  ['semi-rigid-086', 1.86866, 0.001963, 18.883, 61.055],
  ['semi-rigid-141', 1.06541, 0.002129, 10.867, 35.82],
  ['semi-rigid-250', 0.62923, 0.002284, 6.521, 22.182],
  ['foam-1-4', 0.40575, 0.001309, 4.188, 14.14],
  ['foam-1-4-extraflex', 0.5823, 0.001549, 5.978, 19.963],
  ['foam-3-8', 0.32738, 0.001022, 3.376, 11.375],
  ['foam-half', 0.21009, 0.000705, 2.171, 7.349],
  ['foam-half-extraflex', 0.32694, 0.001237, 3.393, 11.576],
  ['foam-7-8', 0.11457, 0.000462, 1.192, 4.085],
  ['foam-1-1-4', 0.07459, 0.000423, 0.788, 2.782],
  ['foam-1-5-8', 0.06253, 0.000455, 0.671, 2.432],
  ['braided-foam-5mm', 1.06223, 0.000832, 10.705, 34.423],
  ['braided-foam-6mm', 0.78438, 0.00138, 7.982, 26.184],
  ['braided-foam-10mm', 0.40694, 0.000702, 4.14, 13.571],
  ['braided-foam-15mm', 0.25278, 0.000714, 2.599, 8.708],
];

/**
 * id, MHz, dB/100 m, source key of cables/SOURCES.md. @source references.md, table 3.3; the three rows of rg-213
 * that are among its fitted points (keys a and c) are left out, they would only meet themselves.
 */
const INDEPENDENT: readonly (readonly [id: string, frequencyMHz: number, dbPer100m: number, key: string])[] =
  [
    ['rg-58c', 30, 8.1, 'a'],
    ['rg-58c', 150, 18.47, 'a'],
    ['rg-58c', 50, 10.8, 'b'],
    ['rg-58c', 150, 20, 'b'],
    ['rg-58c', 850, 58.2, 'b'],
    ['rg-213', 50, 4.9, 'b'],
    ['rg-213', 150, 8.9, 'b'],
    ['rg-213', 450, 16.3, 'b'],
    ['rg-213', 850, 24.7, 'b'],
    ['rg-59b', 30, 5.87, 'a'],
    ['rg-59b', 150, 13.48, 'a'],
    ['rg-174', 30, 14.96, 'a'],
    ['rg-174', 150, 33.79, 'a'],
    ['rg-6-foam', 55.25, 4.92, 'd'],
    ['rg-6-foam', 211.25, 9.84, 'd'],
    ['rg-6-foam', 471.25, 14.76, 'd'],
    ['rg-6-foam', 693.25, 18.37, 'd'],
    ['rg-6-foam', 950, 21, 'd'],
    ['rg-6-foam', 2150, 31.82, 'd'],
    ['foam-half', 50, 1.6, 'b'],
    ['foam-half', 150, 2.8, 'b'],
    ['foam-half', 450, 5.2, 'b'],
    ['foam-half', 850, 6.8, 'b'],
    ['foam-7-8', 50, 0.8, 'b'],
    ['foam-7-8', 150, 1.4, 'b'],
    ['foam-7-8', 450, 2.6, 'b'],
    ['foam-7-8', 850, 3.7, 'b'],
    ['foam-7-8', 100, 1.15, 'e'],
    ['foam-7-8', 435, 2.5, 'e'],
    ['foam-7-8', 2320, 6.45, 'e'],
    ['foam-1-5-8', 50, 0.6, 'b'],
    ['foam-1-5-8', 150, 0.92, 'b'],
    ['foam-1-5-8', 450, 1.7, 'b'],
    ['foam-1-5-8', 850, 2.3, 'b'],
    ['braided-foam-6mm', 10, 2.62, 'f'],
    ['braided-foam-10mm', 10, 1.31, 'f'],
    ['rg-316', 3000, 170, 'h'],
  ];

/**
 * Published points that the table is known to miss by more than 15 %, with what the fit gives relative to them.
 * foam-1-5-8 at 50 MHz: the guide's 0.60 dB/100 m stands against 0.47 in the compilation that the fit rests on, and
 * against the guide's own 7/8 in cable (0.80, scaled by the k1 of the two sizes: 0.44). The guide's figure is
 * doubted, not the fit.
 */
const OUTLIERS: ReadonlyMap<string, number> = new Map([['foam-1-5-8 50', -0.23]]);

function found(id: string) {
  const entry = TABLE.find(id);
  if (!entry) throw new Error(`no cable ${id}`);
  return entry;
}

describe('the cable table', () => {
  it('the cable table holds every type of references.md section 3, and RG-8A beside RG-213', () => {
    expect(TABLE.entries.map((entry) => entry.id).sort()).toEqual(
      [...FITTED.map(([id]) => id), 'rg-8a'].sort(),
    );
    const { k1, k2, attenuation } = found('rg-213');
    expect(found('rg-8a')).toMatchObject({ z0Ohm: 52, k1, k2, attenuation });
  });

  it('the cable table reads without a doubt', () => {
    expect(shippedEntries().notices).toEqual([]);
  });

  it('the cable table has no name that means two cables', () => {
    const owners = new Map<string, string>();
    for (const entry of TABLE.entries) {
      for (const name of new Set([entry.id, entry.name, ...entry.aliases].map(cableKey))) {
        expect([name, owners.get(name)]).toEqual([name, undefined]);
        owners.set(name, entry.id);
      }
    }
  });

  it('the cable table gives a source and a status for every figure', () => {
    for (const entry of TABLE.entries) {
      for (const figure of CABLE_FIGURES) {
        const source = entry.sources[figure];
        expect([entry.id, figure, source !== undefined]).toEqual([entry.id, figure, entry[figure] !== null]);
        expect(source?.status).not.toBe('as given');
      }
      for (const point of entry.attenuation) expect(['confirmed', 'from memory']).toContain(point.status);
    }
  });

  it('the cable table keeps to what cables are', () => {
    for (const entry of TABLE.entries) {
      expect([50, 52, 52.5, 75]).toContain(entry.z0Ohm);
      expect(entry.velocityFactor).toBeGreaterThan(0.65);
      expect(entry.velocityFactor).toBeLessThan(0.9);
      // Common practice: 1 % for a well described cable, more where the published range is wider.
      expect(entry.velocityFactorTolerance / entry.velocityFactor).toBeGreaterThan(0.0099);
      expect(entry.velocityFactorTolerance / entry.velocityFactor).toBeLessThan(0.02);
      expect(entry.bendRadiusOnceMm ?? 0).toBeGreaterThan((entry.outerDiameterMm ?? 0) / 2);
      expect(entry.bendRadiusRepeatedMm ?? Number.POSITIVE_INFINITY).toBeGreaterThan(
        entry.bendRadiusOnceMm ?? 0,
      );
      expect(entry.highestFrequencyMHz ?? 0).toBeGreaterThanOrEqual(entry.fittedBandMHz?.[1] ?? 0);
    }
  });

  it('the cable table stores k1 and k2 as a refit of its own points gives them', () => {
    for (const entry of TABLE.entries) {
      const [low, high] = entry.fittedBandMHz ?? [0, 0];
      const points = entry.attenuation.filter((one) => one.frequencyMHz >= low && one.frequencyMHz <= high);
      const fit = fitAttenuation(points);
      // Stored with five and six decimals: half of the last, or 0.1 %.
      expect(Math.abs(fit.k1 - entry.k1)).toBeLessThan(Math.max(0.51e-5, 0.001 * entry.k1));
      expect(Math.abs(fit.k2 - entry.k2)).toBeLessThan(Math.max(0.51e-6, 0.001 * entry.k2));
      expect(fit.bandMHz).toEqual([low, high]);
    }
  });

  it('the cable table stores the residual that k1 and k2 leave', () => {
    for (const { text } of shippedFiles()) {
      const stored: { cables?: { id: string; worstResidual: number }[] } = JSON.parse(text);
      for (const { id, worstResidual: residual } of stored.cables ?? []) {
        const { attenuation, fittedBandMHz, k1, k2 } = found(id);
        const [low, high] = fittedBandMHz ?? [0, 0];
        const points = attenuation.filter((one) => one.frequencyMHz >= low && one.frequencyMHz <= high);
        // Stored with four decimals.
        expect(Math.abs(worstResidual(points, k1, k2) - residual)).toBeLessThan(0.51e-4);
      }
    }
  });

  it('the cable table meets its points within 5 %, save one of maximum figures on copper-clad steel', () => {
    // references.md section 3 asks 5 %; series 59 at 55 MHz misses by 6.6 % there too (section 10: maxima, and
    // copper-clad steel breaks the form at low frequency).
    for (const entry of TABLE.entries) {
      expect(Math.abs(entry.worstResidual ?? 1)).toBeLessThan(entry.id === 'rg-59-foam' ? 0.067 : 0.05);
    }
  });

  it('the cable table has the fit and the attenuations of references.md table 3.2', () => {
    for (const [id, k1, k2, at100, at1000] of FITTED) {
      const entry = found(id);
      expect([id, entry.k1, entry.k2]).toEqual([id, k1, k2]);
      // Printed with three decimals.
      expect(Math.abs(attenuationDbPer100m(entry, 100e6, 20) / at100 - 1)).toBeLessThan(0.001);
      expect(Math.abs(attenuationDbPer100m(entry, 1000e6, 20) / at1000 - 1)).toBeLessThan(0.001);
    }
  });

  it('the cable table agrees with independent published points within 15 %, and says where not', () => {
    // Different published tables of one designation differ by up to 15 % (references.md section 3).
    for (const [id, frequencyMHz, dbPer100m, key] of INDEPENDENT) {
      const error = attenuationDbPer100m(found(id), frequencyMHz * 1e6, 20) / dbPer100m - 1;
      const known = OUTLIERS.get(`${id} ${frequencyMHz}`);
      if (known === undefined)
        expect([id, frequencyMHz, key, Math.abs(error) < 0.15]).toEqual([id, frequencyMHz, key, true]);
      else expect(error).toBeCloseTo(known, 1);
    }
  });

  it('the cable table lies at most a quarter above conductor-only loss for the semi-rigid sizes', () => {
    // references.md section 2: conductor loss from dimensions at 1 GHz, dB/100 m, MIL-DTL-17/133, /130, /129.
    for (const [id, conductorDb] of [
      ['semi-rigid-086', 58.41],
      ['semi-rigid-141', 32.82],
      ['semi-rigid-250', 18.45],
    ] as const) {
      const ratio = attenuationDbPer100m(found(id), 1e9, 20) / conductorDb;
      expect(ratio).toBeGreaterThan(1);
      expect(ratio).toBeLessThan(1.25);
    }
  });
});
