/**
 * The time during which the terminal is ours: taken over at the start, given back on every way out, lent to the shell
 * in between.
 */
import type { Host } from './config.ts';
import type { Screen } from './screen.ts';

/** How the session ended: by a wish of the person, or by a signal that the process is still to die of. */
export type SessionEnd = { readonly signal: NodeJS.Signals | null };

export type Session = {
  /** Settles when the session is to end; rejects with what was thrown where nobody caught it. */
  readonly over: Promise<SessionEnd>;
  readonly quit: () => void;
  /** Gives the terminal to the shell until the job is continued. */
  readonly suspend: () => void;
  /** Gives the terminal back and stops listening; may be called any number of times. */
  readonly close: () => void;
};

/** Signals that ask a program to go. */
const FAREWELLS: readonly NodeJS.Signals[] = ['SIGINT', 'SIGTERM', 'SIGHUP'];

/** A stop that did not happen (nobody would continue us) is noticed after this, ms. */
const STOPPED_BY_MS = 100;

/** Takes the terminal over. */
export function openSession(parts: {
  readonly host: Host;
  readonly stdin: NodeJS.ReadStream;
  readonly screen: Screen;
  /** Called when the terminal is ours again after a suspension; its size may have changed. */
  readonly onResume: () => void;
}): Session {
  const { host, stdin, screen } = parts;
  let settle: (end: SessionEnd) => void = () => {};
  let reject: (error: unknown) => void = () => {};
  const over = new Promise<SessionEnd>((resolve, fail) => {
    settle = resolve;
    reject = fail;
  });
  let away = false;

  const quit = (): void => settle({ signal: null });
  const onFarewell = (signal: NodeJS.Signals): void => settle({ signal });
  const onCrash = (error: unknown): void => reject(error);

  const suspend = (): void => {
    if (away) return;
    away = true;
    screen.leave();
    setRawMode(stdin, false);
    host.off('SIGTSTP', suspend);
    try {
      // The whole job, so that what started us (npm, a pipe) stops with us and the shell takes over.
      host.kill(0, 'SIGTSTP');
    } catch {
      // A system without jobs: nothing to wait for.
      resume();
      return;
    }
    setTimeout(resume, STOPPED_BY_MS);
  };

  const resume = (): void => {
    if (!away) return;
    away = false;
    host.on('SIGTSTP', suspend);
    setRawMode(stdin, true);
    screen.enter();
    parts.onResume();
  };

  for (const signal of FAREWELLS) host.on(signal, onFarewell);
  host.on('SIGTSTP', suspend);
  host.on('SIGCONT', resume);
  host.on('uncaughtException', onCrash);
  host.on('exit', screen.leave);
  stdin.on('end', quit);
  stdin.on('error', quit);
  screen.enter();

  return {
    over,
    quit,
    suspend,
    close: () => {
      away = false;
      setRawMode(stdin, false);
      screen.leave();
      for (const signal of FAREWELLS) host.off(signal, onFarewell);
      host.off('SIGTSTP', suspend);
      host.off('SIGCONT', resume);
      host.off('uncaughtException', onCrash);
      host.off('exit', screen.leave);
      stdin.off('end', quit);
    },
  };
}

/** A terminal that is gone cannot be set; its 'error' event says so to whoever listens. */
function setRawMode(stdin: NodeJS.ReadStream, raw: boolean): void {
  try {
    stdin.setRawMode?.(raw);
  } catch {
    // Gone: nothing left to set.
  }
}
