/** A comparison of two sweeps in words. */
import type { BandChange, Change, ChangeKind, Comparison } from '../assess/comparison.ts';
import { KIND_WORDS } from '../assess/size-text.ts';
import { decibelText, fixedText, frequencySpanText, lengthText, type Units } from '../plot/quantity-text.ts';

/** "unchanged"; "changed at one place". */
export function changeVerdictWords({ changes }: Comparison): string {
  if (changes.length === 0) return 'unchanged';
  return `changed at ${changes.length === 1 ? 'one place' : `${changes.length} places`}`;
}

/** "120 ±15 ppm longer than before". */
export function stretchWords({ stretchPpm, stretchSigmaPpm }: Comparison): string {
  const size = `${fixedText(Math.abs(stretchPpm), 0)} ±${fixedText(stretchSigmaPpm, 0)} ppm`;
  return `${size} ${stretchPpm < 0 ? 'shorter' : 'longer'} than before`;
}

/** "0.03 ±0.06 dB more than before, one way at mid-band". */
export function lossChangeWords({ lossChangeDb, lossChangeSigmaDb }: Comparison): string {
  const size = `${fixedText(Math.abs(lossChangeDb), 2)} ±${fixedText(lossChangeSigmaDb, 2)} dB`;
  return `${size} ${lossChangeDb < 0 ? 'less' : 'more'} than before, one way at mid-band`;
}

/** "antenna, as before"; "antenna at 50.00 m before, open at 17.40 m after". */
export function endChangeWords({ end }: Comparison, units: Units): string {
  if (end.before === end.after) return `${end.after}, as before`;
  return (
    `${end.before} at ${lengthText(end.lengthBeforeM, units)} before, ${end.after} at ` +
    `${lengthText(end.lengthAfterM, units)} after`
  );
}

/** "main, 1710–2170 MHz: worst return loss 19.1 dB before, 18.0 dB after, 1.1 dB worse". */
export function bandChangeWords({ name, fromHz, toHz, beforeDb, afterDb }: BandChange): string {
  const side = (worstDb: number | null): string => (worstDb === null ? 'not swept' : decibelText(worstDb));
  const by =
    beforeDb === null || afterDb === null
      ? ''
      : `, ${decibelText(Math.abs(afterDb - beforeDb))} ${afterDb < beforeDb ? 'worse' : 'better'}`;
  return `${name}, ${frequencySpanText(fromHz, toHz)}: worst return loss ${side(beforeDb)} before, ${side(afterDb)} after${by}`;
}

/** "series resistance"; "series resistance gone". */
export function changeWords({ kind, gone }: Change): string {
  return `${kindWords(kind)}${gone ? ' gone' : ''}`;
}

function kindWords(kind: ChangeKind): string {
  return kind === 'unresolved' ? 'of unresolved kind' : KIND_WORDS[kind];
}
