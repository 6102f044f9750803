/** What the search for the end is given and gives, and where the description puts the end. */
import type { EndKind, Line } from '../line/line.ts';
import type { LineModel } from './line-model.ts';

export type EndFound = {
  readonly model: LineModel;
  /** The line up to the end that was found; shorter than described when the line is cut. */
  readonly line: Line;
  readonly kind: Exclude<EndKind, 'unknown'>;
  /** True when the line ends well before its description does. */
  readonly cut: boolean;
  /** Cost distance to the best other kind of end, in nats. */
  readonly lead: number;
};

export type EndSearch = {
  readonly line: Line;
  readonly portOhm: number;
  /** Taper for traces, length n. */
  readonly taper: Float64Array;
  /** 6 dB width of an echo, m. */
  readonly resolutionM: number;
  /** Farthest distance the sweep can tell apart, m. */
  readonly unambiguousM: number;
  readonly lossSigma: number;
  /** True when the joints are known already and only the end may move. */
  readonly jointsKnown?: boolean;
};

/** A kind that an end may be found to be. */
export type FoundEnd = Exclude<EndKind, 'unknown'>;

/** A corrected level that only an open, a short or a cut can reach. */
export const FULL_REFLECTION_LEVEL = 0.75;

/** Where the description puts the end, and how sure that is. */
export function expectedEnd(base: LineModel): { readonly meanM: number; readonly sigmaM: number } {
  const n = base.boundaryM.length;
  return {
    meanM: base.priors.boundaryMeanM[n - 1]!,
    sigmaM: Math.sqrt(base.priors.boundaryCovariance[n * n - 1]!),
  };
}

/** Standard deviations of the description within which the end is looked for. */
export const END_SIGMAS = 3.5;
