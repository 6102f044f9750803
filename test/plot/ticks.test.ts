import { describe, expect, it } from 'vitest';
import { axisTicks } from '../../src/plot/ticks.ts';

const texts = (...args: Parameters<typeof axisTicks>) => axisTicks(...args).map((t) => t.text);

describe('axisTicks', () => {
  it('axisTicks stands at round numbers', () => {
    expect(texts([0, 52], 5)).toEqual(['0', '10', '20', '30', '40', '50']);
    expect(texts([-80, 0], 4)).toEqual(['−80', '−60', '−40', '−20', '0']);
  });

  it('axisTicks writes all ticks of an axis with the same decimals', () => {
    expect(texts([47.9, 48.4], 5)).toEqual(['47.9', '48.0', '48.1', '48.2', '48.3', '48.4']);
    expect(texts([-0.1, 0.1], 2)).toEqual(['−0.1', '0.0', '0.1']);
  });

  it('axisTicks in feet stands at round feet, with values back in metres', () => {
    const ticks = axisTicks([0, 52], 4, 1 / 0.3048);
    expect(ticks.map((t) => t.text)).toEqual(['0', '50', '100', '150']);
    expect(ticks[2]?.value).toBeCloseTo(30.48, 10); // 100 ft, exact by the definition of the foot
  });

  it('axisTicks turns signs where the shown unit is the negative of the axis', () => {
    const ticks = axisTicks([-40, 0], 4, -1);
    expect(ticks.map((t) => t.text).sort()).toEqual(['0', '10', '20', '30', '40']);
    expect(ticks.find((t) => t.text === '10')?.value).toBe(-10);
    expect(texts([-2.5, 0], 5, -1)).toContain('0.5');
  });

  it('axisTicks with a count below one still gives at least one tick', () => {
    expect(axisTicks([0, 52], 0).length).toBeGreaterThanOrEqual(1);
  });
});
