/** From flags to what an analysis needs: settings, cables, line, sweep and standards, every problem at once. */
import { loadCableTable } from '../app/cable-files.ts';
import { readBytes } from '../app/files.ts';
import { requestLine } from '../app/line-request.ts';
import { loadSettings, type Settings } from '../app/settings.ts';
import type { AnalyseRequest } from '../app/solver.ts';
import type { CableTable } from '../line/cable-table.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { parseLengthM } from '../sweep/number-text.ts';
import type { FlagName } from './commands.ts';
import type { Io } from './io.ts';
import type { Invocation } from './parse-arguments.ts';

export type Prepared = {
  readonly request: AnalyseRequest;
  readonly settings: Settings;
  readonly cables: CableTable;
};

/** Settings and cable table: what every verb starts from. */
export async function prepareTables(
  invocation: Invocation,
  io: Io,
): Promise<Outcome<{ readonly settings: Settings; readonly cables: CableTable }>> {
  const settings = await loadSettings(
    {
      units: invocation.text('units'),
      window: invocation.text('window'),
      cables: invocation.text('cables'),
      colours: invocation.text('colours'),
      plot: invocation.text('plot'),
    },
    io.env,
  );
  if (!settings.ok) return settings;
  const cables = await loadCableTable(settings.value.cableFolders);
  return cables.ok ? succeed({ settings: settings.value, cables: cables.value }) : cables;
}

/**
 * Reads everything that the analysis of one sweep needs.
 *
 * @returns The request; its notices say what was decided without being asked.
 */
export async function prepareRequest(
  invocation: Invocation,
  sweepFile: string,
  io: Io,
): Promise<Outcome<Prepared>> {
  const tables = await prepareTables(invocation, io);
  if (!tables.ok) return tables;
  const { settings, cables } = tables.value;
  const sweep = await readBytes(sweepFile, { stdin: io.stdin });
  const line = await requestLine(lineFlags(invocation), sweepFile, cables);
  const standards = await readStandards(invocation);
  const offsetM = parseOffset(invocation.text('offset'));
  const port = parsePort(invocation.text('port'));
  if (!sweep.ok || !line.ok || !standards.ok || !offsetM.ok || !port.ok) {
    const outcomes: Outcome<unknown>[] = [sweep, line, standards, offsetM, port];
    // A file that is no sweep at all is worth knowing before one looks for its line.
    if (sweep.ok && port.ok) {
      const { readSweep } = await import('../sweep/read-sweep.ts');
      outcomes.unshift(readSweep(sweep.value, { file: sweepFile, ...(port.value && { port: port.value }) }));
    }
    return fail(...outcomes.flatMap((outcome) => (outcome.ok ? [] : outcome.problems)));
  }
  return succeed(
    {
      request: {
        sweepFile,
        sweepBytes: sweep.value,
        line: line.value.line,
        lineDescribed: line.value.lineDescribed,
        windowSpec: settings.windowSpec,
        port: port.value,
        offsetM: offsetM.value,
        standards: standards.value,
      },
      settings,
      cables,
    },
    line.notices,
  );
}

/** The flags that describe or change a line. */
export function lineFlags(invocation: Invocation) {
  return {
    line: invocation.text('line'),
    logbook: invocation.text('logbook'),
    cable: invocation.text('cable'),
    length: invocation.text('length'),
    end: invocation.text('end'),
    temperature: invocation.text('temperature'),
    velocityFactor: invocation.text('velocity-factor'),
  };
}

const STANDARD_FLAGS = [
  'standard-open',
  'standard-short',
  'standard-load',
] as const satisfies readonly FlagName[];

async function readStandards(invocation: Invocation): Promise<Outcome<AnalyseRequest['standards']>> {
  const missing = STANDARD_FLAGS.filter((flag) => !invocation.has(flag));
  if (missing.length === STANDARD_FLAGS.length) return succeed(null);
  if (missing.length > 0)
    return fail({
      code: 'standards-incomplete',
      what: `a correction needs all three standards; ${missing.map((flag) => `--${flag}`).join(' and ')} ${missing.length === 1 ? 'is' : 'are'} missing`,
      mend: 'give the sweeps of open, short and load, or none of them',
    });
  const files = await Promise.all(STANDARD_FLAGS.map((flag) => readBytes(invocation.text(flag) ?? '')));
  const [open, short, load] = files;
  if (open?.ok && short?.ok && load?.ok)
    return succeed({ open: open.value, short: short.value, load: load.value });
  return fail(...files.flatMap((file): readonly Problem[] => (file.ok ? [] : file.problems)));
}

function parseOffset(text: string | null): Outcome<number> {
  return text === null ? succeed(0) : parseLengthM(text, { signed: true });
}

function parsePort(text: string | null): Outcome<number | null> {
  if (text === null) return succeed(null);
  const port = Number(text);
  if (Number.isInteger(port) && port >= 1) return succeed(port);
  return fail({
    code: 'flag-value',
    what: 'ports are counted from 1',
    found: cleanForDisplay(`--port ${text}`, 60),
    mend: 'write --port 1',
  });
}
