/** What stands in a scene's guide: flanges, faults and ends, relative to the wave impedance of the type. */
import type { Medium } from './coax-medium.ts';
import type { Draws } from './draws.ts';
import type { LumpedKind } from './fault.ts';
import {
  chainToPort,
  type Element,
  emptySpectrum,
  reflectionAgainst,
  type Spectrum,
  type Termination,
} from './ladder.ts';
import type { EndKind, Resonance } from './termination.ts';

/**
 * How a reactance or susceptance goes over the band: gaps and steps follow the frequency or the phase constant, some
 * things hardly change. What a file says of one is its value in the middle of the band.
 */
export type BandLaw = 'frequency' | 'phase' | 'constant';

export const BAND_LAWS: readonly BandLaw[] = ['frequency', 'frequency', 'phase', 'constant'];

/** A lumped thing: r, g, x or b of the guide's wave impedance at the middle of the band, by its kind. */
export type GuideLump = { readonly kind: LumpedKind; readonly size: number; readonly law: BandLaw };

/** The type's guide over the sweep: what everything in it is relative to. */
export type GuideScale = { readonly frequencyHz: Float64Array; readonly medium: Medium };

/** The element that a lump puts into the chain. */
export function lumpElement({ kind, size, law }: GuideLump, { frequencyHz, medium }: GuideScale): Element {
  const middle = frequencyHz.length >> 1;
  const real = kind === 'series-resistance' || kind === 'shunt-leakage';
  const series = kind === 'series-resistance' || kind === 'series-inductance';
  const part = emptySpectrum(frequencyHz.length);
  for (let k = 0; k < frequencyHz.length; k++) {
    const ohm = medium.impedanceRe[k]!;
    const over =
      law === 'frequency'
        ? frequencyHz[k]! / frequencyHz[middle]!
        : law === 'phase'
          ? medium.gammaIm[k]! / medium.gammaIm[middle]!
          : 1;
    const value = size * (real ? 1 : over) * (series ? ohm : 1 / ohm);
    (real ? part.re : part.im)[k] = value;
  }
  return series ? { type: 'impedance', ohm: part } : { type: 'admittance', siemens: part };
}

/** What some elements together reflect in a matched guide. */
export function reflectionOfElements(elements: readonly Element[], scale: GuideScale): Spectrum {
  const { medium, frequencyHz } = scale;
  const n = frequencyHz.length;
  const matched: Termination = {
    voltage: { re: medium.impedanceRe.slice(), im: new Float64Array(n) },
    current: { re: new Float64Array(n).fill(1), im: new Float64Array(n) },
  };
  const port = { re: medium.impedanceRe, im: new Float64Array(n) };
  return reflectionAgainst(chainToPort(elements, matched, frequencyHz), port);
}

/** Largest and RMS size of a reflection over the band, as return loss, dB. */
export function levelsDb(gamma: Spectrum): { readonly worst: number; readonly rms: number } {
  let worst = 0;
  let energy = 0;
  for (let k = 0; k < gamma.re.length; k++) {
    const power = gamma.re[k]! ** 2 + gamma.im[k]! ** 2;
    worst = Math.max(worst, power);
    energy += power / gamma.re.length;
  }
  return { worst: -10 * Math.log10(worst), rms: -10 * Math.log10(energy) };
}

/** A pair of sound flanges: two small things, a few millimetres of gasket apart. */
export type Flange = {
  readonly near: GuideLump;
  readonly far: GuideLump;
  readonly gapM: number;
  /** Worst over the band between matched guides, dB. */
  readonly returnLossDb: number;
};

/** Draws flanges with the given worst return loss over the band. */
export function drawFlange(draws: Draws, returnLossDb: number, scale: GuideScale): Flange {
  const gapM = draws.uniform(0.001, 0.006);
  const kind = () => draws.pick(['series-inductance', 'shunt-capacitance'] as const);
  const shapes = [
    { kind: kind(), share: draws.uniform(0.4, 1), law: draws.pick(BAND_LAWS) },
    { kind: kind(), share: draws.uniform(0.1, 1), law: draws.pick(BAND_LAWS) },
  ] as const;
  const scaled = (size: number): Flange => {
    const lump = (at: 0 | 1): GuideLump => ({
      kind: shapes[at].kind,
      size: size * shapes[at].share,
      law: shapes[at].law,
    });
    return { near: lump(0), far: lump(1), gapM, returnLossDb };
  };
  let low = 1e-6;
  let high = 1;
  for (let i = 0; i < 30; i++) {
    const middle = Math.sqrt(low * high);
    if (levelsDb(reflectionOfElements(flangeElements(scaled(middle), scale), scale)).worst > returnLossDb)
      low = middle;
    else high = middle;
  }
  return scaled(low);
}

/** The flanges' elements, with what is wrong with them between. */
export function flangeElements(flange: Flange, scale: GuideScale, fault: Element[] = []): Element[] {
  return [
    lumpElement(flange.near, scale),
    { type: 'slab', medium: scale.medium, lengthM: flange.gapM / 2, impedanceScale: 1 },
    ...fault,
    { type: 'slab', medium: scale.medium, lengthM: flange.gapM / 2, impedanceScale: 1 },
    lumpElement(flange.far, scale),
  ];
}

/**
 * Reflection of an end, drawn:
 * - `short`: a plate across the flange;
 * - `open`: nothing on the flange, which then radiates: its mouth sees free space through an impedance near that of free
 *   space over the guide's own, with some reactance: 8 to 18 dB come back;
 * - `load`: 22 to 38 dB, part real, part reactive;
 * - `antenna`: a feed, matched in its band (which may be narrower than the sweep), returning more beside it.
 */
export function drawGuideEnd(kind: EndKind, draws: Draws, scale: GuideScale): Spectrum {
  const { frequencyHz } = scale;
  const n = frequencyHz.length;
  switch (kind) {
    case 'short':
      return { re: new Float64Array(n).fill(-1), im: new Float64Array(n) };
    case 'open':
      return drawMouth(draws, scale);
    case 'load': {
      const size = 10 ** (-draws.uniform(22, 38) / 20);
      const angle = draws.uniform(0, 2 * Math.PI);
      const middle = frequencyHz[n >> 1]!;
      return {
        re: new Float64Array(n).fill(size * Math.cos(angle)),
        im: frequencyHz.map((f) => (size * Math.sin(angle) * f) / middle),
      };
    }
    case 'antenna':
      return drawFeed(draws, frequencyHz);
  }
}

function drawMouth(draws: Draws, { medium }: GuideScale): Spectrum {
  const n = medium.gammaIm.length;
  const real = draws.uniform(0.75, 1);
  const reactive = draws.uniform(0.05, 0.3);
  const middle = n >> 1;
  return reflectionOfImpedance(
    // Free space over the wave impedance is the cosine of the bouncing angle.
    medium.impedanceRe.map((ohm) => (real * 376.73) / ohm),
    medium.gammaIm.map((beta) => (reactive * beta) / medium.gammaIm[middle]!),
  );
}

/** Tuned circuits in series, or in parallel; what the sweep's middle half holds is the feed's band. */
function drawFeed(draws: Draws, frequencyHz: Float64Array): Spectrum {
  const [low, high] = [frequencyHz[0]!, frequencyHz.at(-1)!];
  const centre = (low + high) / 2;
  const resonances: Resonance[] = [];
  for (let i = 0; i < draws.pick([1, 1, 2]); i++)
    resonances.push({
      centreHz:
        centre +
        (high - low) * (i === 0 ? draws.uniform(-0.3, 0.3) : draws.pick([-1, 1]) * draws.uniform(0.6, 1.2)),
      // Half the power goes in over centre/Q: about the sweep, or up to four times that.
      quality: (centre / (high - low)) * draws.logUniform(0.25, 1.5),
      resistanceOhm: draws.uniform(0.8, 1.25),
    });
  const n = frequencyHz.length;
  const sum = emptySpectrum(n);
  for (const { centreHz, quality, resistanceOhm } of resonances)
    for (let k = 0; k < n; k++) {
      const off = quality * (frequencyHz[k]! / centreHz - centreHz / frequencyHz[k]!);
      sum.re[k]! += resistanceOhm / (1 + off * off);
      sum.im[k]! -= (resistanceOhm * off) / (1 + off * off);
    }
  const gamma = reflectionOfImpedance(sum.re, sum.im);
  // The dual, tuned circuits in parallel, reflects with the other sign.
  const sign = draws.pick([-1, 1]);
  return { re: gamma.re.map((v) => sign * v), im: gamma.im.map((v) => sign * v) };
}

/** (z − 1)/(z + 1). */
function reflectionOfImpedance(re: Float64Array, im: Float64Array): Spectrum {
  const gamma = emptySpectrum(re.length);
  for (let k = 0; k < re.length; k++) {
    const size = (re[k]! + 1) ** 2 + im[k]! ** 2;
    gamma.re[k] = (re[k]! ** 2 - 1 + im[k]! ** 2) / size;
    gamma.im[k] = (2 * im[k]!) / size;
  }
  return gamma;
}

/** Voltage and current of an end that reflects so, in a guide. */
export function terminationOf(gamma: Spectrum, { medium }: GuideScale): Termination {
  const ohm = medium.impedanceRe;
  return {
    voltage: { re: gamma.re.map((re, k) => ohm[k]! * (1 + re)), im: gamma.im.map((im, k) => ohm[k]! * im) },
    current: { re: gamma.re.map((re) => 1 - re), im: gamma.im.map((im) => -im) },
  };
}
