import { describe, expect, it } from 'vitest';
import { endReflection } from '../../src/assess/end-match.ts';
import { checkLimits, type LimitsQuestion, USUAL_LIMITS } from '../../src/assess/limits-check.ts';
import { createCascade, type Stage } from '../../src/line/cascade.ts';
import { strengthOf } from '../../src/line/discontinuity.ts';
import type { EndModel } from '../../src/line/end.ts';
import { type BandLimit, type Limits, NO_LIMITS } from '../../src/line/line.ts';
import { coaxMedium } from '../../src/line/medium.ts';
import type { Echo } from '../../src/locate/echo.ts';
import { complexCopy } from '../../src/numerics/complex.ts';
import { MADE_CABLE } from '../app/made-analysis.ts';
import { makeEcho, makeEnd, makeLine, makeSolution } from './made-line.ts';

const FREQUENCY_HZ = Float64Array.from({ length: 1000 }, (_, i) => 2.5e6 * (i + 1));
const MAIN: BandLimit = { name: 'main', fromHz: 1.7e9, toHz: 2.2e9, returnLossDb: 14 };

/** 50 m of cable with a joint's inductance at 2 m and 48 m, and a load of this resistance at the end. */
function loadedSweep(end: EndModel) {
  const medium = coaxMedium(MADE_CABLE, FREQUENCY_HZ, { temperatureC: 20 });
  const stretch = (lengthM: number): Stage => ({
    type: 'line',
    medium,
    lengthM,
    conductor: 0,
    dielectric: 0,
  });
  const joint = { ...strengthOf('series-inductance', 0.2e-9, 50), medium } as Stage;
  const stages = [stretch(2), joint, stretch(46), joint, stretch(2)];
  return {
    frequencyHz: FREQUENCY_HZ,
    gamma: complexCopy(createCascade(FREQUENCY_HZ).gamma(stages, end)),
    portOhm: 50,
    port: 1,
    ports: 1,
    file: 'made.s1p',
    comments: [],
  };
}

const JOINTS: readonly Echo[] = [
  makeEcho({
    kind: 'joint',
    distanceM: 2,
    section: 1,
    joint: { index: 2, name: 'a' },
    correctedReturnLossDb: 31,
  }),
  makeEcho({
    kind: 'joint',
    distanceM: 48,
    section: 2,
    joint: { index: 3, name: 'b' },
    correctedReturnLossDb: 30,
  }),
];

function ask(limits: Partial<Limits>, more: Partial<LimitsQuestion> = {}) {
  const question: LimitsQuestion = {
    // 62.5 Ω: Γ = 1/9, 19.08 dB.
    sweep: loadedSweep({ type: 'load', parameters: [1.25, 0] }),
    line: makeLine({ end: 'load', limits: { ...NO_LIMITS, ...limits } }),
    lineDescribed: true,
    solution: makeSolution([...JOINTS, makeEnd()], { end: 'load' }),
    places: ['at joint 2', 'at joint 3', 'at the end'],
    findings: [],
    ...more,
  };
  const verdict = checkLimits(question);
  const of = (limit: string) => verdict.limits.filter((one) => one.limit === limit);
  return { verdict, of };
}

describe('endReflection', () => {
  it('gives the end by itself, line and joints taken away, within 0.02 of |Γ| over the band', () => {
    const end: EndModel = { type: 'antenna', parameters: [-1, 0, 1, 0, 3, 1.95e9] };
    const solution = makeSolution([...JOINTS, makeEnd()]);
    const seen = endReflection(loadedSweep(end), makeLine(), solution, MAIN)!;
    seen.frequencyHz.forEach((f, i) => {
      if (f < MAIN.fromHz || f > MAIN.toHz) return;
      // |Γ| of −1 + 1/(1 + jx); the joints on the way delay it, which does not matter for a match.
      const x = 3 * (f / 1.95e9 - 1.95e9 / f);
      const size = Math.abs(x) / Math.sqrt(1 + x * x);
      expect(Math.abs(Math.hypot(seen.gamma.re[i]!, seen.gamma.im[i]!) - size), `${f}`).toBeLessThan(0.02);
    });
  });
});

describe('checkLimits', () => {
  it('judges the match at the port, and at the end with the line taken away', () => {
    const { of, verdict } = ask({ bands: [MAIN] });
    const [port] = of('match-at-port');
    const [end] = of('match-at-end');
    // Two joints on the way take off or add 0.01 of Γ at most.
    expect(Math.abs(end!.valueDb! - 19.08)).toBeLessThan(0.9);
    // The loss of the line, twice about 5 dB, hides the end from the port.
    expect(port!.valueDb!).toBeGreaterThan(22);
    expect(port!.marginDb).toBeCloseTo(port!.valueDb! - 14, 12);
    expect(port!.atHz!).toBeGreaterThanOrEqual(1.7e9);
    expect(port!.atHz!).toBeLessThanOrEqual(2.2e9);
    expect(verdict.pass).toBe(true);
    expect(verdict.text).toMatch(/^passes: kept: match at the port, match at the end, worst joint, cable/u);
  });

  it('fails a match that misses its limit, and says by how much and where', () => {
    const { of, verdict } = ask({ bands: [{ ...MAIN, returnLossDb: 21 }] });
    expect(of('match-at-end')[0]!.pass).toBe(false);
    expect(verdict.pass).toBe(false);
    expect(verdict.text).toMatch(/^fails: match at the end misses its limit by [12]\.\d dB at \d\.\d+ GHz/u);
  });

  it('does not judge a band that was not swept, nor the match of an open end', () => {
    const off = ask({ bands: [{ ...MAIN, fromHz: 3e9, toHz: 4e9 }] });
    expect(off.of('match-at-port')[0]).toMatchObject({ pass: null, why: 'the band was not swept' });
    const open = makeSolution([makeEnd({ kind: 'open' })], { end: 'open' });
    const { of } = ask({ bands: [MAIN] }, { solution: open });
    expect(of('match-at-port')[0]).toMatchObject({ pass: null, valueDb: null });
    expect(of('match-at-port')[0]!.why).toContain('with its antenna or a load on');
  });

  it('takes the joint that is worst against its own limit', () => {
    const [joint] = ask({ jointReturnLossDb: 28 }).of('joint');
    expect(joint).toMatchObject({
      valueDb: 30,
      limitDb: 28,
      marginDb: 2,
      where: 'at joint 3',
      isDefault: false,
    });
  });

  it('marks limits of common practice, which fail nothing', () => {
    const bad = [{ ...JOINTS[0]!, correctedReturnLossDb: 22 }, JOINTS[1]!, makeEnd()];
    const solution = makeSolution(bad, { end: 'load' });
    const { of, verdict } = ask({ bands: [MAIN] }, { solution });
    expect(of('joint')[0]).toMatchObject({
      limitDb: USUAL_LIMITS.jointReturnLossDb,
      pass: false,
      isDefault: true,
    });
    expect(verdict.pass).toBe(true);
    expect(verdict.text).toContain('(common practice)');
    expect(ask({ bands: [MAIN], jointReturnLossDb: 26 }, { solution }).verdict.pass).toBe(false);
  });

  it('wants a clean cable', () => {
    expect(ask({}).of('cable')[0]).toMatchObject({ pass: true, valueDb: null });
    const solution = makeSolution([makeEcho({ correctedReturnLossDb: 27 }), makeEnd()], { end: 'load' });
    const { of } = ask({ cableReturnLossDb: 30 }, { solution, places: ['in the main run', 'at the end'] });
    expect(of('cable')[0]).toMatchObject({ pass: false, marginDb: -3, where: 'in the main run' });
  });

  it('cannot pass a line with a fault, whatever its limits say', () => {
    const fault = {
      severity: 'fault' as const,
      echo: 0,
      kind: 'series-resistance' as const,
      distanceM: 2,
      distanceSigmaM: 0.1,
      where: 'at joint 2',
      what: 'series resistance',
      confidence: 0.9,
      causes: [],
      checks: [],
      bring: [],
    };
    const { verdict } = ask({ bands: [MAIN] }, { findings: [fault] });
    expect(verdict.pass).toBe(false);
    expect(verdict.text).toMatch(/^fails: 1 fault/u);
  });

  it('judges a line with a load and no limits by the habit of the trade', () => {
    expect(ask({}).of('match-at-port')[0]).toMatchObject({
      band: 'whole sweep',
      limitDb: USUAL_LIMITS.loadedReturnLossDb,
      isDefault: true,
    });
  });
});
