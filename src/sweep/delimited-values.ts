/**
 * What the numbers of a table mean: units where the header gives them, and where it does not, a reading only if the
 * numbers leave no doubt.
 */
import type { Notice } from '../outcome.ts';
import type { Column, ColumnTrouble, ComplexColumns } from './delimited-columns.ts';

/** Turns the two numbers of a row into a complex value. */
export type PairReading = {
  readonly toComplex: (first: number, second: number) => readonly [number, number];
  readonly notices: readonly Notice[];
};

export type FrequencyReading = { readonly scaleHz: number; readonly notices: readonly Notice[] };

/** A frequency column without unit is taken as Hz from here on: no analyzer sweeps so high in kHz. */
const SURELY_HZ = 1e6;

/** Largest value taken for a linear |Γ| in a column that does not say so. */
const SURELY_LINEAR = 2;

const HZ: Readonly<Record<string, number>> = { hz: 1, khz: 1e3, mhz: 1e6, ghz: 1e9 };

/** Scale of the frequency column. */
export function readFrequencyColumn(column: Column, values: Float64Array): FrequencyReading | ColumnTrouble {
  if (column.unit !== null) return { scaleHz: HZ[column.unit] ?? 1, notices: [] };
  if (largest(values) >= SURELY_HZ) {
    return { scaleHz: 1, notices: [taken('frequency', column, 'taken as Hz')] };
  }
  return unclear(column, 'frequency', 'name it frequency_hz, frequency_mhz or the like');
}

/** Meaning of a pair of columns, given all of their values. */
export function readPair(
  columns: ComplexColumns,
  first: Float64Array,
  second: Float64Array,
): PairReading | ColumnTrouble {
  if (columns.first.role === 'real') return { toComplex: (re, im) => [re, im], notices: [] };
  const magnitude = readMagnitude(columns.first, first);
  if ('code' in magnitude) return magnitude;
  const phase = readPhase(columns.second, second);
  if ('code' in phase) return phase;
  return {
    toComplex(size, angle) {
      const linear = magnitude.toLinear(size);
      const radians = angle * phase.scale;
      return [linear * Math.cos(radians), linear * Math.sin(radians)];
    },
    notices: [...magnitude.notices, ...phase.notices],
  };
}

type MagnitudeReading = { readonly toLinear: (value: number) => number; readonly notices: readonly Notice[] };

function readMagnitude(column: Column, values: Float64Array): MagnitudeReading | ColumnTrouble {
  const least = smallest(values);
  switch (column.unit) {
    case 'linear':
      return least < 0 ? below(column, 'a linear magnitude') : linear([]);
    case 'vswr':
      if (least < 1)
        return { ...below(column, 'a VSWR'), what: `has a VSWR below 1 in column "${column.name}"` };
      return { toLinear: (s) => (s - 1) / (s + 1), notices: [] };
    case 'db':
      if (least > 0) {
        return {
          code: 'delimited-unit',
          what: `has only positive values in column "${column.name}", as if more came back than was sent`,
          mend: 'if it is a return loss, name it return_loss_db',
        };
      }
      return { toLinear: (db) => 10 ** (db / 20), notices: [] };
    case 'return loss': {
      // A return loss is positive, but many write the level of the reflection under that name.
      const below0 = values.reduce((count, value) => count + (value < 0 ? 1 : 0), 0);
      if (2 * below0 <= values.length) return { toLinear: (loss) => 10 ** (-loss / 20), notices: [] };
      const notice = taken(
        'return-loss',
        column,
        'mostly negative, so taken as the level of the reflection in dB',
      );
      return { toLinear: (db) => 10 ** (db / 20), notices: [notice] };
    }
    default:
      if (least < 0 || largest(values) > SURELY_LINEAR) {
        return unclear(column, 'magnitude', 'name it magnitude_db, return_loss_db or magnitude_linear');
      }
      return linear([taken('magnitude', column, 'taken as linear')]);
  }
}

function readPhase(
  column: Column,
  values: Float64Array,
): { readonly scale: number; readonly notices: readonly Notice[] } | ColumnTrouble {
  if (column.unit === 'degrees') return { scale: Math.PI / 180, notices: [] };
  if (column.unit === 'radians') return { scale: 1, notices: [] };
  const low = smallest(values);
  const high = largest(values);
  const wrapped = (low >= -180.5 && high <= 180.5) || (low >= -0.5 && high <= 360.5);
  if (wrapped && Math.max(-low, high) > 2 * Math.PI + 0.1) {
    return { scale: Math.PI / 180, notices: [taken('phase', column, 'taken as degrees')] };
  }
  return unclear(column, 'phase', 'name it phase_deg or phase_rad');
}

function linear(notices: readonly Notice[]): MagnitudeReading {
  return { toLinear: (value) => value, notices };
}

function below(column: Column, kind: string): ColumnTrouble {
  return {
    code: 'delimited-unit',
    what: `has ${kind} below zero in column "${column.name}"`,
    mend: 'if the values are in dB, name the column magnitude_db',
  };
}

function unclear(column: Column, kind: string, mend: string): ColumnTrouble {
  return {
    code: 'delimited-unit',
    what: `gives no unit for the ${kind} in column "${column.name}", and its numbers leave it open`,
    mend,
  };
}

function taken(code: string, column: Column, how: string): Notice {
  return { code: `delimited-${code}-unit`, what: `column "${column.name}" was ${how}` };
}

function smallest(values: Float64Array): number {
  return values.reduce((least, value) => Math.min(least, value), Number.POSITIVE_INFINITY);
}

function largest(values: Float64Array): number {
  return values.reduce((most, value) => Math.max(most, value), Number.NEGATIVE_INFINITY);
}
