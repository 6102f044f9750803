/** `check-standards`: are these three sweeps good standards? */
import { programVersion } from '../app/bundled.ts';
import { readBytes } from '../app/files.ts';
import { SCHEMA_VERSION } from '../app/json.ts';
import { loadSettings } from '../app/settings.ts';
import { checkStandards, type StandardsVerdict } from '../assess/check-standards.ts';
import type { Outcome, Problem } from '../outcome.ts';
import { wrapText } from '../plot/cells.ts';
import { SEVERITY_GLYPHS } from '../plot/line-strip.ts';
import { readSweep } from '../sweep/read-sweep.ts';
import type { Sweep } from '../sweep/sweep.ts';
import { type ExitStatus, type Io, textColumns, write } from './io.ts';
import { createPaint, type Paint } from './paint.ts';
import type { Invocation } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';

/** Runs the verb. */
export async function runCheckStandards(invocation: Invocation, io: Io): Promise<ExitStatus> {
  const settings = await loadSettings({ units: null, window: null, cables: null }, io.env);
  const read = await Promise.all(invocation.inputs.map((file) => readOne(file, io)));
  const problems = [settings, ...read].flatMap((one): readonly Problem[] => (one.ok ? [] : one.problems));
  const [open, short, load] = read;
  if (problems.length > 0 || !settings.ok || !open?.ok || !short?.ok || !load?.ok)
    return printProblems(io, problems);
  const verdict = checkStandards({ open: open.value, short: short.value, load: load.value });
  if (invocation.has('json')) {
    const document = {
      schema: SCHEMA_VERSION,
      tool: `feedsonde ${programVersion()}`,
      command: 'check-standards',
      ...verdict,
    };
    await write(io.stdout, `${JSON.stringify(document, null, 2)}\n`);
  } else {
    const paint = createPaint(settings.value.colour && io.stdout.isTTY === true);
    await write(io.stdout, standardsText(verdict, textColumns(io), paint));
  }
  return verdict.pass ? 0 : 1;
}

async function readOne(file: string, io: Io): Promise<Outcome<Sweep>> {
  const bytes = await readBytes(file, { stdin: io.stdin });
  return bytes.ok ? readSweep(bytes.value, { file }) : bytes;
}

/** The verdict, then each check. */
function standardsText({ pass, checks }: StandardsVerdict, columns: number, paint: Paint): string {
  const wrong = checks.filter((check) => !check.pass).length;
  const head = pass
    ? `${SEVERITY_GLYPHS.sound} these are good standards`
    : `${SEVERITY_GLYPHS.fault} these standards will spoil a correction: ${wrong} thing${wrong === 1 ? '' : 's'} wrong`;
  const lines = checks.flatMap((check) => {
    const mark = check.pass ? SEVERITY_GLYPHS.sound : SEVERITY_GLYPHS.fault;
    const text = hanging(`${mark} `, check.what, columns);
    return [
      ...(check.pass ? text : text.map((line) => paint('fault', line))),
      ...(check.mend === null ? [] : hanging('  mend  ', check.mend, columns)),
    ];
  });
  return [...(pass ? [head] : [paint('fault', head)]), ...lines, ''].join('\n');
}

function hanging(label: string, text: string, columns: number): string[] {
  return wrapText(text, columns - label.length).map(
    (line, i) => `${i === 0 ? label : ' '.repeat(label.length)}${line}`,
  );
}
