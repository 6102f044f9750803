/**
 * How near the solver comes to what noise allows at best, by Monte Carlo.
 *
 * Free amplitude and phase: var(τ) ≥ 6/[(2πΔf)²·η·N(N² − 1)], η the power of the echo over that of the noise at one
 * point. Phase known at every frequency, as it is for a pure resistance: var(τ) ≥ 1/[2η·Σ(2πf)²].
 *
 * @source D. C. Rife, R. R. Boorstyn, IEEE Trans. IT-20(5), 591–598, 1974; references.md section 6.
 */
import { describe, expect, it } from 'vitest';
import { SPEED_OF_LIGHT } from '../../src/line/constants.ts';
import { refine } from '../../src/locate/fit-cascade.ts';
import { addFreeLump, type Freedom, NOTHING_FREE } from '../../src/locate/line-model.ts';
import { solveLine } from '../../src/locate/solve-line.ts';
import { evenHz, FOAM, lineOf, MATCHED, OPEN } from './drawn-line.ts';
import {
  contextOn,
  type DrawnRun,
  modelOf,
  reflectionOf,
  searchOn,
  varianceOf,
  withNoise,
} from './drawn-model.ts';

const TRIALS = 60;
/** Three standard errors of the RMS of that many draws, 1/√(2·60) each. */
const SAMPLING = 3 / Math.sqrt(2 * TRIALS);

const ECHO_M = 7.3;
const OHM = 6;
/** So little loss that every frequency counts alike, as the bound has it. */
const CABLE = { ...FOAM, k1: 0.01, k2: 1e-5 };
const METRES_PER_SECOND = (SPEED_OF_LIGHT * CABLE.velocityFactor) / 2;

function runTo(end: DrawnRun['end']): DrawnRun {
  return {
    sections: [{ cable: CABLE, lengthM: 15 }],
    put: [{ kind: 'series-resistance', value: OHM, atM: ECHO_M }],
    end,
  };
}

/** The two bounds on the standard deviation of the distance, m. */
function boundsM(frequencyHz: Float64Array, noiseDb: number) {
  const n = frequencyHz.length;
  const stepHz = frequencyHz[1]! - frequencyHz[0]!;
  const ratio = (OHM / (OHM + 100)) ** 2 / 10 ** (noiseDb / 10);
  const free = 6 / ((2 * Math.PI * stepHz) ** 2 * ratio * n * (n * n - 1));
  const squares = frequencyHz.reduce((sum, f) => sum + (2 * Math.PI * f) ** 2, 0);
  return {
    freePhase: Math.sqrt(free) * METRES_PER_SECOND,
    knownPhase: Math.sqrt(1 / (2 * ratio * squares)) * METRES_PER_SECOND,
  };
}

function rms(values: readonly number[]): number {
  return Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length);
}

const BANDS = [
  ['1–2 GHz', evenHz(1000e6, 2000e6, 301), -50],
  ['600–2700 MHz', evenHz(600e6, 2700e6, 301), -60],
  ['1700–2200 MHz', evenHz(1700e6, 2200e6, 301), -50],
] as const;

describe('boundsM', () => {
  it('gives the worked figures of the references', () => {
    // N = 401 over 1–2 GHz, 40 dB: 0.19420 ps, and 0.036788 ps with the phase known.
    const forty = -40 + 20 * Math.log10(OHM / (OHM + 100));
    const { freePhase, knownPhase } = boundsM(evenHz(1e9, 2e9, 401), forty);
    expect((freePhase / METRES_PER_SECOND) * 1e12).toBeCloseTo(0.1942, 4);
    expect((knownPhase / METRES_PER_SECOND) * 1e12).toBeCloseTo(0.036788, 6);
  });
});

describe('refine', () => {
  it.each(BANDS)(
    'places a lone echo of %s as well as its known phase allows, and no better',
    (_, band, noiseDb) => {
      const clean = reflectionOf(runTo(MATCHED), band);
      const freedom: Freedom = { ...NOTHING_FREE, lumps: null };
      const errors = Array.from({ length: TRIALS }, (_, seed) => {
        const context = contextOn(band, withNoise(clean, noiseDb, seed));
        const model = modelOf(runTo(MATCHED), band);
        const lump = addFreeLump(model, { type: 'resistive', strength: 0.1, distanceM: ECHO_M + 0.002 });
        refine(context, model, freedom, {
          variance: varianceOf(noiseDb),
          maxIterations: 20,
          tolerance: 1e-8,
        });
        return lump.offsetM - ECHO_M;
      });
      const ratio = rms(errors) / boundsM(band, noiseDb).knownPhase;
      expect(ratio).toBeGreaterThan(1 - SAMPLING);
      expect(ratio).toBeLessThan(1 + SAMPLING);
    },
  );
});

describe('solveLine', () => {
  it.each(BANDS.slice(1))(
    'places a lone echo of %s within 0.7 of the bound for a free phase',
    (_, band, noiseDb) => {
      const run = runTo(OPEN);
      const clean = reflectionOf(run, band);
      const { resolutionM } = searchOn(band, CABLE);
      const errors = Array.from({ length: TRIALS }, (_, seed) => {
        const gamma = withNoise(clean, noiseDb, seed);
        const { echoes } = solveLine({
          sweep: { frequencyHz: band, gamma, portOhm: 50, port: 1, ports: 1, file: '', comments: [] },
          line: { ...lineOf(run.sections), end: 'open' },
          lineDescribed: true,
          resolutionM,
          unambiguousM: METRES_PER_SECOND / (band[1]! - band[0]!),
        });
        const found = echoes.filter(({ kind }) => kind === 'series-resistance');
        expect(found).toHaveLength(1);
        return found[0]!.distanceM - ECHO_M;
      });
      const { freePhase, knownPhase } = boundsM(band, noiseDb);
      // Design section 13. Loss, samples' impedance and the instrument are free, too, so that the known phase's own bound
      // is out of reach.
      expect(rms(errors) / freePhase).toBeLessThan(0.7);
      expect(rms(errors) / knownPhase).toBeGreaterThan(1 - SAMPLING);
    },
  );
});
