/** Cables that the scenes are made of, under the ids that the line files name. */
import type { CableFigures } from './coax-medium.ts';

/**
 * z0, velocity factor, k1 and k2, copied by hand from the reference table, not read from the program's own.
 *
 * @source references.md tables 3.1 and 3.2.
 */
export const CABLE_FIGURES = {
  'foam-half': { z0Ohm: 50, velocityFactor: 0.88, k1: 0.21009, k2: 0.000705 },
  'foam-half-extraflex': { z0Ohm: 50, velocityFactor: 0.81, k1: 0.32694, k2: 0.001237 },
  'foam-7-8': { z0Ohm: 50, velocityFactor: 0.89, k1: 0.11457, k2: 0.000462 },
  'foam-1-1-4': { z0Ohm: 50, velocityFactor: 0.89, k1: 0.07459, k2: 0.000423 },
  'foam-1-5-8': { z0Ohm: 50, velocityFactor: 0.88, k1: 0.06253, k2: 0.000455 },
  'foam-1-4-extraflex': { z0Ohm: 50, velocityFactor: 0.84, k1: 0.5823, k2: 0.001549 },
  'braided-foam-10mm': { z0Ohm: 50, velocityFactor: 0.85, k1: 0.40694, k2: 0.000702 },
  'braided-foam-6mm': { z0Ohm: 50, velocityFactor: 0.84, k1: 0.78438, k2: 0.00138 },
  'rg-213': { z0Ohm: 50, velocityFactor: 0.66, k1: 0.59912, k2: 0.006739 },
  'rg-214': { z0Ohm: 50, velocityFactor: 0.659, k1: 0.64976, k2: 0.006641 },
} as const satisfies Record<string, CableFigures>;

export type CableId = keyof typeof CABLE_FIGURES;

/** Cables of a main run. */
export const MAIN_CABLES: readonly CableId[] = [
  'foam-7-8',
  'foam-7-8',
  'foam-half',
  'foam-half',
  'foam-1-1-4',
  'foam-1-5-8',
  'rg-213',
  'braided-foam-10mm',
];

/** Cables of a jumper. */
export const JUMPER_CABLES: readonly CableId[] = [
  'foam-half-extraflex',
  'foam-half-extraflex',
  'foam-1-4-extraflex',
  'braided-foam-10mm',
  'rg-214',
  'rg-213',
];
