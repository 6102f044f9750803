import { describe, expect, it } from 'vitest';
import type { Change } from '../../src/assess/comparison.ts';
import { changeDrawing } from '../../src/report/change-drawing.ts';

const x = Float64Array.of(0, 10, 20, 30);
const curve = (...levels: number[]) => ({ x, y: Float64Array.from(levels) });
const curves = {
  now: curve(-40, -60, -25, -5),
  before: curve(-40, -60, -60, -5),
  difference: curve(-71, -72, -25, -70),
};

function change(fields: Partial<Change> = {}): Change {
  return {
    distanceM: 20,
    distanceSigmaM: 0.1,
    levelDb: -25,
    kind: 'series-resistance',
    gone: false,
    joint: null,
    place: 'somewhere',
    ...fields,
  };
}

describe('changeDrawing', () => {
  it('changeDrawing lays the difference over the trace, and the baseline dotted under it', () => {
    const { chart } = changeDrawing(curves, [], { domainM: [0, 30], units: 'm' });
    expect(chart.series.map(({ role, dotted }) => [role, dotted ?? false])).toEqual([
      ['baseline', true],
      ['trace', false],
      ['difference', false],
    ]);
  });

  it('changeDrawing marks what has come and what has gone by different signs', () => {
    const { chart, key } = changeDrawing(curves, [change(), change({ distanceM: 10, gone: true })], {
      domainM: [0, 30],
      units: 'm',
    });
    expect(chart.marks.map(({ x: at, glyph }) => [at, glyph])).toEqual([
      [20, '+'],
      [10, '−'],
    ]);
    expect(key.map(({ text }) => text)).toEqual(['now', 'baseline', 'difference', 'new', 'gone']);
  });

  it('changeDrawing goes a little below the middle of the difference, at round levels', () => {
    // Middle of −72, −71, −70, −25 is −70.5; 6 dB of room, rounded down to −80.
    expect(changeDrawing(curves, [], { domainM: [0, 30], units: 'm' }).chart.y.domain).toEqual([-80, 0]);
  });

  it('changeDrawing writes feet where feet are wanted', () => {
    const { chart } = changeDrawing(curves, [], { domainM: [0, 30], units: 'ft' });
    expect(chart.x.unit).toBe('ft');
    expect(chart.x.perUnit).toBeCloseTo(1 / 0.3048, 12);
  });
});
