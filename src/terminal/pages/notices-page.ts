/** What the answer rests on: the sweep, what it can do, how well the line explains it, and every doubt. */
import type { Analysis } from '../../app/analysis.ts';
import { noticeInUnits } from '../../app/analysis-in-units.ts';
import { describedLengthM } from '../../line/line.ts';
import {
  decibelText,
  frequencySpanText,
  frequencyText,
  lengthText,
  lengthWithSigmaText,
  levelText,
  percentText,
  temperatureText,
  type Units,
} from '../../plot/quantity-text.ts';
import { type Paragraph, paragraphRows } from '../parts/paragraph.ts';
import { analysisOf, type State } from '../state.ts';
import type { Page } from './page.ts';

const LABEL = 14;

/** Facts first, then the notices. */
export function noticesPage(state: State, width: number): Page {
  const analysis = analysisOf(state);
  if (!analysis || state.solve.phase !== 'ready') return { title: 'what the answer rests on', lines: [] };
  const notices = state.solve.notices.map(
    (notice): Paragraph => ({ label: 'notice', text: noticeInUnits(notice, state.units).what }),
  );
  const none: Paragraph = { label: 'notices', text: 'none' };
  return {
    title: 'what the answer rests on',
    lines: [
      ...factsOf(analysis, state.units).flatMap((fact) => paragraphRows(fact, width, LABEL)),
      [],
      ...(notices.length > 0 ? notices : [none]).flatMap((notice) => paragraphRows(notice, width, LABEL)),
    ],
  };
}

function factsOf(analysis: Analysis, units: Units): readonly Paragraph[] {
  const { sweep, line, reach, solution } = analysis;
  const startHz = sweep.frequencyHz[0]!;
  const stopHz = sweep.frequencyHz.at(-1)!;
  const points = sweep.frequencyHz.length;
  const described = describedLengthM(line);
  const temperature = temperatureText(line.temperatureC, units);
  return [
    {
      label: 'sweep',
      text:
        `${sweep.file}: ${frequencySpanText(startHz, stopHz)}, ${points} points ` +
        `about ${frequencyText((stopHz - startHz) / (points - 1))} apart` +
        (sweep.ports > 1 ? `, port ${sweep.port} of ${sweep.ports}` : ''),
    },
    {
      label: 'it resolves',
      text:
        `${lengthText(reach.resolutionM, units)}, sees ${lengthText(reach.unambiguousM, units, 1)} before echoes ` +
        `fold back, and at the far end echoes down to ${levelText(reach.weakestReturnLossDb)}`,
    },
    {
      label: 'line',
      text:
        `${line.sections.map((section) => section.label).join(', ')}; ` +
        (described === null ? 'length not described' : `${lengthText(described, units)} described`) +
        (line.temperatureKnown ? `, ${temperature}` : `, taken as ${temperature}`),
    },
    {
      label: 'end',
      text:
        `${solution.end === 'unknown' ? 'not told apart' : solution.end} at ` +
        `${lengthWithSigmaText(solution.lengthM, solution.lengthSigmaM, units)}; distances rest on ` +
        (solution.scaledTo === 'description' ? 'the described length' : "the cable's velocity factor"),
    },
    {
      label: 'fit',
      text:
        `${solution.elements} parts explain ${percentText(solution.explained)} of what comes back and leave ` +
        `${decibelText(solution.residualDb)}; loss ${percentText(solution.lossFactor)} of the described`,
    },
  ];
}
