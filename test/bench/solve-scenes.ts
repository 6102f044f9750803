/** Scenes for timing the solver: three sections, two faults, any number of points. */
import { buildScene } from '../scenes/build-scene.ts';
import { type Draws, seededDraws } from '../scenes/draws.ts';
import { drawCableDistance, faultAtJoint, faultInCable, withFaults } from '../scenes/place-fault.ts';
import { drawHealthy, type Recipe, USUAL } from '../scenes/recipe.ts';
import { jointDistances } from '../scenes/run.ts';
import type { Scene } from '../scenes/scene.ts';
import { evenGrid, type PlanName } from '../scenes/sweep-plan.ts';

/** A jumper, a main run and a jumper of 25–45 m in all, a bad joint and a dent, swept with `points` even points. */
export function solveScene(plan: PlanName, points: number, index: number): Scene {
  const draws = seededDraws('solve time', plan, index);
  const recipe = drawTwoFaults(draws, plan);
  const swept = { ...recipe, plan: { name: plan, frequencyHz: evenGrid(plan, points), even: true } };
  return buildScene(swept, { suite: 'solve-time', seed: points, index }, seededDraws('measurement', index));
}

function drawTwoFaults(draws: Draws, plan: PlanName): Recipe {
  for (;;) {
    const recipe = drawHealthy(draws, {
      ...USUAL,
      plans: [plan],
      shapes: ['site'],
      ends: ['antenna', 'load'],
      unevenShare: 0,
    });
    const lengthM = jointDistances(recipe.run.sections).at(-1)!;
    const distanceM = drawCableDistance(recipe, draws);
    const joint = faultAtJoint(recipe, draws, { kind: 'series-resistance', value: 9 });
    if (lengthM > 25 && lengthM < 45 && distanceM !== null && joint !== null)
      return withFaults(recipe, [joint, faultInCable(recipe, 'shunt-capacitance', 26, distanceM)]);
  }
}
