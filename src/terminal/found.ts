/** What was found along the line, worst first: the rows of the list. */
import type { Analysis } from '../app/analysis.ts';
import { analysisInUnits } from '../app/analysis-in-units.ts';
import type { Finding } from '../assess/finding.ts';
import type { Echo, Severity, StretchKind } from '../locate/echo.ts';
import type { Units } from '../plot/quantity-text.ts';
import { echoWords, STRETCH_WORDS } from '../report/echo-words.ts';

/** One row of the list: a finding, or an echo that is as it should be. */
export type Found = {
  readonly severity: Severity;
  readonly distanceM: number;
  readonly distanceSigmaM: number;
  /** As seen at the reference plane, dB, positive; null for a stretch. */
  readonly returnLossDb: number | null;
  /** With the line's loss and the upstream mismatch taken away, dB; null for a stretch. */
  readonly correctedReturnLossDb: number | null;
  /** Kind and size in few words: "series resistance 9.1 Ω". */
  readonly short: string;
  /** Kind and size with its uncertainty. */
  readonly what: string;
  /** "at joint 3, main run to top jumper". */
  readonly where: string;
  /** The same in few words: "joint 3", "main run". */
  readonly place: string;
  readonly confidence: number;
  /** Only for findings. */
  readonly causes: readonly string[];
  readonly checks: readonly string[];
  readonly bring: readonly string[];
};

const SEVERITY_ORDER: Readonly<Record<Severity, number>> = { fault: 0, watch: 1, sound: 2 };

const listed: Readonly<Record<Units, WeakMap<Analysis, readonly Found[]>>> = {
  m: new WeakMap(),
  ft: new WeakMap(),
};

/**
 * The findings by severity and distance, then the echoes without a finding by distance.
 *
 * @param units Of lengths in the words; the numbers are metres.
 */
export function foundIn(analysis: Analysis, units: Units = 'm'): readonly Found[] {
  const known = listed[units].get(analysis);
  if (known) return known;
  const rows = rowsOf(analysisInUnits(analysis, units));
  listed[units].set(analysis, rows);
  return rows;
}

function rowsOf(analysis: Analysis): readonly Found[] {
  const spokenOf = new Set(analysis.findings.map((finding) => finding.echo));
  const others = analysis.solution.echoes.flatMap((echo, index): readonly Found[] =>
    spokenOf.has(index) ? [] : [soundEcho(analysis, echo, index)],
  );
  return [...analysis.findings.map((finding) => foundOf(analysis, finding)), ...others].sort(
    (a, b) => SEVERITY_ORDER[a.severity] - SEVERITY_ORDER[b.severity] || a.distanceM - b.distanceM,
  );
}

function foundOf(analysis: Analysis, finding: Finding): Found {
  const echo = finding.echo === null ? undefined : analysis.solution.echoes[finding.echo];
  return {
    severity: finding.severity,
    distanceM: finding.distanceM,
    distanceSigmaM: finding.distanceSigmaM,
    returnLossDb: echo?.returnLossDb ?? null,
    correctedReturnLossDb: echo?.correctedReturnLossDb ?? null,
    short: echo ? echoWords(analysis, echo) : stretchWords(finding.kind),
    what: finding.what,
    where: finding.where,
    place: echo ? placeOf(analysis, echo) : sectionAt(analysis, finding.distanceM),
    confidence: finding.confidence,
    causes: finding.causes,
    checks: finding.checks,
    bring: finding.bring,
  };
}

function soundEcho(analysis: Analysis, echo: Echo, index: number): Found {
  const words = echoWords(analysis, echo);
  return {
    severity: analysis.severities[index] ?? 'sound',
    distanceM: echo.distanceM,
    distanceSigmaM: echo.distanceSigmaM,
    returnLossDb: echo.returnLossDb,
    correctedReturnLossDb: echo.correctedReturnLossDb,
    short: words,
    what: words,
    where: analysis.places[index] ?? '',
    place: placeOf(analysis, echo),
    confidence: echo.confidence,
    causes: [],
    checks: [],
    bring: [],
  };
}

function placeOf(analysis: Analysis, echo: Echo): string {
  if (echo.joint) return `joint ${echo.joint.index}`;
  return analysis.line.sections[echo.section]?.label ?? '';
}

/** Label of the section in which a distance lies. */
function sectionAt({ line }: Analysis, distanceM: number): string {
  let endM = 0;
  for (const section of line.sections) {
    endM += section.lengthM ?? Number.POSITIVE_INFINITY;
    if (distanceM <= endM) return section.label;
  }
  return '';
}

function stretchWords(kind: Finding['kind']): string {
  return Object.hasOwn(STRETCH_WORDS, kind) ? STRETCH_WORDS[kind as StretchKind] : kind;
}
