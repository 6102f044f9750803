import { describe, expect, it } from 'vitest';
import { wallTimeOf } from '../../src/app/wall-time.ts';

describe('wallTimeOf', () => {
  it('is the time on the clock here, to the minute', () => {
    expect(wallTimeOf(new Date(2026, 4, 3, 7, 5, 59))).toBe('2026-05-03T07:05');
  });
});
