import { describe, expect, it } from 'vitest';
import {
  digitsText,
  fixedText,
  frequencySpanText,
  frequencyText,
  lengthSpanText,
  lengthText,
  lengthWithSigmaText,
  levelText,
  ohmText,
  percentText,
  sureText,
  temperatureText,
} from '../../src/plot/quantity-text.ts';

describe('fixedText', () => {
  it('fixedText writes a real minus sign and no negative zero', () => {
    expect(fixedText(-27.06, 1)).toBe('−27.1');
    expect(fixedText(-0.04, 1)).toBe('0.0');
    expect(fixedText(Number.NaN, 1)).toBe('–');
  });
});

describe('digitsText', () => {
  it('digitsText keeps about the digits asked for, whatever the size', () => {
    expect([9.13, 412.4, 0.0623, 0, -1.55].map((v) => digitsText(v, 2))).toEqual([
      '9.1',
      '412',
      '0.062',
      '0',
      '−1.6',
    ]);
  });
});

describe('lengthText', () => {
  it('lengthText writes metres or feet, feet with one decimal fewer', () => {
    expect(lengthText(48.021, 'm')).toBe('48.02 m');
    expect(lengthText(48.021, 'ft')).toBe('157.5 ft'); // 48.021 / 0.3048 = 157.55
    expect(lengthText(46, 'm', 1)).toBe('46.0 m');
  });
});

describe('lengthSpanText', () => {
  it('lengthSpanText gives two uncertainties to either side, no finer than they are', () => {
    expect(lengthSpanText(48.0213, 0.07, 'm')).toBe('47.88 m and 48.16 m');
    expect(lengthSpanText(48.0213, 0.07, 'ft')).toBe('157.1 ft and 158.0 ft');
    expect(lengthSpanText(0, 0.002, 'm')).toBe('−0.004 m and 0.004 m');
  });
});

describe('sureText', () => {
  it('sureText never says more than 99 %', () => {
    expect([0.5, 0.973, 0.99999, 1].map(sureText)).toEqual(['50 %', '97 %', '99 %', '99 %']);
    expect(sureText(Number.NaN)).toBe('–');
  });
});

describe('lengthWithSigmaText', () => {
  it('lengthWithSigmaText shows as many decimals as the uncertainty deserves', () => {
    expect(lengthWithSigmaText(48.0213, 0.07, 'm')).toBe('48.02 m ±0.07');
    expect(lengthWithSigmaText(48.0213, 0.6, 'm')).toBe('48.0 m ±0.6');
    expect(lengthWithSigmaText(48.0213, 0.0123, 'm')).toBe('48.021 m ±0.012');
    expect(lengthWithSigmaText(48.0213, 7, 'm')).toBe('48 m ±7');
  });

  it('lengthWithSigmaText converts the uncertainty with the length', () => {
    expect(lengthWithSigmaText(30.48, 0.3048, 'ft')).toBe('100.0 ft ±1.0');
  });

  it('lengthWithSigmaText leaves an unknown uncertainty out', () => {
    expect(lengthWithSigmaText(48.0213, Number.NaN, 'm')).toBe('48.02 m');
  });
});

describe('levelText', () => {
  it('levelText turns a return loss into a level below full reflection', () => {
    expect(levelText(27.06)).toBe('−27.1 dB');
    expect(levelText(0)).toBe('0.0 dB');
  });
});

describe('ohmText', () => {
  it('ohmText shows one decimal below a hundred ohms', () => {
    expect(ohmText(50.26)).toBe('50.3 Ω');
    expect(ohmText(99.97)).toBe('100 Ω');
    expect(ohmText(412.2)).toBe('412 Ω');
  });
});

describe('percentText', () => {
  it('percentText never rounds a doubt away', () => {
    expect(percentText(0.973)).toBe('97 %');
    expect(percentText(0.9996)).toBe('99 %');
    expect(percentText(1)).toBe('100 %');
  });
});

describe('temperatureText', () => {
  it('temperatureText is Fahrenheit where feet are shown', () => {
    expect(temperatureText(12, 'm')).toBe('12 °C');
    expect(temperatureText(-12, 'm')).toBe('−12 °C');
    expect(temperatureText(12, 'ft')).toBe('54 °F'); // 12 × 1.8 + 32 = 53.6
  });
});

describe('frequencyText', () => {
  it('frequencyText takes the unit that suits', () => {
    expect([2e6, 9e8, 2.7e9, 3e5, 50].map(frequencyText)).toEqual([
      '2 MHz',
      '900 MHz',
      '2.7 GHz',
      '300 kHz',
      '50 Hz',
    ]);
  });
});

describe('frequencySpanText', () => {
  it('frequencySpanText puts both ends under one unit', () => {
    expect(frequencySpanText(2e6, 2.7e9)).toBe('2–2700 MHz');
    expect(frequencySpanText(1.71e9, 2.17e9)).toBe('1.71–2.17 GHz');
    expect(frequencySpanText(3e5, 3e9)).toBe('0.3–3000 MHz');
    expect(frequencySpanText(0, 6e9)).toBe('0–6000 MHz');
    expect(frequencySpanText(1e3, 9e5)).toBe('1–900 kHz');
  });
});
