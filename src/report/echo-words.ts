/** Kinds and sizes of echoes in plain words, the same in both front doors. */
import { KIND_WORDS } from '../assess/size-text.ts';
import type { Echo, EchoValue, StretchKind } from '../locate/echo.ts';
import type { Solution } from '../locate/solution.ts';
import { digitsText, ohmText } from '../plot/quantity-text.ts';

export const STRETCH_WORDS: Readonly<Record<StretchKind, string>> = {
  wet: 'wet stretch',
  'wrong-cable': 'stretch of another cable',
  sound: 'sound stretch',
};

/** "series resistance 9.1 Ω", "joint", "end: antenna". */
export function echoWords(analysis: { readonly solution: Solution }, echo: Echo): string {
  const { echoes, end } = analysis.solution;
  const isEnd = echo === echoes.at(-1) && end !== 'unknown';
  if (isEnd && (echo.kind === 'open' || echo.kind === 'short' || echo.kind === 'termination'))
    return `end: ${echo.kind === 'termination' ? end : echo.kind}`;
  const value = echo.value && echo.kind !== 'joint' ? ` ${valueText(echo.value)}` : '';
  return `${KIND_WORDS[echo.kind]}${value}`;
}

function valueText({ value, unit }: EchoValue): string {
  return unit === 'ohm' ? ohmText(value) : `${digitsText(value, 2)} ${unit}`;
}
