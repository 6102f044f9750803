import { describe, expect, it } from 'vitest';
import { type SweepOnLine, sweepNotices } from '../../src/assess/sweep-notices.ts';
import { parseSweepRange } from '../../src/sweep/number-text.ts';

/** Unambiguous distance and resolution without a window, velocity factor 0.88. */
function given(startHz: number, stepHz: number, points: number, lengthM: number): SweepOnLine {
  const frequencyHz = Float64Array.from({ length: points }, (_, i) => startHz + i * stepHz);
  const halfSpeed = (299_792_458 * 0.88) / 2;
  return {
    frequencyHz,
    reach: {
      resolutionM: halfSpeed / (stepHz * (points - 1)),
      unambiguousM: halfSpeed / stepHz,
      weakestReturnLossDb: 60,
      impedanceProfile: startHz <= 4 * stepHz ? 'measured' : 'modelled',
    },
    lengthM,
  };
}

const codes = (of: SweepOnLine): string[] => sweepNotices(of).map((notice) => notice.code);

describe('sweepNotices', () => {
  it('has nothing to say of a sweep that does all', () => {
    expect(codes(given(2e6, 2e6, 1350, 50))).toEqual([]);
  });

  it('says where a line folds, and with what step it would not', () => {
    // 131.9 MHz·m ÷ 10 MHz = 13.2 m; 60 m with 1.3 × room need 1.69 MHz or less.
    const [notice] = sweepNotices(given(10e6, 10e6, 200, 60));
    expect(notice?.code).toBe('line-folds');
    expect(notice?.what).toContain(
      'the line of 60.0 m is longer than the 13.2 m that steps of 10 MHz tell apart',
    );
    expect(notice?.what).toContain('steps of 1 MHz, 1991 points over this band,');
  });

  it('says of a folded line nothing of ohms, which need the line unfolded first', () => {
    expect(codes(given(1.7e9, 10e6, 200, 60))).toEqual(['line-folds']);
  });

  it('says when a band is narrow for its line, and what band would do', () => {
    // 131.9 MHz·m ÷ 19.9 MHz = 6.63 m on 40 m; 2 m need 66 MHz.
    const notice = sweepNotices(given(1e6, 1e5, 200, 40)).find((one) => one.code === 'band-narrow');
    expect(notice?.what).toContain(
      'the band of 19.9 MHz parts only what is 6.63 m apart, on a line of 40.0 m',
    );
    expect(notice?.what).toContain('66 MHz would part 2.00 m');
  });

  it('says when a start is too high for ohms, and names a sweep that would do', () => {
    const [notice] = sweepNotices(given(1.7e9, 500e3, 1001, 50));
    expect(notice?.code).toBe('ohms-not-measured');
    expect(notice?.what).toContain('starts too high, at 1.7 GHz,');
    const range = parseSweepRange(/one of (\S+) would do/u.exec(notice?.what ?? '')?.[1] ?? '');
    // 131.9 MHz·m ÷ (1.3 × 50 m) = 2.03 MHz: 2 MHz, from its own first step up to the old stop.
    expect(range.ok && range.value).toEqual({ startHz: 2e6, stopHz: 2.2e9, points: 1100 });
    expect(codes(given(2e6, 2e6, 1100, 50))).toEqual([]);
  });
});
