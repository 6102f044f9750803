/**
 * Speed bench: `npm run build && npm run bench`. Everything is timed in one run and, where it can be, said as a ratio
 * to an outside measure, so that the figures hold on any machine. Flags: --repeats 15.
 */
import { existsSync, readFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { loadCableTable } from '../../src/app/cable-files.ts';
import { median } from '../../src/numerics/statistics.ts';
import { firstFrameMediansMs, withHelloBundle } from './first-frame.ts';
import { runProgram, type SweepAndLine } from './run-program.ts';
import { zoomFftTimes } from './scipy.ts';
import { solveScene } from './solve-scenes.ts';
import { SWEEP_POINTS, TRACE_POINTS, traceTimes } from './speed-trace.ts';
import { processMediansMs } from './stopwatch.ts';

const { values } = parseArgs({ options: { repeats: { type: 'string', default: '15' } } });
const repeats = Number(values.repeats);

const PROGRAM = 'dist/cli.js';
const SAMPLE = ['samples/north-1-later.s1p', '--line', 'samples/north-1-later.line.json'] as const;
for (const needed of [PROGRAM, SAMPLE[0], SAMPLE[2]]) {
  if (existsSync(needed)) continue;
  console.error(
    `${needed} is missing: run "npm run build" and "npm run samples" in the project's folder first`,
  );
  process.exit(2);
}

const table = await loadCableTable();
if (!table.ok) throw new Error(table.problems.map((problem) => problem.what).join('; '));
const cables = table.value;

printTrace();
printSolve();
printWholeProcess();
await printFirstFrame();

function row(label: string, ms: number, note = ''): void {
  console.log(`  ${label.padEnd(48)}${ms.toFixed(ms < 10 ? 3 : 1).padStart(9)} ms${note && `   ${note}`}`);
}

function ratio(of: number, to: number, target: number): string {
  return `${(of / to).toFixed(2)} × (target ≤ ${target})`;
}

function printTrace(): void {
  const ours = traceTimes(300);
  const scipy = zoomFftTimes(SWEEP_POINTS, TRACE_POINTS, 300);
  console.log(`trace of ${SWEEP_POINTS} points to ${TRACE_POINTS} distances, Kaiser window`);
  if (scipy === null)
    console.log('  no scipy here (/usr/bin/python3, Debian: python3-scipy): nothing to compare with');
  else {
    row(`scipy ${scipy.scipy}: zoom_fft function`, scipy.functionMs);
    row(`scipy ${scipy.scipy}: ZoomFFT object, planned once`, scipy.plannedMs);
  }
  const against = (ms: number) => (scipy === null ? '' : `${ratio(ms, scipy.functionMs, 1)} of zoom_fft`);
  row('apparent, planned once', ours.apparentPlannedMs, against(ours.apparentPlannedMs));
  row('apparent, planned on every call', ours.apparentMs, against(ours.apparentMs));
  row('corrected, three sections, planned once', ours.correctedPlannedMs, 'target ≤ 8 ms');
  row('corrected, three sections, planned on every call', ours.correctedMs, 'target ≤ 8 ms');
}

/** Medians over a few scenes of each plan, after as many to warm up. */
function printSolve(): void {
  console.log(`\nsolve of a ${SWEEP_POINTS}-point sweep, three sections, two faults, warm (target ≤ 150 ms)`);
  for (const plan of ['narrow-high', 'band-limited', 'wide'] as const) {
    const scenes = [0, 1, 2, 3, 4].map((index) => solveScene(plan, SWEEP_POINTS, index));
    for (const scene of scenes) solveMs(scene);
    row(plan, median(scenes.flatMap((scene) => [0, 1, 2].map(() => solveMs(scene)))));
  }
}

function solveMs(scene: SweepAndLine): number {
  const answer = runProgram(scene, cables);
  if (answer.failed !== null) throw new Error(`no answer to time: ${answer.failed}`);
  return answer.solveMs;
}

function printWholeProcess(): void {
  const sample: SweepAndLine = {
    sweepText: readFileSync(SAMPLE[0], 'utf8'),
    lineText: readFileSync(SAMPLE[2], 'utf8'),
    lineDescribed: true,
  };
  const solve = median([0, 1, 2, 3, 4, 5, 6].map(() => solveMs(sample)));
  const [bare, locate] = processMediansMs(repeats, [
    ['-e', '0'],
    [PROGRAM, 'locate', ...SAMPLE, '--json'],
  ]) as [number, number];
  console.log('\nwhole process');
  row('node -e 0', bare);
  row(`solve of ${SAMPLE[0]}, warm`, solve);
  const over = ((locate - solve) / bare).toFixed(2);
  row('locate --json of it', locate, `solve + ${over} × bare start (target ≤ 2.5)`);
}

async function printFirstFrame(): Promise<void> {
  const [hello, text, plot] = (await withHelloBundle((path) =>
    firstFrameMediansMs(repeats, [
      { nodeArguments: [path], drawn: 'text' },
      { nodeArguments: [PROGRAM, ...SAMPLE], drawn: 'text' },
      { nodeArguments: [PROGRAM, ...SAMPLE], drawn: 'plot' },
    ]),
  )) as [number, number, number];
  console.log('\nfirst frame in a terminal of 100 × 30, from the start of the process');
  row('bundled hello of the UI library', hello);
  row('workspace, first text', text, ratio(text, hello, 1.5));
  row('workspace, first frame with the trace drawn', plot, ratio(plot, hello, 1.5));
}
