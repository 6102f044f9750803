/** `compare`: what has changed on a line between two sweeps, or since its logged baseline. */
import { programVersion } from '../app/bundled.ts';
import { type ComparedSweeps, compare } from '../app/compare.ts';
import { compareDocument } from '../app/compare-json.ts';
import { readBytes } from '../app/files.ts';
import type { Settings } from '../app/settings.ts';
import type { AnalyseRequest } from '../app/solver.ts';
import { STANDARD_INPUT } from '../app/standard-input.ts';
import { fail, type Notice, type Outcome, succeed } from '../outcome.ts';
import { fixedText, lengthPerMetre } from '../plot/quantity-text.ts';
import { type ExitStatus, type Io, textColumns, write } from './io.ts';
import { createPaint } from './paint.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { prepareRequest, prepareTables } from './request.ts';

type Pair = {
  readonly before: AnalyseRequest;
  readonly after: AnalyseRequest;
  readonly settings: Settings;
};

/** Runs the verb. */
export async function runCompare(invocation: Invocation, io: Io): Promise<ExitStatus> {
  const [before = '', after = ''] = invocation.inputs;
  const pair = invocation.has('baseline')
    ? await sinceBaseline(invocation, before, after, io)
    : await twoFiles(invocation, before, after, io);
  if (!pair.ok) return printProblems(io, pair.problems);
  const { units } = pair.value.settings;
  const compared = compare({
    before: pair.value.before,
    after: pair.value.after,
    lengthWords: (lengthM) => `${fixedText(lengthM * lengthPerMetre(units), 1)} ${units}`,
  });
  if (!compared.ok) return printProblems(io, compared.problems);
  const notices = [...pair.notices, ...doubtsOf(compared.value)];
  if (invocation.has('json')) {
    const document = compareDocument(compared.value, `feedsonde ${programVersion()}`, notices);
    await write(io.stdout, `${JSON.stringify(document, null, 2)}\n`);
  } else await printComparison(compared.value, pair.value.settings, notices, io);
  return compared.value.comparison.verdict === 'changed' ? 1 : 0;
}

/** Two files of one line, described by what lies beside the earlier one where nothing else is given. */
async function twoFiles(
  invocation: Invocation,
  before: string,
  after: string,
  io: Io,
): Promise<Outcome<Pair>> {
  if (before === STANDARD_INPUT && after === STANDARD_INPUT)
    return fail({
      code: 'input-twice',
      what: 'standard input can be only one of the two sweeps',
      mend: 'give the other as a file',
    });
  const prepared = await prepareRequest(invocation, before, io);
  const later = await readBytes(after, { stdin: io.stdin });
  if (!prepared.ok || !later.ok)
    return fail(...[prepared, later].flatMap((outcome) => (outcome.ok ? [] : outcome.problems)));
  const { request, settings } = prepared.value;
  return succeed(
    { before: request, after: { ...request, sweepFile: after, sweepBytes: later.value }, settings },
    prepared.notices,
  );
}

/** A line of the logbook by name, and the sweep that its baseline is compared with. */
async function sinceBaseline(
  invocation: Invocation,
  lineName: string,
  after: string,
  io: Io,
): Promise<Outcome<Pair>> {
  const tables = await prepareTables(invocation, io);
  if (!tables.ok) return tables;
  // Loaded here: most runs need no logbook.
  const { baselineSweep } = await import('../app/log-lines.ts');
  const { openLogbookFile } = await import('../app/log-file.ts');
  const logbook = await openLogbookFile(invocation.text('logbook'), { create: false });
  if (!logbook.ok) return logbook;
  try {
    const logged = baselineSweep(logbook.value, lineName, tables.value.cables);
    if (!logged.ok) return logged;
    const { entry, bytes, line, standards } = logged.value;
    const described = invocation.has('line') || invocation.has('cable');
    const prepared = await prepareRequest(
      described
        ? invocation
        : { ...invocation, text: (flag) => invocation.text(flag) ?? (flag === 'line' ? lineName : null) },
      after,
      io,
    );
    if (!prepared.ok) return prepared;
    const { request, settings } = prepared.value;
    const taken: Notice = {
      code: 'baseline-taken',
      what: `the baseline is ${entry.file}, taken ${entry.takenAt.replace('T', ' ')}`,
    };
    return succeed(
      {
        before: {
          sweepFile: entry.file,
          sweepBytes: bytes,
          line,
          lineDescribed: entry.setup.lineDescribed,
          windowSpec: entry.setup.windowSpec,
          port: entry.setup.port,
          offsetM: entry.setup.offsetM,
          standards,
        },
        after: request,
        settings,
      },
      [taken, ...prepared.notices],
    );
  } finally {
    logbook.value.close();
  }
}

/** What the solving of either sweep had to say, once where both say it. */
function doubtsOf({ before, after }: ComparedSweeps): Notice[] {
  const said = new Set<string>();
  return [...before.notices, ...after.notices].filter(({ what }) => {
    if (said.has(what)) return false;
    said.add(what);
    return true;
  });
}

async function printComparison(
  compared: ComparedSweeps,
  settings: Settings,
  notices: readonly Notice[],
  io: Io,
): Promise<void> {
  // Loaded here, for measuring the width of text takes longer to get ready than a script would wait.
  const { compareText } = await import('./compare-text.ts');
  const text = compareText(compared, {
    columns: textColumns(io),
    units: settings.units,
    paint: createPaint(settings.colour && io.stdout.isTTY === true),
    notices,
  });
  await write(io.stdout, text);
}
