/** Child process of the accuracy bench: draws scenes, has them answered, sends the scores back. */
import { loadCableTable } from '../../src/app/cable-files.ts';
import type { RippleMeasure } from '../scenes/ripple.ts';
import type { Scene } from '../scenes/scene.ts';
import { drawScene, type SuiteName } from '../scenes/suites.ts';
import type { Answer } from './answer.ts';
import { CHANGE_SUITE_NAMES, type ChangeSuiteName, type ScoredPair, scoredPair } from './change-suites.ts';
import { plainRecipe } from './plain-recipe.ts';
import { runProgram } from './run-program.ts';
import { type SceneScore, scoreScene } from './score.ts';

export type AccuracyTask = {
  readonly suite: SuiteName | ChangeSuiteName;
  readonly seed: number;
  readonly indices: readonly number[];
  readonly rippleMeasure: RippleMeasure;
};

/** Both ways' scores of a scene, and a line of text for each thing that the program got wrong. */
export type ScenePair = {
  readonly program: SceneScore;
  readonly plain: SceneScore;
  readonly misses: readonly string[];
};

/** What comes back of a task: a scene's scores, or those of a pair of sweeps. */
export type Scored = ScenePair | ScoredPair;

const cables = await readyTable();

process.on('message', (task: AccuracyTask) => {
  process.send?.(task.indices.map((index) => scored(task, index)));
});
process.send?.('ready');

function scored(task: AccuracyTask, index: number): Scored {
  const change = CHANGE_SUITE_NAMES.find((name) => name === task.suite);
  if (change !== undefined) return scoredPair(change, task.seed, index, cables);
  return scenePair(task, task.suite as SuiteName, index);
}

function scenePair(task: AccuracyTask, suite: SuiteName, index: number): ScenePair {
  const scene = drawScene(suite, task.seed, index, { rippleMeasure: task.rippleMeasure });
  const answer = runProgram(scene, cables);
  const program = scoreScene(scene, answer);
  return { program, plain: scoreScene(scene, plainRecipe(scene)), misses: missesOf(scene, answer, program) };
}

async function readyTable() {
  const table = await loadCableTable();
  if (!table.ok) throw new Error(table.problems.map((problem) => problem.what).join('; '));
  return table.value;
}

/** What went wrong in a scene, for whoever mends the solver. */
function missesOf(scene: Scene, answer: Answer, score: SceneScore): string[] {
  const { truth } = scene;
  const name = `${scene.suite} ${scene.seed}/${scene.index} ${truth.plan} ${truth.points} pts ${truth.end}`;
  const misses: string[] = [];
  if (answer.failed !== null) misses.push(`${name}: no answer: ${answer.failed}`);
  for (const [i, fault] of score.variants['fault-or-watch'].faults.entries()) {
    const real = truth.faults[i]!;
    const what =
      `${real.kind} ${real.value ?? ''}${real.unit ?? ''} at ${real.distanceM.toFixed(2)} m` +
      `${real.joint === null ? '' : ` (joint ${real.joint})`}, ${real.apparentReturnLossDb.toFixed(1)} dB`;
    if (!fault.found) misses.push(`${name}: missed ${what}`);
    else if (!fault.kindRight) misses.push(`${name}: ${what} called ${fault.answeredKind}`);
    else if (!fault.jointRight) misses.push(`${name}: ${what} placed at the wrong joint or cable`);
  }
  for (const extra of score.variants['fault-or-watch'].false)
    misses.push(
      `${name}: false ${extra.severity} ${extra.kind} at ${extra.distanceM.toFixed(2)} m` +
        `${extra.joint === null ? '' : ` (joint ${extra.joint})`}${extra.ghost ? ', a ghost' : ''}`,
    );
  if (truth.stretches.length > 0 && score.answeredStretch !== truth.stretches[0]!.kind) {
    const [real] = truth.stretches;
    misses.push(
      `${name}: ${real!.kind} ${real!.fromM.toFixed(2)}–${real!.toM.toFixed(2)} m, ` +
        `${real!.excessLossDb.toFixed(2)} dB answered as ${score.answeredStretch ?? 'nothing'}`,
    );
  }
  if (scene.suite === 'unknown-length' && !(score.end.lengthRight && score.end.kindRight))
    misses.push(
      `${name}: ${truth.lengthM.toFixed(2)} m to ${truth.end} answered as ` +
        `${answer.lengthM?.toFixed(2)} m to ${answer.end}`,
    );
  return misses;
}
