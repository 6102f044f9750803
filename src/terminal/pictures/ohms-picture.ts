/** Ohms against distance. */
import type { Analysis } from '../../app/analysis.ts';
import { hasGuide } from '../../line/line.ts';
import type { ImpedanceProfile } from '../../locate/impedance-profile.ts';
import { fixedText, frequencyText, lengthPerMetre, ohmText } from '../../plot/quantity-text.ts';
import { run } from '../../plot/run.ts';
import { type Domain, paddedDomain } from '../../plot/scale.ts';
import { chosenOf, spanOf } from '../derived.ts';
import { foundIn } from '../found.ts';
import { layoutOf } from '../layout.ts';
import type { State } from '../state.ts';
import { findingMark } from './finding-mark.ts';
import { levelLabel } from './level-label.ts';
import type { Picture } from './picture.ts';

/** A sound line would otherwise fill the plot with a fraction of an ohm. */
const SMALLEST_SPAN_OHM = 8;
/** An open reads as thousands of ohms; the axis ends here, at multiples of the port's. */
const MOST_TIMES_PORT = 3;
/** The end's own step begins so many resolutions before it. */
const BEFORE_END_RESOLUTIONS = 2;

/** The impedance profile with what was found on it. */
export function ohmsPicture(state: State, analysis: Analysis): Picture {
  const { impedance: profile, sweep } = analysis;
  if (!profile) return { chart: null, instead: whyNoOhms(analysis), atCursor: '', legend: [] };
  const span = spanOf(state, analysis);
  const chosen = chosenOf(state);
  return {
    chart: {
      x: { domain: span, unit: state.units, perUnit: lengthPerMetre(state.units) },
      y: { domain: ohmsInView(analysis, profile, span), unit: 'Ω' },
      series: [{ x: profile.distanceM, y: profile.impedanceOhm, role: 'ohms' }],
      levels: [{ y: sweep.portOhm, role: 'guide' }],
      marks: [
        ...levelLabel('port', sweep.portOhm, span, layoutOf(state).plotWidth),
        ...foundIn(analysis, state.units)
          .filter((row) => row.severity !== 'sound' || row === chosen)
          .map(findingMark)
          .reverse(),
      ],
      cursor: state.cursorM,
    },
    instead: [],
    atCursor: ohmText(valueAt(profile, state.cursorM)),
    legend: [
      [run(profile.origin === 'measured' ? 'from the sweep' : 'from the solved line')],
      [run(`port ${fixedText(sweep.portOhm, 0)} Ω`)],
    ],
  };
}

/** The end may read as nothing or as thousands of ohms: the axis is for what lies before it. */
function ohmsInView(analysis: Analysis, profile: ImpedanceProfile, [from, to]: Domain): Domain {
  const { portOhm } = analysis.sweep;
  const lastM = Math.min(to, analysis.solution.lengthM - BEFORE_END_RESOLUTIONS * analysis.reach.resolutionM);
  const inView = profile.impedanceOhm.filter(
    (ohm, i) =>
      profile.distanceM[i]! >= from && profile.distanceM[i]! <= lastM && ohm < MOST_TIMES_PORT * portOhm,
  );
  const [low, high] = paddedDomain([portOhm, ...inView], {
    fallback: [0, 2 * portOhm],
    smallestSpan: SMALLEST_SPAN_OHM,
  });
  return [Math.max(0, low), high];
}

/** Straight between the samples; NaN outside them. */
function valueAt({ distanceM, impedanceOhm }: ImpedanceProfile, atM: number): number {
  const after = distanceM.findIndex((d) => d >= atM);
  if (after < 0) return Number.NaN;
  if (distanceM[after] === atM) return impedanceOhm[after]!;
  if (after === 0) return Number.NaN;
  const share = (atM - distanceM[after - 1]!) / (distanceM[after]! - distanceM[after - 1]!);
  return impedanceOhm[after - 1]! + share * (impedanceOhm[after]! - impedanceOhm[after - 1]!);
}

function whyNoOhms({ sweep, line, reach }: Analysis): readonly string[] {
  if (hasGuide(line)) return ['A waveguide has no ohms of its own, so none can be drawn along this line.'];
  if (reach.impedanceProfile !== 'no') return ['This answer carries no ohms along the line.'];
  const startHz = sweep.frequencyHz[0]!;
  const stopHz = sweep.frequencyHz.at(-1)!;
  const stepHz = (stopHz - startHz) / (sweep.frequencyHz.length - 1);
  return [
    'This sweep gives no ohms along the line.',
    `It starts at ${frequencyText(startHz)}. Ohms need a sweep that begins near zero: at most a few of its own ` +
      `steps (${frequencyText(stepHz)} here) above 0 Hz, evenly spaced.`,
  ];
}
