/** Value to dot and back: the one axis that the plot and the line drawn above it share. */
import { nice } from 'd3-array';

/** Start and stop of an axis; start < stop. */
export type Domain = readonly [number, number];

/** A linear axis on a row (or column) of dots. */
export type Scale = {
  readonly domain: Domain;
  readonly dots: number;
  /** Dot position as a real number: start of the domain is 0, its stop is `dots − 1`. */
  readonly toDot: (value: number) => number;
  readonly toValue: (dot: number) => number;
};

/** Dots of a braille character across and down. */
export const DOTS_ACROSS = 2;
export const DOTS_DOWN = 4;

/**
 * A linear scale over dots.
 *
 * @throws RangeError When the domain is not finite and rising, or there are fewer than 2 dots.
 */
export function linearScale(domain: Domain, dots: number): Scale {
  const [start, stop] = domain;
  if (!(Number.isFinite(start) && Number.isFinite(stop) && start < stop))
    throw new RangeError(`domain must rise, got ${start} to ${stop}`);
  if (!(dots >= 2)) throw new RangeError(`a scale needs at least 2 dots, got ${dots}`);
  const dotsPerUnit = (dots - 1) / (stop - start);
  return {
    domain,
    dots,
    toDot: (value) => (value - start) * dotsPerUnit,
    toValue: (dot) => start + dot / dotsPerUnit,
  };
}

/** The distance axis of a plot `width` cells wide, in dots. */
export function cellScale(domain: Domain, width: number): Scale {
  return linearScale(domain, width * DOTS_ACROSS);
}

/** Cell in which a value falls on a scale made by `cellScale`; may lie outside 0..width−1. */
export function cellOf(scale: Scale, value: number): number {
  return Math.floor(Math.round(scale.toDot(value)) / DOTS_ACROSS);
}

/**
 * A domain that holds all finite values with some room, at round numbers.
 *
 * @param values May hold NaN; when none is finite, the domain is `fallback`.
 * @param options.room Share of the span added at both sides (default 0.08).
 * @param options.smallestSpan The span is never less than this, so that a flat line does not fill the plot.
 */
export function paddedDomain(
  values: Iterable<number>,
  options: { readonly fallback: Domain; readonly room?: number; readonly smallestSpan?: number },
): Domain {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const value of values) {
    if (!Number.isFinite(value)) continue;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  if (low > high) return options.fallback;
  const span = Math.max(high - low, options.smallestSpan ?? 0) || Math.abs(high) || 1;
  const middle = (low + high) / 2;
  const half = span * (0.5 + (options.room ?? 0.08));
  const [start, stop] = nice(middle - half, middle + half, 5);
  return [start, stop];
}
