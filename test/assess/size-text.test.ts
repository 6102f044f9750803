import { describe, expect, it } from 'vitest';
import { sizeText, stretchText } from '../../src/assess/size-text.ts';
import type { EchoValue } from '../../src/locate/echo.ts';

const ohms = (value: number, sigma: number | null): EchoValue => ({
  quantity: 'resistance',
  value,
  sigma,
  unit: 'ohm',
});

describe('sizeText', () => {
  it('shows as many decimals as the doubt deserves', () => {
    expect(sizeText('series-resistance', ohms(9.123, 0.6))).toBe('series resistance 9.1 ± 0.6 Ω');
    expect(sizeText('series-resistance', ohms(9.123, 0.04))).toBe('series resistance 9.12 ± 0.04 Ω');
    expect(sizeText('shunt-leakage', ohms(412.3, 31))).toBe('shunt leakage 412 ± 31 Ω');
  });

  it('shows two digits, and no exponent, where the doubt is not known', () => {
    expect(sizeText('shunt-leakage', ohms(412, null))).toBe('shunt leakage 412 Ω');
    expect(sizeText('series-resistance', ohms(9.123, Number.NaN))).toBe('series resistance 9.1 Ω');
    expect(sizeText('series-resistance', ohms(0.0123, null))).toBe('series resistance 0.012 Ω');
    expect(sizeText('series-resistance', ohms(0, null))).toBe('series resistance 0 Ω');
  });

  it.each([
    ['series-inductance', { quantity: 'inductance', value: 1.5, sigma: 0.1, unit: 'nH' }, '1.50 ± 0.10 nH'],
    ['shunt-capacitance', { quantity: 'capacitance', value: 0.6, sigma: 0.02, unit: 'pF' }, '0.60 ± 0.02 pF'],
    ['termination', { quantity: 'return loss', value: 14.2, sigma: null, unit: 'dB' }, '14 dB return loss'],
  ] as const)('gives %s its unit', (kind, value, words) => {
    expect(sizeText(kind, value)).toContain(words);
  });

  it('gives the kind alone where no size is known', () => {
    expect(sizeText('open', null)).toBe('open');
    expect(sizeText('series-resistance', ohms(Number.NaN, 1))).toBe('series resistance');
  });

  it('only compares a fault of unresolved kind with a size', () => {
    expect(sizeText('unresolved', ohms(0.5, 0.1))).toBe('fault of unresolved kind, like 0.50 ± 0.10 Ω');
    expect(sizeText('unresolved', null)).toBe('fault of unresolved kind');
  });
});

describe('stretchText', () => {
  const stretch = { fromM: 20, toM: 28, excessLossDb: 1.42, excessLossSigmaDb: 0.12 };

  it('tells what, how long, and how much it loses', () => {
    expect(stretchText({ ...stretch, kind: 'wet' })).toBe(
      'wet cable over 8.0 m, 1.42 ± 0.12 dB more loss than described, one way at band centre',
    );
  });

  it('says less loss instead of a negative excess', () => {
    expect(stretchText({ ...stretch, excessLossDb: -0.61, kind: 'wrong-cable' })).toBe(
      'another cable over 8.0 m, 0.61 ± 0.12 dB less loss than described, one way at band centre',
    );
  });
});
