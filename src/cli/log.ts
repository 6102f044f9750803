/** `log`: the logbook on the command line, one action a function. */
import { programVersion } from '../app/bundled.ts';
import { writeBytes } from '../app/files.ts';
import { entryShown, logHead, summaryDocument, trendDocument } from '../app/log-documents.ts';
import { exportLogbook } from '../app/log-export.ts';
import { openLogbookFile } from '../app/log-file.ts';
import { importLogbook } from '../app/log-import.ts';
import { nearestWords } from '../line/nearest-word.ts';
import type { ListFilter } from '../logbook/entries.ts';
import { type EntrySummary, shortKey } from '../logbook/entry.ts';
import type { Logbook } from '../logbook/logbook.ts';
import { fullName } from '../logbook/stored-lines.ts';
import { followLine } from '../logbook/trend.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { type ExitStatus, type Io, textColumns, write } from './io.ts';
import { runLogAdd } from './log-add.ts';
import { parseDate } from './log-dates.ts';
import { checkText, entryText, type LogTextOptions, listText } from './log-text.ts';
import { trendText } from './log-trend-text.ts';
import { createPaint } from './paint.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { prepareTables } from './request.ts';

/** What an action works with. */
type Work = {
  readonly invocation: Invocation;
  /** Words after the action's name. */
  readonly words: readonly string[];
  readonly logbook: Logbook;
  readonly options: LogTextOptions;
  readonly io: Io;
};

type Action = {
  /** What it takes, for the problem when that is wrong. */
  readonly takes: string;
  readonly fewest: number;
  readonly most: number;
  /** True for the actions that may start a logbook. */
  readonly creates: boolean;
  readonly run: (work: Work) => Promise<ExitStatus>;
};

const ANY_NUMBER = Number.POSITIVE_INFINITY;

const ACTIONS: Readonly<Record<string, Action>> = {
  add: { takes: 'SWEEP...', fewest: 1, most: ANY_NUMBER, creates: true, run: runAdd },
  list: { takes: '[LINE]', fewest: 0, most: 1, creates: false, run: runList },
  show: { takes: 'ENTRY|LINE', fewest: 1, most: 1, creates: false, run: runShow },
  baseline: { takes: 'LINE [ENTRY]', fewest: 1, most: 2, creates: false, run: runBaseline },
  trend: { takes: 'LINE', fewest: 1, most: 1, creates: false, run: runTrend },
  export: { takes: 'FOLDER [LINE]', fewest: 1, most: 2, creates: false, run: runExport },
  import: { takes: 'FOLDER', fewest: 1, most: 1, creates: true, run: runImport },
  check: { takes: '', fewest: 0, most: 0, creates: false, run: runCheck },
};

/** Runs the verb. */
export async function runLog(invocation: Invocation, io: Io): Promise<ExitStatus> {
  const [name = '', ...words] = invocation.inputs;
  const action = Object.hasOwn(ACTIONS, name) ? ACTIONS[name] : undefined;
  if (!action) return printProblems(io, [unknownAction(name)]);
  if (words.length < action.fewest || words.length > action.most)
    return printProblems(io, [
      {
        code: words.length < action.fewest ? 'argument-missing' : 'argument-extra',
        what: `log ${name} takes ${action.takes === '' ? 'no further words' : action.takes}`,
        found: cleanForDisplay(words.join(' '), 60) || 'nothing',
        mend: `write feedsonde log ${name} ${action.takes}`
          .trimEnd()
          .concat('; quote names that hold blanks'),
      },
    ]);
  const tables = await prepareTables(invocation, io);
  if (!tables.ok) return printProblems(io, tables.problems);
  const logbook = await openLogbookFile(invocation.text('logbook'), { create: action.creates });
  if (!logbook.ok) return printProblems(io, logbook.problems);
  try {
    const { units, colour } = tables.value.settings;
    const options = {
      columns: textColumns(io),
      units,
      paint: createPaint(colour && io.stdout.isTTY === true),
    };
    return await action.run({ invocation, words, logbook: logbook.value, options, io });
  } finally {
    logbook.value.close();
  }
}

function runAdd({ invocation, words, logbook, options, io }: Work): Promise<ExitStatus> {
  return runLogAdd(invocation, words, logbook, options, io);
}

async function runList(work: Work): Promise<ExitStatus> {
  const filter = filterOf(work, work.words[0]);
  const entries = filter.ok ? work.logbook.list(filter.value) : filter;
  return answer(work, 'list', entries, (list) => ({
    document: { entries: list.map(summaryDocument) },
    text: () => listText(list, work.logbook.file, work.options),
  }));
}

async function runShow(work: Work): Promise<ExitStatus> {
  const { logbook, invocation } = work;
  const summary = entryOrLatest(logbook, work.words[0] ?? '');
  const entry = summary.ok ? logbook.entry(summary.value.key) : summary;
  const output = invocation.text('output');
  if (entry.ok && output !== null) {
    const bytes = logbook.original(entry.value.hash);
    const written = bytes.ok
      ? await writeBytes(output, bytes.value, { overwrite: invocation.has('force') })
      : bytes;
    if (!written.ok) return printProblems(work.io, written.problems);
  }
  return answer(work, 'show', entry, (one) => ({
    document: entryShown(one),
    text: () => entryText(one, work.options),
  }));
}

async function runBaseline(work: Work): Promise<ExitStatus> {
  const { logbook, words, options } = work;
  const chosen = chooseBaseline(logbook, words[0] ?? '', words[1]);
  return answer(work, 'baseline', chosen, ({ name, baseline }) => ({
    document: { line: name, baseline: baseline && summaryDocument(baseline) },
    text: () =>
      baseline === null ? `${name}: no baseline was chosen\n` : listText([baseline], logbook.file, options),
  }));
}

function chooseBaseline(
  logbook: Logbook,
  name: string,
  word: string | undefined,
): Outcome<{ readonly name: string; readonly baseline: EntrySummary | null }> {
  const line = logbook.findLine(name);
  if (!line.ok) return line;
  const shown = fullName(line.value);
  if (word === undefined) {
    if (line.value.baseline === null) return succeed({ name: shown, baseline: null });
    const there = logbook.find(line.value.baseline);
    return there.ok ? succeed({ name: shown, baseline: there.value }) : there;
  }
  const entry = logbook.find(word);
  if (!entry.ok) return entry;
  if (entry.value.lineId !== line.value.id)
    return fail({
      code: 'entry-of-other-line',
      what: `entry ${shortKey(entry.value.key)} is a sweep of "${fullName(entry.value.line)}", not of "${shown}"`,
      mend: `"feedsonde log list" with the line's name shows its entries`,
    });
  const set = logbook.setBaseline(line.value.id, entry.value.key);
  return set.ok ? succeed({ name: shown, baseline: { ...entry.value, baseline: true } }) : set;
}

async function runTrend(work: Work): Promise<ExitStatus> {
  const { logbook, words, options } = work;
  const line = logbook.findLine(words[0] ?? '');
  const history = line.ok ? logbook.history(line.value.id) : line;
  if (!line.ok || !history.ok)
    return printProblems(work.io, [
      ...(line.ok ? [] : line.problems),
      ...(history.ok ? [] : history.problems),
    ]);
  const trend = followLine(history.value);
  return answer(work, 'trend', succeed(trend), () => ({
    document: trendDocument(line.value, trend),
    text: () => trendText(line.value, trend, options),
  }));
}

async function runExport(work: Work): Promise<ExitStatus> {
  const [folder = '', line] = work.words;
  const filter = filterOf(work, line);
  const done = filter.ok ? await exportLogbook(work.logbook, folder, filter.value) : filter;
  return answer(work, 'export', done, ({ entries, lines }) => ({
    document: { folder, entries, lines },
    text: () => `${count(entries, 'entry', 'entries')} of ${count(lines, 'line', 'lines')} written\n`,
  }));
}

async function runImport(work: Work): Promise<ExitStatus> {
  const { io, invocation, words, logbook } = work;
  const tables = await prepareTables(invocation, io);
  if (!tables.ok) return printProblems(io, tables.problems);
  const done = await importLogbook(logbook, words[0] ?? '', tables.value.cables, new Date().toISOString());
  return answer(work, 'import', done, ({ added, already }) => ({
    document: { folder: words[0] ?? '', added, already, notices: done.ok ? done.notices : [] },
    text: () =>
      `${count(added, 'entry', 'entries')} taken in, ${already} already there\n` +
      (done.ok ? done.notices.map(({ what }) => `note  ${what}\n`).join('') : ''),
  }));
}

async function runCheck(work: Work): Promise<ExitStatus> {
  const found = work.logbook.check();
  const status = await answer(work, 'check', found, (result) => ({
    document: { ...result, pass: result.damaged.length === 0 && result.structure.length === 0 },
    text: () => checkText(result, work.logbook.file, work.options),
  }));
  if (!found.ok || status !== 0) return status;
  return found.value.damaged.length === 0 && found.value.structure.length === 0 ? 0 : 1;
}

/** Prints what came out: JSON, text, or why it could not be done. */
async function answer<T>(
  { invocation, logbook, io }: Work,
  action: string,
  outcome: Outcome<T>,
  render: (value: T) => { readonly document: object; readonly text: () => string },
): Promise<ExitStatus> {
  if (!outcome.ok) return printProblems(io, outcome.problems);
  const { document, text } = render(outcome.value);
  const head = logHead(action, `feedsonde ${programVersion()}`, logbook.file);
  await write(
    io.stdout,
    invocation.has('json') ? `${JSON.stringify({ ...head, ...document }, null, 2)}\n` : text(),
  );
  return 0;
}

function filterOf({ invocation, logbook }: Work, lineName: string | undefined): Outcome<ListFilter> {
  const since = parseDate(invocation.text('since'), 'since');
  const until = parseDate(invocation.text('until'), 'until');
  const line = lineName === undefined ? succeed(null) : logbook.findLine(lineName);
  if (!since.ok || !until.ok || !line.ok) {
    const outcomes: Outcome<unknown>[] = [since, until, line];
    return fail(...outcomes.flatMap((outcome): readonly Problem[] => (outcome.ok ? [] : outcome.problems)));
  }
  return succeed({
    lineId: line.value?.id ?? null,
    site: invocation.text('site'),
    since: since.value,
    until: until.value,
  });
}

/** An entry by its key, or the latest one of a line by the line's name. */
function entryOrLatest(logbook: Logbook, word: string): Outcome<EntrySummary> {
  const entry = logbook.find(word);
  if (entry.ok || entry.problems.some(({ code }) => code === 'entry-ambiguous')) return entry;
  const line = logbook.findLine(word);
  // Hexadecimal digits were meant for an entry, anything else for a line.
  if (!line.ok) return /^[0-9a-f-p]+$/u.test(word) ? entry : line;
  const entries = logbook.list({ lineId: line.value.id });
  if (!entries.ok) return entries;
  const latest = entries.value.at(-1);
  return latest ? succeed(latest) : entry;
}

function unknownAction(name: string): Problem {
  const names = Object.keys(ACTIONS);
  const [near] = nearestWords(name, names);
  return {
    code: 'action-unknown',
    what: `"${cleanForDisplay(name, 40)}" is nothing that log can do`,
    mend: near === undefined ? `it can ${names.join(', ')}` : `did you mean "log ${near}"?`,
  };
}

function count(number: number, one: string, many: string): string {
  return `${number} ${number === 1 ? one : many}`;
}
