/**
 * Accuracy bench: `npm run bench:accuracy -- --suite single,pairs --seed 1,2,3 --count 60 --json --misses`.
 *
 * Draws scenes by the test side's own simulator, has the program and the plain recipe answer them, prints one table
 * a suite: the worst seed's figure, the figure over all seeds in brackets.
 */
import { type ChildProcess, fork } from 'node:child_process';
import { availableParallelism } from 'node:os';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import { SUITE_NAMES, type SuiteName } from '../scenes/suites.ts';
import { suiteReport } from './accuracy-report.ts';
import type { AccuracyTask, ScenePair } from './accuracy-worker.ts';
import { confidenceTable } from './figures.ts';

const { values } = parseArgs({
  options: {
    suite: { type: 'string', default: SUITE_NAMES.join(',') },
    seed: { type: 'string', default: '1,2,3' },
    count: { type: 'string', default: '60' },
    jobs: { type: 'string', default: String(availableParallelism()) },
    ripple: { type: 'string', default: 'worst' },
    json: { type: 'boolean', default: false },
    misses: { type: 'boolean', default: false },
  },
});
const suites = values.suite.split(',').map(suiteNamed);
const seeds = values.seed.split(',').map(Number);
const count = Number(values.count);

const pairs = await answerAll(
  suites.flatMap((suite) => seeds.flatMap((seed) => tasksOf(suite, seed))),
  Math.max(1, Number(values.jobs)),
);
const reports = suites.map((suite) =>
  suiteReport(
    suite,
    seeds,
    pairs.filter((pair) => pair.program.suite === suite),
  ),
);
const confidence = confidenceTable(
  pairs.map((pair) => pair.program),
  'fault-or-watch',
);
if (values.json) {
  const misses = pairs.flatMap((pair) => pair.misses);
  console.log(
    JSON.stringify(
      { seeds, count, ripple: values.ripple, suites: reports.map((r) => r.data), confidence, misses },
      null,
      1,
    ),
  );
} else {
  for (const report of reports) console.log(`${report.text}\n`);
  console.log('confidence given, and how often right (true fault, there, of that kind), all suites:');
  for (const row of confidence)
    console.log(
      `  ${row.from.toFixed(2)}–${row.to.toFixed(2)}  mean ${row.meanConfidence.toFixed(3)}  ` +
        `right ${row.right.toFixed(3)}  of ${row.findings}`,
    );
  if (values.misses) for (const pair of pairs) for (const miss of pair.misses) console.log(miss);
}

function suiteNamed(text: string): SuiteName {
  const suite = SUITE_NAMES.find((name) => name === text);
  if (suite !== undefined) return suite;
  console.error(`no suite "${text}"; there are ${SUITE_NAMES.join(', ')}`);
  process.exit(2);
}

/** Scenes in handfuls, so that the processes stay evenly busy. */
function tasksOf(suite: SuiteName, seed: number): AccuracyTask[] {
  const handful = 6;
  const tasks: AccuracyTask[] = [];
  for (let from = 0; from < count; from += handful) {
    const indices = Array.from({ length: Math.min(handful, count - from) }, (_, i) => from + i);
    tasks.push({ suite, seed, indices, rippleMeasure: values.ripple === 'rms' ? 'rms' : 'worst' });
  }
  return tasks;
}

/** Spreads the tasks over child processes; the results come back in the order of the tasks. */
async function answerAll(tasks: readonly AccuracyTask[], jobs: number): Promise<ScenePair[]> {
  const results: ScenePair[][] = tasks.map(() => []);
  let next = 0;
  let done = 0;
  const serve = (child: ChildProcess) =>
    new Promise<void>((resolve, reject) => {
      let current = -1;
      child.on('error', reject);
      child.on('exit', (code) =>
        code === 0 || code === null ? resolve() : reject(new Error(`exit ${code}`)),
      );
      child.on('message', (message: ScenePair[] | 'ready') => {
        if (message !== 'ready') {
          results[current] = message;
          done += message.length;
          if (process.stderr.isTTY) process.stderr.write(`\r${done} scenes `);
        }
        current = next++;
        const task = tasks[current];
        if (task === undefined) child.disconnect();
        else child.send(task);
      });
    });
  const worker = fileURLToPath(new URL('./accuracy-worker.ts', import.meta.url));
  const children = Array.from({ length: Math.min(jobs, tasks.length) }, () =>
    fork(worker, { execArgv: ['--import', 'tsx'] }),
  );
  await Promise.all(children.map(serve));
  if (process.stderr.isTTY) process.stderr.write('\r');
  return results.flat();
}
