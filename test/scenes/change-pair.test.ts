import { describe, expect, it } from 'vitest';
import { drawChangePair } from './change-pair.ts';

const pairs = Array.from({ length: 24 }, (_, index) => drawChangePair(31, index));

describe('drawChangePair', () => {
  it('gives the same pair, character for character, for the same seed and index', () => {
    expect(drawChangePair(31, 2)).toEqual(pairs[2]);
    expect(drawChangePair(32, 2).afterText).not.toEqual(pairs[2]!.afterText);
  });

  it('changes most lines, at −35 to −60 dB, a few of them at joints between sections', () => {
    const changes = pairs.flatMap(({ truth }) => truth.change ?? []);
    expect(changes.length).toBeGreaterThan(pairs.length / 3);
    expect(changes.length).toBeLessThan(pairs.length);
    for (const { levelDb } of changes) {
      expect(levelDb).toBeLessThan(-34.9);
      expect(levelDb).toBeGreaterThan(-60.1);
    }
  });

  it('lengthens a line that has become warmer, and makes it lossier', () => {
    for (const { truth } of pairs.filter((pair) => Math.abs(pair.truth.swingC) > 5)) {
      expect(Math.sign(truth.stretchPpm)).toBe(Math.sign(truth.swingC));
      expect(Math.abs(truth.stretchPpm)).toBeLessThan(700);
      if (truth.grid === 'same') expect(Math.sign(truth.lossChangeDb)).toBe(Math.sign(truth.swingC));
    }
  });

  it('sets the second sweep otherwise where it is asked to, and says how', () => {
    const others = Array.from({ length: 24 }, (_, index) => drawChangePair(31, index, 1).truth);
    for (const { grid, even } of others) expect(grid === 'same').toBe(!even);
    const grids = new Set(others.map(({ grid }) => grid));
    for (const grid of ['points', 'start', 'stop'] as const) expect(grids).toContain(grid);
  });
});
