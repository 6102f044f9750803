import { describe, expect, it } from 'vitest';
import { severitiesOf } from '../../src/assess/severity.ts';
import { type EndKind, NO_LIMITS } from '../../src/line/line.ts';
import type { Echo, EchoKind, Severity } from '../../src/locate/echo.ts';
import { makeEcho, makeEnd, makeLine, makeSolution } from './made-line.ts';

const line = makeLine();
const severityOf = (echo: Echo, of = line): Severity | undefined =>
  severitiesOf(of, makeSolution([echo, makeEnd()]))[0];
const endSeverity = (end: EndKind, kind: EchoKind): Severity | undefined =>
  severitiesOf(makeLine({ end }), makeSolution([makeEnd({ kind })]))[0];

describe('severitiesOf', () => {
  it('calls a strong flaw in the cable a fault, however unsure its kind', () => {
    expect(severityOf(makeEcho({ correctedReturnLossDb: 22, confidence: 0.4, kind: 'unresolved' }))).toBe(
      'fault',
    );
  });

  it('calls a flaw that cable as sold may show sound', () => {
    expect(severityOf(makeEcho({ correctedReturnLossDb: 49 }))).toBe('sound');
  });

  it('has a weak flaw watched when neither its kind nor its being there is sure', () => {
    const weak = { correctedReturnLossDb: 40, kind: 'unresolved' } as const;
    expect(severityOf(makeEcho({ ...weak, confidence: 0.5 }))).toBe('watch');
    expect(severityOf(makeEcho({ ...weak, confidence: 0.9 }))).toBe('fault');
  });

  it("takes the line's own limit for the cable: what keeps to it is watched, however sure", () => {
    const limited = makeLine({ limits: { ...NO_LIMITS, cableReturnLossDb: 38 } });
    const sure = { kind: 'series-resistance', confidence: 0.99 } as const;
    expect(severityOf(makeEcho({ ...sure, correctedReturnLossDb: 37 }), limited)).toBe('fault');
    expect(severityOf(makeEcho({ ...sure, correctedReturnLossDb: 39 }), limited)).toBe('watch');
    expect(severityOf(makeEcho({ ...sure, correctedReturnLossDb: 39 }))).toBe('fault');
    expect(severityOf(makeEcho({ ...sure, correctedReturnLossDb: 49 }), limited)).toBe('sound');
  });

  describe('at a joint', () => {
    const joint = { index: 2, name: 'bottom jumper / main run' };

    it('calls any kind but a sound joint a fault', () => {
      expect(severityOf(makeEcho({ kind: 'series-resistance', joint, correctedReturnLossDb: 36 }))).toBe(
        'fault',
      );
    });

    it('watches a sound joint only where it is worse than a limit', () => {
      const plain = makeEcho({ kind: 'joint', joint, correctedReturnLossDb: 27 });
      expect(severityOf(plain)).toBe('sound');
      const limited = makeLine({ limits: { ...NO_LIMITS, jointReturnLossDb: 28 } });
      expect(severityOf(plain, limited)).toBe('watch');
      expect(severityOf({ ...plain, correctedReturnLossDb: 29 }, limited)).toBe('sound');
    });

    it("takes a joint's own described return loss before the line's limit", () => {
      const [first, ...others] = line.sections;
      const described = makeLine({
        sections: [{ ...first!, jointAfter: { name: null, returnLossDb: 24 } }, ...others],
        limits: { ...NO_LIMITS, jointReturnLossDb: 28 },
      });
      const plain = makeEcho({ kind: 'joint', joint, correctedReturnLossDb: 27 });
      expect(severityOf(plain, described)).toBe('sound');
      expect(severityOf({ ...plain, correctedReturnLossDb: 23 }, described)).toBe('watch');
    });
  });

  it.each([
    ['open', 'open', 'sound'],
    ['short', 'short', 'sound'],
    ['open', 'short', 'watch'],
    ['short', 'termination', 'watch'],
    ['load', 'termination', 'sound'],
    ['antenna', 'termination', 'sound'],
    ['load', 'open', 'fault'],
    ['antenna', 'short', 'fault'],
    ['unknown', 'open', 'sound'],
    ['unknown', 'termination', 'sound'],
  ] as const)('described as %s, found as %s: %s', (end, kind, severity) => {
    expect(endSeverity(end, kind)).toBe(severity);
  });

  it('calls an end before the described one a fault, whatever it is', () => {
    for (const end of ['open', 'short', 'load', 'antenna', 'unknown'] as const)
      expect(
        severitiesOf(makeLine({ end }), makeSolution([makeEnd({ kind: 'open' })], { endsEarly: true })),
      ).toEqual(['fault']);
  });
});
