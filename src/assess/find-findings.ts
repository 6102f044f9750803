/** From echoes and stretches to findings: where, what, how sure, why, and what to do first. */
import type { Line } from '../line/line.ts';
import type { Echo, Severity, Stretch } from '../locate/echo.ts';
import type { Solution } from '../locate/solution.ts';
import { adviceFor, type PlaceKind } from './advice.ts';
import type { Finding } from './finding.ts';
import { placeText } from './place-text.ts';
import { sizeText, stretchText } from './size-text.ts';

/** Confidence of a stretch whose excess loss stands `z` sigmas above nothing is at least this. */
const STRETCH_CONFIDENCE = 0.9;

/** Place of each echo in words, in the order of the solution's echoes. */
export function placesOf(line: Line, solution: Solution): string[] {
  return solution.echoes.map((echo, i) =>
    placeText(
      line,
      { distanceM: echo.distanceM, jointIndex: echo.joint?.index ?? null, section: echo.section },
      solution.endsEarly && i === solution.echoes.length - 1,
    ),
  );
}

/**
 * What matters of a solution, faults before what is to be watched, then by distance.
 *
 * @param severities One per echo, as `severitiesOf` gives them. @param places One per echo, as `placesOf` gives them.
 */
export function findingsOf(
  line: Line,
  solution: Solution,
  severities: readonly Severity[],
  places: readonly string[],
): Finding[] {
  const findings: Finding[] = [];
  solution.echoes.forEach((echo, i) => {
    const severity = severities[i]!;
    if (severity === 'sound' || echo.kind === 'joint') {
      if (severity === 'watch') findings.push(jointFinding(echo, i, places[i]!));
      return;
    }
    const advice = adviceFor(echo.kind, placeKind(line, solution, echo, i));
    findings.push({
      severity,
      echo: i,
      kind: echo.kind,
      distanceM: echo.distanceM,
      distanceSigmaM: echo.distanceSigmaM,
      where: places[i]!,
      what:
        solution.endsEarly && i === solution.echoes.length - 1
          ? `${sizeText(echo.kind, echo.value)}: the line stops here`
          : sizeText(echo.kind, echo.value),
      confidence: echo.confidence,
      ...advice,
    });
  });
  for (const stretch of solution.stretches) {
    if (stretch.kind !== 'sound') findings.push(stretchFinding(line, stretch, stretch.kind));
  }
  const rank = { fault: 0, watch: 1 };
  return findings.sort((a, b) => rank[a.severity] - rank[b.severity] || a.distanceM - b.distanceM);
}

/** A joint that is sound by its kind but worse than the line's own limit. */
function jointFinding(echo: Echo, index: number, where: string): Finding {
  return {
    severity: 'watch',
    echo: index,
    kind: echo.kind,
    distanceM: echo.distanceM,
    distanceSigmaM: echo.distanceSigmaM,
    where,
    what: `joint with ${echo.correctedReturnLossDb.toFixed(1)} dB return loss, worse than this line's limit`,
    confidence: echo.confidence,
    ...adviceFor('unresolved', 'joint'),
  };
}

function stretchFinding(line: Line, stretch: Stretch, kind: 'wet' | 'wrong-cable'): Finding {
  const middleM = (stretch.fromM + stretch.toM) / 2;
  return {
    severity: 'fault',
    echo: null,
    kind,
    distanceM: middleM,
    distanceSigmaM: (stretch.toM - stretch.fromM) / Math.sqrt(12),
    where: `from ${stretch.fromM.toFixed(1)} m to ${stretch.toM.toFixed(1)} m, ${placeText(
      line,
      { distanceM: stretch.fromM, jointIndex: null, section: sectionOf(line, middleM) },
      false,
    )}`,
    what: stretchText(stretch),
    confidence: STRETCH_CONFIDENCE,
    ...adviceFor(kind, 'cable'),
  };
}

function placeKind(line: Line, solution: Solution, echo: Echo, index: number): PlaceKind {
  if (index === solution.echoes.length - 1) return solution.endsEarly ? 'cable' : 'end';
  if (echo.joint === null) return 'cable';
  if (echo.joint.index === 1) return 'port';
  return echo.joint.index === line.sections.length + 1 ? 'end' : 'joint';
}

/** Section that a distance lies in, by the described lengths. */
function sectionOf(line: Line, distanceM: number): number {
  let startM = 0;
  for (const [i, section] of line.sections.entries()) {
    startM += section.lengthM ?? Number.POSITIVE_INFINITY;
    if (distanceM < startM) return i;
  }
  return line.sections.length - 1;
}
