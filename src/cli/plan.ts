/** `plan`: what to set an instrument to before a line is swept. */
import { programVersion } from '../app/bundled.ts';
import { SCHEMA_VERSION } from '../app/json.ts';
import { type PlanRequest, requestPlan } from '../app/plan-request.ts';
import { planSweep, type SweepPlan } from '../assess/plan-sweep.ts';
import { hasGuide } from '../line/line.ts';
import { parseWindow } from '../numerics/window.ts';
import type { Problem } from '../outcome.ts';
import {
  decibelText,
  fixedText,
  frequencyText,
  lengthText,
  levelText,
  type Units,
} from '../plot/quantity-text.ts';
import { formatSweepRange } from '../sweep/quantity-format.ts';
import { type ExitStatus, type Io, textColumns, write } from './io.ts';
import { labelledRows } from './labelled-rows.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import { lineFlags, prepareTables } from './request.ts';

/** Runs the verb. */
export async function runPlan(invocation: Invocation, io: Io): Promise<ExitStatus> {
  const tables = await prepareTables(invocation, io);
  if (!tables.ok) return printProblems(io, tables.problems);
  const { settings, cables } = tables.value;
  const request = await requestPlan(lineFlags(invocation), invocation.text('band'), cables);
  const window = parseWindow(settings.windowSpec);
  const problems: Problem[] = [request, window].flatMap((one) => (one.ok ? [] : one.problems));
  if (!request.ok || !window.ok) return printProblems(io, problems);
  const plan = planSweep({ ...request.value, window: window.value });
  if (!plan.ok) return printProblems(io, plan.problems);
  const text = invocation.has('json')
    ? `${JSON.stringify(planDocument(request.value, plan.value), null, 2)}\n`
    : planText(request.value, plan.value, { columns: textColumns(io), units: settings.units });
  await write(io.stdout, text);
  return 0;
}

function planDocument({ line }: PlanRequest, plan: SweepPlan) {
  const { range, lossDb, ...rest } = plan;
  return {
    schema: SCHEMA_VERSION,
    tool: `feedsonde ${programVersion()}`,
    command: 'plan',
    line: { name: line.name, lengthM: plan.lengthM },
    ...range,
    sweep: formatSweepRange(range),
    ...rest,
    startLossDb: lossDb[0],
    stopLossDb: lossDb[1],
  };
}

function planText(
  { line }: PlanRequest,
  plan: SweepPlan,
  { columns, units }: { readonly columns: number; readonly units: Units },
): string {
  const row = labelledRows(columns);
  const { range, sweeps, remarks, lossDb } = plan;
  const ohms = hasGuide(line)
    ? 'none: a guide has no ohms'
    : plan.ohms
      ? 'can be measured against distance'
      : 'only as the solved line has them';
  return [
    `${line.name === '' ? 'line' : line.name}: ${formatSweepRange(range)}`,
    ...row('start', frequencyText(range.startHz)),
    ...row('stop', frequencyText(range.stopHz)),
    ...row('points', `${range.points}, in steps of ${frequencyText(plan.stepHz)}`),
    ...row(
      'line',
      `${lengthText(plan.lengthM, units)}, unambiguous to ${lengthText(plan.unambiguousM, units, 1)}`,
    ),
    ...row('resolution', lengthText(plan.resolutionM, units)),
    ...row(
      'weakest echo',
      `${levelText(plan.weakestReturnLossDb)} at the far end, with noise of −70 dB a point`,
    ),
    ...row(
      'loss one way',
      `${fixedText(lossDb[0], 2)} dB at the start, ${decibelText(lossDb[1])} at the stop`,
    ),
    ...row('ohms', ohms),
    '',
    ...sweeps.flatMap(({ end, why }, i) => row(i === 0 ? 'sweep with' : '', `${END_WORDS[end]}: ${why}`)),
    ...(remarks.length > 0 ? ['', ...remarks.flatMap((remark) => row('note', remark))] : []),
    '',
  ].join('\n');
}

const END_WORDS = {
  short: 'a short at the far end',
  load: 'a load there',
  antenna: 'the antenna on',
} as const;
