/** Round numbers along an axis. */
import { tickStep, ticks } from 'd3-array';
import { MINUS } from './quantity-text.ts';
import type { Domain } from './scale.ts';

/** A place on the axis and what is written there, unit left out. */
export type Tick = { readonly value: number; readonly text: string };

/**
 * About `count` ticks at round numbers of the shown unit.
 *
 * @param domain In the axis' own unit (metres, dB, ohms).
 * @param count How many are wanted, at least 1; d3-array's rule decides between steps of 1, 2 and 5.
 * @param perUnit Shown units per unit of the axis, for example 1/0.3048 to show metres as feet.
 *   A negative one turns the signs: a level of −20 dB is written as 20.
 * @returns Rising; values in the axis' own unit, all with the same decimals.
 */
export function axisTicks(domain: Domain, count: number, perUnit = 1): readonly Tick[] {
  const start = domain[0] * perUnit;
  const stop = domain[1] * perUnit;
  const wanted = Math.max(1, Math.floor(count));
  const step = Math.abs(tickStep(start, stop, wanted));
  const decimals = Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
  return ticks(start, stop, wanted).map((shown) => ({
    // No "−0": it would compare as another value.
    value: shown / perUnit + 0,
    text: tickText(shown, decimals),
  }));
}

function tickText(value: number, decimals: number): string {
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? MINUS + text : text;
}
