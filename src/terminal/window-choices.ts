/** The windows that can be chosen, with what each trades of resolution against side lobes. */
import type { Analysis } from '../app/analysis.ts';
import { createWindow, parseWindow, type WindowSpec } from '../numerics/window.ts';

/** A window as it stands in the list. */
export type WindowChoice = {
  /** As the flag takes it: `kaiser:6`. */
  readonly spec: string;
  readonly name: string;
  /** Width of one echo at half its height, in bins of the transform. */
  readonly widthBins: number;
  /** Highest side lobe, dB, negative. */
  readonly sideLobeDb: number;
};

/** From the sharpest to the calmest. */
const OFFERED = [
  'rectangular',
  'kaiser:3',
  'hamming',
  'kaiser:6',
  'hann',
  'dolph-chebyshev:60',
  'blackman',
  'kaiser:10',
  'blackman-harris',
];

/** Points on which the figures are measured; more would not change a shown digit. */
const MEASURED_POINTS = 256;

const measured = new Map<string, WindowChoice>();

/** The offered windows, and the present one first when it is not among them. */
export function windowChoices(present: string): readonly WindowChoice[] {
  const specs = OFFERED.includes(present) ? OFFERED : [present, ...OFFERED];
  return specs.map(windowChoice).filter((choice) => choice !== null);
}

/**
 * Width of one echo with another window than the analysis was made with, m.
 *
 * @returns NaN when one of the windows cannot be read.
 */
export function resolutionWith(analysis: Analysis, madeWith: string, windowSpec: string): number {
  const then = windowChoice(madeWith);
  const now = windowChoice(windowSpec);
  return then && now ? (analysis.reach.resolutionM * now.widthBins) / then.widthBins : Number.NaN;
}

/** A window's name for people: "Kaiser β 6". */
export function windowName(windowSpec: string): string {
  const parsed = parseWindow(windowSpec);
  return parsed.ok ? nameOf(parsed.value) : windowSpec;
}

function windowChoice(spec: string): WindowChoice | null {
  const known = measured.get(spec);
  if (known) return known;
  const parsed = parseWindow(spec);
  if (!parsed.ok) return null;
  const { width6DbBins, sideLobeDb } = createWindow(parsed.value, MEASURED_POINTS);
  const choice = { spec, name: nameOf(parsed.value), widthBins: width6DbBins, sideLobeDb };
  measured.set(spec, choice);
  return choice;
}

function nameOf(spec: WindowSpec): string {
  switch (spec.kind) {
    case 'kaiser':
      return `Kaiser β ${spec.beta}`;
    case 'dolph-chebyshev':
      return `Dolph-Chebyshev ${spec.sideLobeDb} dB`;
    case 'blackman-harris':
      return 'Blackman-Harris';
    case 'rectangular':
      return 'rectangular';
    case 'hann':
    case 'hamming':
    case 'blackman':
      return spec.kind[0]!.toUpperCase() + spec.kind.slice(1);
  }
}
