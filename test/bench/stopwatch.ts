/** Times: medians of many runs, so that one hiccup of the machine does not count. */
import { spawnSync } from 'node:child_process';
import { median } from '../../src/numerics/statistics.ts';

/** Median time of one call in ms, after a warm-up of a fifth of the repeats. */
export function medianMs(repeats: number, run: () => void): number {
  for (let i = 0; i < Math.ceil(repeats / 5); i++) run();
  const times: number[] = [];
  for (let i = 0; i < repeats; i++) {
    const started = performance.now();
    run();
    times.push(performance.now() - started);
  }
  return median(times);
}

/**
 * Median times of whole processes, run in turns so that both meet the same machine.
 *
 * @param commands Arguments to this Node's own executable.
 * @returns A median in ms for each command.
 * @throws Error When a process ends with a status that is not accepted (0 and 1: done, or done with a fault found).
 */
export function processMediansMs(repeats: number, commands: readonly (readonly string[])[]): number[] {
  const times: number[][] = commands.map(() => []);
  for (let i = 0; i < repeats + 1; i++) {
    for (const [c, command] of commands.entries()) {
      const started = performance.now();
      const done = spawnSync(process.execPath, command, { stdio: ['ignore', 'pipe', 'pipe'] });
      const took = performance.now() - started;
      if (done.status !== 0 && done.status !== 1)
        throw new Error(`node ${command.join(' ')} ended with ${done.status}: ${done.stderr.toString()}`);
      // The first turn fills the disk cache.
      if (i > 0) times[c]!.push(took);
    }
  }
  return times.map((list) => median(list));
}
