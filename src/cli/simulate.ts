/** `simulate`: the sweep that a described line would give. */
import { type Fault, parseFault } from '../app/fault-text.ts';
import { refuseTarget, writeText } from '../app/files.ts';
import { readLineFile } from '../app/line-request.ts';
import { simulate } from '../app/simulate.ts';
import { fail, type Outcome, succeed } from '../outcome.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { parseLevelDb, parseSweepRange } from '../sweep/number-text.ts';
import { writeTouchstone } from '../sweep/write-touchstone.ts';
import { type ExitStatus, type Io, write } from './io.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { lineFlags, prepareTables } from './request.ts';

/** The wide sweep of the samples: harmonic, so that an impedance profile is possible. */
const DEFAULT_SWEEP = '2MHz-2700MHz:1350';
const DEFAULT_SEED = 1;
const PORT_OHM = 50;

/**
 * Runs the verb.
 *
 * @param argv What was typed, for the header of the file.
 */
export async function runSimulate(
  invocation: Invocation,
  io: Io,
  argv: readonly string[],
): Promise<ExitStatus> {
  const output = invocation.text('output');
  const overwrite = invocation.has('force');
  const refused = output === null ? null : await refuseTarget(output, { overwrite });
  const tables = await prepareTables(invocation, io);
  const line = tables.ok
    ? await readLineFile(invocation.inputs[0] ?? '', lineFlags(invocation), tables.value.cables)
    : tables;
  const faults = all(invocation.texts('fault').map(parseFault));
  const range = parseSweepRange(invocation.text('sweep') ?? DEFAULT_SWEEP);
  const noiseDb = levelOf(invocation.text('noise'));
  const residueDb = levelOf(invocation.text('residue'));
  const asBuilt = seedOf('as-built', invocation.text('as-built'), null);
  const seed = seedOf('seed', invocation.text('seed'), DEFAULT_SEED);
  const target: Outcome<null> = refused ? fail(refused) : succeed(null);
  if (
    !target.ok ||
    !line.ok ||
    !faults.ok ||
    !range.ok ||
    !noiseDb.ok ||
    !residueDb.ok ||
    !asBuilt.ok ||
    !seed.ok
  ) {
    const outcomes: readonly Outcome<unknown>[] = [
      target,
      line,
      faults,
      range,
      noiseDb,
      residueDb,
      asBuilt,
      seed,
    ];
    return printProblems(
      io,
      outcomes.flatMap((outcome) => (outcome.ok ? [] : outcome.problems)),
    );
  }
  const sweep = simulate({
    line: line.value,
    faults: faults.value,
    range: range.value,
    portOhm: PORT_OHM,
    asBuilt: asBuilt.value,
    noiseDb: noiseDb.value,
    residueDb: residueDb.value,
    seed: seed.value ?? DEFAULT_SEED,
  });
  if (!sweep.ok) return printProblems(io, sweep.problems);
  const text = writeTouchstone(sweep.value, headerOf(line.value.name, argv));
  if (output === null) {
    await write(io.stdout, text);
    return 0;
  }
  const written = await writeText(output, text, { overwrite });
  return written.ok ? 0 : printProblems(io, written.problems);
}

/** Says that nothing here was measured, and how to make it again. */
function headerOf(name: string, argv: readonly string[]): string[] {
  const words = argv.filter((word) => word !== '--force').map(shellWord);
  return [
    `Invented: a simulated sweep${name === '' ? '' : ` of ${name}`}, not a measurement.`,
    `Made by: feedsonde ${words.join(' ')}`,
  ];
}

function shellWord(word: string): string {
  return /^[\w@%+=:,./-]+$/u.test(word) ? word : `'${word.replaceAll("'", "'\\''")}'`;
}

function all(outcomes: readonly Outcome<Fault>[]): Outcome<readonly Fault[]> {
  const problems = outcomes.flatMap((outcome) => (outcome.ok ? [] : outcome.problems));
  return problems.length > 0
    ? fail(...problems)
    : succeed(outcomes.flatMap((outcome) => (outcome.ok ? [outcome.value] : [])));
}

function levelOf(text: string | null): Outcome<number | null> {
  return text === null ? succeed(null) : parseLevelDb(text);
}

function seedOf(flag: string, text: string | null, otherwise: number | null): Outcome<number | null> {
  if (text === null) return succeed(otherwise);
  const seed = Number(text);
  if (text.trim() !== '' && Number.isSafeInteger(seed) && seed >= 0) return succeed(seed);
  return fail({
    code: 'flag-value',
    what: 'a seed is a whole number from 0 up',
    found: cleanForDisplay(`--${flag} ${text}`, 60),
    mend: `write --${flag} 7`,
  });
}
