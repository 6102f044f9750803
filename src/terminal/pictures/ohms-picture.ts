/** Ohms against distance. */
import type { Analysis } from '../../app/analysis.ts';
import { fixedText, lengthPerMetre, ohmText } from '../../plot/quantity-text.ts';
import { run } from '../../plot/run.ts';
import { ohmsAt, ohmsInView, whyNoOhms } from '../../report/ohms-curve.ts';
import { chosenOf, spanOf } from '../derived.ts';
import { foundIn } from '../found.ts';
import { layoutOf } from '../layout.ts';
import type { State } from '../state.ts';
import { findingMark } from './finding-mark.ts';
import { levelLabel } from './level-label.ts';
import type { Picture } from './picture.ts';

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
    atCursor: ohmText(ohmsAt(profile, state.cursorM)),
    legend: [
      [run(profile.origin === 'measured' ? 'from the sweep' : 'from the solved line')],
      [run(`port ${fixedText(sweep.portOhm, 0)} Ω`)],
    ],
  };
}
