/** Runs the program on a scene, in this process, through its app floor. */
import { analyse } from '../../src/app/analyse.ts';
import type { Analysis } from '../../src/app/analysis.ts';
import type { AnalyseRequest } from '../../src/app/solver.ts';
import { checkLoss } from '../../src/assess/loss-check.ts';
import type { CableTable } from '../../src/line/cable-table.ts';
import { readLine } from '../../src/line/read-line.ts';
import type { Outcome } from '../../src/outcome.ts';
import type { Scene } from '../scenes/scene.ts';
import { type Answer, failedAnswer } from './answer.ts';

/** A sweep and the description of its line, as texts. */
export type SweepAndLine = Pick<Scene, 'sweepText' | 'lineText' | 'lineDescribed'>;

/** The request that the command line would make of a scene's two files. */
export function requestOf(scene: SweepAndLine, cables: CableTable): Outcome<AnalyseRequest> {
  const line = readLine(scene.lineText, 'scene.line.json', cables);
  if (!line.ok) return line;
  return {
    ok: true,
    notices: [],
    value: {
      sweepFile: 'scene.s1p',
      sweepBytes: new TextEncoder().encode(scene.sweepText),
      line: line.value,
      lineDescribed: scene.lineDescribed,
      windowSpec: 'kaiser:6',
      port: null,
      offsetM: 0,
      skipImpedance: true,
      standards: null,
    },
  };
}

/** The program's answer to a scene, and how long it took, reading of the sweep included. */
export function runProgram(scene: SweepAndLine, cables: CableTable): Answer {
  const request = requestOf(scene, cables);
  if (!request.ok) return failedAnswer(request.problems.map((p) => p.what).join('; '), 0);
  const started = performance.now();
  try {
    const outcome = analyse(request.value);
    const solveMs = performance.now() - started;
    if (!outcome.ok) return failedAnswer(outcome.problems.map((p) => p.what).join('; '), solveMs);
    return answerOf(outcome.value, solveMs);
  } catch (error) {
    // A throw is a bug of the program; the table counts it rather than losing the whole run.
    return failedAnswer(`threw ${String(error)}`, performance.now() - started);
  }
}

function answerOf(analysis: Analysis, solveMs: number): Answer {
  const { solution } = analysis;
  return {
    findings: analysis.findings.map((finding) => ({
      severity: finding.severity,
      kind: finding.kind,
      distanceM: finding.distanceM,
      sigmaM: finding.distanceSigmaM,
      joint: finding.echo === null ? null : (solution.echoes[finding.echo]?.joint?.index ?? null),
      confidence: finding.confidence,
    })),
    stretches: solution.stretches.filter((stretch) => stretch.kind !== 'sound'),
    lengthM: solution.lengthM,
    lengthSigmaM: solution.lengthSigmaM,
    end: solution.end,
    loss: lossOf(analysis),
    solveMs,
    failed: notFinite(analysis),
  };
}

/** What the loss check says; apart from the solve's time. */
function lossOf(analysis: Analysis): Answer['loss'] {
  const { lossDb, sigmaDb } = checkLoss(analysis);
  return lossDb && { lossDb, sigmaDb };
}

/** Names the first number of the results that is not finite: it would make nonsense of the JSON. */
function notFinite(analysis: Analysis): string | null {
  const numbers: [string, number][] = [
    ['lengthM', analysis.solution.lengthM],
    ['lengthSigmaM', analysis.solution.lengthSigmaM],
    ['delayNs', analysis.solution.delayNs],
    ...analysis.findings.flatMap((f): [string, number][] => [
      ['finding.distanceM', f.distanceM],
      ['finding.distanceSigmaM', f.distanceSigmaM],
      ['finding.confidence', f.confidence],
    ]),
  ];
  const bad = numbers.find(([, value]) => !Number.isFinite(value));
  return bad ? `${bad[0]} is ${bad[1]}` : null;
}
