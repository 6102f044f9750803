/** A scene's sweep as a file. */
import type { Spectrum } from './ladder.ts';

/** What a scene is called: suite, seed and index. */
export type SceneName = { readonly suite: string; readonly seed: number; readonly index: number };

/** Port impedance of every scene, Ω. */
export const PORT_OHM = 50;

/** Touchstone 1.1 text; the header says that it is invented. */
export function touchstoneText(name: SceneName, frequencyHz: Float64Array, gamma: Spectrum): string {
  const rows = Array.from(
    frequencyHz,
    (f, k) => `${f} ${gamma.re[k]!.toPrecision(9)} ${gamma.im[k]!.toPrecision(9)}`,
  );
  const header = `! invented scene: suite ${name.suite}, seed ${name.seed}, index ${name.index}`;
  return `${header}\n# Hz S RI R ${PORT_OHM}\n${rows.join('\n')}\n`;
}
