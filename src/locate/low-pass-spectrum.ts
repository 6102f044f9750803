/** A reflection brought down to 0 Hz on even steps, against the line's own impedance: what a low-pass response is made of. */
import type { Medium } from '../line/medium.ts';
import { type MediumRun, pathTo, runLengthM } from '../line/medium-run.ts';
import type { ComplexArray } from '../numerics/complex.ts';
import { complexZeros } from '../numerics/complex.ts';
import { spacingOf } from '../sweep/spacing.ts';
import { type PointsOnPath, planBandLimited } from './band-limited.ts';
import { gridShares, medianStepHz } from './grid-weights.ts';

/** Share of the unambiguous distance that the line may fill: the rest shows where it has ended. */
const FULLEST_TURNS = 0.9;

/** Where points are to spare, the line fills this share: its first bounces still come back within the distance. */
const SPARE_TURNS = 0.45;

/** Expected error at 0 Hz, for a line whose end returns 1, up to which it counts as known. Set by the profiles' tests. */
const LARGEST_ERROR_AT_ZERO = 0.05;

/** So far the end may have turned at the lowest frequency whatever the line, turns. Set by the profiles' tests. */
const SURE_TURNS = 0.6;

/** Turns of the end over the whole band from which on it may have turned further there: enough places to tell apart. */
const MANY_TURNS = 50;

/**
 * Whether a sweep starts low enough, and has steps fine enough, to say what lies at 0 Hz: f1 at the first harmonic
 * where the line fills most of the unambiguous distance, at one of the next where it is shorter.
 *
 * @param frequencyHz Rising, above 0, length n ≥ 2.
 * @param run The line at these frequencies.
 */
export function reachesZero(frequencyHz: Float64Array, run: MediumRun): boolean {
  const measured = { frequencyHz, path: roundTrip(run) };
  if (turnsPerHz(measured) * medianStepHz(frequencyHz) > FULLEST_TURNS) return false;
  const { im } = measured.path;
  const isSure = im[0]! <= 2 * Math.PI * SURE_TURNS;
  if (!isSure && im[im.length - 1]! < 2 * Math.PI * MANY_TURNS) return false;
  const zero = { frequencyHz: new Float64Array(1), path: complexZeros(1) };
  return planBandLimited(measured, zero).error[0]! <= LARGEST_ERROR_AT_ZERO;
}

/** Below the sweep, and over so many of its steps, points stand so much closer: there skin effect bends all like √f. */
const FINER = 6;
const FADING_STEPS = 8;

/** Steps at the low end of a sweep that are looked at. */
const LOW_STEPS = 8;

/** Frequencies over which a low-pass response is summed, and what each stands for; length n. */
export type LowPassNodes = {
  /** From 0, not falling, Hz. */
  readonly frequencyHz: Float64Array;
  /** Edges of the cell of each, Hz; at 0 the cell begins there. */
  readonly fromHz: Float64Array;
  readonly toHz: Float64Array;
  /** Share of the cell that counts, 0..1. */
  readonly share: Float64Array;
  /** Point of the sweep that stands there, or −1 where it has to be filled in. */
  readonly measured: Int32Array;
};

/**
 * The points of a sweep, and a finer row of points from 0 up to them. Over the lowest steps of the sweep the two fade
 * into each other: a sum over even steps is then as good as the integral, wherever the steps begin.
 *
 * @param frequencyHz Of the sweep: rising, above 0, length n ≥ 2. Where it has points to spare, some are left out.
 * @param run The line at these frequencies.
 * @param topHz Where the nodes end, at the sweep's highest frequency at the latest.
 */
export function lowPassNodes(frequencyHz: Float64Array, run: MediumRun, topHz: number): LowPassNodes {
  const nodes: { hz: number; widthHz: number; share: number; measured: number }[] = [];
  const stride = strideOf(frequencyHz, turnsPerHz({ frequencyHz, path: roundTrip(run) }));
  const lowHz = frequencyHz[0]!;
  const lowStepHz = stride * medianStepHz(frequencyHz.subarray(0, Math.min(frequencyHz.length, LOW_STEPS)));
  const fadeHz = Math.min(FADING_STEPS * lowStepHz, frequencyHz[frequencyHz.length - 1]! - lowHz);
  const { widthHz } = gridShares(frequencyHz);
  for (let k = 0; k < frequencyHz.length && frequencyHz[k]! <= topHz; k += stride) {
    const hz = frequencyHz[k]!;
    const share = 1 - fading((hz - lowHz) / fadeHz);
    if (share > 0) nodes.push({ hz, widthHz: stride * widthHz[k]!, share, measured: k });
  }
  const fineHz =
    Math.min(lowHz, lowStepHz) / Math.max(1, Math.round((FINER * Math.min(lowHz, lowStepHz)) / lowStepHz));
  for (let k = 0; k * fineHz < lowHz + fadeHz; k++)
    nodes.push({
      hz: k * fineHz,
      widthHz: fineHz,
      share: fading((k * fineHz - lowHz) / fadeHz),
      measured: -1,
    });
  nodes.sort((a, b) => a.hz - b.hz);
  return {
    frequencyHz: Float64Array.from(nodes, (node) => node.hz),
    fromHz: Float64Array.from(nodes, (node) => Math.max(0, node.hz - node.widthHz / 2)),
    toHz: Float64Array.from(nodes, (node) => node.hz + node.widthHz / 2),
    share: Float64Array.from(nodes, (node) => node.share),
    measured: Int32Array.from(nodes, (node) => node.measured),
  };
}

/** Every how many points of an even sweep are enough for the line; 1 for an uneven one. */
function strideOf(frequencyHz: Float64Array, turnsPerHertz: number): number {
  const { even, stepHz } = spacingOf(frequencyHz);
  return even ? Math.max(1, Math.floor(SPARE_TURNS / (turnsPerHertz * stepHz))) : 1;
}

/** 1 up to 0, 0 from 1 on, flat at both. */
function fading(x: number): number {
  if (x <= 0) return 1;
  return x >= 1 ? 0 : Math.cos((Math.PI / 2) * x) ** 2;
}

export type LowPassPlan = {
  /** From a reflection at the sweep's frequencies to one at the nodes, real at 0. */
  spectrum(gamma: ComplexArray): ComplexArray;
  /** How badly a reflection at the sweep's frequencies fits the picture of a line; lower is likelier. */
  misfit(gamma: ComplexArray): number;
};

/** Residues have delays of a nanosecond at most (common practice: test lead and adaptor); up to here they hold still. */
const RESIDUE_FADES_HZ = 250e6;

/**
 * Plans how a sweep is brought to the nodes of a low-pass sum: its own points are used as they are but for what is
 * not real in time at the low end, which would bend the whole profile; the rest, 0 Hz among them, is filled in. Both
 * by `planBandLimited`.
 *
 * @param frequencyHz Of the sweep, above 0.
 * @param run The line there.
 * @param nodesRun The line at the nodes.
 */
export function planLowPassSpectrum(
  frequencyHz: Float64Array,
  run: MediumRun,
  nodes: LowPassNodes,
  nodesRun: MediumRun,
): LowPassPlan {
  const missing = Array.from(nodes.measured.keys()).filter((i) => nodes.measured[i]! < 0);
  const path = roundTrip(nodesRun);
  const plan = planBandLimited(
    { frequencyHz, path: roundTrip(run) },
    {
      frequencyHz: Float64Array.from(missing, (i) => nodes.frequencyHz[i]!),
      path: {
        re: Float64Array.from(missing, (i) => path.re[i]!),
        im: Float64Array.from(missing, (i) => path.im[i]!),
      },
    },
  );
  return {
    misfit: plan.misfit,
    spectrum(gamma) {
      const filled = plan.fill(gamma);
      const value = complexZeros(nodes.measured.length);
      const residue = plan.residue(gamma);
      nodes.measured.forEach((k, i) => {
        if (k < 0) return;
        value.re[i] = gamma.re[k]!;
        value.im[i] = gamma.im[k]! - residue * fading(nodes.frequencyHz[i]! / RESIDUE_FADES_HZ);
      });
      missing.forEach((i, m) => {
        value.re[i] = filled.re[m]!;
        value.im[i] = filled.im[m]!;
      });
      return value;
    },
  };
}

/** Exponent of the way to the end and back. */
function roundTrip(run: MediumRun): ComplexArray {
  const { attenuation, phase } = pathTo(run, runLengthM(run));
  return { re: attenuation.map((v) => 2 * v), im: phase.map((v) => 2 * v) };
}

/** Mean turns of the end's phase per hertz. */
function turnsPerHz({ frequencyHz, path }: PointsOnPath): number {
  const last = frequencyHz.length - 1;
  return (path.im[last]! - path.im[0]!) / (2 * Math.PI * (frequencyHz[last]! - frequencyHz[0]!));
}

/**
 * Γ seen from the port turned into Γ seen from a medium: (Γ − g)/(1 − g·Γ), g = (Zc − R)/(Zc + R).
 *
 * Taking a reflection against the line's own complex impedance keeps the slow rise that skin effect gives to every
 * long line out of its profile.
 */
export function againstMedium(gamma: ComplexArray, portOhm: number, medium: Medium): ComplexArray {
  const own = complexZeros(gamma.re.length);
  for (let k = 0; k < own.re.length; k++) {
    const [gRe, gIm] = quotient(
      medium.impedance.re[k]! - portOhm,
      medium.impedance.im[k]!,
      medium.impedance.re[k]! + portOhm,
      medium.impedance.im[k]!,
    );
    const re = gamma.re[k]!;
    const im = gamma.im[k]!;
    const [ownRe, ownIm] = quotient(re - gRe, im - gIm, 1 - (gRe * re - gIm * im), -(gRe * im + gIm * re));
    own.re[k] = ownRe;
    own.im[k] = ownIm;
  }
  return own;
}

function quotient(aRe: number, aIm: number, bRe: number, bIm: number): readonly [number, number] {
  const size = bRe * bRe + bIm * bIm;
  return [(aRe * bRe + aIm * bIm) / size, (aIm * bRe - aRe * bIm) / size];
}
