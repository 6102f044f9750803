/** A described line and solutions of it, made by hand: 2 m + 46 m + 2 m. */
import { type Line, NO_LIMITS, PLAIN_JOINT } from '../../src/line/line.ts';
import type { Echo } from '../../src/locate/echo.ts';
import type { Solution } from '../../src/locate/solution.ts';
import { MADE_CABLE } from '../app/made-analysis.ts';

export function makeLine(fields: Partial<Line> = {}): Line {
  const section = (lengthM: number, label: string) => ({
    type: 'coax' as const,
    cable: MADE_CABLE,
    lengthM,
    label,
    jointAfter: PLAIN_JOINT,
  });
  return {
    name: 'Made line',
    site: 'Nowhere',
    sections: [section(2, 'bottom jumper'), section(46, 'main run'), section(2, 'top jumper')],
    end: 'antenna',
    temperatureC: 20,
    temperatureKnown: true,
    limits: NO_LIMITS,
    ...fields,
  };
}

/** An echo inside the main run, 31.4 m out, unless said otherwise. */
export function makeEcho(fields: Partial<Echo> = {}): Echo {
  return {
    distanceM: 31.4,
    distanceSigmaM: 0.03,
    returnLossDb: 25,
    correctedReturnLossDb: 22,
    kind: 'shunt-capacitance',
    confidence: 0.97,
    value: { quantity: 'capacitance', value: 0.6, sigma: 0.02, unit: 'pF' },
    joint: null,
    section: 1,
    ...fields,
  };
}

/** The end of the line, an antenna, 50 m out unless said otherwise. */
export function makeEnd(fields: Partial<Echo> = {}): Echo {
  return makeEcho({
    distanceM: 50,
    kind: 'termination',
    correctedReturnLossDb: 14,
    value: { quantity: 'return loss', value: 14, sigma: null, unit: 'dB' },
    joint: { index: 4, name: 'top jumper / end' },
    section: 2,
    ...fields,
  });
}

export function makeSolution(echoes: readonly Echo[], fields: Partial<Solution> = {}): Solution {
  return {
    echoes,
    ghosts: [],
    stretches: [],
    lengthM: echoes.at(-1)?.distanceM ?? 0,
    lengthSigmaM: 0.05,
    distanceScale: 1,
    delayNs: 380,
    end: 'antenna',
    endsEarly: false,
    scaledTo: 'description',
    lossFactor: 1,
    loss: { conductor: 1 - 1, dielectric: 1 - 1, covariance: [1e-4, 1e-4, 1e-3] },
    impedanceRatios: [],
    modelGamma: { re: new Float64Array(0), im: new Float64Array(0) },
    residualDb: -50,
    explained: 0.999,
    elements: echoes.length,
    notices: [],
    ...fields,
  };
}
