import { describe, expect, it } from 'vitest';
import { checkStandards, type StandardSweeps } from '../../src/assess/check-standards.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';

const FREQUENCY_HZ = Float64Array.from({ length: 201 }, (_, i) => 10e6 * (i + 1));

/** A reflection of a size in dB behind a length of air, m. */
function standard(sign: number, levelDb: number, lengthM = 0, frequencyHz = FREQUENCY_HZ): Sweep {
  const size = sign * 10 ** (levelDb / 20);
  const angles = frequencyHz.map((f) => (-4 * Math.PI * f * lengthM) / 299_792_458);
  return {
    frequencyHz,
    gamma: { re: angles.map((a) => size * Math.cos(a)), im: angles.map((a) => size * Math.sin(a)) },
    portOhm: 50,
    port: 1,
    ports: 1,
    file: 'made.s1p',
    comments: [],
  };
}

const GOOD: StandardSweeps = {
  open: standard(1, -0.05),
  short: standard(-1, -0.04),
  load: standard(1, -46),
};

const wrong = (sweeps: StandardSweeps): string[] =>
  checkStandards(sweeps).checks.flatMap(({ check, standard: of, pass }) => (pass ? [] : [`${check} ${of}`]));

describe('checkStandards', () => {
  it('takes an open, a short and a load at one plane for good', () => {
    expect(checkStandards(GOOD).pass).toBe(true);
    expect(wrong(GOOD)).toEqual([]);
  });

  it('takes a lead that all three were seen through for the lead', () => {
    const lead = {
      open: standard(1, -0.8, 0.7),
      short: standard(-1, -0.8, 0.7),
      load: standard(1, -28, 0.2),
    };
    expect(wrong(lead)).toEqual([]);
    expect(checkStandards(lead).checks.find(({ check }) => check === 'level')?.what).toContain(
      '0.80 dB of it',
    );
  });

  it('names the standard that lies behind a length, and the length', () => {
    const long = { ...GOOD, short: standard(-1, -0.04, 0.012) };
    expect(wrong(long)).toEqual(['length all']);
    const { what, mend } = checkStandards(long).checks.find(({ check }) => check === 'length')!;
    expect(what).toBe('the short lies 12.0 mm (in air) behind the other');
    expect(mend).toContain('short');
    expect(checkStandards({ ...GOOD, open: standard(1, -0.05, 0.008) }).checks[4]?.what).toContain(
      'the open lies 8.0 mm',
    );
  });

  it('finds the same standard given twice', () => {
    expect(wrong({ ...GOOD, short: GOOD.open })).toEqual(['opposite all']);
  });

  it('finds a load in the place of a short, and a short in the place of the load', () => {
    expect(wrong({ ...GOOD, short: GOOD.load })).toContain('level short');
    expect(wrong({ ...GOOD, load: GOOD.short })).toEqual(['quiet load']);
  });

  it('finds a worn load behind a calibration', () => {
    expect(wrong({ ...GOOD, load: standard(1, -33) })).toEqual(['quiet load']);
  });

  it('finds one standard that loses more than the other', () => {
    expect(wrong({ ...GOOD, open: standard(1, -0.9) })).toEqual(['level open', 'level short']);
  });

  it('looks no further where the three were not swept alike', () => {
    const load = standard(1, -46, 0, FREQUENCY_HZ.slice(0, 101));
    expect(wrong({ ...GOOD, load })).toEqual(['grid load']);
  });
});
