/** What a logbook holds: lines, and of each the sweeps with what was concluded of them. */
import type { Severity } from '../locate/echo.ts';

/** One sweep's place in a logbook: SHA-256 of its bytes, and `-p2` behind it where it is another port of that file. */
export type EntryKey = string;

/** How the sweep was analysed, beyond its line; with the originals it can be done again. */
export type Setup = {
  /** As asked for; null for the first. */
  readonly port: number | null;
  readonly offsetM: number;
  readonly windowSpec: string;
  /** False when only a cable type was known. */
  readonly lineDescribed: boolean;
  /** SHA-256 of the sweeps of the standards that corrected it; null for a corrected sweep. */
  readonly standards: { readonly open: string; readonly short: string; readonly load: string } | null;
};

/** An echo as it is followed over the years. Kinds and units are words: a later program may know more of them. */
export type EchoFigures = {
  readonly distanceM: number;
  readonly distanceSigmaM: number;
  /** As seen at the reference plane, RMS over the band, dB, positive. */
  readonly returnLossDb: number;
  /** With line loss and upstream mismatch removed, dB. */
  readonly correctedReturnLossDb: number;
  readonly kind: string;
  /** Kind and size in words: "series resistance 9.1 Ω". */
  readonly words: string;
  readonly value: {
    readonly quantity: string;
    readonly value: number;
    readonly sigma: number | null;
    readonly unit: string;
  } | null;
  /** Joint that it sits at, counted from 1; null inside a section. */
  readonly joint: number | null;
  readonly place: string;
  readonly severity: Severity;
};

/** Worst match over a named band. */
export type BandFigures = {
  readonly name: string;
  readonly fromHz: number;
  readonly toHz: number;
  readonly worstReturnLossDb: number;
  readonly worstAtHz: number;
  /** Acceptance figure of the line then; null for none. */
  readonly limitDb: number | null;
};

/** What is followed from sweep to sweep; null where it is not known. */
export type EntryFigures = {
  readonly startHz: number;
  readonly stopHz: number;
  readonly points: number;
  readonly resolutionM: number;
  readonly temperatureC: number | null;
  readonly lengthM: number;
  readonly lengthSigmaM: number | null;
  readonly end: string;
  readonly residualDb: number | null;
  /** One-way loss of the cable; `lossSigmaDb`, `lossMarginDb` and `lossPass` are null without a loss check. */
  readonly lossDb: number | null;
  readonly lossAtHz: number | null;
  readonly lossSigmaDb: number | null;
  readonly lossMarginDb: number | null;
  readonly lossPass: boolean | null;
  readonly bands: readonly BandFigures[];
  readonly echoes: readonly EchoFigures[];
};

/** What people say about a sweep; '' where nothing was said. */
export type Remarks = {
  readonly who: string;
  readonly instrument: string;
  readonly weather: string;
  readonly note: string;
};

/** A line as it is known by name. */
export type LineName = { readonly site: string; readonly name: string };

/** What is needed to log one sweep. */
export type NewEntry = Remarks & {
  readonly line: LineName;
  /** Text of the line file, every cable with its figures: the line as described then. */
  readonly described: string;
  /** Text of the line file under which the line is known from now on; null leaves what is known. */
  readonly knownAs: string | null;
  /** Name of the sweep's file, without its folder. */
  readonly file: string;
  readonly bytes: Uint8Array;
  readonly standards: {
    readonly open: Uint8Array;
    readonly short: Uint8Array;
    readonly load: Uint8Array;
  } | null;
  /** Port that was analysed, counted from 1. */
  readonly port: number;
  /** Wall time on site, `2026-05-03` or `2026-05-03T14:30`. */
  readonly takenAt: string;
  /** Time in UTC, `2026-05-03T12:30:00.000Z`. */
  readonly addedAt: string;
  /** Name and version of the program. */
  readonly tool: string;
  readonly setup: Omit<Setup, 'standards'>;
  readonly faults: number;
  readonly watches: number;
  readonly figures: EntryFigures;
  /** The whole result as JSON text. */
  readonly document: string;
};

/** One row of a list. */
export type EntrySummary = Remarks & {
  readonly key: EntryKey;
  readonly lineId: number;
  readonly line: LineName;
  readonly file: string;
  readonly port: number;
  readonly takenAt: string;
  readonly addedAt: string;
  readonly tool: string;
  readonly faults: number;
  readonly watches: number;
  /** True for the sweep that later ones of its line are compared with. */
  readonly baseline: boolean;
};

/** An entry with everything but the bytes of its originals. */
export type Entry = EntrySummary & {
  /** SHA-256 of the sweep's bytes. */
  readonly hash: string;
  readonly sizeBytes: number;
  readonly setup: Setup;
  readonly described: string;
  readonly figures: EntryFigures;
  readonly document: string;
};

/** A line that later sweeps can name. */
export type StoredLine = LineName & {
  readonly id: number;
  /** Text of a line file. */
  readonly described: string;
  readonly changedAt: string;
  readonly baseline: EntryKey | null;
  readonly entries: number;
};

/** Shortest piece of a hash that is shown; as many more are taken where two begin alike. */
export const SHOWN_HASH_LENGTH = 8;

/** An entry's key as people type it: the first eight digits, and the port where it is not the first. */
export function shortKey(key: EntryKey): string {
  const port = /-p\d+$/u.exec(key)?.[0] ?? '';
  return key.slice(0, SHOWN_HASH_LENGTH) + port;
}

/** Key of one port of a file. */
export function entryKey(hash: string, port: number): EntryKey {
  return port === 1 ? hash : `${hash}-p${port}`;
}
