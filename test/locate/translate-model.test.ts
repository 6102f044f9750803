import { describe, expect, it } from 'vitest';
import { type Line, NO_LIMITS, PLAIN_JOINT } from '../../src/line/line.ts';
import { ALL_FREE, createLineModel, type LineModel } from '../../src/locate/line-model.ts';
import { translate } from '../../src/locate/translate-model.ts';
import { MADE_CABLE } from '../app/made-analysis.ts';

function madeModel(): LineModel {
  const line: Line = {
    name: '',
    site: '',
    sections: [{ type: 'coax', cable: MADE_CABLE, lengthM: 20, label: 'run', jointAfter: PLAIN_JOINT }],
    end: 'open',
    temperatureC: 20,
    temperatureKnown: true,
    limits: NO_LIMITS,
  };
  const frequencyHz = Float64Array.from({ length: 40 }, (_, i) => 5e7 * (i + 1));
  return createLineModel(line, frequencyHz, 50, [20], { lossSigma: 0.03 });
}

/** Lengths of the stretches of line, in order. */
function lengthsOf(model: LineModel): number[] {
  return translate(model, ALL_FREE).stages.flatMap((stage) => (stage.type === 'line' ? [stage.lengthM] : []));
}

describe('translate', () => {
  it('parts a section at the edges of a stretch, and slows what lies between them', () => {
    const model = madeModel();
    model.stretches.push({ id: 1, section: 0, fromM: 8, toM: 12, ratio: 0.4, slowness: 0.25, dielectric: 0 });
    // 4 m at a quarter more delay count as 5.
    expect(lengthsOf(model)).toEqual([8, 5, 8]);
  });

  it('takes a stretch whose edges a step of the search has crossed, instead of failing', () => {
    const model = madeModel();
    model.stretches.push({ id: 1, section: 0, fromM: 12, toM: 8, ratio: 0.4, slowness: 0, dielectric: 0 });
    expect(lengthsOf(model)).toEqual([8, 4, 8]);
  });
});
