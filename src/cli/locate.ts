/** `locate`: echoes and findings of one sweep. */
import { analyse } from '../app/analyse.ts';
import type { Analysis } from '../app/analysis.ts';
import { programVersion } from '../app/bundled.ts';
import { refuseTarget, writeText } from '../app/files.ts';
import { locateDocument } from '../app/json.ts';
import type { Settings } from '../app/settings.ts';
import { traceCsv } from '../app/trace-export.ts';
import type { Notice } from '../outcome.ts';
import { type ExitStatus, type Io, textColumns, write } from './io.ts';
import { createPaint } from './paint.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { prepareRequest } from './request.ts';

/** Runs the verb. */
export async function runLocate(invocation: Invocation, io: Io): Promise<ExitStatus> {
  const traceFile = invocation.text('trace');
  const overwrite = invocation.has('force');
  const refused = traceFile === null ? null : await refuseTarget(traceFile, { overwrite });
  const prepared = await prepareRequest(invocation, invocation.inputs[0] ?? '', io);
  if (!prepared.ok || refused)
    return printProblems(io, [...(refused ? [refused] : []), ...(prepared.ok ? [] : prepared.problems)]);
  const { request, settings } = prepared.value;
  const outcome = analyse({ ...request, skipImpedance: traceFile === null });
  if (!outcome.ok) return printProblems(io, outcome.problems);
  const analysis = outcome.value;
  const notices = [...prepared.notices, ...outcome.notices];
  if (traceFile !== null) {
    const written = await writeText(traceFile, traceCsv(analysis, settings.windowSpec), { overwrite });
    if (!written.ok) return printProblems(io, written.problems);
  }
  if (invocation.has('json')) {
    const document = locateDocument(analysis, `feedsonde ${programVersion()}`, notices);
    await write(io.stdout, `${JSON.stringify(document, null, 2)}\n`);
  } else await printAnalysis(analysis, settings, notices, io);
  return analysis.findings.some((finding) => finding.severity === 'fault') ? 1 : 0;
}

/** Prints an analysis as text, coloured where standard output is a terminal that may show colour. */
export async function printAnalysis(
  analysis: Analysis,
  settings: Settings,
  notices: readonly Notice[],
  io: Io,
): Promise<void> {
  // Loaded here, for measuring the width of text takes longer to get ready than a script would wait.
  const { locateText } = await import('./locate-text.ts');
  const text = locateText(analysis, {
    columns: textColumns(io),
    units: settings.units,
    paint: createPaint(settings.colour && io.stdout.isTTY === true),
    notices,
  });
  await write(io.stdout, text);
}
