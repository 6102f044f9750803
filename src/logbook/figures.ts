/** The form of what is stored as JSON: written by us, but read from files that anyone may have touched. */
import * as v from 'valibot';
import type { EntryFigures, Setup } from './entry.ts';

const finite = v.pipe(v.number(), v.finite());
const known = v.nullable(finite);
const severity = v.picklist(['fault', 'watch', 'sound']);
const hash = v.pipe(v.string(), v.regex(/^[0-9a-f]{64}$/u));

/** Figures of one entry. Keys that a later program adds are let be. */
export const figuresForm = v.object({
  startHz: finite,
  stopHz: finite,
  points: finite,
  resolutionM: finite,
  temperatureC: known,
  lengthM: finite,
  lengthSigmaM: known,
  end: v.string(),
  residualDb: known,
  lossDb: known,
  lossAtHz: known,
  lossSigmaDb: known,
  lossMarginDb: known,
  lossPass: v.nullable(v.boolean()),
  bands: v.array(
    v.object({
      name: v.string(),
      fromHz: finite,
      toHz: finite,
      worstReturnLossDb: finite,
      worstAtHz: finite,
      limitDb: known,
    }),
  ),
  echoes: v.array(
    v.object({
      distanceM: finite,
      distanceSigmaM: finite,
      returnLossDb: finite,
      correctedReturnLossDb: finite,
      kind: v.string(),
      words: v.string(),
      value: v.nullable(
        v.object({
          quantity: v.string(),
          value: finite,
          sigma: known,
          unit: v.string(),
        }),
      ),
      joint: known,
      place: v.string(),
      severity,
    }),
  ),
}) satisfies v.GenericSchema<unknown, EntryFigures>;

/** How a sweep was analysed. */
export const setupForm = v.object({
  port: known,
  offsetM: finite,
  windowSpec: v.string(),
  lineDescribed: v.boolean(),
  standards: v.nullable(v.object({ open: hash, short: hash, load: hash })),
}) satisfies v.GenericSchema<unknown, Setup>;

/** A line file or a result: any object. */
export const objectForm = v.record(v.string(), v.unknown());

/**
 * Reads stored JSON.
 *
 * @returns The value, or null when the text is no JSON of that form.
 */
export function readStored<Form extends v.GenericSchema>(
  text: string,
  form: Form,
): v.InferOutput<Form> | null {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    return null;
  }
  const checked = v.safeParse(form, value);
  return checked.success ? checked.output : null;
}
