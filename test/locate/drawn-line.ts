/** Lines and their sweeps by the program's own cascade, for tests of the transforms. */
import type { Cable } from '../../src/line/cable.ts';
import { createCascade, type Stage } from '../../src/line/cascade.ts';
import type { EndModel } from '../../src/line/end.ts';
import { type Line, NO_LIMITS, PLAIN_JOINT } from '../../src/line/line.ts';
import { coaxMedium, portMedium } from '../../src/line/medium.ts';
import { type MediumRun, runOfMedia } from '../../src/line/medium-run.ts';
import { createRandom } from '../../src/numerics/random.ts';
import type { Sweep } from '../../src/sweep/sweep.ts';

/** A cable of these figures. */
export function cable(figures: Pick<Cable, 'z0Ohm' | 'velocityFactor' | 'k1' | 'k2'>): Cable {
  return {
    id: 'drawn',
    name: 'drawn cable',
    z0ToleranceOhm: 1,
    velocityFactorTolerance: 0.01,
    fittedBandMHz: null,
    highestFrequencyMHz: null,
    ...figures,
  };
}

/** As of references.md table 3.2: a low-loss foam cable, a lossy thin one with solid dielectric. */
export const FOAM = cable({ z0Ohm: 50, velocityFactor: 0.89, k1: 0.11457, k2: 0.000462 });
export const THIN = cable({ z0Ohm: 50, velocityFactor: 0.66, k1: 2.43836, k2: 0.033442 });
export const SOLID = cable({ z0Ohm: 50, velocityFactor: 0.66, k1: 0.59912, k2: 0.006739 });

export const MATCHED: EndModel = { type: 'load', parameters: [1, 0] };
export const OPEN: EndModel = { type: 'open', parameters: [0] };
export const SHORT: EndModel = { type: 'short', parameters: [0] };

/** Even frequencies. */
export function evenHz(startHz: number, stopHz: number, points: number): Float64Array {
  return Float64Array.from({ length: points }, (_, k) => startHz + ((stopHz - startHz) * k) / (points - 1));
}

/** A described line of these sections. */
export function lineOf(
  sections: readonly { readonly cable: Cable; readonly lengthM: number | null }[],
): Line {
  return {
    name: 'drawn',
    site: '',
    sections: sections.map((section, i) => ({
      type: 'coax',
      label: `section ${i + 1}`,
      jointAfter: PLAIN_JOINT,
      ...section,
    })),
    end: 'unknown',
    temperatureC: 20,
    temperatureKnown: true,
    limits: NO_LIMITS,
  };
}

/** The media of a line at these frequencies. */
export function runOfLine(line: Line, frequencyHz: Float64Array): MediumRun {
  const media = line.sections.map((section) => {
    if (section.type !== 'coax') throw new TypeError('coax only');
    return coaxMedium(section.cable, frequencyHz, { temperatureC: 20 });
  });
  return runOfMedia(
    media,
    line.sections.map((section) => section.lengthM ?? 0),
  );
}

/** The sweep of stretches of cable between a 50 Ω port and an end; noise is complex normal, RMS linear. */
export function sweepThrough(
  stretches: readonly { readonly cable: Cable; readonly lengthM: number }[],
  end: EndModel,
  frequencyHz: Float64Array,
  { noise = 0, seed = 1 } = {},
): Sweep {
  const stages: Stage[] = [];
  let before = portMedium(50, frequencyHz.length);
  for (const { cable: of, lengthM } of stretches) {
    const after = coaxMedium(of, frequencyHz, { temperatureC: 20 });
    stages.push({ type: 'step', before, after, ratio: 1 });
    stages.push({ type: 'line', medium: after, lengthM, conductor: 0, dielectric: 0 });
    before = after;
  }
  const seen = createCascade(frequencyHz).gamma(stages, end);
  const random = createRandom(seed);
  const noisy = (value: number) => value + (noise / Math.SQRT2) * random.normal();
  const gamma = { re: seen.re.map(noisy), im: seen.im.map(noisy) };
  return { frequencyHz, gamma, portOhm: 50, port: 1, ports: 1, file: '', comments: [] };
}
