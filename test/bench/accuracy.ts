/**
 * Accuracy bench: `npm run bench:accuracy -- --suite single,pairs --seed 1,2,3 --count 60 --json --misses`.
 *
 * Draws scenes by the test side's own simulator, has the program and the plain recipe answer them, prints one table
 * a suite: the worst seed's figure, the figure over all seeds in brackets. The suites of comparisons draw two sweeps of
 * one line each.
 */
import { type ChildProcess, fork } from 'node:child_process';
import { availableParallelism } from 'node:os';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import { SUITE_NAMES, type SuiteName } from '../scenes/suites.ts';
import { suiteReport } from './accuracy-report.ts';
import type { AccuracyTask, Scored } from './accuracy-worker.ts';
import { changeReport } from './change-report.ts';
import { CHANGE_SUITE_NAMES, type ChangeSuiteName } from './change-suites.ts';
import { confidenceTable } from './figures.ts';

type AnySuite = SuiteName | ChangeSuiteName;

const ALL_SUITES: readonly AnySuite[] = [...SUITE_NAMES, ...CHANGE_SUITE_NAMES];

const { values } = parseArgs({
  options: {
    suite: { type: 'string', default: ALL_SUITES.join(',') },
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

const answered = await answerAll(
  suites.flatMap((suite) => seeds.flatMap((seed) => tasksOf(suite, seed))),
  Math.max(1, Number(values.jobs)),
);
const reports = suites.map((suite) => reportOf(suite, answered.get(suite) ?? []));
const all = suites.flatMap((suite) => answered.get(suite) ?? []);
const confidence = confidenceTable(
  all.flatMap((one) => ('program' in one ? [one.program] : [])),
  'fault-or-watch',
);
if (values.json) {
  const misses = all.flatMap((one) => one.misses);
  console.log(
    JSON.stringify(
      { seeds, count, ripple: values.ripple, suites: reports.map((r) => r.data), confidence, misses },
      null,
      1,
    ),
  );
} else {
  for (const report of reports) console.log(`${report.text}\n`);
  if (confidence.length > 0)
    console.log('confidence given, and how often right (true fault, there, of that kind), all suites:');
  for (const row of confidence)
    console.log(
      `  ${row.from.toFixed(2)}–${row.to.toFixed(2)}  mean ${row.meanConfidence.toFixed(3)}  ` +
        `right ${row.right.toFixed(3)}  of ${row.findings}`,
    );
  if (values.misses) for (const { misses } of all) for (const miss of misses) console.log(miss);
}

function reportOf(suite: AnySuite, results: readonly Scored[]) {
  const change = CHANGE_SUITE_NAMES.find((name) => name === suite);
  if (change === undefined)
    return suiteReport(
      suite as SuiteName,
      seeds,
      results.flatMap((one) => ('program' in one ? [one] : [])),
    );
  return changeReport(
    change,
    seeds,
    results.flatMap((one) => ('score' in one ? [one.score] : [])),
  );
}

function suiteNamed(text: string): AnySuite {
  const suite = ALL_SUITES.find((name) => name === text);
  if (suite !== undefined) return suite;
  console.error(`no suite "${text}"; there are ${ALL_SUITES.join(', ')}`);
  process.exit(2);
}

/** Scenes in handfuls, so that the processes stay evenly busy. */
function tasksOf(suite: AnySuite, seed: number): AccuracyTask[] {
  const handful = 6;
  const tasks: AccuracyTask[] = [];
  for (let from = 0; from < count; from += handful) {
    const indices = Array.from({ length: Math.min(handful, count - from) }, (_, i) => from + i);
    tasks.push({ suite, seed, indices, rippleMeasure: values.ripple === 'rms' ? 'rms' : 'worst' });
  }
  return tasks;
}

/** Spreads the tasks over child processes; the results of each suite come back in the order of its tasks. */
async function answerAll(
  tasks: readonly AccuracyTask[],
  jobs: number,
): Promise<ReadonlyMap<AnySuite, readonly Scored[]>> {
  const results: Scored[][] = tasks.map(() => []);
  let next = 0;
  let done = 0;
  const serve = (child: ChildProcess) =>
    new Promise<void>((resolve, reject) => {
      let current = -1;
      child.on('error', reject);
      child.on('exit', (code) =>
        code === 0 || code === null ? resolve() : reject(new Error(`exit ${code}`)),
      );
      child.on('message', (message: Scored[] | 'ready') => {
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
  return new Map(suites.map((suite) => [suite, results.filter((_, i) => tasks[i]?.suite === suite).flat()]));
}
