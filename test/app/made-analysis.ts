/** A small analysis made by hand: what the front doors are shown in tests, without solving anything. */
import type { Analysis } from '../../src/app/analysis.ts';
import type { Cable } from '../../src/line/cable.ts';
import { createCascade, type Stage } from '../../src/line/cascade.ts';
import { strengthOf } from '../../src/line/discontinuity.ts';
import { type Line, NO_LIMITS, PLAIN_JOINT } from '../../src/line/line.ts';
import { coaxMedium } from '../../src/line/medium.ts';
import { complexCopy } from '../../src/numerics/complex.ts';

export const MADE_CABLE: Cable = {
  id: 'made',
  name: 'made-up cable',
  z0Ohm: 50,
  z0ToleranceOhm: 1,
  velocityFactor: 0.88,
  velocityFactorTolerance: 0.01,
  k1: 0.2,
  k2: 0.0007,
  fittedBandMHz: null,
  highestFrequencyMHz: null,
};

/** 20 m of cable in two sections, 10 Ω in series at joint 2 (8 m), open at the end; 5–2000 MHz, 400 points. */
export function makeAnalysis(fields: Partial<Analysis> = {}): Analysis {
  const section = (lengthM: number, label: string) => ({
    type: 'coax' as const,
    cable: MADE_CABLE,
    lengthM,
    label,
    jointAfter: PLAIN_JOINT,
  });
  const line: Line = {
    name: 'Made line',
    site: 'Nowhere',
    sections: [section(8, 'lower run'), section(12, 'upper run')],
    end: 'open',
    temperatureC: 20,
    temperatureKnown: true,
    limits: NO_LIMITS,
  };
  const frequencyHz = Float64Array.from({ length: 400 }, (_, i) => 5e6 * (i + 1));
  const medium = coaxMedium(MADE_CABLE, frequencyHz, { temperatureC: 20 });
  const stretch = (lengthM: number): Stage => ({
    type: 'line',
    medium,
    lengthM,
    conductor: 0,
    dielectric: 0,
  });
  const stages = [stretch(8), { ...strengthOf('series-resistance', 10, 50), medium } as Stage, stretch(12)];
  const gamma = complexCopy(createCascade(frequencyHz).gamma(stages, { type: 'open', parameters: [0] }));
  const distanceM = Float64Array.from({ length: 5 }, (_, i) => i * 5);
  return {
    sweep: { frequencyHz, gamma, portOhm: 50, port: 1, ports: 1, file: 'made.s1p', comments: [] },
    line,
    lineDescribed: true,
    reach: { resolutionM: 0.12, unambiguousM: 26.4, weakestReturnLossDb: 61.3, impedanceProfile: 'measured' },
    trace: {
      distanceM,
      value: { re: Float64Array.of(0, 0.1, 0, 0, 1), im: Float64Array.of(0, 0, 0.01, 0, 0) },
      corrected: true,
    },
    impedance: {
      distanceM: Float64Array.of(0, 10),
      impedanceOhm: Float64Array.of(50, 60),
      origin: 'measured',
    },
    solution: {
      echoes: [
        {
          distanceM: 8.004,
          distanceSigmaM: 0.012,
          returnLossDb: 22.04,
          correctedReturnLossDb: 20.83,
          kind: 'series-resistance',
          confidence: 0.973,
          value: { quantity: 'resistance', value: 9.96, sigma: 0.3, unit: 'ohm' },
          joint: { index: 2, name: 'lower run / upper run' },
          section: 1,
        },
        {
          distanceM: 20.001,
          distanceSigmaM: 0.01,
          returnLossDb: 4.6,
          correctedReturnLossDb: 0.01,
          kind: 'open',
          confidence: 1,
          value: null,
          joint: { index: 3, name: 'upper run / end' },
          section: 1,
        },
      ],
      ghosts: [{ distanceM: 32.0, returnLossDb: 46.2, betweenM: [8.004, 20.001] }],
      stretches: [],
      lengthM: 20.001,
      lengthSigmaM: 0.01,
      distanceScale: 1,
      delayNs: 151.6,
      end: 'open',
      endsEarly: false,
      scaledTo: 'description',
      lossFactor: 1.01,
      loss: { conductor: 1.01 - 1, dielectric: 1.01 - 1, covariance: [1e-4, 1e-4, 1e-3] },
      impedanceRatios: [],
      modelGamma: gamma,
      residualDb: -72.4,
      explained: 0.99998,
      elements: 2,
      notices: [],
    },
    severities: ['fault', 'sound'],
    places: ['at joint 2, lower run to upper run', 'at the end'],
    findings: [
      {
        severity: 'fault',
        echo: 0,
        kind: 'series-resistance',
        distanceM: 8.004,
        distanceSigmaM: 0.012,
        where: 'at joint 2, lower run to upper run',
        what: 'series resistance 10.0 ± 0.3 Ω',
        confidence: 0.973,
        causes: ['corroded centre contact', 'loose connector'],
        checks: ['torque and contact of the connector'],
        bring: ['connector kit'],
      },
    ],
    notices: [{ code: 'made-notice', what: 'a doubt that travels with the result' }],
    ...fields,
  };
}
