import { describe, expect, it } from 'vitest';
import { longestCoax, withCable } from '../../src/terminal/change-cable.ts';
import { foundIn } from '../../src/terminal/found.ts';
import { resolutionWith, windowChoices, windowName } from '../../src/terminal/window-choices.ts';
import { makeAnalysis } from '../app/made-analysis.ts';
import { OTHER_CABLE } from './made-state.ts';

const analysis = makeAnalysis();
const [finding] = analysis.findings;

describe('foundIn', () => {
  it('puts faults before watches before what is sound, each by distance, and every echo once', () => {
    const [fault, end] = analysis.solution.echoes;
    const echoes = [{ ...fault!, distanceM: 2 }, fault!, { ...fault!, distanceM: 12 }, end!];
    const rows = foundIn(
      makeAnalysis({
        solution: { ...analysis.solution, echoes },
        severities: ['sound', 'fault', 'watch', 'sound'],
        places: ['', '', '', ''],
        findings: [
          { ...finding!, echo: 2, severity: 'watch', distanceM: 12 },
          { ...finding!, echo: 1 },
        ],
      }),
    );
    expect(rows.map((row) => [row.severity, row.distanceM])).toEqual([
      ['fault', 8.004],
      ['watch', 12],
      ['sound', 2],
      ['sound', 20.001],
    ]);
  });

  it('names a stretch by its kind and the section it lies in, without levels', () => {
    const wet = { ...finding!, echo: null, kind: 'wet' as const, distanceM: 14 };
    const rows = foundIn(makeAnalysis({ findings: [wet], severities: ['sound', 'sound'] }));
    expect(rows[0]).toMatchObject({ short: 'wet stretch', place: 'upper run', returnLossDb: null });
  });

  it('gives the same list for the same analysis, so that rows can be compared', () => {
    expect(foundIn(analysis)).toBe(foundIn(analysis));
    expect(foundIn(analysis)[0]).toMatchObject({ place: 'joint 2', short: 'series resistance 10.0 Ω' });
  });
});

describe('withCable', () => {
  it('changes the longest section only, and its label only where it named the cable', () => {
    const changed = withCable(analysis.line, OTHER_CABLE)!;
    expect(changed.sections.map((section) => section.label)).toEqual(['lower run', 'upper run']);
    expect(longestCoax(changed)?.cable.id).toBe('other');
    const [section] = analysis.line.sections;
    const named = {
      ...analysis.line,
      sections: [{ ...section!, label: 'made-up cable' } as typeof section & object],
    };
    expect(withCable(named, OTHER_CABLE)?.sections[0]?.label).toBe('another cable');
  });

  it('has nothing to change on a line without coax', () => {
    expect(withCable({ ...analysis.line, sections: [] }, OTHER_CABLE)).toBeNull();
  });
});

describe('windowChoices', () => {
  it('goes from sharp to calm, and holds a window of the user first', () => {
    const widths = windowChoices('kaiser:6').map((choice) => choice.widthBins);
    expect(widths).toEqual([...widths].sort((a, b) => a - b));
    expect(windowChoices('kaiser:4.5')[0]?.name).toBe('Kaiser β 4.5');
  });

  it('scales the resolution by the width of the windows', () => {
    expect(resolutionWith(analysis, 'kaiser:6', 'kaiser:6')).toBeCloseTo(0.12, 12);
    // Widths at half height of the rectangular and the Hann window: 1.21 and 2.00 bins. @source F. J. Harris 1978.
    expect(resolutionWith(analysis, 'rectangular', 'hann') / 0.12).toBeCloseTo(2 / 1.21, 1);
    expect(resolutionWith(analysis, 'no such', 'hann')).toBeNaN();
    expect(windowName('no such')).toBe('no such');
  });
});
