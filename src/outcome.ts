/** The one vocabulary for "did it work": expected trouble is a value, a bug is a throw, a doubt is a notice. */

/** Something that stops the work; says where, what is wrong, and how to mend it. */
export type Problem = {
  /** Short stable word for tests and JSON, for example `touchstone-number`. */
  readonly code: string;
  /** Name of the file as the user gave it. */
  readonly file?: string;
  /** Line in that file, counted from 1. */
  readonly line?: number;
  /** What is wrong, in words said on site. */
  readonly what: string;
  /** What was found there, already cleaned of control characters. */
  readonly found?: string;
  /** How to mend it. */
  readonly mend: string;
};

/** A doubt that travels with a result and is shown with it. */
export type Notice = {
  readonly code: string;
  readonly what: string;
};

/** Either a value with its notices, or every problem found. */
export type Outcome<T> =
  | { readonly ok: true; readonly value: T; readonly notices: readonly Notice[] }
  | { readonly ok: false; readonly problems: readonly Problem[] };

/** Wraps a value that could be had. */
export function succeed<T>(value: T, notices: readonly Notice[] = []): Outcome<T> {
  return { ok: true, value, notices };
}

/** Wraps the problems that stood in the way. */
export function fail(...problems: readonly Problem[]): {
  readonly ok: false;
  readonly problems: readonly Problem[];
} {
  return { ok: false, problems };
}

/** Marks a branch that the types rule out; reaching it is a bug. */
export function assertNever(value: never): never {
  throw new TypeError(`unexpected value: ${JSON.stringify(value)}`);
}
