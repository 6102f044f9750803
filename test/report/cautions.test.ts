import { describe, expect, it } from 'vitest';
import { CAUTIONS } from '../../src/report/cautions.ts';

describe('CAUTIONS', () => {
  it('has a gist that fits one line of 80 columns', () => {
    expect(CAUTIONS.short.length).toBeLessThanOrEqual(80);
  });

  it.each([
    ['transmitters', /no transmitter can be keyed/u],
    ['DC and static charge', /DC on the line.*discharge/u],
    ['radiating', /connected antenna radiates/u],
    ['thunder and arrestors', /thunder.*Arrestors and bonds stay/u],
    ['climbing', /trained people with fall protection/u],
    ['local law', /Local law/u],
    ['estimates', /Confirm a place before cutting/u],
  ])('speaks of %s', (_, words) => {
    expect(CAUTIONS.paragraphs.some((paragraph) => words.test(paragraph))).toBe(true);
  });
});
