/** The outside measure of the trace: scipy's zoom_fft function, where Debian's python3-scipy is installed. */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

export type ZoomFftTimes = {
  readonly scipy: string;
  /** zoom_fft(x, …): plans on every call, as the function does. */
  readonly functionMs: number;
  /** A ZoomFFT object planned once. */
  readonly plannedMs: number;
};

const PYTHON = '/usr/bin/python3';

/** Median times of a windowed sweep; null when there is no scipy. Thread settings of its libraries are left alone. */
export function zoomFftTimes(points: number, bins: number, repeats: number): ZoomFftTimes | null {
  if (!existsSync(PYTHON)) return null;
  const script = fileURLToPath(new URL('./zoom-fft.py', import.meta.url));
  const environment = Object.fromEntries(
    Object.entries(process.env).filter(([name]) => !name.startsWith('OPENBLAS')),
  );
  const done = spawnSync(PYTHON, [script, String(points), String(bins), String(repeats)], {
    encoding: 'utf8',
    env: environment,
  });
  return done.status === 0 ? (JSON.parse(done.stdout) as ZoomFftTimes) : null;
}
