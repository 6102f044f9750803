/** `log add`: analyses sweeps and saves them; a line file among them is stored as a line. */
import { stat } from 'node:fs/promises';
import { analyse } from '../app/analyse.ts';
import { programVersion } from '../app/bundled.ts';
import { shownName } from '../app/files.ts';
import { readLineFile } from '../app/line-request.ts';
import { keepLine, knownLine, newEntry } from '../app/log-add.ts';
import { logHead, summaryDocument } from '../app/log-documents.ts';
import { STANDARD_INPUT } from '../app/standard-input.ts';
import { wallTimeOf } from '../app/wall-time.ts';
import { verdictWords, worstOf } from '../assess/verdict.ts';
import type { Added } from '../logbook/add-entry.ts';
import { type EntrySummary, type LineName, shortKey } from '../logbook/entry.ts';
import type { Logbook } from '../logbook/logbook.ts';
import { fullName } from '../logbook/stored-lines.ts';
import { type Notice, type Outcome, type Problem, succeed } from '../outcome.ts';
import { wrapText } from '../plot/cells.ts';
import { SEVERITY_GLYPHS } from '../plot/line-strip.ts';
import { type ExitStatus, type Io, write } from './io.ts';
import { parseWallTime } from './log-dates.ts';
import { type LogTextOptions, whenText } from './log-text.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { lineFlags, prepareRequest, prepareTables } from './request.ts';

type Saved =
  | { readonly type: 'sweep'; readonly added: Added; readonly entry: EntrySummary }
  | { readonly type: 'line'; readonly line: LineName; readonly changed: boolean };

/** Saves each; one that cannot be saved does not stop the rest. */
export async function runLogAdd(
  invocation: Invocation,
  files: readonly string[],
  logbook: Logbook,
  options: LogTextOptions,
  io: Io,
): Promise<ExitStatus> {
  const documents: unknown[] = [];
  const lines: unknown[] = [];
  let status: ExitStatus = 0;
  for (const file of files) {
    const saved = /\.line\.json$/iu.test(file)
      ? await storeLine(invocation, file, logbook, io)
      : await saveSweep(invocation, file, logbook, io);
    if (!saved.ok) {
      await printProblems(
        io,
        saved.problems.map((problem) => inFile(problem, file)),
      );
      status = 2;
      continue;
    }
    if (saved.value.type === 'sweep') {
      if (saved.value.entry.faults > 0 && status === 0) status = 1;
      documents.push({
        how: saved.value.added.how,
        ...summaryDocument(saved.value.entry),
        notices: saved.notices,
      });
    } else lines.push({ ...saved.value.line, changed: saved.value.changed });
    if (!invocation.has('json')) await write(io.stdout, savedText(saved.value, saved.notices, options));
  }
  if (invocation.has('json')) {
    const head = logHead('add', `feedsonde ${programVersion()}`, logbook.file);
    await write(io.stdout, `${JSON.stringify({ ...head, entries: documents, lines }, null, 2)}\n`);
  }
  return status;
}

async function saveSweep(
  invocation: Invocation,
  file: string,
  logbook: Logbook,
  io: Io,
): Promise<Outcome<Saved>> {
  const taken = await takenAt(invocation, file);
  if (!taken.ok) return taken;
  const prepared = await prepareRequest(invocation, file, io);
  if (!prepared.ok) return prepared;
  const analysis = analyse(prepared.value.request);
  if (!analysis.ok) return analysis;
  const said = (flag: 'who' | 'instrument' | 'weather' | 'note'): string => invocation.text(flag) ?? '';
  const about = {
    who: said('who'),
    instrument: said('instrument'),
    weather: said('weather'),
    note: said('note'),
    takenAt: taken.value,
    addedAt: new Date().toISOString(),
    name: invocation.text('name'),
    site: invocation.text('site'),
    tool: `feedsonde ${programVersion()}`,
  };
  const known = knownLine(logbook, analysis.value.line, about);
  if (!known.ok) return known;
  const entry = newEntry(prepared.value.request, analysis.value, about, prepared.value.cables, known.value);
  if (!entry.ok) return entry;
  const added = logbook.add(entry.value, {
    replace: invocation.has('replace'),
    baseline: invocation.has('baseline'),
  });
  if (!added.ok) return added;
  const saved = logbook.find(added.value.key);
  if (!saved.ok) return saved;
  return succeed({ type: 'sweep', added: added.value, entry: saved.value }, [
    ...(added.value.how === 'already' ? [] : [...prepared.notices, ...taken.notices]),
    ...addedNotices(added.value, saved.value, entry.value.line),
  ]);
}

async function storeLine(
  invocation: Invocation,
  file: string,
  logbook: Logbook,
  io: Io,
): Promise<Outcome<Saved>> {
  const tables = await prepareTables(invocation, io);
  if (!tables.ok) return tables;
  const line = await readLineFile(file, lineFlags(invocation), tables.value.cables);
  if (!line.ok) return line;
  const kept = keepLine(logbook, line.value, tables.value.cables, new Date().toISOString());
  return kept.ok ? succeed({ type: 'line', ...kept.value }) : kept;
}

/** As said with --when; else when the file was last written, which may be when it was copied: so it is said aloud. */
async function takenAt(invocation: Invocation, file: string): Promise<Outcome<string>> {
  const when = invocation.text('when');
  if (when !== null) return parseWallTime(when, 'when');
  const written = file === STANDARD_INPUT ? null : await stat(file).catch(() => null);
  const time = wallTimeOf(written?.mtime ?? new Date());
  const from = written ? 'the date of the file' : 'now';
  return succeed(time, [
    { code: 'taken-at', what: `taken ${whenText(time)}, ${from}; --when gives another` },
  ]);
}

function addedNotices(added: Added, saved: EntrySummary, line: LineName): Notice[] {
  const here = `under "${fullName(saved.line)}" since ${saved.addedAt.slice(0, 10)}`;
  const notices: Notice[] = [];
  if (added.how === 'already')
    notices.push({
      code: 'already-logged',
      what: `this very sweep is logged ${here}; nothing was changed (--replace takes the new line, results and remarks)`,
    });
  if (added.how === 'already' && fullName(saved.line) !== fullName(line))
    notices.push({ code: 'other-line', what: `it is now said to be of "${fullName(line)}"` });
  if (added.lineChanged)
    notices.push({
      code: 'line-changed',
      what: `"${fullName(line)}" is described differently from before; later sweeps take this description`,
    });
  return notices;
}

function savedText(saved: Saved, notices: readonly Notice[], { columns, paint }: LogTextOptions): string {
  if (saved.type === 'line')
    return `${wrapText(`● line "${fullName(saved.line)}" is ${saved.changed ? 'described anew' : 'stored'}`, columns).join('\n')}\n`;
  const { entry, added } = saved;
  const severity = worstOf(entry);
  const how = { new: 'logged as', already: 'is there as', replaced: 'replaces' }[added.how];
  const head =
    `${SEVERITY_GLYPHS[severity]} ${fullName(entry.line)}, ${whenText(entry.takenAt)}: ${verdictWords(entry)}; ` +
    `${how} ${shortKey(entry.key)}${entry.baseline ? ', the baseline' : ''}`;
  return [
    ...wrapText(head, columns).map((line) => paint(severity, line)),
    ...notices.flatMap(({ what }) =>
      wrapText(what, columns - 6).map((line, i) => `${i === 0 ? 'note  ' : '      '}${line}`),
    ),
    '',
  ].join('\n');
}

/** Of several sweeps it must be said which one a problem is about. */
function inFile(problem: Problem, file: string): Problem {
  return problem.file === undefined ? { ...problem, file: shownName(file) } : problem;
}
