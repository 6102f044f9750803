/** From echoes and stretches to findings: where, what, how sure, why, and what to do first. */
import type { Line } from '../line/line.ts';
import type { Echo, Severity, Stretch, StretchKind } from '../locate/echo.ts';
import type { Solution } from '../locate/solution.ts';
import { adviceFor } from './advice.ts';
import type { PlaceKind } from './advice-kinds.ts';
import type { Finding } from './finding.ts';
import { guideAdviceFor } from './guide-advice.ts';
import { inMetres, type LengthWords, placeText, startsM, stretchPlaceText } from './place-text.ts';
import { sizeText, stretchText } from './size-text.ts';

/** Confidence of a stretch: the solver reports none that it is not this sure of. */
const STRETCH_CONFIDENCE = 0.9;

/** Place of each echo in words, in the order of the solution's echoes. */
export function placesOf(line: Line, solution: Solution, lengthWords: LengthWords = inMetres): string[] {
  return solution.echoes.map((echo, i) =>
    placeText(
      line,
      {
        distanceM: echo.distanceM,
        jointIndex: jointIndexOf(line, solution, i),
        section: echo.section,
      },
      lengthWords,
    ),
  );
}

/**
 * What matters of a solution, faults before what is to be watched, then by distance.
 *
 * @param severities One per echo, as `severitiesOf` gives them.
 * @param places One per echo, as `placesOf` gives them.
 * @param lengthWords How the words write lengths; the same that the places were made with.
 */
export function findingsOf(
  line: Line,
  solution: Solution,
  severities: readonly Severity[],
  places: readonly string[],
  lengthWords: LengthWords = inMetres,
): Finding[] {
  const echoes = solution.echoes.flatMap((echo, i): Finding[] => {
    const severity = severities[i]!;
    if (severity === 'sound') return [];
    const { distanceM, distanceSigmaM, kind, confidence } = echo;
    return [
      {
        severity,
        echo: i,
        kind,
        distanceM,
        distanceSigmaM,
        where: places[i]!,
        what: echoWhat(line, solution, i),
        confidence,
        ...(isInGuide(line, solution, i)
          ? guideAdviceFor(placeKind(line, solution, i))
          : adviceFor(kind, placeKind(line, solution, i))),
      },
    ];
  });
  const stretches = solution.stretches.flatMap((stretch) =>
    isFaulty(stretch) ? [stretchFinding(line, stretch, lengthWords)] : [],
  );
  const rank = { fault: 0, watch: 1 };
  return [...echoes, ...stretches].sort(
    (a, b) => rank[a.severity] - rank[b.severity] || a.distanceM - b.distanceM,
  );
}

/** A stretch that is a finding. */
type FaultyStretch = Stretch & { readonly kind: Exclude<StretchKind, 'sound'> };

function isFaulty(stretch: Stretch): stretch is FaultyStretch {
  return stretch.kind !== 'sound';
}

/** What an echo is; at the end also what was to be expected there, at a joint what its limit has to do with it. */
function echoWhat(line: Line, solution: Solution, index: number): string {
  const echo = solution.echoes[index]!;
  if (echo.kind === 'joint')
    return `joint with ${echo.correctedReturnLossDb.toFixed(1)} dB return loss, worse than this line's limit`;
  const size = sizeText(echo.kind, echo.value);
  if (index < solution.echoes.length - 1) return size;
  if (solution.endsEarly) return `${size}: the line stops here`;
  const expected: Readonly<Record<Line['end'], string | null>> = {
    open: 'an open end',
    short: 'a short',
    load: 'a load',
    antenna: 'an antenna',
    unknown: null,
  };
  const described = expected[line.end];
  return described === null ? size : `${size}, where the description has ${described}`;
}

function stretchFinding(line: Line, stretch: FaultyStretch, lengthWords: LengthWords): Finding {
  return {
    severity: 'fault',
    echo: null,
    kind: stretch.kind,
    distanceM: (stretch.fromM + stretch.toM) / 2,
    // That of an even chance over the whole stretch.
    distanceSigmaM: (stretch.toM - stretch.fromM) / Math.sqrt(12),
    where: stretchPlaceText(line, stretch, lengthWords),
    what: stretchText(stretch, lengthWords),
    confidence: STRETCH_CONFIDENCE,
    ...adviceFor(stretch.kind, 'cable'),
  };
}

function placeKind(line: Line, solution: Solution, index: number): PlaceKind {
  const jointIndex = jointIndexOf(line, solution, index);
  const isLast = index === solution.echoes.length - 1;
  if (jointIndex === 1) return 'port';
  if (isLast && !solution.endsEarly) return 'end';
  if (jointIndex === null) return 'cable';
  return jointIndex === line.sections.length + 1 ? 'end' : 'joint';
}

/** Whether a place has guide on both sides: at the port and at the end, on the one side it has. */
function isInGuide(line: Line, solution: Solution, index: number): boolean {
  const jointIndex = jointIndexOf(line, solution, index);
  const { section } = solution.echoes[index]!;
  const around = jointIndex === null ? [section] : [jointIndex - 2, jointIndex - 1];
  return around.every((side) => line.sections[side]?.type === 'guide' || line.sections[side] === undefined);
}

/** How near a joint a line that stops early must stop to have come apart there, m: the length of a connector. */
const AT_JOINT_M = 0.3;

/** The joint an echo sits at; where the line stops early, only one that is described to be just there. */
function jointIndexOf(line: Line, solution: Solution, index: number): number | null {
  const echo: Echo = solution.echoes[index]!;
  if (echo.joint === null) return null;
  if (!solution.endsEarly || index < solution.echoes.length - 1) return echo.joint.index;
  const jointM = startsM(line)[echo.joint.index - 1] ?? Number.POSITIVE_INFINITY;
  const nearM = Math.max(AT_JOINT_M, 2 * echo.distanceSigmaM);
  return Math.abs(jointM - echo.distanceM) <= nearM ? echo.joint.index : null;
}
