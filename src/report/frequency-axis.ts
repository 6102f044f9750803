/** The frequency axis that match and loss share. */
import type { AxisSpec } from '../plot/chart.ts';
import type { Domain } from '../plot/scale.ts';

/** From here on an axis counts in GHz. */
const GIGAHERTZ_FROM_HZ = 10e9;

/** An axis over these frequencies, in MHz, or in GHz where the numbers would grow long. */
export function frequencyAxis(domainHz: Domain): AxisSpec {
  return domainHz[1] >= GIGAHERTZ_FROM_HZ
    ? { domain: domainHz, unit: 'GHz', perUnit: 1e-9 }
    : { domain: domainHz, unit: 'MHz', perUnit: 1e-6 };
}

/** First to last frequency of a sweep. */
export function sweptDomain(frequencyHz: Float64Array): Domain {
  return [frequencyHz[0] ?? 0, frequencyHz.at(-1) ?? 1];
}
