/** The run of the earlier sweep as its solver found it, at the frequencies that both sweeps share. */
import { DB_PER_NEPER } from '../line/constants.ts';
import { type Line, referenceOhm } from '../line/line.ts';
import { type Medium, sectionMedium } from '../line/medium.ts';
import { groupDelaySPerM, type MediumRun } from '../line/medium-run.ts';
import type { Solution } from '../locate/solution.ts';
import type { DelayPiece, LineChange } from './compare-warp.ts';

export type SolvedRun = {
  readonly run: MediumRun;
  /** Growth of γ for a relative growth of conductor loss, one per section. */
  readonly perLoss: readonly Medium['gammaPerConductorLoss'][];
  /** Model distances of joints 1 … n+1, m. */
  readonly jointM: readonly number[];
  /** Round-trip delay to the end, s. */
  readonly endS: number;
  readonly pieces: readonly DelayPiece[];
};

/** Lengths shorter than this can't be told from nothing, m. */
const SHORTEST_M = 1e-3;

/** Builds it; distances are the model's: physical distance over the solution's scale. */
export function solvedRun(
  line: Line,
  solution: Solution,
  frequencyHz: Float64Array,
  portOhm: number,
): SolvedRun {
  const z0Ohm = referenceOhm(line, portOhm);
  const media = line.sections.map((section) =>
    sectionMedium(section, frequencyHz, { temperatureC: line.temperatureC, z0Ohm }),
  );
  const jointM = jointDistancesM(line, solution);
  const { conductor, dielectric } = solution.loss;
  const rate = (medium: Medium, part: 're' | 'im'): Float64Array =>
    medium.gamma[part].map(
      (value, i) =>
        value +
        conductor * medium.gammaPerConductorLoss[part][i]! +
        dielectric * medium.gammaPerDielectricLoss[part][i]!,
    );
  const run: MediumRun = {
    startM: Float64Array.from(jointM),
    alpha: media.map((medium) => rate(medium, 're')),
    beta: media.map((medium) => rate(medium, 'im')),
  };
  const perLoss = media.map(({ gammaPerConductorLoss: { re, im } }) => ({
    re: re.map((value) => value * (1 + conductor)),
    im: im.map((value) => value * (1 + conductor)),
  }));
  const delays = groupDelaySPerM(run, frequencyHz);
  const pieces: DelayPiece[] = [];
  let fromS = 0;
  line.sections.forEach((section, s) => {
    const before = line.sections[s - 1];
    const alike = before?.type === 'coax' && section.type === 'coax' && before.cable === section.cable;
    const perSecond = 1 / delays[s]!;
    if (!alike)
      pieces.push({
        fromS,
        perLoss: {
          re: perLoss[s]!.re.map((value) => value * perSecond),
          im: perLoss[s]!.im.map((value) => value * perSecond),
        },
      });
    fromS += 2 * delays[s]! * (jointM[s + 1]! - jointM[s]!);
  });
  return { run, perLoss, jointM, endS: fromS, pieces };
}

/** The same run on the later day. */
export function changedRun({ run, perLoss }: SolvedRun, change: LineChange): MediumRun {
  return {
    startM: run.startM,
    alpha: run.alpha.map((alpha, s) => alpha.map((value, i) => value + change.loss * perLoss[s]!.re[i]!)),
    beta: run.beta.map((beta, s) =>
      beta.map((value, i) => (value + change.loss * perLoss[s]!.im[i]!) * (1 + change.stretch)),
    ),
  };
}

/** One-way loss that a relative growth of 1 adds at the middle of the band, dB. */
export function lossPerGrowthDb({ jointM, perLoss }: SolvedRun, frequencyHz: Float64Array): number {
  const middleHz = (frequencyHz[0]! + frequencyHz[frequencyHz.length - 1]!) / 2;
  const middle = Math.max(
    0,
    frequencyHz.findIndex((f) => f >= middleHz),
  );
  return perLoss.reduce(
    (sum, rate, s) => sum + DB_PER_NEPER * rate.re[middle]! * (jointM[s + 1]! - jointM[s]!),
    0,
  );
}

/** Joints where the solver saw them, else where they are described; the end last. */
function jointDistancesM(line: Line, solution: Solution): number[] {
  const seen = new Map<number, number>();
  for (const { joint, distanceM } of solution.echoes) if (joint !== null) seen.set(joint.index, distanceM);
  const last = line.sections.length + 1;
  const distances = [0];
  line.sections.forEach(({ lengthM }, s) => {
    const before = distances[s]!;
    const index = s + 2;
    const described = lengthM === null ? Number.POSITIVE_INFINITY : before + lengthM;
    const own =
      index === last ? solution.lengthM : (seen.get(index) ?? Math.min(described, solution.lengthM));
    distances.push(Math.max(before + SHORTEST_M, own));
  });
  return distances.map((m) => m / solution.distanceScale);
}
