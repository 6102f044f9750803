/** The program's front door: argv and streams in, exit status out. Everything heavy is loaded when it is needed. */
import process from 'node:process';
import { programVersion } from '../app/bundled.ts';
import { assertNever } from '../outcome.ts';
import { type ExitStatus, type Io, write } from './io.ts';
import { type Invocation, parseArguments } from './parse-arguments.ts';
import { printProblems } from './print-problems.ts';
import type { OpenWorkspace } from './workspace.ts';

const io: Io = {
  stdin: process.stdin,
  stdout: process.stdout,
  stderr: process.stderr,
  env: process.env,
};

// A reader that had enough (`| head`) is no trouble of ours; a full disk is.
io.stderr.on('error', (error: NodeJS.ErrnoException) => process.exit(error.code === 'EPIPE' ? 0 : 2));
io.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit(0);
  const what = `standard output could not be written (${error.code ?? error.message})`;
  io.stderr.write(`feedsonde: ${what}\n  check the disk that it goes to\n`, () => process.exit(2));
});

process.exitCode = await run(process.argv.slice(2)).catch(async (error: unknown): Promise<ExitStatus> => {
  const what = error instanceof Error ? (error.stack ?? error.message) : String(error);
  await write(
    io.stderr,
    `feedsonde: a fault of the program; please report it with what you typed\n${what}\n`,
  );
  return 2;
});

async function run(argv: readonly string[]): Promise<ExitStatus> {
  const parsed = parseArguments(argv);
  if (!parsed.ok) return printProblems(io, parsed.problems);
  const invocation = parsed.value;
  if (invocation.has('version')) {
    await write(io.stdout, `feedsonde ${programVersion()}\n`);
    return 0;
  }
  if (invocation.has('help')) {
    const { verbHelp } = await import('./help.ts');
    await write(io.stdout, verbHelp(invocation.verb));
    return 0;
  }
  return runVerb(invocation, argv);
}

async function runVerb(invocation: Invocation, argv: readonly string[]): Promise<ExitStatus> {
  switch (invocation.verb) {
    case 'workspace':
      return (await import('./workspace.ts')).runWorkspace(invocation, io, loadWorkspace);
    case 'locate':
      return (await import('./locate.ts')).runLocate(invocation, io);
    case 'loss':
      return (await import('./loss.ts')).runLoss(invocation, io);
    case 'plan':
      return (await import('./plan.ts')).runPlan(invocation, io);
    case 'check-standards':
      return (await import('./check-standards.ts')).runCheckStandards(invocation, io);
    case 'compare':
      return (await import('./compare.ts')).runCompare(invocation, io);
    case 'cables':
      return (await import('./cables.ts')).runCables(invocation, io);
    case 'simulate':
      return (await import('./simulate.ts')).runSimulate(invocation, io, argv);
    case 'log':
      return (await import('./log.ts')).runLog(invocation, io);
    default:
      return assertNever(invocation.verb);
  }
}

async function loadWorkspace(): Promise<OpenWorkspace> {
  const { startWorkspace } = await import('../terminal/start.tsx');
  return async (input) => {
    await startWorkspace({ ...input, host: process });
  };
}
