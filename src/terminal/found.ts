/** What was found along the line, worst first: the rows of the list. */
import type { Analysis } from '../app/analysis.ts';
import type { Echo, EchoKind, Severity } from '../locate/echo.ts';
import { digitsText, ohmText } from '../plot/quantity-text.ts';

/** One row of the list: a finding, or an echo that is as it should be. */
export type Found = {
  readonly severity: Severity;
  readonly distanceM: number;
  readonly distanceSigmaM: number;
  /** As seen at the reference plane, dB, positive; null for a stretch. */
  readonly returnLossDb: number | null;
  /** With the line's loss and the upstream mismatch taken away, dB; null for a stretch. */
  readonly correctedReturnLossDb: number | null;
  readonly what: string;
  readonly where: string;
  readonly confidence: number;
  /** Only for findings. */
  readonly causes: readonly string[];
  readonly checks: readonly string[];
  readonly bring: readonly string[];
};

const SEVERITY_ORDER: Readonly<Record<Severity, number>> = { fault: 0, watch: 1, sound: 2 };

/** Plain words for the kinds of echo. */
const KIND_WORDS: Readonly<Record<EchoKind, string>> = {
  open: 'open',
  short: 'short',
  termination: 'termination',
  'series-resistance': 'series resistance',
  'shunt-leakage': 'shunt leakage',
  'series-inductance': 'series inductance',
  'shunt-capacitance': 'shunt capacitance',
  'impedance-step': 'impedance step',
  joint: 'joint',
  unresolved: 'unresolved',
};

const listed = new WeakMap<Analysis, readonly Found[]>();

/** The findings by severity and distance, then the echoes without a finding by distance. */
export function foundIn(analysis: Analysis): readonly Found[] {
  const known = listed.get(analysis);
  if (known) return known;
  const spokenOf = new Set(analysis.findings.map((finding) => finding.echo));
  const findings = analysis.findings.map((finding): Found => {
    const echo = finding.echo === null ? undefined : analysis.solution.echoes[finding.echo];
    return {
      severity: finding.severity,
      distanceM: finding.distanceM,
      distanceSigmaM: finding.distanceSigmaM,
      returnLossDb: echo?.returnLossDb ?? null,
      correctedReturnLossDb: echo?.correctedReturnLossDb ?? null,
      what: finding.what,
      where: finding.where,
      confidence: finding.confidence,
      causes: finding.causes,
      checks: finding.checks,
      bring: finding.bring,
    };
  });
  const others = analysis.solution.echoes.flatMap((echo, index): readonly Found[] =>
    spokenOf.has(index) ? [] : [soundEcho(analysis, echo, index)],
  );
  const rows = [...findings, ...others].sort(
    (a, b) => SEVERITY_ORDER[a.severity] - SEVERITY_ORDER[b.severity] || a.distanceM - b.distanceM,
  );
  listed.set(analysis, rows);
  return rows;
}

/** How many faults and watches there are. */
export function verdictOf(analysis: Analysis): { readonly faults: number; readonly watches: number } {
  const count = (severity: Severity) => analysis.findings.filter((f) => f.severity === severity).length;
  return { faults: count('fault'), watches: count('watch') };
}

function soundEcho(analysis: Analysis, echo: Echo, index: number): Found {
  return {
    severity: analysis.severities[index] ?? 'sound',
    distanceM: echo.distanceM,
    distanceSigmaM: echo.distanceSigmaM,
    returnLossDb: echo.returnLossDb,
    correctedReturnLossDb: echo.correctedReturnLossDb,
    what: echoWords(analysis, echo),
    where: analysis.places[index] ?? '',
    confidence: echo.confidence,
    causes: [],
    checks: [],
    bring: [],
  };
}

function echoWords(analysis: Analysis, echo: Echo): string {
  const isEnd = echo === analysis.solution.echoes.at(-1) && analysis.solution.end !== 'unknown';
  if (isEnd && (echo.kind === 'open' || echo.kind === 'short' || echo.kind === 'termination'))
    return `end: ${echo.kind === 'termination' ? analysis.solution.end : echo.kind}`;
  const value = echo.value && echo.kind !== 'joint' ? ` ${valueText(echo.value)}` : '';
  return `${KIND_WORDS[echo.kind]}${value}`;
}

function valueText(value: NonNullable<Echo['value']>): string {
  return value.unit === 'ohm' ? ohmText(value.value) : `${digitsText(value.value, 2)} ${value.unit}`;
}
