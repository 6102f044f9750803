/** The top row: which line, which sweep, and the verdict. */
import type { Analysis } from '../../app/analysis.ts';
import { STANDARD_INPUT } from '../../app/standard-input.ts';
import { verdictOf } from '../../assess/verdict.ts';
import { cellWidth, fitRuns, spreadRuns } from '../../plot/cells.ts';
import { SEVERITY_GLYPHS } from '../../plot/line-strip.ts';
import { frequencySpanText, temperatureText } from '../../plot/quantity-text.ts';
import { type Run, run, runsText } from '../../plot/run.ts';
import { analysisOf, type State } from '../state.ts';

/** Blanks between the sweep's facts and the texts beside them. */
const GAP = 3;

/** Name and temperature at the left, the verdict at the right, and of the sweep what fits between. */
export function headerRow(state: State, width: number): readonly Run[] {
  const left = [run(' '), run(titleOf(state), 'strong'), ...temperatureRuns(state)];
  const right = [...statusRuns(state), run(' ')];
  const room = width - cellWidth(runsText(left)) - cellWidth(runsText(right)) - 2 * GAP;
  const middle = sweepTexts(state).find((text) => cellWidth(text) <= room);
  if (!middle) return spreadRuns(left, right, width);
  return spreadRuns(left, [run(middle, 'dim'), run(' '.repeat(GAP)), ...right], width);
}

/** The row of the cautions' gist, until the cautions were read. */
export function cautionRow(state: State, width: number): readonly Run[] {
  return fitRuns([run('! ', 'key'), run(state.cautions.short, 'caution')], width);
}

function titleOf(state: State): string {
  if (!state.request) return 'feedsonde';
  const { line, sweepFile } = state.request;
  return line.name || (sweepFile === STANDARD_INPUT ? 'sweep from standard input' : baseName(sweepFile));
}

function temperatureRuns(state: State): readonly Run[] {
  const line = state.request?.line;
  return line?.temperatureKnown ? [run(` · ${temperatureText(line.temperatureC, state.units)}`)] : [];
}

/** What is known of the sweep, longest text first. */
function sweepTexts(state: State): readonly string[] {
  const name = state.request && state.request.line.name !== '' ? baseName(state.request.sweepFile) : '';
  const analysis = analysisOf(state);
  if (!analysis) return name === '' ? [] : [name];
  const span = spanText(analysis);
  const points = `${span} · ${analysis.sweep.frequencyHz.length} points`;
  return [...(name === '' || name === STANDARD_INPUT ? [] : [`${name} · ${points}`]), points, span];
}

function spanText({ sweep }: Analysis): string {
  return frequencySpanText(sweep.frequencyHz[0]!, sweep.frequencyHz.at(-1)!);
}

function statusRuns(state: State): readonly Run[] {
  switch (state.solve.phase) {
    case 'idle':
      return [];
    case 'running':
      return [run('solving…', 'strong')];
    case 'failed':
      return [run('not solved', 'strong')];
    case 'ready':
      return verdictRuns(state.solve.analysis);
  }
}

function verdictRuns(analysis: Analysis): readonly Run[] {
  const { faults, watches, doubtful } = verdictOf(analysis);
  if (faults + watches === 0 && !doubtful) return [run(`${SEVERITY_GLYPHS.sound} no fault found`, 'sound')];
  return [
    ...(faults > 0
      ? [run(`${SEVERITY_GLYPHS.fault} ${faults} fault${faults === 1 ? '' : 's'}`, 'fault')]
      : []),
    ...(faults > 0 && watches > 0 ? [run(' · ')] : []),
    ...(watches > 0 ? [run(`${SEVERITY_GLYPHS.watch} ${watches} to watch`, 'watch')] : []),
    ...(doubtful && faults + watches > 0 ? [run(' · ')] : []),
    ...(doubtful ? [run(`${SEVERITY_GLYPHS.watch} fits badly`, 'watch')] : []),
  ];
}

/** The last part of a path; both kinds of separator. */
function baseName(path: string): string {
  return path.split(/[/\\]/u).at(-1) || path;
}
