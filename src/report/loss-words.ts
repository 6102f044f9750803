/** A loss check in words. */
import type { LossCheck, LossMethod } from '../assess/loss-check.ts';
import type { Solution } from '../locate/solution.ts';
import { fixedText, frequencyText } from '../plot/quantity-text.ts';

/** What the loss was read from. */
export const LOSS_METHODS: Readonly<Record<LossMethod, string>> = {
  'end-echo': 'the echo of the far end, which has passed the run twice',
  transmission: 'the transmission from end to end; the joints’ own loss is in it',
  bound: 'what comes back at all: the loss is no more than that',
  none: 'nothing: the end is not seen',
};

/** How to get a loss check where a sweep gives none. */
export const HOW_TO_CHECK =
  'For the loss itself, sweep once more with the far end open or shorted (a short tells it as well as an open and ' +
  'radiates nothing), or through from end to end with two ports.';

/** The verdict of a loss check. */
export function lossVerdictWords(solution: Solution, check: LossCheck): string {
  const margin = fixedText(Math.abs(check.marginDb ?? 0), 2);
  const at = frequencyText(check.atHz);
  if (check.pass === true) return `loss check passes, ${margin} dB to spare at ${at}`;
  if (check.pass === false) return `loss check fails, ${margin} dB over its limit at ${at}`;
  if (solution.endsEarly) return 'no loss check: the line stops before its end';
  return 'no loss check: this end does not tell the loss';
}

/** Why a sweep does not tell the loss, and how to get it. */
export function whyNoLoss({ endsEarly, end }: Solution): string {
  if (endsEarly) return 'What lies beyond the place where the line stops cannot be checked.';
  return (
    `The ${end} takes in most of what reaches it, so what comes back tells its match and the faults on the ` +
    `way, and of the loss only the most that it can be. ${HOW_TO_CHECK}`
  );
}
