import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
  createWindow,
  parseWindow,
  type WindowSpec,
  windowSampler,
  windowText,
} from '../../src/numerics/window.ts';

type Reference = {
  middles: Record<string, number[]>;
  dolphChebyshev: { n: number; sideLobeDb: number; values: number[] }[];
};
const reference: Reference = JSON.parse(
  readFileSync(new URL('../reference/windows.json', import.meta.url), 'utf8'),
);

function spec(text: string): WindowSpec {
  const outcome = parseWindow(text);
  if (!outcome.ok) throw new Error(`${text} is not a window`);
  return outcome.value;
}

/**
 * Published figures: coherent gain, ENBW, side lobe, 3 dB and 6 dB width.
 * @source F. J. Harris, Proc. IEEE 66(1), 1978, Table I, with the corrections of A. H. Nuttall, IEEE Trans. ASSP-29(1),
 *   1981 (figures evaluated from the definitions for N = 4096, Dolph-Chebyshev for its own N); Heinzel et al. 2002.
 */
const PUBLISHED: [string, number, number, number, number, number, number][] = [
  ['rectangular', 4096, 1.0, 1.0, -13.26, 0.886, 1.207],
  ['hann', 4096, 0.5, 1.5, -31.47, 1.441, 2.0],
  ['hamming', 4096, 0.54, 1.3628, -42.68, 1.303, 1.815],
  ['blackman', 4096, 0.42, 1.7268, -58.11, 1.644, 2.299],
  ['blackman-harris', 4096, 0.3588, 2.0044, -92.01, 1.899, 2.666],
  ['kaiser:2', 4096, 0.7955, 1.0472, -18.43, 0.993, 1.362],
  ['kaiser:3.5', 4096, 0.6406, 1.1906, -26.75, 1.146, 1.584],
  ['kaiser:6', 4096, 0.5, 1.4668, -43.8, 1.402, 1.954],
  ['kaiser:7.854', 4096, 0.4396, 1.6519, -57.56, 1.573, 2.199],
  ['kaiser:8.6', 4096, 0.4208, 1.7214, -63.25, 1.637, 2.291],
  ['kaiser:14', 4096, 0.3319, 2.1611, -105.94, 2.045, 2.874],
  ['dolph-chebyshev:70', 51, 0.4369, 1.6569, -70, 1.575, 2.205],
  ['dolph-chebyshev:60', 128, 0.476, 1.5273, -60, 1.455, 2.034],
  ['dolph-chebyshev:80', 1024, 0.4141, 1.743, -80, 1.655, 2.319],
  ['dolph-chebyshev:100', 1024, 0.3701, 1.9423, -100, 1.84, 2.584],
];

describe('createWindow', () => {
  it.each(PUBLISHED)(
    'gives the published figures of %s over %i points',
    (text, n, gain, enbw, side, w3, w6) => {
      const window = createWindow(spec(text), n);
      // Printed digits; points at the middles of their cells instead of at their starts shift the last one by one.
      expect(Math.abs(window.coherentGain - gain)).toBeLessThan(1.1e-4);
      expect(Math.abs(window.enbwBins - enbw)).toBeLessThan(1.1e-4);
      // 0.03 dB: the steps at the ends of a Kaiser window, sampled differently, move its far side lobes.
      expect(Math.abs(window.sideLobeDb - side)).toBeLessThan(0.03);
      expect(Math.abs(window.width3DbBins - w3)).toBeLessThan(1.1e-3);
      expect(Math.abs(window.width6DbBins - w6)).toBeLessThan(1.1e-3);
    },
  );

  it('agrees with the values of an independent program', () => {
    for (const [text, values] of Object.entries(reference.middles)) {
      const window = createWindow(spec(text), values.length);
      values.forEach((value, k) => {
        expect(window.values[k]).toBeCloseTo(value, 12);
      });
    }
    for (const { n, sideLobeDb, values } of reference.dolphChebyshev) {
      const window = createWindow({ kind: 'dolph-chebyshev', sideLobeDb }, n);
      values.forEach((value, k) => {
        expect(window.values[k]).toBeCloseTo(value, 10);
      });
    }
  });

  it('is symmetric and positive in the middle for every kind and odd or even length', () => {
    for (const text of ['rectangular', 'hann', 'blackman-harris', 'kaiser:6', 'dolph-chebyshev:70'])
      for (const n of [1, 2, 3, 16, 201]) {
        const { values } = createWindow(spec(text), n);
        for (let k = 0; k < n; k++) expect(values[k]).toBeCloseTo(values[n - 1 - k]!, 10);
        expect(values[n >> 1]).toBeGreaterThan(0);
      }
  });

  it('keeps the figures of a very long window without measuring it whole', () => {
    // The shape no longer changes beyond 4096 points; 1e-3 is the printed digit.
    expect(createWindow(spec('hann'), 100_000).width6DbBins).toBeCloseTo(2.0, 3);
  });

  it('refuses no points and settings out of range', () => {
    expect(() => createWindow(spec('hann'), 0)).toThrow(RangeError);
    expect(() => createWindow(spec('hann'), 2.5)).toThrow(RangeError);
    expect(() => createWindow({ kind: 'kaiser', beta: -1 }, 8)).toThrow(RangeError);
    expect(() => createWindow({ kind: 'dolph-chebyshev', sideLobeDb: Number.NaN }, 8)).toThrow(RangeError);
  });
});

describe('windowSampler', () => {
  it('gives at cell middles what createWindow gives', () => {
    for (const text of ['hamming', 'blackman', 'kaiser:6']) {
      const sampler = windowSampler(spec(text));
      const { values } = createWindow(spec(text), 33);
      values.forEach((value, k) => {
        expect(sampler((k + 0.5) / 33)).toBeCloseTo(value, 14);
      });
    }
  });

  it('follows a Dolph-Chebyshev window of another length inside its end spikes', () => {
    const sampler = windowSampler(spec('dolph-chebyshev:60'));
    const { values } = createWindow(spec('dolph-chebyshev:60'), 512);
    // The window itself changes with its length by about 1/n of its height.
    for (let k = 5; k < 507; k++)
      expect(Math.abs(sampler((k + 0.5) / 512) - values[k]!)).toBeLessThan(2 / 512);
  });

  it('is 0 outside the span', () => {
    for (const text of ['rectangular', 'kaiser:6', 'dolph-chebyshev'])
      expect([-0.01, 1.01].map(windowSampler(spec(text)))).toEqual([0, 0]);
  });
});

describe('parseWindow', () => {
  it('reads names with and without a setting, and windowText writes them back', () => {
    for (const text of ['hann', 'kaiser:6', 'kaiser:2.5', 'dolph-chebyshev:80', 'blackman-harris'])
      expect(windowText(spec(text))).toBe(text);
    expect(spec(' Kaiser ')).toEqual({ kind: 'kaiser', beta: 6 });
    expect(spec('dolph-chebyshev')).toEqual({ kind: 'dolph-chebyshev', sideLobeDb: 60 });
  });

  it.each([
    '',
    'hanning',
    'hann:3',
    'kaiser:',
    'kaiser:-1',
    'kaiser:99',
    'kaiser:1e1',
    'kaiser:6:6',
    'constructor',
  ])('refuses %j with a way to mend it', (text) => {
    const outcome = parseWindow(text);
    expect(outcome.ok).toBe(false);
    if (!outcome.ok) expect(outcome.problems[0]?.mend).toMatch(/kaiser:6/);
  });

  it('shows what was typed without its control characters, and cut short', () => {
    const outcome = parseWindow(`\u001b[31m\u202e${'x'.repeat(500)}`);
    expect(outcome.ok).toBe(false);
    if (!outcome.ok) expect(outcome.problems[0]?.found).toBe(`[31m${'x'.repeat(36)}`);
  });
});
