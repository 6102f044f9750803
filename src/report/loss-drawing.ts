/** One-way loss of the cable against its table, with the doubt of the reading and the limit. */
import { jointAllowanceDb } from '../assess/joint-allowance.ts';
import type { BandLoss } from '../assess/loss-bands.ts';
import type { LossCheck } from '../assess/loss-check.ts';
import type { ChartMark, Series } from '../plot/chart.ts';
import { SEVERITY_GLYPHS } from '../plot/line-strip.ts';
import { type Domain, paddedDomain } from '../plot/scale.ts';
import { type Drawing, dottedKey, type KeyEntry, lineKey, markKey } from './drawing.ts';
import { frequencyAxis, sweptDomain } from './frequency-axis.ts';

/** The doubt is drawn this many σ to either side: it holds the truth 95 times in 100. */
const SIGMAS = 2;

/** Draws it: what was read, or the most that it can be; the table alone where nothing is known. */
export function lossDrawing(
  check: LossCheck,
  options: { readonly domainHz?: Domain | undefined } = {},
): Drawing {
  const { frequencyHz, lossDb, sigmaDb, tableLossDb, atMostDb } = check;
  const limitDb = lossLimitDb(check);
  const read = lossDb ?? atMostDb;
  const curve = (y: Float64Array, role: Series['role'], dotted: boolean): Series => ({
    x: frequencyHz,
    y,
    role,
    dotted,
  });
  const high = lossDb && sigmaDb ? lossDb.map((db, i) => db + SIGMAS * sigmaDb[i]!) : null;
  const low = lossDb && sigmaDb ? lossDb.map((db, i) => db - SIGMAS * sigmaDb[i]!) : null;
  const [, top] = paddedDomain([...limitDb, ...(read ?? []), ...(high ?? [])], {
    fallback: [0, 1],
    room: 0.05,
  });
  return {
    title: 'loss of the cable, one way',
    chart: {
      x: frequencyAxis(options.domainHz ?? sweptDomain(frequencyHz)),
      y: { domain: [0, Math.max(0.5, top)], unit: 'dB' },
      areas: low && high ? [{ x: frequencyHz, low, high, role: 'doubt' }] : [],
      series: [
        curve(limitDb, 'guide', true),
        curve(tableLossDb, 'baseline', false),
        ...(read ? [curve(read, 'trace', lossDb === null)] : []),
      ],
      levels: [],
      marks: check.bands.flatMap(bandMark),
      cursor: null,
    },
    key: keyOf(check),
  };
}

/** What the loss may be: table, joints and what is allowed over them, dB, length n. */
export function lossLimitDb({ frequencyHz, tableLossDb, joints, allowedDb }: LossCheck): Float64Array {
  return tableLossDb.map((db, i) => db + jointAllowanceDb(joints, frequencyHz[i]!) + allowedDb);
}

/** Where a band is nearest to its limit, on the curve that was read. */
function bandMark({ atHz, lossDb, faultsDb, pass }: BandLoss): ChartMark[] {
  if (lossDb === null || pass === null) return [];
  const severity = pass ? 'sound' : 'fault';
  return [{ x: atHz, y: lossDb + faultsDb, glyph: SEVERITY_GLYPHS[severity], role: severity }];
}

function keyOf({ lossDb, atMostDb, sigmaDb, bands }: LossCheck): readonly KeyEntry[] {
  const judged = bands.filter(({ lossDb: read, pass }) => read !== null && pass !== null);
  return [
    ...(lossDb ? [lineKey('trace', 'as swept')] : []),
    ...(!lossDb && atMostDb ? [dottedKey('trace', 'the most it can be')] : []),
    lineKey('baseline', 'table'),
    dottedKey('guide', 'limit'),
    ...(lossDb && sigmaDb ? [{ role: 'doubt', look: 'area', glyph: '', text: '±2σ' } as const] : []),
    ...(judged.some(({ pass }) => pass) ? [markKey('sound', SEVERITY_GLYPHS.sound, 'kept')] : []),
    ...(judged.some(({ pass }) => !pass) ? [markKey('fault', SEVERITY_GLYPHS.fault, 'missed')] : []),
  ];
}
