/** Loss of a cable against frequency and temperature, and where the table's figures stop holding. */
import type { Notice } from '../outcome.ts';
import type { Cable } from './cable.ts';
import { COPPER_TEMPERATURE_COEFFICIENT, TABLE_TEMPERATURE_C } from './constants.ts';

/** The two figures of a cable's loss. */
export type LossFigures = Pick<Cable, 'k1' | 'k2'>;

/**
 * Factor by which conductor loss at a temperature exceeds that at 20 °C: resistance grows with the metal's
 * temperature coefficient, skin-effect loss with the root of it.
 *
 * @param temperatureC Of the cable, above −236 °C.
 * @throws RangeError Where the linear law of resistance has reached zero.
 * @source NBS Handbook 100 (1966), copper; root from the surface resistance √(πfμ/σ).
 */
export function conductorTemperatureFactor(temperatureC: number): number {
  const resistance = 1 + COPPER_TEMPERATURE_COEFFICIENT * (temperatureC - TABLE_TEMPERATURE_C);
  if (!(resistance > 0 && resistance < Number.POSITIVE_INFINITY)) {
    throw new RangeError(`no conductor loss at ${temperatureC} °C`);
  }
  return Math.sqrt(resistance);
}

/**
 * Conductor part of the attenuation, dB per 100 m: k1·√f·√(1 + 0.0039(T − 20)).
 *
 * @param frequencyHz At least 0.
 * @param temperatureC Of the cable.
 */
export function conductorDbPer100m(cable: LossFigures, frequencyHz: number, temperatureC: number): number {
  return cable.k1 * Math.sqrt(frequencyHz / 1e6) * conductorTemperatureFactor(temperatureC);
}

/**
 * Dielectric part of the attenuation, dB per 100 m: k2·f; its small change with temperature is left out.
 *
 * @param frequencyHz At least 0.
 */
export function dielectricDbPer100m(cable: LossFigures, frequencyHz: number): number {
  return (cable.k2 * frequencyHz) / 1e6;
}

/**
 * Attenuation of a matched cable, one way, dB per 100 m.
 *
 * As good as the table behind k1 and k2: a few per cent within the fitted band for the same product, up to
 * 15 % between products of one type.
 *
 * @param frequencyHz At least 0.
 * @param temperatureC Of the cable; tables hold at 20 °C.
 * @source Reference Data for Engineers, 9th ed., "Transmission Lines" (A = k1·√f + k2·f).
 */
export function attenuationDbPer100m(cable: LossFigures, frequencyHz: number, temperatureC: number): number {
  return conductorDbPer100m(cable, frequencyHz, temperatureC) + dielectricDbPer100m(cable, frequencyHz);
}

/**
 * Says so when a sweep leaves the band over which the cable's loss was fitted.
 *
 * @param startHz Lowest frequency used.
 * @param stopHz Highest frequency used.
 * @returns Null within the band, and for a cable whose figures claim no band.
 */
export function outsideFittedBand(cable: Cable, startHz: number, stopHz: number): Notice | null {
  if (cable.fittedBandMHz === null) return null;
  const [lowMHz, highMHz] = cable.fittedBandMHz;
  const below = startHz < lowMHz * 1e6;
  const above = stopHz > highMHz * 1e6;
  if (!below && !above) return null;
  const where = below && above ? 'outside it' : below ? 'below it' : 'above it';
  return {
    code: 'cable-band',
    what: `the loss of ${cable.name} is known for ${lowMHz}–${highMHz} MHz; ${where} the figures are continued by formula`,
  };
}

/**
 * Says so when a sweep goes above the highest frequency of use of a cable.
 *
 * @param stopHz Highest frequency used.
 * @returns Null up to that frequency, and where it is not known.
 */
export function aboveHighestFrequency(cable: Cable, stopHz: number): Notice | null {
  const highest = cable.highestFrequencyMHz;
  if (highest === null || stopHz <= highest * 1e6) return null;
  return {
    code: 'cable-highest-frequency',
    what: `${cable.name} is meant for use up to ${highest} MHz; above that it need not behave as one clean line`,
  };
}
