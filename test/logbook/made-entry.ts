/** Entries made by hand: what a logbook is filled with in tests, without solving anything. */
import { createHash } from 'node:crypto';
import type { EchoFigures, EntryFigures, NewEntry } from '../../src/logbook/entry.ts';

/** Text of a line file as entries keep it. */
export const DESCRIBED = `${JSON.stringify(
  {
    name: 'Made line',
    site: 'Nowhere',
    sections: [
      {
        cable: { id: 'made', z0: 50, velocityFactor: 0.88, k1: 0.2, k2: 0.0007 },
        lengthM: 20,
        label: 'run',
      },
    ],
    end: 'open',
  },
  null,
  2,
)}\n`;

export function makeEcho(fields: Partial<EchoFigures> = {}): EchoFigures {
  return {
    distanceM: 20,
    distanceSigmaM: 0.02,
    returnLossDb: 3,
    correctedReturnLossDb: 0.5,
    kind: 'open',
    words: 'end: open',
    value: null,
    joint: 2,
    place: 'at the end',
    severity: 'sound',
    ...fields,
  };
}

export function makeFigures(fields: Partial<EntryFigures> = {}): EntryFigures {
  return {
    startHz: 5e6,
    stopHz: 2e9,
    points: 400,
    resolutionM: 0.12,
    temperatureC: 20,
    lengthM: 20,
    lengthSigmaM: 0.02,
    end: 'open',
    residualDb: -50,
    lossDb: 1.2,
    lossAtHz: 1e9,
    lossSigmaDb: null,
    lossMarginDb: null,
    lossPass: null,
    bands: [],
    echoes: [makeEcho({ distanceM: 0, joint: 1, kind: 'joint', words: 'joint' }), makeEcho()],
    ...fields,
  };
}

/**
 * Entry number `index`: its sweep differs from that of every other number.
 *
 * @param sizeBytes Rough size of a sweep that does not compress; a short text by default.
 */
export function makeEntry(index: number, fields: Partial<NewEntry> = {}, sizeBytes = 0): NewEntry {
  const day = new Date(Date.UTC(2020, 0, 1) + index * 86_400_000).toISOString();
  return {
    line: { site: 'Nowhere', name: 'Made line' },
    described: DESCRIBED,
    knownAs: DESCRIBED,
    file: `sweep-${index}.s1p`,
    bytes: sweepBytes(index, sizeBytes),
    standards: null,
    port: 1,
    takenAt: day.slice(0, 10),
    addedAt: day,
    who: 'Mara',
    instrument: '',
    weather: '',
    note: '',
    tool: 'feedsonde 0.0.0',
    setup: { port: null, offsetM: 0, windowSpec: 'kaiser:6', lineDescribed: true },
    faults: 0,
    watches: 0,
    figures: makeFigures(),
    document: JSON.stringify({ schema: 1, command: 'locate', echoes: [], findings: [] }),
    ...fields,
  };
}

function sweepBytes(index: number, sizeBytes: number): Uint8Array {
  const rows = [`! sweep ${index}`, '# Hz S RI R 50'];
  let size = 0;
  for (let row = 0; size < sizeBytes || row < 2; row++) {
    const digits = createHash('sha256').update(`${index} ${row}`).digest('base64');
    rows.push(`! ${digits}`);
    size += digits.length;
  }
  return new TextEncoder().encode(`${rows.join('\n')}\n`);
}
