/**
 * The plain recipe that the program is measured against: Kaiser window, zero-padded inverse Fourier transform,
 * peaks over a threshold, one scalar loss per cable.
 *
 * It is given every fair advantage of a careful user: the described cables' velocities and losses, the described
 * joints and end, a threshold for joints and one for cable, and side lobes masked.
 */

import { createFft, nextPowerOfTwo } from '../../src/numerics/fft.ts';
import { median } from '../../src/numerics/statistics.ts';
import { CABLE_FIGURES, type CableId } from '../scenes/cable-figures.ts';
import { type CableFigures, tableLossDb } from '../scenes/coax-medium.ts';
import { AS_TYPED, GUIDES, type GuideName, guideLossDb, guideMedium } from '../scenes/guide-medium.ts';
import type { Scene } from '../scenes/scene.ts';
import type { Answer, AnsweredFinding } from './answer.ts';

/** @source SI definition of the metre. */
const SPEED_OF_LIGHT_M_S = 299_792_458;
/** Side lobes of a Kaiser window with β = 6 lie 44 dB down. @source references.md section 1. */
const KAISER_BETA = 6;
const MASK_DB = 42;
/** A joint's echo above this is looked at. @source references.md section 8, common practice (26 dB). */
const JOINT_THRESHOLD_DB = 26;
/** Tried 36 to 42 on scenes of seeds 101 and 102: most found for few false ones. */
const CABLE_THRESHOLD_DB = 40;
/** Over the median of all peaks, so that carriers and noise don't flood the list. */
const OVER_FLOOR_DB = 12;
/** Width of an echo at half amplitude, in Fourier cells, with this window. @source references.md section 6. */
const ECHO_CELLS = 1.95;

type DescribedSection = { readonly figures: CableFigures; readonly lengthM: number | null };
type Peak = { readonly distanceM: number; readonly levelDb: number; readonly angle: number };

/** Reads a scene with the plain recipe. */
export function plainRecipe(scene: Scene): Answer {
  const started = performance.now();
  const { frequencyHz, re, im } = evenSweep(scene.sweepText);
  const centreHz = (frequencyHz[0]! + frequencyHz.at(-1)!) / 2;
  const sections = describedSections(scene.lineText, centreHz);
  const slowest = Math.min(...sections.map((section) => section.figures.velocityFactor));
  const spanHz = frequencyHz.at(-1)! - frequencyHz[0]!;
  const cellM = (ECHO_CELLS * SPEED_OF_LIGHT_M_S * slowest) / (2 * spanHz);
  const { peaks: all, floorDb } = tracePeaks(frequencyHz, re, im, sections, centreHz);
  const described = describedLength(sections);
  const peaks = unmasked(all, cellM);
  const end = chooseEnd(peaks, described, cellM);
  const cut = described !== null && end.distanceM < described - Math.max(2 * cellM, 0.05 * described);
  // A careful user scales the picture so that the end falls where the line is known to end.
  const scale = described === null || cut ? 1 : described / end.distanceM;
  const joints = described === null ? [0] : jointPlaces(sections);
  const findings = peaks
    .filter((peak) => peak.distanceM > Math.max(0.5, cellM) && peak.distanceM < end.distanceM - cellM)
    .map((peak) => ({ ...peak, distanceM: peak.distanceM * scale }))
    .flatMap((peak) => findingOf(peak, joints, cellM, floorDb));
  if (cut) findings.push(toFinding(end, Math.cos(end.angle) > 0 ? 'open' : 'short', null));
  return {
    findings,
    stretches: [],
    lengthM: end.distanceM,
    lengthSigmaM: null,
    end: endKind(end),
    loss: plainLoss(re, im),
    solveMs: performance.now() - started,
    failed: null,
  };
}

/** Sections of a line file; the scenes' own figures for the cables and guides that it names. */
function describedSections(lineText: string, centreHz: number): DescribedSection[] {
  type Inline = { z0: number; velocityFactor: number; k1: number; k2: number };
  type Section = { cable: CableId | Inline; lengthM?: number } | { guide: GuideName; lengthM?: number };
  const line = JSON.parse(lineText) as { sections: Section[] };
  return line.sections.map((section) => ({
    figures: 'guide' in section ? guideAtCentre(section.guide, centreHz) : cableFigures(section.cable),
    lengthM: section.lengthM ?? null,
  }));
  function cableFigures(cable: CableId | Inline): CableFigures {
    return typeof cable === 'string' ? CABLE_FIGURES[cable] : { ...cable, z0Ohm: cable.z0 };
  }
}

/** A guide as one who knows only its group velocity and loss in the middle of the band takes it. */
function guideAtCentre(name: GuideName, centreHz: number): CableFigures {
  const around = Float64Array.of(centreHz * 0.999, centreHz * 1.001);
  const medium = guideMedium(GUIDES[name], AS_TYPED, 20, around);
  const delayPerM = (medium.gammaIm[1]! - medium.gammaIm[0]!) / (2 * Math.PI * (around[1]! - around[0]!));
  return {
    z0Ohm: 50,
    velocityFactor: 1 / (delayPerM * SPEED_OF_LIGHT_M_S),
    k1: 0,
    k2: guideLossDb(medium, 100)[0]! / (centreHz / 1e6),
  };
}

function describedLength(sections: readonly DescribedSection[]): number | null {
  return sections.reduce<number | null>(
    (sum, s) => (sum === null || s.lengthM === null ? null : sum + s.lengthM),
    0,
  );
}

function jointPlaces(sections: readonly DescribedSection[]): number[] {
  const places = [0];
  for (const { lengthM } of sections) places.push(places.at(-1)! + (lengthM ?? 0));
  return places;
}

/** The sweep on an even grid: linear interpolation where it isn't. */
function evenSweep(text: string): { frequencyHz: Float64Array; re: Float64Array; im: Float64Array } {
  const rows = text
    .split('\n')
    .filter((row) => row !== '' && !row.startsWith('!') && !row.startsWith('#'))
    .map((row) => row.split(' ').map(Number));
  const n = rows.length;
  const [first, last] = [rows[0]![0]!, rows[n - 1]![0]!];
  const frequencyHz = Float64Array.from({ length: n }, (_, k) => first + ((last - first) * k) / (n - 1));
  const re = new Float64Array(n);
  const im = new Float64Array(n);
  let below = 0;
  for (let k = 0; k < n; k++) {
    while (below < n - 2 && rows[below + 1]![0]! <= frequencyHz[k]!) below++;
    const [f0, r0, i0] = rows[below] as [number, number, number];
    const [f1, r1, i1] = rows[below + 1] as [number, number, number];
    const share = (frequencyHz[k]! - f0) / (f1 - f0);
    re[k] = r0 + share * (r1 - r0);
    im[k] = i0 + share * (i1 - i0);
  }
  return { frequencyHz, re, im };
}

/** Local maxima of the padded transform, their level with the described loss put back, and the median of them. */
function tracePeaks(
  frequencyHz: Float64Array,
  re: Float64Array,
  im: Float64Array,
  sections: readonly DescribedSection[],
  centreHz: number,
): { peaks: Peak[]; floorDb: number } {
  const n = frequencyHz.length;
  const size = nextPowerOfTwo(16 * n);
  const packed = new Float64Array(2 * size);
  let gain = 0;
  for (let k = 0; k < n; k++) {
    const weight = kaiser((2 * k) / (n - 1) - 1);
    gain += weight;
    packed[2 * k] = re[k]! * weight;
    packed[2 * k + 1] = im[k]! * weight;
  }
  const trace = new Float64Array(2 * size);
  createFft(size).inverse(packed, trace);
  const stepS = (n - 1) / (size * (frequencyHz[n - 1]! - frequencyHz[0]!));
  const levelAt = (i: number) => (Math.hypot(trace[2 * i]!, trace[2 * i + 1]!) * size) / gain;
  const peaks: Peak[] = [];
  for (let i = 1; i < size - 1; i++) {
    const here = levelAt(i);
    if (here < 1e-4 || here <= levelAt(i - 1) || here < levelAt(i + 1)) continue;
    const tip = (0.5 * (levelAt(i - 1) - levelAt(i + 1))) / (levelAt(i - 1) - 2 * here + levelAt(i + 1));
    const delayS = (i + tip) * stepS;
    const { distanceM, lossDb } = placeOf(delayS, sections, centreHz);
    // Phase of the peak with the carrier's turn at band start undone, the window's centre left in.
    const turned = 2 * Math.PI * frequencyHz[0]! * delayS;
    const within = Math.PI * (frequencyHz[n - 1]! - frequencyHz[0]!) * -tip * stepS;
    const angle = Math.atan2(trace[2 * i + 1]!, trace[2 * i]!) + turned - within;
    peaks.push({ distanceM, levelDb: -20 * Math.log10(here) - 2 * lossDb, angle });
  }
  return { peaks, floorDb: median(peaks.map((peak) => peak.levelDb)) };
}

/** Kaiser window at x in −1..1, from the series of the modified Bessel function. */
function kaiser(x: number): number {
  const argument = KAISER_BETA * Math.sqrt(Math.max(0, 1 - x * x));
  let term = 1;
  let sum = 1;
  for (let m = 1; m < 40; m++) {
    term *= (argument / (2 * m)) ** 2;
    sum += term;
  }
  return sum;
}

/** Distance and one-way loss at a round-trip delay, walking through the described sections. */
function placeOf(delayS: number, sections: readonly DescribedSection[], centreHz: number) {
  let left = delayS;
  let distanceM = 0;
  let lossDb = 0;
  for (const [s, { figures, lengthM }] of sections.entries()) {
    const slowness = 2 / (SPEED_OF_LIGHT_M_S * figures.velocityFactor);
    const wholeM = s === sections.length - 1 ? Number.POSITIVE_INFINITY : (lengthM ?? 0);
    const walkedM = Math.min(wholeM, left / slowness);
    distanceM += walkedM;
    lossDb += tableLossDb(figures, walkedM, centreHz);
    left -= walkedM * slowness;
    if (left <= 0) break;
  }
  return { distanceM, lossDb };
}

/** Peaks that no stronger neighbour's flank or side lobes explain. */
function unmasked(peaks: readonly Peak[], cellM: number): Peak[] {
  return peaks.filter((peak) =>
    peaks.every((other) => {
      const apartM = Math.abs(other.distanceM - peak.distanceM);
      if (other === peak || other.levelDb >= peak.levelDb) return true;
      if (apartM < 0.6 * cellM) return false;
      return apartM > 8 * cellM || peak.levelDb - other.levelDb < MASK_DB - 4;
    }),
  );
}

/** Near the described end the strongest peak there; a full reflection before it is a cut; else the strongest. */
function chooseEnd(peaks: readonly Peak[], described: number | null, cellM: number): Peak {
  const strongest = (list: readonly Peak[]) =>
    list.reduce<Peak | null>(
      (best, peak) => (best === null || peak.levelDb < best.levelDb ? peak : best),
      null,
    );
  const nothing: Peak = { distanceM: described ?? 0, levelDb: 99, angle: 0 };
  if (described === null) return strongest(peaks.filter((p) => p.distanceM > cellM)) ?? nothing;
  const cut = peaks.find(
    (p) => p.levelDb < 1.5 && p.distanceM > cellM && p.distanceM < described - 2 * cellM,
  );
  const reach = Math.max(2 * cellM, 0.02 * described);
  const near = strongest(peaks.filter((p) => Math.abs(p.distanceM - described) < reach));
  return cut ?? near ?? nothing;
}

function endKind(end: Peak): string {
  if (end.levelDb < 3) return Math.cos(end.angle) > 0 ? 'open' : 'short';
  return end.levelDb < 14 ? 'antenna' : 'load';
}

/** A fault when the peak is over the threshold of its place. */
function findingOf(peak: Peak, joints: readonly number[], cellM: number, floorDb: number): AnsweredFinding[] {
  const reach = Math.max(0.75 * cellM, 0.01 * peak.distanceM);
  const joint = joints.findIndex((jointM) => Math.abs(jointM - peak.distanceM) < reach);
  const threshold = joint >= 0 ? JOINT_THRESHOLD_DB : CABLE_THRESHOLD_DB;
  if (peak.levelDb > Math.min(threshold, floorDb - OVER_FLOOR_DB)) return [];
  const kind = kindOfPhase(peak.angle);
  // An echo at a described joint is that joint: a careful user reports the joint's own place.
  if (joint >= 0) return [toFinding({ ...peak, distanceM: joints[joint]! }, kind, joint + 1)];
  return [toFinding(peak, kind, null)];
}

/** The kind whose phase is nearest: 0 series R, 180° shunt leak, +90° series L, −90° shunt C. */
function kindOfPhase(angle: number): string {
  const quarter = Math.round(angle / (Math.PI / 2));
  const kinds = ['series-resistance', 'series-inductance', 'shunt-leakage', 'shunt-capacitance'];
  return kinds[((quarter % 4) + 4) % 4]!;
}

function toFinding(peak: Peak, kind: string, joint: number | null): AnsweredFinding {
  return { severity: 'fault', kind, distanceM: peak.distanceM, sigmaM: null, joint, confidence: null };
}

/** Points on each side over which a careful reader averages the ripple of a return-loss curve: a twelfth of them. */
const AVERAGED_SHARE = 1 / 12;

/** Half the return loss, averaged over the ripple: one-way loss of a line that is open or shorted at its end. */
function plainLoss(re: Float64Array, im: Float64Array): Answer['loss'] {
  const reach = Math.max(1, Math.round(re.length * AVERAGED_SHARE));
  const lossDb = re.map((_, k) => {
    const [from, to] = [Math.max(0, k - reach), Math.min(re.length, k + reach + 1)];
    let sum = 0;
    for (let i = from; i < to; i++) sum += -10 * Math.log10(re[i]! ** 2 + im[i]! ** 2);
    return sum / (to - from) / 2;
  });
  return { lossDb, sigmaDb: null };
}
