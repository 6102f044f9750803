import { describe, expect, it } from 'vitest';
import type { Scene } from './scene.ts';
import { drawScene, SUITE_NAMES, type SuiteName } from './suites.ts';

const SCENES_EACH = 8;

/** Scenes of a suite, drawn once for all tests of this file. */
const drawn = new Map<SuiteName, Scene[]>();
function scenesOf(suite: SuiteName): Scene[] {
  const known = drawn.get(suite);
  if (known) return known;
  const scenes = Array.from({ length: SCENES_EACH }, (_, index) => drawScene(suite, 11, index));
  drawn.set(suite, scenes);
  return scenes;
}

describe('drawScene', () => {
  it('gives the same scene, character for character, for the same suite, seed and index', () => {
    expect(drawScene('pairs', 3, 1)).toEqual(drawScene('pairs', 3, 1));
    expect(drawScene('pairs', 3, 1).sweepText).not.toEqual(drawScene('pairs', 4, 1).sweepText);
  });

  it.each(SUITE_NAMES)('writes finite, rising, passive sweeps for %s', (suite) => {
    for (const scene of scenesOf(suite)) {
      const rows = scene.sweepText.trim().split('\n').slice(2);
      expect(rows).toHaveLength(scene.truth.points);
      let before = 0;
      for (const [k, row] of rows.entries()) {
        const [f, re, im] = row.split(' ').map(Number);
        expect(f! > before && Number.isFinite(re) && Number.isFinite(im)).toBe(true);
        // Noise and tracking may lift a full reflection a little over one; a carrier may lift a point more.
        if (!scene.truth.interfered.includes(k)) expect(Math.hypot(re!, im!)).toBeLessThan(1.05);
        before = f!;
      }
    }
  });

  it.each(SUITE_NAMES)('places the faults of %s within the line, at joints where it says so', (suite) => {
    for (const { truth } of scenesOf(suite)) {
      for (const fault of truth.faults) {
        expect(fault.distanceM).toBeGreaterThan(0);
        expect(fault.distanceM).toBeLessThanOrEqual(truth.lengthM);
        if (fault.joint !== null) expect(fault.distanceM).toBe(truth.jointM[fault.joint - 1]);
        expect(Number.isFinite(fault.apparentReturnLossDb)).toBe(true);
      }
    }
  });

  it('draws the faults that each suite is named for', () => {
    for (const { truth } of scenesOf('single')) expect(truth.faults).toHaveLength(1);
    for (const { truth } of scenesOf('pairs')) expect(truth.faults).toHaveLength(2);
    for (const { truth } of scenesOf('behind-strong')) {
      const levels = truth.faults.map((fault) => fault.apparentReturnLossDb);
      expect(levels.at(-1)! - levels[0]!).toBeGreaterThan(10);
    }
    for (const { truth } of scenesOf('joints')) expect(truth.faults[0]?.joint).toBeGreaterThan(1);
    for (const { truth } of scenesOf('healthy')) expect(truth.faults).toHaveLength(0);
    expect(scenesOf('wet').some(({ truth }) => truth.stretches.length === 1)).toBe(true);
    expect(scenesOf('wet').some(({ truth }) => truth.stretches.length === 0)).toBe(true);
    for (const { truth } of scenesOf('wrong-cable')) expect(truth.stretches[0]?.kind).toBe('wrong-cable');
  });

  it('says no more than the cable for unknown-length', () => {
    for (const { lineText, lineDescribed } of scenesOf('unknown-length')) {
      expect(lineDescribed).toBe(false);
      expect(Object.keys(JSON.parse(lineText))).toEqual(['sections']);
      expect(lineText).not.toContain('lengthM');
    }
  });

  it('keeps sound joints at 28–45 dB and structure at 35–45 dB', () => {
    for (const { truth } of scenesOf('healthy')) {
      for (const level of truth.jointReturnLossDb) {
        expect(level).toBeGreaterThanOrEqual(28);
        expect(level).toBeLessThanOrEqual(45);
      }
      expect(truth.structuralReturnLossDb).toBeGreaterThanOrEqual(35);
      expect(truth.structuralReturnLossDb).toBeLessThanOrEqual(45);
    }
  });
});
