/** `loss`: the loss of the cable against its table. */
import { analyse } from '../app/analyse.ts';
import { analysisInUnits } from '../app/analysis-in-units.ts';
import { programVersion } from '../app/bundled.ts';
import { lossDocument } from '../app/loss-document.ts';
import { checkLoss } from '../assess/loss-check.ts';
import { fixedText, lengthPerMetre } from '../plot/quantity-text.ts';
import { type ExitStatus, type Io, textColumns, write } from './io.ts';
import { lossText } from './loss-text.ts';
import { createPaint } from './paint.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { prepareRequest } from './request.ts';

/** Runs the verb. */
export async function runLoss(invocation: Invocation, io: Io): Promise<ExitStatus> {
  const prepared = await prepareRequest(invocation, invocation.inputs[0] ?? '', io);
  if (!prepared.ok) return printProblems(io, prepared.problems);
  const { request, settings } = prepared.value;
  const outcome = analyse({ ...request, skipImpedance: true });
  if (!outcome.ok) return printProblems(io, outcome.problems);
  const notices = [...prepared.notices, ...outcome.notices];
  const analysis = analysisInUnits(outcome.value, settings.units);
  const check = checkLoss({
    ...analysis,
    lengthWords: (lengthM) => `${fixedText(lengthM * lengthPerMetre(settings.units), 1)} ${settings.units}`,
  });
  if (check.method === 'none' && !analysis.solution.endsEarly)
    return printProblems(io, [
      {
        code: 'loss-not-seen',
        file: analysis.sweep.file,
        what: `the far end (${analysis.solution.end}) sends back too little to tell the loss by`,
        mend: 'sweep the line with its far end open or shorted, or through from end to end with two ports',
      },
    ]);
  if (invocation.has('json')) {
    const inMetres = checkLoss(outcome.value);
    const document = lossDocument(outcome.value, inMetres, `feedsonde ${programVersion()}`, notices);
    await write(io.stdout, `${JSON.stringify(document, null, 2)}\n`);
  } else {
    const paint = createPaint(settings.colour && io.stdout.isTTY === true);
    const columns = textColumns(io);
    await write(io.stdout, lossText(analysis, check, { columns, units: settings.units, paint, notices }));
  }
  const fault = check.excess.some((one) => one.kind !== 'all-along');
  return check.pass === false || fault || analysis.solution.endsEarly ? 1 : 0;
}
