/** `cables`: the table, one cable, or the loss and delay of a run. */
import { findCable } from '../app/line-request.ts';
import type { CableEntry } from '../line/cable.ts';
import { TABLE_TEMPERATURE_C } from '../line/constants.ts';
import { aboveHighestFrequency, attenuationDbPer100m, outsideFittedBand } from '../line/loss.ts';
import { coaxMedium } from '../line/medium.ts';
import { fail, type Notice, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cellWidth, fitText, wrapText } from '../plot/cells.ts';
import {
  decibelText,
  digitsText,
  fixedText,
  frequencyText,
  lengthPerMetre,
  lengthText,
  temperatureText,
  type Units,
} from '../plot/quantity-text.ts';
import { cleanForDisplay } from '../sweep/clean-text.ts';
import { parseFrequencyHz, parseLengthM, parseTemperatureC } from '../sweep/number-text.ts';
import { type ExitStatus, type Io, textColumns, write } from './io.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { prepareTables } from './request.ts';

/** What is asked of a run of one cable; null where not given. */
type Question = {
  readonly frequencyHz: number | null;
  readonly lengthM: number | null;
  readonly temperatureC: number;
};

/** What a run of cable does at one frequency. */
type RunFigures = {
  readonly frequencyHz: number;
  readonly lengthM: number | null;
  readonly temperatureC: number;
  readonly lossDbPer100m: number;
  /** One way. */
  readonly lossDb: number | null;
  readonly delayNs: number | null;
  readonly notices: readonly Notice[];
};

/** Length of line over which delay per metre is shown. */
const PER_100_M = 100;
/** Step of the central difference that gives the group delay, relative to the frequency. */
const DELAY_STEP = 1e-4;

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
    tables.ok && name !== undefined ? findCable(name, tables.value.cables) : succeed<CableEntry | null>(null);
  if (!tables.ok || !question.ok || !chosen.ok) {
    const outcomes: readonly Outcome<unknown>[] = [tables, question, chosen];
    return printProblems(
      io,
      outcomes.flatMap((outcome) => (outcome.ok ? [] : outcome.problems)),
    );
  }
  const { cables, settings } = tables.value;
  const entries = chosen.value ? [chosen.value] : cables.entries;
  const text = invocation.has('json')
    ? `${JSON.stringify(
        entries.map((entry) => jsonEntry(entry, question.value)),
        null,
        2,
      )}\n`
    : chosen.value
      ? oneText(chosen.value, question.value, settings.units, textColumns(io))
      : tableText(entries, settings.units);
  await write(io.stdout, text);
  return 0;
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

/** Loss by the table's law, delay by the causal model; null when no frequency was asked for. */
function runFigures(entry: CableEntry, question: Question): RunFigures | null {
  const { frequencyHz, lengthM, temperatureC } = question;
  if (frequencyHz === null) return null;
  const lossDbPer100m = attenuationDbPer100m(entry, frequencyHz, temperatureC);
  return {
    frequencyHz,
    lengthM,
    temperatureC,
    lossDbPer100m,
    lossDb: lengthM === null ? null : (lossDbPer100m * lengthM) / PER_100_M,
    delayNs: lengthM === null ? null : groupDelaySPerM(entry, frequencyHz, temperatureC) * lengthM * 1e9,
    notices: [
      outsideFittedBand(entry, frequencyHz, frequencyHz),
      aboveHighestFrequency(entry, frequencyHz),
    ].filter((notice) => notice !== null),
  };
}

function groupDelaySPerM(entry: CableEntry, frequencyHz: number, temperatureC: number): number {
  const step = frequencyHz * DELAY_STEP;
  const { gamma } = coaxMedium(entry, Float64Array.of(frequencyHz - step, frequencyHz + step), {
    temperatureC,
  });
  return (gamma.im[1]! - gamma.im[0]!) / (2 * Math.PI * 2 * step);
}

/** An entry as the JSON array has it: `z0` in Ω and the rest under the names of the cable files. */
function jsonEntry(entry: CableEntry, question: Question): Record<string, unknown> {
  const { z0Ohm, z0ToleranceOhm, ...rest } = entry;
  const run = runFigures(entry, question);
  const { id, name, ...others } = rest;
  return {
    id,
    name,
    z0: z0Ohm,
    z0Tolerance: z0ToleranceOhm,
    ...others,
    ...(run === null ? {} : { run }),
  };
}

function tableText(entries: readonly CableEntry[], units: Units): string {
  const head = ['id', 'Ω', 'vf', ...TABLE_FREQUENCIES_HZ.map(frequencyText), 'name'];
  const rows = entries.map((entry) => [
    entry.id,
    digitsText(entry.z0Ohm, 3),
    digitsText(entry.velocityFactor, 3),
    ...TABLE_FREQUENCIES_HZ.map((f) => lossCell(entry, f, units)),
    entry.name,
  ]);
  const widths = head.map((title, i) =>
    Math.max(cellWidth(title), ...rows.map((row) => cellWidth(row[i] ?? ''))),
  );
  const line = (row: readonly string[]): string =>
    row
      .map((text, i) =>
        i === row.length - 1 ? text : fitText(text, widths[i] ?? 0, i === 0 ? 'left' : 'right'),
      )
      .join('  ');
  const per = units === 'ft' ? '100 ft' : '100 m';
  const foot = [
    '',
    `Loss in dB per ${per} at 20 °C; blank above the highest frequency of use.`,
    '"feedsonde cables ID" shows one with its sources.',
  ];
  return `${[line(head), ...rows.map(line), ...foot].join('\n')}\n`;
}

/** Blank above the highest frequency that the cable is meant for. */
function lossCell(entry: CableEntry, frequencyHz: number, units: Units): string {
  if (aboveHighestFrequency(entry, frequencyHz)) return '';
  const perMetre = attenuationDbPer100m(entry, frequencyHz, TABLE_TEMPERATURE_C) / PER_100_M;
  return fixedText((perMetre * PER_100_M) / lengthPerMetre(units), 2);
}

function oneText(entry: CableEntry, question: Question, units: Units, columns: number): string {
  const row = (label: string, text: string, source?: string): string[] =>
    wrapText(source === undefined ? text : `${text}  (${source})`, columns - 20).map(
      (line, i) => `${fitText(i === 0 ? label : '', 20)}${line}`,
    );
  const sourceOf = (figure: keyof CableEntry['sources']): string | undefined => {
    const found = entry.sources[figure];
    return found && `${found.source}; ${found.status}`;
  };
  const run = runFigures(entry, question);
  const lines = [
    `${entry.id}: ${entry.name}`,
    '',
    ...(run === null ? [] : [...runLines(run, units, row), '']),
    ...(entry.aliases.length > 0 ? row('also', entry.aliases.join(', ')) : []),
    ...row('family', entry.family),
    ...row('impedance', `${entry.z0Ohm} ±${digitsText(entry.z0ToleranceOhm, 1)} Ω`, sourceOf('z0Ohm')),
    ...row(
      'velocity factor',
      `${entry.velocityFactor} ±${digitsText(entry.velocityFactorTolerance, 1)}`,
      sourceOf('velocityFactor'),
    ),
    ...row('k1, k2', `${entry.k1} dB/100 m/√MHz, ${entry.k2} dB/100 m/MHz`, sourceOf('k1')),
    ...(entry.fittedBandMHz ? row('fitted over', `${entry.fittedBandMHz.join('–')} MHz`) : []),
    ...(entry.worstResidual === null
      ? []
      : row('worst residual', `${fixedText(entry.worstResidual * 100, 1)} %`)),
    ...(entry.highestFrequencyMHz === null
      ? []
      : row('up to', frequencyText(entry.highestFrequencyMHz * 1e6), sourceOf('highestFrequencyMHz'))),
    ...(entry.outerDiameterMm === null
      ? []
      : row('outer diameter', `${entry.outerDiameterMm} mm`, sourceOf('outerDiameterMm'))),
    ...(entry.bendRadiusOnceMm === null
      ? []
      : row('bend once', `${entry.bendRadiusOnceMm} mm radius`, sourceOf('bendRadiusOnceMm'))),
    ...(entry.bendRadiusRepeatedMm === null
      ? []
      : row('bend repeatedly', `${entry.bendRadiusRepeatedMm} mm radius`, sourceOf('bendRadiusRepeatedMm'))),
    ...(entry.note === null ? [] : row('note', entry.note)),
    ...(entry.attenuation.length > 0 ? ['', 'Published attenuation at 20 °C:'] : []),
    ...entry.attenuation.flatMap((point) =>
      row(
        `  ${frequencyText(point.frequencyMHz * 1e6)}`,
        `${point.dbPer100m} dB/100 m`,
        `${point.source}; ${point.status}`,
      ),
    ),
  ];
  return `${lines.join('\n')}\n\nThe letters are explained in cables/SOURCES.md.\n`;
}

function runLines(run: RunFigures, units: Units, row: (label: string, text: string) => string[]): string[] {
  const at = `at ${frequencyText(run.frequencyHz)}, ${temperatureText(run.temperatureC, units)}`;
  const per = units === 'ft' ? '100 ft' : '100 m';
  const notes = run.notices.flatMap((notice) => row('note', notice.what));
  if (run.lossDb === null || run.lengthM === null)
    return [
      ...row('loss', `${fixedText(run.lossDbPer100m / lengthPerMetre(units), 2)} dB/${per} ${at}`),
      ...notes,
    ];
  return [
    ...row('loss one way', `${fixedText(run.lossDb, 2)} dB for ${lengthText(run.lengthM, units)} ${at}`),
    ...row('return loss', `${decibelText(2 * run.lossDb)} with the far end open or shorted`),
    ...row(
      'delay',
      `${fixedText(run.delayNs ?? Number.NaN, 2)} ns one way, ${fixedText(2 * (run.delayNs ?? Number.NaN), 2)} ns there and back`,
    ),
    ...notes,
  ];
}
