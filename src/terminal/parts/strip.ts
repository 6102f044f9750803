/** The two rows of the line strip, standing over the plot. */
import { describedLengthM } from '../../line/line.ts';
import { fitRuns } from '../../plot/cells.ts';
import { drawLineStrip, type LineStripSpec } from '../../plot/line-strip.ts';
import { type Run, run } from '../../plot/run.ts';
import { endText, lineSpan, stripSections } from '../../report/line-sections.ts';
import { chosenOf, spanOf } from '../derived.ts';
import { foundIn } from '../found.ts';
import { GUTTER, type Layout } from '../layout.ts';
import { analysisOf, type State } from '../state.ts';

/** The line with what was found on it; before there is an answer, the line as described. */
export function stripRows(state: State, layout: Layout): readonly (readonly Run[])[] {
  const spec = stripSpec(state);
  if (!spec) return [fitRuns([], layout.columns), fitRuns([], layout.columns)];
  const { line, marks } = drawLineStrip(spec, layout.plotWidth);
  const gutter = run(' '.repeat(GUTTER));
  return [line, marks].map((row) => fitRuns([gutter, ...row], layout.columns));
}

function stripSpec(state: State): LineStripSpec | null {
  const analysis = analysisOf(state);
  if (analysis) {
    const chosen = chosenOf(state);
    return {
      domainM: spanOf(state, analysis),
      sections: stripSections(analysis.line, analysis.solution.lengthM, state.units),
      endText: endText(analysis),
      marks: foundIn(analysis, state.units).map((row) => ({
        distanceM: row.distanceM,
        severity: row.severity,
        chosen: row === chosen,
      })),
      cursorM: state.cursorM,
    };
  }
  const line = state.request?.line;
  const lengthM = line ? describedLengthM(line) : null;
  if (!line || lengthM === null || !(lengthM > 0)) return null;
  return {
    domainM: lineSpan(lengthM),
    sections: stripSections(line, null, state.units),
    endText: line.end === 'unknown' ? 'end' : line.end,
    marks: [],
    cursorM: null,
  };
}
