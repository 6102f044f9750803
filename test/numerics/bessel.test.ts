import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { besselI0 } from '../../src/numerics/bessel.ts';

const reference: { besselI0: { x: number; value: number }[] } = JSON.parse(
  readFileSync(new URL('../reference/windows.json', import.meta.url), 'utf8'),
);

describe('besselI0', () => {
  it.each(reference.besselI0)('agrees with an independent program at x = $x', ({ x, value }) => {
    // Both claim about 1e-15; the exponential of the larger arguments costs two digits.
    expect(Math.abs(besselI0(x) / value - 1)).toBeLessThan(1e-13);
  });

  it('is even and joins its two series without a step', () => {
    expect(besselI0(-3)).toBe(besselI0(3));
    expect(besselI0(30 * (1 + 1e-15)) / besselI0(30)).toBeCloseTo(1, 12);
  });
});
