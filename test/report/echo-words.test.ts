import { describe, expect, it } from 'vitest';
import type { Analysis } from '../../src/app/analysis.ts';
import type { Echo } from '../../src/locate/echo.ts';
import { echoWords } from '../../src/report/echo-words.ts';
import { makeAnalysis } from '../app/made-analysis.ts';
import { makeEcho, makeEnd, makeSolution } from '../assess/made-line.ts';

const words = (echo: Echo, end: Analysis['solution']['end'] = 'antenna'): string => {
  const echoes = echo.distanceM === 50 ? [makeEcho(), echo] : [echo, makeEnd()];
  return echoWords(makeAnalysis({ solution: makeSolution(echoes, { end }) }), echo);
};

describe('echoWords', () => {
  it('says kind and size with two digits', () => {
    expect(words(makeEcho())).toBe('shunt capacitance 0.60 pF');
    expect(
      words(
        makeEcho({
          kind: 'series-resistance',
          value: { quantity: 'resistance', value: 9.13, sigma: 0.6, unit: 'ohm' },
        }),
      ),
    ).toBe('series resistance 9.1 Ω');
  });

  it('says of a joint only that it is one', () => {
    const value = { quantity: 'return loss', value: 34, sigma: null, unit: 'dB' } as const;
    expect(words(makeEcho({ kind: 'joint', value }))).toBe('joint');
  });

  it('names the end by what it is', () => {
    expect(words(makeEnd())).toBe('end: antenna');
    expect(words(makeEnd({ kind: 'short', value: null }), 'short')).toBe('end: short');
    expect(words(makeEnd(), 'unknown')).toBe('termination 14 dB');
  });

  it('calls an open before the end no end', () => {
    expect(words(makeEcho({ kind: 'open', value: null }))).toBe('open');
  });
});
