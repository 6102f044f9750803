/** An analysis as the JSON document of `locate --json`: schema 1, full precision, null where unknown, never NaN. */
import type { Finding } from '../assess/finding.ts';
import { describedLengthM } from '../line/line.ts';
import type { Echo, EchoKind, EchoValue, Severity, StretchKind } from '../locate/echo.ts';
import type { Ghost } from '../locate/solution.ts';
import type { Notice } from '../outcome.ts';
import { spacingOf } from '../sweep/spacing.ts';

import type { Analysis } from './analysis.ts';
import { analysisNotices } from './analysis-notices.ts';

/** Version of the documents' form; rises when a reader of the old form would misread the new one. */
export const SCHEMA_VERSION = 1;

export type LocateEcho = {
  readonly distanceM: number | null;
  readonly distanceSigmaM: number | null;
  readonly returnLossDb: number | null;
  readonly correctedReturnLossDb: number | null;
  readonly kind: EchoKind;
  readonly confidence: number | null;
  readonly ghost: boolean;
  readonly value: EchoValue | null;
  readonly joint: { readonly index: number; readonly name: string } | null;
  readonly place: string;
  readonly severity: Severity;
};

export type LocateDocument = {
  readonly schema: typeof SCHEMA_VERSION;
  readonly tool: string;
  readonly command: 'locate';
  readonly sweep: {
    readonly file: string;
    readonly port: number;
    readonly startHz: number | null;
    readonly stopHz: number | null;
    readonly points: number;
    /** The smallest step of an uneven sweep. */
    readonly stepHz: number | null;
    readonly even: boolean;
    readonly portOhm: number | null;
  };
  readonly reach: {
    readonly resolutionM: number | null;
    readonly unambiguousM: number | null;
    readonly weakestReturnLossDb: number | null;
    readonly impedanceProfile: 'measured' | 'modelled' | 'no';
  };
  readonly line: {
    readonly name: string;
    readonly lengthM: number | null;
    readonly describedLengthM: number | null;
    readonly delayNs: number | null;
    readonly end: string;
    readonly scaledTo: 'description' | 'velocity-factor';
  };
  /** In order of distance; ghosts follow the echoes, so that `findings[].echo` counts echoes alone. */
  readonly echoes: readonly LocateEcho[];
  readonly sections: readonly {
    readonly fromM: number | null;
    readonly toM: number | null;
    readonly excessLossDb: number | null;
    readonly excessLossSigmaDb: number | null;
    readonly kind: StretchKind;
  }[];
  readonly fit: {
    readonly residualDb: number | null;
    readonly explained: number | null;
    readonly elements: number;
  };
  readonly findings: readonly {
    readonly severity: Finding['severity'];
    readonly echo: number | null;
    readonly kind: Finding['kind'];
    readonly distanceM: number | null;
    readonly where: string;
    readonly what: string;
    readonly confidence: number | null;
    readonly causes: readonly string[];
    readonly checks: readonly string[];
    readonly bring: readonly string[];
  }[];
  readonly notices: readonly Notice[];
};

/**
 * Makes the document.
 *
 * @param tool Name and version of the program, `feedsonde 0.1.0`.
 * @param notices What the reading of files had to say; the analysis' own notices follow.
 */
export function locateDocument(
  analysis: Analysis,
  tool: string,
  notices: readonly Notice[] = [],
): LocateDocument {
  const { sweep, reach, line, solution } = analysis;
  const { stepHz, even } = spacingOf(sweep.frequencyHz);
  return {
    schema: SCHEMA_VERSION,
    tool,
    command: 'locate',
    sweep: {
      file: sweep.file,
      port: sweep.port,
      startHz: known(sweep.frequencyHz[0]),
      stopHz: known(sweep.frequencyHz.at(-1)),
      points: sweep.frequencyHz.length,
      stepHz: known(stepHz),
      even,
      portOhm: known(sweep.portOhm),
    },
    reach: {
      resolutionM: known(reach.resolutionM),
      unambiguousM: known(reach.unambiguousM),
      weakestReturnLossDb: known(reach.weakestReturnLossDb),
      impedanceProfile: reach.impedanceProfile,
    },
    line: {
      name: line.name,
      lengthM: known(solution.lengthM),
      describedLengthM: describedLengthM(line),
      delayNs: known(solution.delayNs),
      end: solution.end,
      scaledTo: solution.scaledTo,
    },
    echoes: [
      ...solution.echoes.map((echo, i) =>
        echoEntry(echo, analysis.places[i] ?? '', analysis.severities[i] ?? 'sound'),
      ),
      ...solution.ghosts.map(ghostEntry),
    ],
    sections: solution.stretches.map((stretch) => ({
      fromM: known(stretch.fromM),
      toM: known(stretch.toM),
      excessLossDb: known(stretch.excessLossDb),
      excessLossSigmaDb: known(stretch.excessLossSigmaDb),
      kind: stretch.kind,
    })),
    fit: {
      residualDb: known(solution.residualDb),
      explained: known(solution.explained),
      elements: solution.elements,
    },
    findings: analysis.findings.map((finding) => ({
      severity: finding.severity,
      echo: finding.echo,
      kind: finding.kind,
      distanceM: known(finding.distanceM),
      where: finding.where,
      what: finding.what,
      confidence: known(finding.confidence),
      causes: finding.causes,
      checks: finding.checks,
      bring: finding.bring,
    })),
    notices: [...notices, ...analysisNotices(analysis)].map(({ code, what }) => ({ code, what })),
  };
}

function echoEntry(echo: Echo, place: string, severity: Severity): LocateEcho {
  return {
    distanceM: known(echo.distanceM),
    distanceSigmaM: known(echo.distanceSigmaM),
    returnLossDb: known(echo.returnLossDb),
    correctedReturnLossDb: known(echo.correctedReturnLossDb),
    kind: echo.kind,
    confidence: known(echo.confidence),
    ghost: false,
    value: echo.value && Number.isFinite(echo.value.value) ? valueEntry(echo.value) : null,
    joint: echo.joint && { index: echo.joint.index, name: echo.joint.name },
    place,
    severity,
  };
}

function valueEntry({ quantity, value, sigma, unit }: EchoValue): EchoValue {
  return { quantity, value, sigma: known(sigma), unit };
}

/** A re-reflection stands among the echoes, marked as what it is: no kind, no size of its own, nothing to mend. */
function ghostEntry(ghost: Ghost): LocateEcho {
  const between = ghost.betweenM.map((m) => `${m.toFixed(2)} m`).join(' and ');
  return {
    distanceM: known(ghost.distanceM),
    distanceSigmaM: null,
    returnLossDb: known(ghost.returnLossDb),
    correctedReturnLossDb: null,
    kind: 'unresolved',
    confidence: null,
    ghost: true,
    value: null,
    joint: null,
    place: `re-reflection between ${between}`,
    severity: 'sound',
  };
}

/** JSON has no NaN and no infinity: what is not finite is not known. */
function known(value: number | null | undefined): number | null {
  return value !== undefined && value !== null && Number.isFinite(value) ? value : null;
}
