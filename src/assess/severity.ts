/** How bad an echo is: from what it is, its size, what was described, and the limits of the line. */
import type { Line } from '../line/line.ts';
import type { Echo, Severity } from '../locate/echo.ts';
import type { Solution } from '../locate/solution.ts';

/**
 * Return loss of a flaw in the cable below which it is a fault whatever else is said, where the line file gives no
 * limit, dB. Above it, a flaw that is sure to be there is a fault too, unless it is no larger than cable as sold may
 * show; where a limit is given, what keeps to it is something to watch.
 *
 * @source references.md section 8: ordinary connectors return −30 to −40 dB (common practice).
 */
const ALWAYS_FAULT_DB = 32;

/** Flaws weaker than this are what cable as sold may show here and there, dB. Common practice: 40 to 45 dB. */
const STRUCTURE_DB = 48;

/** Confidence below which a weak flaw is something to watch rather than a fault. */
const SURE = 0.6;

/** Severity of each echo of a solution, in the order of its echoes. */
export function severitiesOf(line: Line, solution: Solution): Severity[] {
  return solution.echoes.map((echo, i) =>
    i === solution.echoes.length - 1 ? endSeverity(line, solution, echo) : echoSeverity(line, echo),
  );
}

function endSeverity(line: Line, solution: Solution, echo: Echo): Severity {
  if (solution.endsEarly) return 'fault';
  const full = echo.kind === 'open' || echo.kind === 'short';
  switch (line.end) {
    case 'unknown':
      return 'sound';
    case 'open':
    case 'short':
      return echo.kind === line.end ? 'sound' : 'watch';
    case 'load':
    case 'antenna':
      return full ? 'fault' : 'sound';
  }
}

function echoSeverity(line: Line, echo: Echo): Severity {
  const { limits } = line;
  if (echo.kind === 'joint') {
    const described =
      echo.joint === null ? null : line.sections[echo.joint.index - 2]?.jointAfter.returnLossDb;
    const limitDb = described ?? limits.jointReturnLossDb;
    return limitDb !== null && limitDb !== undefined && echo.correctedReturnLossDb < limitDb
      ? 'watch'
      : 'sound';
  }
  if (echo.joint !== null) return 'fault';
  const limitDb = limits.cableReturnLossDb;
  if (echo.correctedReturnLossDb < (limitDb ?? ALWAYS_FAULT_DB)) return 'fault';
  if (echo.correctedReturnLossDb > STRUCTURE_DB) return 'sound';
  const sure = echo.confidence >= SURE || echo.kind !== 'unresolved';
  return sure && limitDb === null ? 'fault' : 'watch';
}
