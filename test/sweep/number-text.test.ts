/** Quantities with units, both ways. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Outcome } from '../../src/outcome.ts';
import {
  parseCapacitancePF,
  parseDelayS,
  parseFrequencyHz,
  parseInductanceNH,
  parseLengthM,
  parseLevelDb,
  parseResistanceOhm,
  parseSweepRange,
  parseTemperatureC,
} from '../../src/sweep/number-text.ts';
import {
  formatCapacitance,
  formatFrequency,
  formatFrequencyExactly,
  formatInductance,
  formatLength,
  formatResistance,
  formatSweepRange,
  formatTemperature,
} from '../../src/sweep/quantity-format.ts';

function valueIn<T>(outcome: Outcome<T>): T {
  if (!outcome.ok) throw new Error(outcome.problems.map((p) => p.what).join('; '));
  return outcome.value;
}

function whatOf(outcome: Outcome<unknown>): string {
  return outcome.ok ? '' : outcome.problems.map((p) => `${p.what} | ${p.mend}`).join('; ');
}

describe('parseLengthM', () => {
  it.each([
    ['46m', 46],
    ['46 m', 46],
    [' 1.5 metres ', 1.5],
    ['150ft', 45.72],
    ["10'", 3.048],
    ['12in', 0.3048],
    ['20cm', 0.2],
    ['5 mm', 0.005],
    ['1.2km', 1200],
    ['+3m', 3],
    ['1e1m', 10],
  ])('reads %s', (text, wanted) => {
    expect(valueIn(parseLengthM(text))).toBeCloseTo(wanted, 12);
  });

  it('takes a bare number only where a unit is agreed', () => {
    expect(valueIn(parseLengthM('10', { defaultUnit: 'ft' }))).toBeCloseTo(3.048, 12);
    expect(whatOf(parseLengthM('10'))).toMatch(/no unit/);
  });

  it('takes an offset below zero only where asked, with either minus', () => {
    expect(valueIn(parseLengthM('−0.4m', { signed: true }))).toBe(-0.4);
    expect(whatOf(parseLengthM('-0.4m'))).toMatch(/below 0 m/);
  });

  it.each(['', 'm', 'ten m', '1,5m', '46 yards', '1.2.3m', 'NaNm', '1e999m', '46m!', 'x'.repeat(500)])(
    'refuses %j and shows how to write it',
    (text) => {
      expect(whatOf(parseLengthM(text))).toMatch(/46m/);
    },
  );
});

describe('the other quantities', () => {
  it.each([
    ['parseFrequencyHz', parseFrequencyHz, '1.7GHz', 1.7e9],
    ['parseFrequencyHz', parseFrequencyHz, '900 mhz', 900e6],
    ['parseFrequencyHz', parseFrequencyHz, '2e9', 2e9],
    ['parseFrequencyHz', parseFrequencyHz, '0', 0],
    ['parseTemperatureC', parseTemperatureC, '12', 12],
    ['parseTemperatureC', parseTemperatureC, '-5C', -5],
    ['parseTemperatureC', parseTemperatureC, '54 °F', 110 / 9],
    ['parseResistanceOhm', parseResistanceOhm, '9ohm', 9],
    ['parseResistanceOhm', parseResistanceOhm, '1.2 kΩ', 1200],
    ['parseInductanceNH', parseInductanceNH, '1.5nH', 1.5],
    ['parseInductanceNH', parseInductanceNH, '800pH', 0.8],
    ['parseCapacitancePF', parseCapacitancePF, '0.6pF', 0.6],
    ['parseCapacitancePF', parseCapacitancePF, '0.001nF', 1],
    ['parseDelayS', parseDelayS, '30ps', 30e-12],
    ['parseDelayS', parseDelayS, '-0.1 ns', -1e-10],
    ['parseLevelDb', parseLevelDb, '-70dB', -70],
    ['parseLevelDb', parseLevelDb, '-70', -70],
  ])('%s reads %s', (_, parse: (text: string) => Outcome<number>, text, wanted) => {
    expect(valueIn(parse(text))).toBeCloseTo(wanted, 12);
  });

  it.each([
    ['parseFrequencyHz', parseFrequencyHz, '-1MHz'],
    ['parseTemperatureC', parseTemperatureC, '-300C'],
    ['parseResistanceOhm', parseResistanceOhm, '9'],
    ['parseResistanceOhm', parseResistanceOhm, '-9ohm'],
    ['parseInductanceNH', parseInductanceNH, '1.5pF'],
    ['parseDelayS', parseDelayS, '30'],
    ['parseLevelDb', parseLevelDb, '-70dBm'],
  ])('%s refuses %s', (_, parse: (text: string) => Outcome<number>, text) => {
    expect(parse(text).ok).toBe(false);
  });
});

describe('parseSweepRange', () => {
  it.each([
    ['2MHz-2700MHz:1350', { startHz: 2e6, stopHz: 2.7e9, points: 1350 }],
    ['1700-2200MHz:401', { startHz: 1.7e9, stopHz: 2.2e9, points: 401 }],
    ['0.5 GHz – 3 GHz : 201', { startHz: 0.5e9, stopHz: 3e9, points: 201 }],
    ['1e6-2e9:11', { startHz: 1e6, stopHz: 2e9, points: 11 }],
  ])('reads %s', (text, wanted) => {
    expect(valueIn(parseSweepRange(text))).toEqual(wanted);
  });

  it.each([
    '',
    '2MHz-2700MHz',
    '3GHz-2GHz:11',
    '1GHz-2GHz:1',
    '1GHz-2GHz:2.5',
    '1GHz-2GHz:2000000',
    '1GHz:2GHz:3',
  ])('refuses %j', (text) => {
    expect(whatOf(parseSweepRange(text))).toMatch(/2MHz-2700MHz:1350|1.7GHz/);
  });

  it('reads back what formatSweepRange writes', () => {
    const range = { startHz: 1.2345e6, stopHz: 2.7e9, points: 1350 };
    expect(formatSweepRange(range)).toBe('1.2345MHz-2.7GHz:1350');
    expect(valueIn(parseSweepRange(formatSweepRange(range)))).toEqual(range);
  });
});

describe('quantities as text', () => {
  it.each([
    [formatFrequency(1.7e9), '1.7 GHz'],
    [formatFrequency(40.25e6), '40.25 MHz'],
    [formatFrequency(0), '0 Hz'],
    [formatFrequency(999), '999 Hz'],
    [formatFrequency(5.464246e7, 4), '54.64 MHz'],
    [formatLength(48.018), '48.02 m'],
    [formatLength(48.018, 'ft'), '157.5 ft'],
    [formatLength(-0.001), '0.00 m'],
    [formatTemperature(12), '12 °C'],
    [formatTemperature(12.2222, 'F'), '54 °F'],
    [formatResistance(9.1234), '9.12 Ω'],
    [formatInductance(1.5), '1.5 nH'],
    [formatCapacitance(0.6), '0.6 pF'],
  ])('writes %s', (found, wanted) => {
    expect(found).toBe(wanted);
  });

  it('formatFrequencyExactly writes what parseFrequencyHz reads back to the very same number', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1e13, noNaN: true }), (hz) => {
        expect(valueIn(parseFrequencyHz(formatFrequencyExactly(hz)))).toBe(hz);
      }),
      { seed: 5, numRuns: 500 },
    );
  });

  it('formatLength, formatTemperature and the rest write what their readers take', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.001, max: 1e4, noNaN: true }), (x) => {
        expect(Math.abs(valueIn(parseLengthM(formatLength(x))) - x)).toBeLessThanOrEqual(0.0050001);
        expect(Math.abs(valueIn(parseLengthM(formatLength(x, 'ft'))) - x)).toBeLessThanOrEqual(0.0152401);
        expect(Math.abs(valueIn(parseTemperatureC(formatTemperature(x, 'F'))) - x)).toBeLessThan(0.028);
        for (const [parse, format] of [
          [parseResistanceOhm, formatResistance],
          [parseInductanceNH, formatInductance],
          [parseCapacitancePF, formatCapacitance],
        ] as const)
          expect(Math.abs(valueIn(parse(format(x))) - x)).toBeLessThanOrEqual(0.0051 * x);
      }),
      { seed: 6, numRuns: 300 },
    );
  });
});
