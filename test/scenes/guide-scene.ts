/** Scenes of waveguide runs: tubes between flanges, one fault or none, whatever stands at the far end. */
import type { Medium } from './coax-medium.ts';
import type { Draws } from './draws.ts';
import { LUMPED_KINDS, type LumpedKind } from './fault.ts';
import {
  AS_TYPED,
  GUIDES,
  type GuideFigures,
  type GuideName,
  guideLossDb,
  guideMedium,
  guideResolutionM,
  guideUnambiguousM,
  type TubeFigures,
} from './guide-medium.ts';
import {
  BAND_LAWS,
  drawFlange,
  drawGuideEnd,
  type Flange,
  flangeElements,
  type GuideLump,
  type GuideScale,
  levelsDb,
  lumpElement,
  reflectionOfElements,
  terminationOf,
} from './guide-parts.ts';
import { addNoise, addResidue, drawResidue } from './instrument.ts';
import { chainToPort, type Element, reflectionAgainst } from './ladder.ts';
import { drawSlabs, type Slab } from './ripple.ts';
import { jointDistances } from './run.ts';
import type { Scene, TrueFault } from './scene.ts';
import type { EndKind } from './termination.ts';
import { type SceneName, touchstoneText } from './touchstone-text.ts';

type Tube = TubeFigures & { readonly lengthM: number; readonly describedLengthM: number };

/** A run before it is worked out. */
type GuideRun = {
  readonly name: GuideName;
  readonly tubes: readonly Tube[];
  readonly temperatureC: number;
  readonly frequencyHz: Float64Array;
  readonly scale: GuideScale;
  readonly media: readonly Medium[];
};

type GuideFault = { readonly lump: GuideLump; readonly distanceM: number; readonly joint: number | null };

/** Points that instruments offer. */
const POINT_COUNTS = [201, 401, 801, 1001, 1601, 2001, 4001];
/** Reach kept over the line's length. Common practice, references.md section 8. */
const REACH_MARGIN = 1.2;
/** Tubes of one lot share a die: this much of the width is theirs together, and this little each one's own, 1σ. */
const LOT_WIDTH = 0.003;
const OWN_WIDTH = 7e-5;

/** Draws and works out one scene; `share` of them carry a fault. */
export function guideScene(name: SceneName, draws: Draws, share: number): Scene {
  for (;;) {
    const run = drawRun(draws);
    if (run === null) continue;
    const fault = draws.chance(share) ? drawFault(run, draws) : 'none';
    if (fault !== null) return workOut(name, run, fault === 'none' ? null : fault, draws);
  }
}

/** A run of 3–60 m in tubes of one size, and a sweep within its band that sees all of it. */
function drawRun(draws: Draws): GuideRun | null {
  const name = draws.pick(Object.keys(GUIDES) as GuideName[]);
  const guide = GUIDES[name];
  const lengthM = draws.logUniform(3, 60);
  const lot = 1 + draws.uniform(-LOT_WIDTH, LOT_WIDTH);
  const loss = draws.uniform(0.95, 1.12);
  const tubes = cutIntoTubes(lengthM, draws).map(
    (describedLengthM): Tube => ({
      describedLengthM,
      lengthM: describedLengthM + draws.normal() * (0.002 + 0.0003 * describedLengthM),
      width: lot + OWN_WIDTH * draws.normal(),
      loss: loss * (1 + 0.01 * draws.normal()),
    }),
  );
  const frequencyHz = drawSweep(guide, lengthM, draws);
  if (frequencyHz === null) return null;
  const temperatureC = draws.uniform(-15, 40);
  const scale = { frequencyHz, medium: guideMedium(guide, AS_TYPED, temperatureC, frequencyHz) };
  const media = tubes.map((tube) => guideMedium(guide, tube, temperatureC, frequencyHz));
  return { name, tubes, temperatureC, frequencyHz, scale, media };
}

/** Two to twelve tubes of 1–6 m, to the centimetre. */
function cutIntoTubes(lengthM: number, draws: Draws): number[] {
  const count = Math.max(2, Math.min(12, Math.round(lengthM / draws.uniform(1.5, 5))));
  const shares = Array.from({ length: count }, () => draws.uniform(0.6, 1.4));
  const total = shares.reduce((a, b) => a + b, 0);
  return shares.map((share) => Math.round(((lengthM * share) / total) * 100) / 100);
}

/** Mostly most of the guide's band; one in four no more than a link's own band and some. */
function drawSweep(guide: GuideFigures, lengthM: number, draws: Draws): Float64Array | null {
  const [lowHz, highHz] = guide.bandHz;
  const span = (highHz - lowHz) * (draws.chance(0.25) ? draws.uniform(0.15, 0.4) : draws.uniform(0.5, 1));
  const fromHz = draws.uniform(lowHz, highHz - span);
  const enough = POINT_COUNTS.filter((count) => {
    const grid = evenBand(fromHz, span, count);
    const medium = guideMedium(guide, { width: 1 - LOT_WIDTH, loss: 1 }, 20, grid);
    return guideUnambiguousM(medium) >= REACH_MARGIN * lengthM;
  });
  return enough.length === 0 ? null : evenBand(fromHz, span, draws.pick(enough.slice(0, 3)));
}

function evenBand(fromHz: number, spanHz: number, count: number): Float64Array {
  return Float64Array.from({ length: count }, (_, k) => Math.round(fromHz + (spanHz * k) / (count - 1)));
}

/** Half the faults at flanges (not at the port or the end), half inside a tube; null where there is no room. */
function drawFault(run: GuideRun, draws: Draws): GuideFault | null {
  const joints = jointDistances(run.tubes);
  const kind = draws.pick(LUMPED_KINDS);
  const law = draws.pick(BAND_LAWS);
  if (draws.chance(0.5)) {
    const joint = draws.integer(2, run.tubes.length);
    return { lump: drawFlangeFault(kind, law, run, draws), distanceM: joints[joint - 1]!, joint };
  }
  const margin = Math.max(0.3, 1.5 * guideResolutionM(run.scale.medium));
  const tube = draws.integer(0, run.tubes.length - 1);
  const fromM = joints[tube]! + margin;
  const toM = joints[tube + 1]! - margin;
  if (toM - fromM < 0.1) return null;
  const distanceM = draws.uniform(fromM, toM);
  const levelDb = draws.chance(1 / 3) ? draws.uniform(32, 42) : draws.uniform(12, 32);
  return {
    lump: lumpOfLevel(kind, law, levelDb, run.scale, lossUpTo(run, distanceM)),
    distanceM,
    joint: null,
  };
}

/** By size on site: r and g of 0.08–0.8; a reactance that reflects more than 25 dB even of a good flange. */
function drawFlangeFault(kind: LumpedKind, law: BandLaw, run: GuideRun, draws: Draws): GuideLump {
  const real = kind === 'series-resistance' || kind === 'shunt-leakage';
  if (real) return { kind, law, size: Number(draws.logUniform(0.08, 0.8).toPrecision(4)) };
  return lumpOfLevel(kind, law, draws.uniform(10, 22), run.scale, null);
}

type BandLaw = GuideLump['law'];

/** The size at which a lump looks as large as wanted, in RMS over the band behind some loss. */
function lumpOfLevel(
  kind: LumpedKind,
  law: BandLaw,
  wantedDb: number,
  scale: GuideScale,
  lossNp: Float64Array | null,
): GuideLump {
  let [low, high] = [1e-4, 20];
  for (let i = 0; i < 40; i++) {
    const size = Math.sqrt(low * high);
    if (apparentDb({ kind, law, size }, scale, lossNp) > wantedDb) low = size;
    else high = size;
  }
  return { kind, law, size: Number(Math.sqrt(low * high).toPrecision(4)) };
}

function apparentDb(lump: GuideLump, scale: GuideScale, lossNp: Float64Array | null): number {
  const gamma = reflectionOfElements([lumpElement(lump, scale)], scale);
  if (lossNp === null) return levelsDb(gamma).rms;
  const seen = (part: Float64Array) => part.map((v, k) => v * Math.exp(-2 * lossNp[k]!));
  return levelsDb({ re: seen(gamma.re), im: seen(gamma.im) }).rms;
}

function lossUpTo(run: GuideRun, distanceM: number): Float64Array {
  const joints = jointDistances(run.tubes);
  const loss = new Float64Array(run.frequencyHz.length);
  run.media.forEach((medium, t) => {
    const inside = Math.max(0, Math.min(joints[t + 1]!, distanceM) - joints[t]!);
    for (let k = 0; k < loss.length; k++) loss[k]! += medium.gammaRe[k]! * inside;
  });
  return loss;
}

/** Worst over the swept band of what the tubes themselves return, of a whole run, dB. */
const STRUCTURE_DB = [42, 55] as const;

function workOut(name: SceneName, run: GuideRun, fault: GuideFault | null, draws: Draws): Scene {
  const { frequencyHz, scale, tubes } = run;
  const endKind = draws.pick<EndKind>(['antenna', 'antenna', 'antenna', 'short', 'short', 'load', 'open']);
  const flanges = Array.from({ length: tubes.length + 1 }, () =>
    drawFlange(draws, draws.uniform(30, 46), scale),
  );
  const structureDb = draws.uniform(...STRUCTURE_DB);
  const end = terminationOf(drawGuideEnd(endKind, draws, scale), scale);
  const elements = layTubes(run, flanges, fault, structureDb, draws);
  const n = frequencyHz.length;
  const port = { re: scale.medium.impedanceRe, im: new Float64Array(n) };
  const gamma = reflectionAgainst(chainToPort(elements, end, frequencyHz), port);
  const measured = addResidue(gamma, drawResidue(draws), frequencyHz);
  const noiseDb = -draws.uniform(60, 80);
  addNoise(measured, noiseDb, draws);
  const joints = jointDistances(tubes);
  const saysTemperature = draws.chance(0.7);
  return {
    ...name,
    sweepText: touchstoneText(name, frequencyHz, measured),
    lineText: `${JSON.stringify(
      {
        name: `scene ${name.suite} ${name.seed}/${name.index}`,
        sections: tubes.map(({ describedLengthM }, t) => ({
          guide: run.name,
          lengthM: describedLengthM,
          label: `tube ${t + 1}`,
        })),
        end: endKind,
        ...(saysTemperature ? { temperatureC: Math.round(run.temperatureC + draws.uniform(-3, 3)) } : {}),
      },
      null,
      2,
    )}\n`,
    lineDescribed: true,
    truth: {
      faults: fault === null ? [] : [trueFault(run, fault)],
      stretches: [],
      end: endKind,
      lengthM: joints.at(-1)!,
      jointM: joints,
      jointReturnLossDb: flanges.map((flange) => flange.returnLossDb),
      ghostsM: fault === null ? [] : [2 * joints.at(-1)! - fault.distanceM],
      plan: 'guide',
      points: n,
      even: true,
      spanHz: frequencyHz.at(-1)! - frequencyHz[0]!,
      resolutionM: guideResolutionM(scale.medium),
      noiseDb,
      structuralReturnLossDb: structureDb,
      temperatureC: run.temperatureC,
      cableLossDb: tubes
        .map(({ lengthM }, t) => guideLossDb(run.media[t]!, lengthM))
        .reduce((sum, loss) => sum.map((v, k) => v + loss[k]!)),
      interfered: [],
    },
  };
}

function trueFault(run: GuideRun, { lump, distanceM, joint }: GuideFault): TrueFault {
  return {
    distanceM,
    kind: lump.kind,
    value: lump.size,
    unit: 'z0',
    joint,
    apparentReturnLossDb: apparentDb(lump, run.scale, lossUpTo(run, distanceM)),
  };
}

/** Flanges, tubes in slabs, and the fault where it is. */
function layTubes(
  run: GuideRun,
  flanges: readonly Flange[],
  fault: GuideFault | null,
  structureDb: number,
  draws: Draws,
): Element[] {
  const joints = jointDistances(run.tubes);
  const slabs = run.tubes.map(({ lengthM }) => drawSlabs(lengthM, draws));
  const ripple = structureScale(run, slabs, structureDb);
  const broken = fault === null ? [] : [lumpElement(fault.lump, run.scale)];
  const chain: Element[] = [];
  for (let j = 0; j < joints.length; j++) {
    chain.push(...flangeElements(flanges[j]!, run.scale, fault?.joint === j + 1 ? broken : []));
    const medium = run.media[j];
    if (medium === undefined) break;
    // The gaskets' own length comes out of the tubes, all of it at the port and at the end.
    let atM = joints[j]! + flanges[j]!.gapM * (j === 0 ? 1 : 0.5);
    const stopM = joints[j + 1]! - flanges[j + 1]!.gapM * (j === run.tubes.length - 1 ? 1 : 0.5);
    for (const [s, slab] of slabs[j]!.entries()) {
      const last = s === slabs[j]!.length - 1;
      const toM = last ? Math.max(stopM, atM) : atM + slab.lengthM;
      const impedanceScale = Math.exp(ripple * slab.shape);
      const layTo = (endM: number) =>
        chain.push({ type: 'slab', medium, lengthM: endM - atM, impedanceScale });
      if (fault !== null && fault.joint === null && fault.distanceM >= atM && fault.distanceM < toM) {
        layTo(fault.distanceM);
        chain.push(...broken);
        atM = fault.distanceM;
      }
      layTo(toM);
      atM = toM;
    }
  }
  return chain;
}

/** The factor on the slabs' shapes that gives the run its structure: the tubes alone, matched, at some frequencies. */
function structureScale(run: GuideRun, slabs: readonly (readonly Slab[])[], wantedDb: number): number {
  const trial = 1e-3;
  const elements = slabs.flatMap((tube, t) =>
    tube.map(
      (slab): Element => ({
        type: 'slab',
        medium: run.media[t]!,
        lengthM: slab.lengthM,
        impedanceScale: Math.exp(trial * slab.shape),
      }),
    ),
  );
  // Small steps add up in proportion; matched to the lot's own impedance, which differs from the type's by a hair.
  const n = run.frequencyHz.length;
  const own = { re: run.media[0]!.impedanceRe, im: new Float64Array(n) };
  const end = { voltage: own, current: { re: new Float64Array(n).fill(1), im: new Float64Array(n) } };
  const gamma = reflectionAgainst(chainToPort(elements, end, run.frequencyHz), own);
  return trial * 10 ** ((levelsDb(gamma).worst - wantedDb) / 20);
}
