import { describe, expect, it } from 'vitest';
import { FAULT_FORMS, NORMALISED_FORMS, parseFault } from '../../src/app/fault-text.ts';

const read = (text: string): unknown => {
  const fault = parseFault(text);
  return fault.ok ? fault.value : fault.problems[0]?.code;
};

describe('parseFault', () => {
  it.each([
    [
      'series-resistance:9ohm@joint3',
      { kind: 'series-resistance', value: 9, place: { at: 'joint', joint: 3 } },
    ],
    [
      'shunt-leakage:400ohm@12.5m',
      { kind: 'shunt-leakage', value: 400, place: { at: 'distance', distanceM: 12.5 } },
    ],
    ['open@17.4m', { kind: 'open', place: { at: 'distance', distanceM: 17.4 } }],
    ['short@joint1', { kind: 'short', place: { at: 'joint', joint: 1 } }],
    ['section:75ohm@20m-23m', { kind: 'section', impedanceOhm: 75, fromM: 20, toM: 23 }],
    ['wet:k2x12,er1.03@20m-28m', { kind: 'wet', k2Factor: 12, permittivityFactor: 1.03, fromM: 20, toM: 28 }],
    ['wet:er1.5@1m-2m', { kind: 'wet', k2Factor: 1, permittivityFactor: 1.5, fromM: 1, toM: 2 }],
  ])('reads %s', (text, expected) => {
    expect(read(text)).toEqual(expected);
  });

  it.each([
    ['series-resistance:r0.2@joint3', 'series-resistance', 0.2],
    ['shunt-leakage:g0.05@joint3', 'shunt-leakage', 0.05],
    ['series-inductance:X1.5@joint3', 'series-inductance', 1.5],
    ['shunt-capacitance:b2@joint3', 'shunt-capacitance', 2],
  ])('reads %s, a size relative to the line', (text, kind, normalised) => {
    expect(read(text)).toEqual({ kind, normalised, place: { at: 'joint', joint: 3 } });
  });

  it('reads every form without a unit that messages show', () => {
    for (const form of Object.values(NORMALISED_FORMS)) expect(parseFault(form).ok, form).toBe(true);
  });

  it('takes henries and farads from nH and pF', () => {
    expect(read('series-inductance:1.5nH@joint2')).toMatchObject({ value: expect.closeTo(1.5e-9, 20) });
    expect(read('shunt-capacitance:0.6pF@31.4m')).toMatchObject({ value: expect.closeTo(0.6e-12, 24) });
  });

  it('takes feet', () => {
    // 10 ft = 3.048 m, exact by definition.
    expect(read('open@10ft')).toMatchObject({ place: { distanceM: 3.048 } });
  });

  it('reads every form that help shows', () => {
    for (const form of Object.values(FAULT_FORMS)) expect(parseFault(form).ok, form).toBe(true);
  });

  it.each([
    ['', 'fault-text'],
    ['series-resistance', 'fault-text'],
    ['series-resistance:9ohm', 'fault-text'],
    ['series-resistence:9ohm@joint3', 'fault-kind'],
    ['open:5ohm@3m', 'fault-text'],
    ['open@joint0', 'fault-text'],
    ['open@17.4', 'fault-text'],
    ['shunt-leakage:0ohm@3m', 'fault-text'],
    ['section:75ohm@23m-20m', 'fault-text'],
    ['section:0ohm@20m-23m', 'fault-text'],
    ['wet:k2x0.5@20m-28m', 'fault-text'],
    ['wet:@20m-28m', 'fault-text'],
    ['series-resistance:x0.2@joint3', 'fault-text'],
    ['series-inductance:x0@joint3', 'fault-text'],
    ['series-inductance:x0.2ohm@joint3', 'fault-text'],
    ['series-inductance:x1e9@joint3', 'fault-text'],
    ['series-inductance:x0.2@3', 'fault-text'],
  ])('refuses %j', (text, code) => {
    expect(read(text)).toBe(code);
  });

  it('names the nearest kind', () => {
    const fault = parseFault('shunt-capacitence:1pF@3m');
    expect(!fault.ok && fault.problems[0]?.mend).toBe('did you mean "shunt-capacitance"?');
  });
});
