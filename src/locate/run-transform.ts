/**
 * Sums over a sweep's frequencies at every distance along a run, each frequency turned back by its own phase and, if
 * asked, weighed down or up by its own loss: the engine under the traces and the impedance profile.
 */
import type { MediumRun } from '../line/medium-run.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { planFastest } from './block-sum.ts';
import { type DistanceGrid, type LossHandling, piecesOf } from './path-factor.ts';
import { planPlainSum } from './plain-sum.ts';

export type RunTransformOptions = {
  readonly run: MediumRun;
  readonly grid: DistanceGrid;
  readonly loss: LossHandling;
  /** 'fast' chooses block by block what is cheapest at −120 dB of error; 'exact' is the plain sum everywhere. */
  readonly method: 'fast' | 'exact';
};

/** A planned transform; its buffers are reused, so one plan serves one caller at a time. */
export type RunTransform = {
  /**
   * output(d) = Σ_k input[k]·e^{2s·A(d) + 2j·B(d)}, with s = 0, −1, +1 for leave, weigh, undo.
   *
   * @param inputOfSection Input to use at distances inside a section, length n.
   * @param output Length = points of the grid.
   */
  transform(inputOfSection: (section: number) => ComplexArray, output: ComplexArray): void;
};

/**
 * Plans a transform along a run.
 *
 * Within a section the exponent is linear in distance, so each section's stretch of the grid is planned by itself. A
 * frequency grid that is far from even, or a stretch of few points, comes out cheapest as the plain sum even where
 * the fast way is asked for.
 *
 * @throws RangeError When the grid has no point or a step that is not above 0.
 */
export function createRunTransform(options: RunTransformOptions): RunTransform {
  const { run, grid, loss, method } = options;
  if (!(Number.isInteger(grid.points) && grid.points >= 1 && grid.stepM > 0 && Number.isFinite(grid.fromM)))
    throw new RangeError(`no distances: from ${grid.fromM}, step ${grid.stepM}, points ${grid.points}`);
  const pieces = piecesOf(run, grid);
  const planned = pieces.map((piece) => ({
    section: piece.section,
    apply: method === 'fast' ? planFastest(run, grid, loss, piece) : planPlainSum(run, grid, loss, piece),
  }));
  return {
    transform(inputOfSection, output) {
      for (const { section, apply } of planned) apply(inputOfSection(section), output);
    },
  };
}
