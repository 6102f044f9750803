import { describe, expect, it } from 'vitest';
import { traceCsv } from '../../src/app/trace-export.ts';
import { traceWindow } from '../../src/app/trace-view.ts';
import { makeAnalysis } from './made-analysis.ts';

const view = { fromM: -0.5, toM: 21, points: 2001, windowSpec: 'kaiser:6', corrected: true };

function peakNear(analysis = makeAnalysis(), fields: Partial<typeof view> = {}, fromM = 7, toM = 9) {
  const { distanceM, value } = traceWindow(analysis, { ...view, ...fields });
  let best = -1;
  for (let i = 0; i < distanceM.length; i++) {
    if (distanceM[i]! < fromM || distanceM[i]! > toM) continue;
    if (best < 0 || Math.hypot(value.re[i]!, value.im[i]!) > Math.hypot(value.re[best]!, value.im[best]!))
      best = i;
  }
  return { distanceM: distanceM[best]!, size: Math.hypot(value.re[best]!, value.im[best]!) };
}

describe('traceWindow', () => {
  it('shows 10 Ω in series in 50 Ω at its place, at its true size where loss is undone', () => {
    const peak = peakNear();
    // Grid step 11 mm; Γ = 10/110, Pozar 4e section 4.3; side lobes of the full reflection behind it below 1 %.
    expect(peak.distanceM).toBeCloseTo(8, 1);
    expect(peak.size).toBeCloseTo(10 / 110, 2);
  });

  it('leaves the loss in where it is not to be undone', () => {
    // At mid band 5.2 dB/100 m: 16 m there and back take 0.8 dB, a factor of 0.91.
    const ratio = peakNear(makeAnalysis(), { corrected: false }).size / peakNear().size;
    expect(ratio).toBeGreaterThan(0.86);
    expect(ratio).toBeLessThan(0.96);
  });

  it('measures in the scaled distances of the analysis', () => {
    const made = makeAnalysis();
    const scaled = makeAnalysis({ solution: { ...made.solution, distanceScale: 1.02 } });
    expect(peakNear(scaled).distanceM).toBeCloseTo(8.16, 1);
  });

  it('reaches to the end that was found where the last length is unknown', () => {
    const made = makeAnalysis();
    const [first, last] = made.line.sections;
    const unknown = makeAnalysis({
      line: { ...made.line, sections: [first!, { ...last!, lengthM: null } as typeof first & object] },
    });
    expect(peakNear(unknown).distanceM).toBeCloseTo(8, 1);
  });

  it('gives the same trace again, and another for another window', () => {
    const made = makeAnalysis();
    expect(traceWindow(made, view)).toEqual(traceWindow(made, view));
    expect(peakNear(made, { windowSpec: 'hann' }).size).not.toBe(peakNear(made).size);
  });

  it('leaves out a point at 0 Hz, where no medium is known', () => {
    const made = makeAnalysis();
    const { frequencyHz, gamma } = made.sweep;
    const withZero = (values: Float64Array, zero: number) => Float64Array.of(zero, ...values);
    const dc = makeAnalysis({
      sweep: {
        ...made.sweep,
        frequencyHz: withZero(frequencyHz, 0),
        gamma: { re: withZero(gamma.re, 1), im: withZero(gamma.im, 0) },
      },
    });
    expect(peakNear(dc)).toEqual(peakNear(made));
  });

  it('refuses a window it does not know', () => {
    expect(() => traceWindow(makeAnalysis(), { ...view, windowSpec: 'round' })).toThrow(RangeError);
  });
});

describe('traceCsv', () => {
  it('is one table with a header, levels in dB, and empty cells where nothing is known', () => {
    const rows = traceCsv(makeAnalysis(), 'kaiser:6').split('\n');
    expect(rows[0]).toBe('distanceM,correctedDb,correctedRe,correctedIm,apparentDb,impedanceOhm');
    expect(rows).toHaveLength(7);
    expect(rows[1]).toMatch(/^0,,0,0,-[\d.]+,50$/u);
    expect(rows[2]).toMatch(/^5,-20,0.1,0,-[\d.]+,55$/u);
    expect(rows[5]).toMatch(/^20,0,1,0,-[\d.]+,$/u);
    expect(rows[6]).toBe('');
  });
});
