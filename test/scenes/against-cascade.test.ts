import { describe, expect, it } from 'vitest';
import { createCascade, type Stage } from '../../src/line/cascade.ts';
import { strengthOf } from '../../src/line/discontinuity.ts';
import { portMedium, coaxMedium as programMedium } from '../../src/line/medium.ts';
import { CABLE_FIGURES, type CableId } from './cable-figures.ts';
import { coaxMedium } from './coax-medium.ts';
import { faultElement, LUMPED_KINDS, type LumpedKind } from './fault.ts';
import { chainToPort, type Element, reflectionAtPort } from './ladder.ts';
import { evenGrid } from './sweep-plan.ts';
import { terminate } from './termination.ts';

const GRID = evenGrid('wide', 270);
const TEMPERATURE_C = 5;
const SI_UNIT: Readonly<Record<LumpedKind, number>> = {
  'series-resistance': 1,
  'shunt-leakage': 1,
  'series-inductance': 1e-9,
  'shunt-capacitance': 1e-12,
};

/** A run of the program's cascade and of the scenes' chain, made of the same sections and faults. */
function bothWays(
  sections: readonly { readonly cable: CableId; readonly lengthM: number }[],
  faults: readonly { readonly kind: LumpedKind; readonly value: number }[],
  end: 'open' | 'short',
) {
  const stages: Stage[] = [];
  const elements: Element[] = [];
  let before = portMedium(50, GRID.length);
  for (const [s, { cable, lengthM }] of sections.entries()) {
    const figures = CABLE_FIGURES[cable];
    const ours = coaxMedium(figures, TEMPERATURE_C, GRID);
    const theirs = programMedium(
      {
        ...figures,
        id: cable,
        name: cable,
        z0ToleranceOhm: 1,
        velocityFactorTolerance: 0.01,
        fittedBandMHz: null,
        highestFrequencyMHz: null,
      },
      GRID,
      { temperatureC: TEMPERATURE_C },
    );
    stages.push({ type: 'step', before, after: theirs, ratio: 1 });
    stages.push({ type: 'line', medium: theirs, lengthM, conductor: 0, dielectric: 0 });
    elements.push({ type: 'slab', medium: ours, lengthM, impedanceScale: 1 });
    const fault = faults[s];
    if (fault !== undefined) {
      stages.push({ ...strengthOf(fault.kind, fault.value * SI_UNIT[fault.kind], 50), medium: theirs });
      elements.push(faultElement(fault.kind, fault.value));
    }
    before = theirs;
  }
  const theirs = createCascade(GRID).gamma(stages, { type: end, parameters: [0] });
  const termination = end === 'open' ? { kind: end, fringeF: 0 } : ({ kind: end, inductanceH: 0 } as const);
  const ours = reflectionAtPort(chainToPort(elements, terminate(termination, GRID), GRID), 50);
  let worst = 0;
  for (let k = 0; k < GRID.length; k++)
    worst = Math.max(worst, Math.hypot(ours.re[k]! - theirs.re[k]!, ours.im[k]! - theirs.im[k]!));
  return worst;
}

describe('chainToPort', () => {
  it.each(LUMPED_KINDS)('agrees with the program’s cascade on a lossy run with %s and a bare end', (kind) => {
    const value = {
      'series-resistance': 9,
      'shunt-leakage': 120,
      'series-inductance': 1.5,
      'shunt-capacitance': 0.6,
    };
    const sections = [
      { cable: 'foam-half-extraflex', lengthM: 2 },
      { cable: 'rg-213', lengthM: 14 },
      { cable: 'foam-7-8', lengthM: 20 },
    ] as const;
    const faults = [
      { kind, value: value[kind] },
      { kind, value: value[kind] },
    ];
    for (const end of ['open', 'short'] as const) {
      // Two ways of the same formulas; k1 and k2 go through 20/ln 10 with nine and with sixteen digits, which turns
      // some hundred wavelengths of a 36 m run by less than 1e-8.
      expect(bothWays(sections, faults, end)).toBeLessThan(1e-7);
    }
  });
});
