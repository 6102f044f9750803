import { beforeAll, describe, expect, it } from 'vitest';
import { analyse } from '../../src/app/analyse.ts';
import { loadCableTable } from '../../src/app/cable-files.ts';
import { compareSweeps } from '../../src/assess/compare-sweeps.ts';
import type { Comparison } from '../../src/assess/comparison.ts';
import type { CableTable } from '../../src/line/cable-table.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';
import { requestOf } from '../bench/run-program.ts';
import { type ChangePair, drawChangePair } from '../scenes/change-pair.ts';

let cables: CableTable;
beforeAll(async () => {
  const table = await loadCableTable();
  if (!table.ok) throw new Error('no cable table');
  cables = table.value;
});

/** Pairs of the seed that are known to be what a test needs; the tests say what that is. */
const PAIRS = { weakChange: 8, unchanged: 1, otherGrid: 5, warmer: 4 } as const;

function pairNamed(name: keyof typeof PAIRS): ChangePair {
  return drawChangePair(1, PAIRS[name]);
}

function solved(sweepText: string, lineText: string) {
  const request = requestOf({ sweepText, lineText, lineDescribed: true }, cables);
  const analysis = request.ok ? analyse(request.value) : request;
  if (!analysis.ok) throw new Error(analysis.problems.map((problem) => problem.what).join('; '));
  return analysis.value;
}

function comparisonOf(pair: ChangePair, turn: (sweep: Sweep) => Sweep = (sweep) => sweep): Comparison {
  const before = solved(pair.beforeText, pair.lineText);
  const after = solved(pair.afterText, pair.lineText);
  const outcome = compareSweeps({
    line: before.line,
    before,
    after: { solution: after.solution, sweep: turn(after.sweep) },
  });
  if (!outcome.ok) throw new Error(outcome.problems.map((problem) => problem.what).join('; '));
  return outcome.value;
}

describe('compareSweeps', () => {
  it('places a change of −45 dB or less in the cable across a swing of temperature, and names its kind', () => {
    const pair = pairNamed('weakChange');
    expect(pair.truth).toMatchObject({ plan: 'wide', change: { joint: null } });
    expect(pair.truth.change!.levelDb).toBeLessThan(-45);
    expect(Math.abs(pair.truth.stretchPpm)).toBeGreaterThan(100);
    const { verdict, changes, stretchPpm } = comparisonOf(pair);
    const { change } = pair.truth;
    expect(verdict).toBe('changed');
    expect(changes).toHaveLength(1);
    expect(changes[0]!.kind).toBe(change!.kind);
    expect(changes[0]!.joint).toBeNull();
    expect(Math.abs(changes[0]!.distanceM - change!.distanceM)).toBeLessThan(0.15);
    expect(Math.abs(changes[0]!.levelDb - change!.levelDb)).toBeLessThan(1.5);
    expect(Math.abs(stretchPpm - pair.truth.stretchPpm)).toBeLessThan(40);
  });

  it('calls a line unchanged that only the weather and a wrench have touched', () => {
    const pair = pairNamed('unchanged');
    expect(pair.truth.change).toBeNull();
    expect(Math.abs(pair.truth.swingC)).toBeGreaterThan(20);
    const { verdict, changes } = comparisonOf(pair);
    expect(changes).toEqual([]);
    expect(verdict).toBe('unchanged');
  });

  it('gives growth of length and loss their signs: positive where AFTER is longer and lossier', () => {
    const warmer = pairNamed('warmer');
    expect(warmer.truth.swingC).toBeGreaterThan(20);
    const { stretchPpm, lossChangeDb } = comparisonOf(warmer);
    expect(stretchPpm).toBeGreaterThan(0);
    expect(lossChangeDb).toBeGreaterThan(0);
  });

  it('compares different grids over what they share, and says so', () => {
    const pair = pairNamed('otherGrid');
    const { common, notices } = comparisonOf(pair);
    expect(notices.map(({ code }) => code)).toContain('different-grids');
    expect(common.points).toBeGreaterThan(100);
  });

  it('turns a sweep that refers to another port impedance', () => {
    const pair = pairNamed('unchanged');
    const to75 = (sweep: Sweep): Sweep => {
      const gamma = { re: sweep.gamma.re.slice(), im: sweep.gamma.im.slice() };
      const rho = (75 - sweep.portOhm) / (75 + sweep.portOhm);
      for (let i = 0; i < gamma.re.length; i++) {
        const [a, b] = [gamma.re[i]!, gamma.im[i]!];
        const size = (1 - rho * a) ** 2 + (rho * b) ** 2;
        gamma.re[i] = ((a - rho) * (1 - rho * a) - rho * b * b) / size;
        gamma.im[i] = (b * (1 - rho * a) + rho * b * (a - rho)) / size;
      }
      return { ...sweep, gamma, portOhm: 75 };
    };
    const { verdict, notices } = comparisonOf(pair, to75);
    expect(verdict).toBe('unchanged');
    expect(notices.map(({ code }) => code)).toContain('different-ports');
  });

  it('refuses sweeps that share no band', () => {
    const pair = pairNamed('unchanged');
    const before = solved(pair.beforeText, pair.lineText);
    const sweep = {
      ...before.sweep,
      frequencyHz: before.sweep.frequencyHz.map((f) => f + 1e10),
      file: 'far.s1p',
    };
    const outcome = compareSweeps({ line: before.line, before, after: { solution: before.solution, sweep } });
    expect(outcome).toMatchObject({ ok: false, problems: [{ code: 'nothing-in-common', file: 'far.s1p' }] });
  });
});
