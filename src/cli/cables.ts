/** `cables`: the table of cables and guides, one of them, or the loss and delay of a run. */
import { findCable } from '../app/line-request.ts';
import type { CableEntry } from '../line/cable.ts';
import { type CableTable, isGuide, type TableEntry } from '../line/cable-table.ts';
import { TABLE_TEMPERATURE_C } from '../line/constants.ts';
import { aboveHighestFrequency, attenuationDbPer100m } from '../line/loss.ts';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cutText, wrapText } from '../plot/cells.ts';
import { digitsText, fixedText, frequencyText, lengthPerMetre, type Units } from '../plot/quantity-text.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { parseFrequencyHz, parseLengthM, parseTemperatureC } from '../sweep/number-text.ts';
import { belowCutoff, guideTableLines, jsonGuide, oneGuideText } from './guide-text.ts';
import { type ExitStatus, type Io, textColumns, write } from './io.ts';
import { labelledRows } from './labelled-rows.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { prepareTables } from './request.ts';
import { PER_100_M, type Question, runFigures, runLines } from './run-figures.ts';
import { tableLines } from './table-lines.ts';

/** Below it no feedline is swept, and a bare number was meant in MHz, Hz. */
const LOWEST_HZ = 10e3;

/** Columns of loss in the table. */
const TABLE_FREQUENCIES_HZ = [100e6, 900e6, 2000e6] as const;

/** Runs the verb. */
export async function runCables(invocation: Invocation, io: Io): Promise<ExitStatus> {
  const question = readQuestion(invocation);
  const tables = await prepareTables(invocation, io);
  const name = invocation.inputs[0];
  const chosen =
    tables.ok && name !== undefined ? findCable(name, tables.value.cables) : succeed<TableEntry | null>(null);
  const travels = question.ok && chosen.ok ? travelsIn(chosen.value, question.value) : succeed(null);
  if (!tables.ok || !question.ok || !chosen.ok || !travels.ok) {
    const outcomes: readonly Outcome<unknown>[] = [tables, question, chosen, travels];
    return printProblems(
      io,
      outcomes.flatMap((outcome) => (outcome.ok ? [] : outcome.problems)),
    );
  }
  const { cables, settings } = tables.value;
  const text = invocation.has('json')
    ? jsonText(chosen.value ? [chosen.value] : [...cables.entries, ...cables.guides], question.value)
    : chosen.value
      ? pageText(chosen.value, question.value, settings.units, textColumns(io))
      : tableText(cables, settings.units, io);
  await write(io.stdout, text);
  return 0;
}

/** A problem where the frequency asked about does not travel in the guide asked about. */
function travelsIn(entry: TableEntry | null, question: Question): Outcome<null> {
  const problem = entry !== null && isGuide(entry) ? belowCutoff(entry, question.frequencyHz) : null;
  return problem === null ? succeed(null) : fail(problem);
}

function jsonText(entries: readonly TableEntry[], question: Question): string {
  const written = entries.map((entry) =>
    isGuide(entry) ? jsonGuide(entry, question) : jsonCable(entry, question),
  );
  return `${JSON.stringify(written, null, 2)}\n`;
}

function pageText(entry: TableEntry, question: Question, units: Units, columns: number): string {
  return isGuide(entry)
    ? oneGuideText(entry, question, units, columns)
    : oneCableText(entry, question, units, columns);
}

function readQuestion(invocation: Invocation): Outcome<Question> {
  const at = invocation.text('at');
  const length = invocation.text('length');
  const temperature = invocation.text('temperature');
  const frequencyHz = at === null ? succeed(null) : parseFrequencyHz(at);
  const lengthM = length === null ? succeed(null) : parseLengthM(length);
  const temperatureC = temperature === null ? succeed(TABLE_TEMPERATURE_C) : parseTemperatureC(temperature);
  const problems: Problem[] = [frequencyHz, lengthM, temperatureC].flatMap((outcome) =>
    outcome.ok ? [] : outcome.problems,
  );
  if (frequencyHz.ok && frequencyHz.value !== null && frequencyHz.value < LOWEST_HZ)
    problems.push({
      code: 'flag-value',
      what: `${frequencyText(frequencyHz.value)} is below all that these figures are for`,
      found: cleanForDisplay(`--at ${at}`, 60),
      mend: 'give the unit too: --at 900MHz',
    });
  if (length !== null && at === null)
    problems.push({
      code: 'flag-clash',
      what: '--length goes with --at',
      mend: 'say at which frequency: --at 900MHz',
    });
  if (at !== null && invocation.inputs.length === 0)
    problems.push({
      code: 'argument-missing',
      what: '--at asks about one cable',
      mend: 'name it: feedsonde cables rg-213 --at 900MHz',
    });
  if (problems.length > 0 || !frequencyHz.ok || !lengthM.ok || !temperatureC.ok) return fail(...problems);
  return succeed({
    frequencyHz: frequencyHz.value,
    lengthM: lengthM.value,
    temperatureC: temperatureC.value,
  });
}

/** A cable as the JSON array has it: `z0` in Ω and the rest under the names of the cable files. */
function jsonCable(entry: CableEntry, question: Question): Record<string, unknown> {
  const { z0Ohm, z0ToleranceOhm, ...rest } = entry;
  const run = runFigures(entry, question);
  const { id, name, ...others } = rest;
  return {
    id,
    name,
    type: 'coax',
    z0: z0Ohm,
    z0Tolerance: z0ToleranceOhm,
    ...others,
    ...(run === null ? {} : { run }),
  };
}

/** Lines are cut to a terminal's width; in a pipe they stay whole. */
function tableText(cables: CableTable, units: Units, io: Io): string {
  const head = ['id', 'Ω', 'vf', ...TABLE_FREQUENCIES_HZ.map(frequencyText), 'name'];
  const lines = tableLines(
    head,
    cables.entries.map((entry) => [
      entry.id,
      digitsText(entry.z0Ohm, 3),
      digitsText(entry.velocityFactor, 3),
      ...TABLE_FREQUENCIES_HZ.map((f) => lossCell(entry, f, units)),
      entry.name,
    ]),
  );
  const per = units === 'ft' ? '100 ft' : '100 m';
  const foot = [
    '',
    ...wrapText(
      `Loss in dB per ${per} at 20 °C; of a cable blank above its highest frequency of use, of a guide at the lower ` +
        'and upper end of its band. "feedsonde cables ID" shows one with its sources.',
      textColumns(io),
    ),
  ];
  const rows = [...lines, '', ...guideTableLines(cables.guides, units)];
  const shown = io.stdout.isTTY ? rows.map((row) => cutText(row, textColumns(io))) : rows;
  return `${[...shown, ...foot].join('\n')}\n`;
}

/** Blank above the highest frequency that the cable is meant for. */
function lossCell(entry: CableEntry, frequencyHz: number, units: Units): string {
  if (aboveHighestFrequency(entry, frequencyHz)) return '';
  const perMetre = attenuationDbPer100m(entry, frequencyHz, TABLE_TEMPERATURE_C) / PER_100_M;
  return fixedText((perMetre * PER_100_M) / lengthPerMetre(units), 2);
}

function oneCableText(entry: CableEntry, question: Question, units: Units, columns: number): string {
  const row = labelledRows(columns);
  const { sources } = entry;
  const run = runFigures(entry, question);
  const lines = [
    `${entry.id}: ${entry.name}`,
    '',
    ...(run === null ? [] : [...runLines(run, units, row), '']),
    ...(entry.aliases.length > 0 ? row('also', entry.aliases.join(', ')) : []),
    ...row('family', entry.family),
    ...row('impedance', `${entry.z0Ohm} ±${digitsText(entry.z0ToleranceOhm, 1)} Ω`, sources.z0Ohm),
    ...row(
      'velocity factor',
      `${entry.velocityFactor} ±${digitsText(entry.velocityFactorTolerance, 1)}`,
      sources.velocityFactor,
    ),
    ...row('k1, k2', `${entry.k1} dB/100 m/√MHz, ${entry.k2} dB/100 m/MHz`, sources.k1),
    ...(entry.fittedBandMHz ? row('fitted over', `${entry.fittedBandMHz.join('–')} MHz`) : []),
    ...(entry.worstResidual === null
      ? []
      : row('worst residual', `${fixedText(entry.worstResidual * 100, 1)} %`)),
    ...(entry.highestFrequencyMHz === null
      ? []
      : row('up to', frequencyText(entry.highestFrequencyMHz * 1e6), sources.highestFrequencyMHz)),
    ...(entry.outerDiameterMm === null
      ? []
      : row('outer diameter', `${entry.outerDiameterMm} mm`, sources.outerDiameterMm)),
    ...(entry.bendRadiusOnceMm === null
      ? []
      : row('bend once', `${entry.bendRadiusOnceMm} mm radius`, sources.bendRadiusOnceMm)),
    ...(entry.bendRadiusRepeatedMm === null
      ? []
      : row('bend repeatedly', `${entry.bendRadiusRepeatedMm} mm radius`, sources.bendRadiusRepeatedMm)),
    ...(entry.note === null ? [] : row('note', entry.note)),
    ...(entry.attenuation.length > 0 ? ['', 'Published attenuation at 20 °C:'] : []),
    ...entry.attenuation.flatMap((point) =>
      row(`  ${frequencyText(point.frequencyMHz * 1e6)}`, `${point.dbPer100m} dB/100 m`, point),
    ),
  ];
  return `${lines.join('\n')}\n\nThe letters are explained in cables/SOURCES.md.\n`;
}
