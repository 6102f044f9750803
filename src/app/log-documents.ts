/** What the logbook verbs say, as JSON: schema 1, null where unknown. */
import type { Entry, EntrySummary, StoredLine } from '../logbook/entry.ts';
import type { Course, LineTrend } from '../logbook/trend.ts';
import { SCHEMA_VERSION } from './json.ts';

/** Head that every document begins with. */
export function logHead(command: string, tool: string, logbook: string) {
  return { schema: SCHEMA_VERSION, tool, command: `log ${command}`, logbook };
}

/** One row of a list. */
export function summaryDocument(entry: EntrySummary) {
  return {
    entry: entry.key,
    site: entry.line.site,
    line: entry.line.name,
    takenAt: entry.takenAt,
    addedAt: entry.addedAt,
    file: entry.file,
    port: entry.port,
    faults: entry.faults,
    watches: entry.watches,
    baseline: entry.baseline,
    who: entry.who,
    instrument: entry.instrument,
    weather: entry.weather,
    note: entry.note,
    tool: entry.tool,
  };
}

/** One entry with all that was concluded; `results` is what `locate --json` said then. */
export function entryShown(entry: Entry) {
  return {
    ...summaryDocument(entry),
    sha256: entry.hash,
    sizeBytes: entry.sizeBytes,
    setup: entry.setup,
    described: JSON.parse(entry.described) as unknown,
    figures: entry.figures,
    results: JSON.parse(entry.document) as unknown,
  };
}

/** A line over the years; every point names its entry. */
export function trendDocument(line: StoredLine, trend: LineTrend) {
  const { moments } = trend;
  const when = (at: number) => ({
    entry: moments[at]?.key ?? '',
    takenAt: moments[at]?.takenAt ?? '',
  });
  const course = ({ points, change, perYear }: Course) => ({
    change,
    perYear,
    points: points.map(({ at, value }) => ({ ...when(at), value })),
  });
  return {
    line: { site: line.site, name: line.name, baseline: line.baseline },
    sweeps: moments.map(({ key, takenAt, figures }) => ({
      entry: key,
      takenAt,
      temperatureC: figures.temperatureC,
      end: figures.end,
      startHz: figures.startHz,
      stopHz: figures.stopHz,
      points: figures.points,
      residualDb: figures.residualDb,
    })),
    echoes: trend.echoes.map((echo) => ({
      place: echo.place,
      joint: echo.joint,
      kind: echo.kind,
      inLastSweep: echo.lastAt === moments.length - 1,
      changeDb: echo.levelDb.change,
      perYearDb: echo.levelDb.perYear,
      points: echo.echoes.map(({ at, echo: seen }) => ({
        ...when(at),
        distanceM: seen.distanceM,
        distanceSigmaM: seen.distanceSigmaM,
        returnLossDb: seen.returnLossDb,
        correctedReturnLossDb: seen.correctedReturnLossDb,
        kind: seen.kind,
        severity: seen.severity,
        value: seen.value,
      })),
    })),
    lossDb: { atHz: trend.lossAtHz, ...course(trend.lossDb) },
    lengthM: course(trend.lengthM),
    match: trend.match.map(({ band, returnLossDb }) => ({ band, worstReturnLossDb: course(returnLossDb) })),
  };
}
