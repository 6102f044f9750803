/** A comparison as the JSON document of `compare --json`: schema 1, full precision, null where unknown, never NaN. */
import type { BandChange, Change, Comparison } from '../assess/comparison.ts';
import type { Notice } from '../outcome.ts';
import type { Sweep } from '../sweep/sweep.ts';
import type { ComparedSweeps } from './compare.ts';
import { SCHEMA_VERSION } from './json.ts';

type SweepEntry = {
  readonly file: string;
  readonly port: number;
  readonly startHz: number | null;
  readonly stopHz: number | null;
  readonly points: number;
};

export type CompareDocument = {
  readonly schema: typeof SCHEMA_VERSION;
  readonly tool: string;
  readonly command: 'compare';
  readonly before: SweepEntry;
  readonly after: SweepEntry;
  /** What both cover: all that is said below is said of this. */
  readonly common: Comparison['common'];
  readonly line: { readonly name: string };
  readonly verdict: Comparison['verdict'];
  readonly changes: readonly {
    readonly distanceM: number | null;
    readonly distanceSigmaM: number | null;
    readonly levelDb: number | null;
    readonly kind: Change['kind'];
    readonly gone: boolean;
    readonly joint: Change['joint'];
    readonly place: string;
  }[];
  readonly stretchPpm: number | null;
  readonly stretchSigmaPpm: number | null;
  readonly lossChangeDb: number | null;
  readonly lossChangeSigmaDb: number | null;
  readonly bands: readonly BandChange[];
  readonly end: Comparison['end'];
  readonly notices: readonly Notice[];
};

/**
 * Makes the document.
 *
 * @param tool Name and version of the program, `feedsonde 0.1.0`.
 * @param notices What the reading of files had to say; those of the comparison follow.
 */
export function compareDocument(
  { before, after, comparison }: ComparedSweeps,
  tool: string,
  notices: readonly Notice[] = [],
): CompareDocument {
  return {
    schema: SCHEMA_VERSION,
    tool,
    command: 'compare',
    before: sweepEntry(before.sweep),
    after: sweepEntry(after.sweep),
    common: comparison.common,
    line: { name: before.line.name },
    verdict: comparison.verdict,
    changes: comparison.changes.map((change) => ({
      distanceM: known(change.distanceM),
      distanceSigmaM: known(change.distanceSigmaM),
      levelDb: known(change.levelDb),
      kind: change.kind,
      gone: change.gone,
      joint: change.joint && { index: change.joint.index, name: change.joint.name },
      place: change.place,
    })),
    stretchPpm: known(comparison.stretchPpm),
    stretchSigmaPpm: known(comparison.stretchSigmaPpm),
    lossChangeDb: known(comparison.lossChangeDb),
    lossChangeSigmaDb: known(comparison.lossChangeSigmaDb),
    bands: comparison.bands,
    end: comparison.end,
    notices: [...notices, ...comparison.notices].map(({ code, what }) => ({ code, what })),
  };
}

function sweepEntry(sweep: Sweep): SweepEntry {
  return {
    file: sweep.file,
    port: sweep.port,
    startHz: known(sweep.frequencyHz[0]),
    stopHz: known(sweep.frequencyHz.at(-1)),
    points: sweep.frequencyHz.length,
  };
}

/** JSON has no NaN and no infinity: what is not finite is not known. */
function known(value: number | undefined): number | null {
  return value !== undefined && Number.isFinite(value) ? value : null;
}
