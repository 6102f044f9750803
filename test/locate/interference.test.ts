import { describe, expect, it } from 'vitest';
import { createFitContext, type FitContext } from '../../src/locate/fit-context.ts';
import { leaveOutInterference } from '../../src/locate/interference.ts';
import { complexZeros } from '../../src/numerics/complex.ts';
import { evenHz } from './drawn-line.ts';
import { withNoise } from './drawn-model.ts';

const POINTS = 800;
const GRID = evenHz(600e6, 2700e6, POINTS);

/** A context whose fit has left this over. */
function contextWith(residual: { re: Float64Array; im: Float64Array }): FitContext {
  const context = createFitContext(GRID, complexZeros(POINTS), new Float64Array(POINTS).fill(1));
  context.residual.re.set(residual.re);
  context.residual.im.set(residual.im);
  return context;
}

/** What a weak unexplained echo leaves: a slow rotation, and nulls where it beats with another. */
function ripple(size: number): { re: Float64Array; im: Float64Array } {
  const residual = withNoise(complexZeros(POINTS), -70, 2);
  for (let i = 0; i < POINTS; i++) {
    residual.re[i] = residual.re[i]! + size * (Math.cos(0.31 * i) + Math.cos(0.352 * i));
    residual.im[i] = residual.im[i]! + size * (Math.sin(0.31 * i) + Math.sin(0.352 * i));
  }
  return residual;
}

describe('leaveOutInterference', () => {
  it('names the points that a carrier has hit, and takes their weight', () => {
    const residual = withNoise(complexZeros(POINTS), -60, 1);
    const hit = [120, 121, 122, 500];
    for (const i of hit) residual.re[i] = residual.re[i]! + 0.08;
    const context = contextWith(residual);
    expect(leaveOutInterference(context)).toEqual(hit);
    expect(Array.from(context.weight.keys()).filter((i) => context.weight[i] === 0)).toEqual(hit);
  });

  it('finds none in noise', () => {
    for (let seed = 1; seed <= 20; seed++)
      expect(leaveOutInterference(contextWith(withNoise(complexZeros(POINTS), -60, seed)))).toEqual([]);
  });

  it('finds none in echoes that are not explained yet, at their nulls either', () => {
    expect(leaveOutInterference(contextWith(ripple(0.05)))).toEqual([]);
  });

  it('finds a carrier over such echoes', () => {
    const residual = ripple(0.005);
    residual.im[333] = residual.im[333]! + 0.3;
    expect(leaveOutInterference(contextWith(residual))).toEqual([333]);
  });

  it('finds carriers at both ends of the sweep', () => {
    const residual = withNoise(complexZeros(POINTS), -60, 4);
    residual.re[0] = 0.1;
    residual.re[POINTS - 1] = 0.1;
    expect(leaveOutInterference(contextWith(residual))).toEqual([0, POINTS - 1]);
  });

  it('does not name again what it left out before', () => {
    const residual = withNoise(complexZeros(POINTS), -60, 5);
    residual.re[77] = 0.2;
    const context = contextWith(residual);
    expect(leaveOutInterference(context)).toEqual([77]);
    expect(leaveOutInterference(context)).toEqual([]);
    expect(context.weight[77]).toBe(0);
  });

  it('takes hits all over the sweep for a model that does not fit, and leaves out none', () => {
    const residual = withNoise(complexZeros(POINTS), -60, 6);
    for (let i = 5; i < POINTS; i += 10) residual.re[i] = 0.2;
    const context = contextWith(residual);
    expect(leaveOutInterference(context)).toEqual([]);
    expect(context.weight.every((w) => w === 1)).toBe(true);
  });

  it('finds none where nothing is left over at all', () => {
    expect(leaveOutInterference(contextWith(complexZeros(POINTS)))).toEqual([]);
  });
});
