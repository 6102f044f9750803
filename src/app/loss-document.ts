/** A loss check as the JSON document of `loss --json`. */
import type { BandLoss } from '../assess/loss-bands.ts';
import type { LossCheck } from '../assess/loss-check.ts';
import type { Excess } from '../assess/loss-excess.ts';
import type { Notice } from '../outcome.ts';
import type { Analysis } from './analysis.ts';
import { SCHEMA_VERSION } from './json.ts';

export type LossDocument = {
  readonly schema: typeof SCHEMA_VERSION;
  readonly tool: string;
  readonly command: 'loss';
  readonly sweep: { readonly file: string; readonly port: number; readonly points: number };
  readonly line: {
    readonly name: string;
    readonly lengthM: number | null;
    readonly end: string;
    readonly temperatureC: number;
    readonly temperatureKnown: boolean;
  };
  /** What the loss was read from. */
  readonly method: LossCheck['method'];
  readonly frequencyHz: readonly number[];
  /** One way, of the cable alone, joints not included; null where the sweep cannot tell. */
  readonly lossDb: readonly (number | null)[] | null;
  readonly sigmaDb: readonly (number | null)[] | null;
  readonly tableLossDb: readonly (number | null)[];
  /** The most that the loss can be, where that is all that the sweep tells. */
  readonly atMostDb: readonly (number | null)[] | null;
  /** Allowance for the joints at `atHz`. */
  readonly jointsDb: number;
  readonly allowedDb: number;
  readonly allowedIsDefault: boolean;
  /** Where the margin is smallest. */
  readonly atHz: number;
  /** Table, joints and what is allowed over them, less the loss. */
  readonly marginDb: number | null;
  readonly pass: boolean | null;
  readonly bands: readonly BandLoss[];
  readonly excess: readonly Excess[];
  readonly notices: readonly Notice[];
};

/**
 * Makes the document.
 *
 * @param tool Name and version of the program.
 */
export function lossDocument(
  analysis: Analysis,
  check: LossCheck,
  tool: string,
  notices: readonly Notice[],
): LossDocument {
  const { sweep, line, solution } = analysis;
  return {
    schema: SCHEMA_VERSION,
    tool,
    command: 'loss',
    sweep: { file: sweep.file, port: sweep.port, points: sweep.frequencyHz.length },
    line: {
      name: line.name,
      lengthM: known(solution.lengthM),
      end: solution.end,
      temperatureC: line.temperatureC,
      temperatureKnown: line.temperatureKnown,
    },
    method: check.method,
    frequencyHz: Array.from(check.frequencyHz),
    lossDb: curve(check.lossDb),
    sigmaDb: curve(check.sigmaDb),
    tableLossDb: Array.from(check.tableLossDb, known),
    atMostDb: curve(check.atMostDb),
    jointsDb: check.jointsDb,
    allowedDb: check.allowedDb,
    allowedIsDefault: check.allowedIsDefault,
    atHz: check.atHz,
    marginDb: known(check.marginDb),
    pass: check.pass,
    bands: check.bands,
    excess: check.excess,
    notices: [...notices, ...analysis.notices, ...check.notices].map(({ code, what }) => ({ code, what })),
  };
}

function curve(values: Float64Array | null): (number | null)[] | null {
  return values && Array.from(values, known);
}

function known(value: number | null): number | null {
  return value !== null && Number.isFinite(value) ? value : null;
}
