import { describe, expect, it } from 'vitest';
import { adviceFor } from '../../src/assess/advice.ts';
import { findingsOf, placesOf } from '../../src/assess/find-findings.ts';
import type { Finding } from '../../src/assess/finding.ts';
import type { Line } from '../../src/line/line.ts';
import type { Severity } from '../../src/locate/echo.ts';
import type { Solution } from '../../src/locate/solution.ts';
import { makeEcho, makeEnd, makeLine, makeSolution } from './made-line.ts';

const line = makeLine();
const jointThree = makeEcho({
  distanceM: 48.02,
  kind: 'series-resistance',
  value: { quantity: 'resistance', value: 9.1, sigma: 0.6, unit: 'ohm' },
  joint: { index: 3, name: 'main run / top jumper' },
});

function find(solution: Solution, severities: readonly Severity[], of: Line = line): Finding[] {
  return findingsOf(of, solution, severities, placesOf(of, solution));
}

describe('findingsOf', () => {
  it('says where, what, how sure, why, what to check and what to bring', () => {
    const solution = makeSolution([jointThree, makeEnd()]);
    expect(find(solution, ['fault', 'sound'])).toEqual([
      {
        severity: 'fault',
        echo: 0,
        kind: 'series-resistance',
        distanceM: 48.02,
        distanceSigmaM: 0.03,
        where: 'at joint 3, main run to top jumper',
        what: 'series resistance 9.1 ± 0.6 Ω',
        confidence: 0.97,
        ...adviceFor('series-resistance', 'joint'),
      },
    ]);
  });

  it('passes over what is sound', () => {
    expect(find(makeSolution([makeEcho(), makeEnd()]), ['sound', 'sound'])).toEqual([]);
  });

  it('puts faults before what is to be watched, each by distance', () => {
    const solution = makeSolution([
      makeEcho({ distanceM: 5 }),
      makeEcho({ distanceM: 10 }),
      makeEcho({ distanceM: 20 }),
      makeEnd(),
    ]);
    expect(find(solution, ['watch', 'fault', 'fault', 'sound']).map((finding) => finding.echo)).toEqual([
      1, 2, 0,
    ]);
  });

  it.each([
    ['port', makeEcho({ distanceM: 0, joint: { index: 1, name: 'port' } })],
    ['joint', makeEcho({ joint: { index: 2, name: 'x' } })],
    ['cable', makeEcho()],
  ] as const)('takes the advice for a place at the %s', (place, echo) => {
    const [finding] = find(makeSolution([echo, makeEnd()]), ['fault', 'sound']);
    expect(finding?.causes).toEqual(adviceFor('shunt-capacitance', place).causes);
  });

  it('says what was expected at the end', () => {
    const solution = makeSolution([makeEnd({ kind: 'open', value: null })]);
    const [finding] = find(solution, ['fault']);
    expect(finding?.what).toBe('open, where the description has an antenna');
    expect(finding?.where).toBe('at the end');
    expect(finding?.causes).toEqual(adviceFor('open', 'end').causes);
  });

  it('says of a joint that it is worse than its limit', () => {
    const joint = makeEcho({ kind: 'joint', correctedReturnLossDb: 25.84, joint: { index: 2, name: 'x' } });
    const [finding] = find(makeSolution([joint, makeEnd()]), ['watch', 'sound']);
    expect(finding?.what).toBe("joint with 25.8 dB return loss, worse than this line's limit");
    expect(finding?.causes).toEqual(adviceFor('joint', 'joint').causes);
  });

  describe('of a line that stops early', () => {
    const stop = (distanceM: number, distanceSigmaM: number): Finding | undefined =>
      find(
        makeSolution(
          [
            makeEnd({
              kind: 'open',
              value: null,
              distanceM,
              distanceSigmaM,
              section: 1,
              joint: { index: 3, name: 'main run / top jumper' },
            }),
          ],
          { endsEarly: true },
        ),
        ['fault'],
      )[0];

    it('speaks of a cut cable between joints, whatever joint closes the section', () => {
      const finding = stop(17.4, 0.2);
      expect(finding?.what).toBe('open: the line stops here');
      expect(finding?.where).toBe('in the main run, 15.4 m from joint 2 toward the end');
      expect(finding?.causes).toEqual(adviceFor('open', 'cable').causes);
    });

    it('speaks of a joint that came apart where one is described just there', () => {
      const finding = stop(47.8, 0.2);
      expect(finding?.where).toBe('at joint 3, main run to top jumper');
      expect(finding?.causes).toEqual(adviceFor('open', 'joint').causes);
    });
  });

  it('reports a stretch with both edges, and passes over a sound one', () => {
    const stretch = { fromM: 20, toM: 28, excessLossDb: 1.4, excessLossSigmaDb: 0.1 };
    const solution = makeSolution([makeEnd()], {
      stretches: [
        { ...stretch, kind: 'wet' },
        { ...stretch, fromM: 30, toM: 34, kind: 'sound' },
      ],
    });
    const findings = find(solution, ['sound']);
    expect(findings).toHaveLength(1);
    expect(findings[0]).toMatchObject({
      severity: 'fault',
      echo: null,
      kind: 'wet',
      distanceM: 24,
      where: 'in the main run, from 20.0 m to 28.0 m',
    });
    // Standard deviation of an even chance over 8 m: 8/√12.
    expect(findings[0]?.distanceSigmaM).toBeCloseTo(2.309, 3);
  });
});
