/**
 * Scenes of the independent simulator with everything chosen by hand but what chance does on site: the stray of the
 * cables, the connectors' shapes, the structure, the residue of the correction, the noise.
 */
import { analyse } from '../../src/app/analyse.ts';
import type { Analysis } from '../../src/app/analysis.ts';
import { loadCableTable } from '../../src/app/cable-files.ts';
import { requestOf } from '../bench/run-program.ts';
import { buildScene } from '../scenes/build-scene.ts';
import { CABLE_FIGURES, type CableId } from '../scenes/cable-figures.ts';
import type { CableFigures } from '../scenes/coax-medium.ts';
import { drawConnector } from '../scenes/connector.ts';
import { type Draws, seededDraws } from '../scenes/draws.ts';
import type { FaultKind } from '../scenes/fault.ts';
import { drawResidue } from '../scenes/instrument.ts';
import { jointDistances, type PlacedFault } from '../scenes/run.ts';
import type { Scene } from '../scenes/scene.ts';
import { evenGrid, type PlanName } from '../scenes/sweep-plan.ts';
import { drawEnd, type EndKind, type EndModel } from '../scenes/termination.ts';

/** A fault in its kind's unit (Ω, Ω, nH, pF); at a joint, counted from 1, or inside a cable. */
export type SketchedFault = {
  readonly kind: FaultKind;
  readonly value?: number;
} & ({ readonly atM: number } | { readonly joint: number; readonly half?: 'near' | 'far' });

export type Sketch = {
  /** Default: jumper, main run, jumper, 26 m in all. */
  readonly sections?: readonly {
    readonly cable: CableId;
    readonly lengthM: number;
    /** Where it differs from the true one. */
    readonly describedLengthM?: number;
  }[];
  readonly plan?: PlanName;
  readonly points?: number;
  /** Steps that wander by 30 %. */
  readonly uneven?: boolean;
  readonly end?: EndKind;
  /** A very end instead of a drawn one. */
  readonly endModel?: EndModel;
  readonly describedEnd?: EndKind | 'unknown';
  readonly faults?: readonly SketchedFault[];
  /** Worst return loss over the band of every sound joint, dB. */
  readonly jointDb?: number;
  readonly noiseDb?: number;
  readonly carriers?: boolean;
  /** Only the type of the (single) cable is known. */
  readonly typeOnly?: boolean;
};

const SITE = [
  { cable: 'foam-half-extraflex', lengthM: 3 },
  { cable: 'foam-half', lengthM: 20 },
  { cable: 'foam-half-extraflex', lengthM: 3 },
] as const;

/** Works a sketch out; the seed decides what chance does. */
export function sketchedScene(sketch: Sketch, seed: number): Scene {
  const draws = seededDraws('sketch', seed);
  const { plan = 'wide', points = 1350, end = 'load', sections = SITE, typeOnly = false } = sketch;
  const even = evenGrid(plan, points);
  const frequencyHz = sketch.uneven ? wandering(even, draws) : even;
  const lengths = jointDistances(sections);
  const faults = (sketch.faults ?? []).map((fault): PlacedFault => {
    const { kind, value = null } = fault;
    return 'joint' in fault
      ? {
          fault: { kind, value },
          distanceM: lengths[fault.joint - 1]!,
          joint: fault.joint,
          half: fault.half ?? 'near',
        }
      : { fault: { kind, value }, distanceM: fault.atM, joint: null, half: 'near' };
  });
  return buildScene(
    {
      run: {
        sections: sections.map((section, i) => ({
          describedLengthM: section.lengthM,
          ...section,
          label: `section ${i + 1}`,
          figures: strayed(CABLE_FIGURES[section.cable], draws),
          inline: false,
        })),
        joints: Array.from({ length: sections.length + 1 }, () =>
          drawConnector(draws, sketch.jointDb ?? 36, frequencyHz),
        ),
        faults,
        stretches: [],
        temperatureC: 20 + draws.uniform(-10, 10),
        end: sketch.endModel ?? drawEnd(end, draws, frequencyHz),
      },
      plan: { name: plan, frequencyHz, even: !sketch.uneven },
      ripple: { returnLossDb: 42, measure: 'worst' },
      residue: drawResidue(draws),
      noiseDb: sketch.noiseDb ?? -70,
      carriers: sketch.carriers ?? false,
      describedTemperatureC: 20,
      describedEnd: sketch.describedEnd ?? (typeOnly ? 'unknown' : end),
      lineDescribed: !typeOnly,
    },
    { suite: 'sketch', seed, index: 0 },
    draws,
  );
}

/** A true piece of cable: half a per cent of velocity, 0.7 Ω, 3 % of loss off its type at most. */
function strayed(table: CableFigures, draws: Draws): CableFigures {
  const loss = 1 + draws.uniform(-0.03, 0.03);
  return {
    z0Ohm: table.z0Ohm + draws.uniform(-0.7, 0.7),
    velocityFactor: table.velocityFactor * (1 + draws.uniform(-0.005, 0.005)),
    k1: table.k1 * loss,
    k2: table.k2 * loss,
  };
}

function wandering(even: Float64Array, draws: Draws): Float64Array {
  const stepHz = even[1]! - even[0]!;
  return even.map((f, k) =>
    k === 0 || k === even.length - 1 ? f : Math.round(f + stepHz * draws.uniform(-0.3, 0.3)),
  );
}

const cables = await loadCableTable();

/** What the program says of a scene. @throws Error When it says nothing. */
export function answerTo(scene: Scene): Analysis {
  if (!cables.ok) throw new Error(cables.problems.map((problem) => problem.what).join('; '));
  const request = requestOf(scene, cables.value);
  if (!request.ok) throw new Error(request.problems.map((problem) => problem.what).join('; '));
  const outcome = analyse(request.value);
  if (!outcome.ok) throw new Error(outcome.problems.map((problem) => problem.what).join('; '));
  return outcome.value;
}
