import { describe, expect, it } from 'vitest';
import { verdictOf, verdictWords, worstOf } from '../../src/assess/verdict.ts';
import { makeAnalysis } from '../app/made-analysis.ts';

describe('verdictOf', () => {
  it('counts what was found, and doubts it where the line does not explain the sweep', () => {
    const analysis = makeAnalysis();
    expect(verdictOf(analysis)).toEqual({ faults: 1, watches: 0, doubtful: false });
    const solution = { ...analysis.solution, explained: 0.1, residualDb: -8 };
    expect(verdictOf({ ...analysis, solution }).doubtful).toBe(true);
  });
});

describe('verdictWords and worstOf', () => {
  it.each([
    [{ faults: 0, watches: 0 }, 'sound', 'no fault found'],
    [{ faults: 1, watches: 0 }, 'fault', '1 fault'],
    [{ faults: 2, watches: 3, doubtful: false }, 'fault', '2 faults, 3 to watch'],
    [{ faults: 0, watches: 1 }, 'watch', '1 to watch'],
    [{ faults: 0, watches: 0, doubtful: true }, 'watch', 'this line explains the sweep badly'],
    [{ faults: 1, watches: 0, doubtful: true }, 'fault', '1 fault, this line explains the sweep badly'],
  ] as const)('say of %j that it is a %s: %s', (verdict, severity, words) => {
    expect(worstOf(verdict)).toBe(severity);
    expect(verdictWords(verdict)).toBe(words);
  });
});
