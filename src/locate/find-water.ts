/**
 * Is there water in the cable? With everything behind an open or a short coming back, the end tells what the whole run
 * loses. A sample's loss differs from its type as a whole and by little; water adds loss that grows with frequency.
 */
import { describedLengthM, type Line } from '../line/line.ts';
import type { DistanceScale } from './distance-scale.ts';
import type { Stretch } from './echo.ts';
import { boundaryAt, type LineModel } from './line-model.ts';

/**
 * Excess loss, one way at band centre, that a dry line may show: a fixed part that the correction's residue leaves in
 * doubt, dB, and a share of the described loss. Chosen on seeded scenes, wet and dry; common practice gives samples ±5 %.
 */
const DOUBT_DB = 0.18;
const DOUBT_SHARE = 0.038;

/** What grows with frequency counts this much more: it is water's own mark, though no sweep tells it well. */
const OWN_MARK = 0.25;

/** A fault takes its own share of what comes back, and its kind being wrong would look like loss. */
const FAULTY_DOUBT = 2.5;

/** A section whose impedance is this much under its description, ln, is wet as a whole: water slows and loads it. */
const WET_IMPEDANCE = -0.02;

const DB_PER_NEPER = 20 / Math.LN10;

/**
 * The wet stretch of a run, or nothing.
 *
 * Where in a section the water stands is not looked for: the stretch is the section that it is most likely in.
 *
 * @param model Solved; its end an open or a short. @param faulty True when something else on the line is bad.
 */
export function findWater(line: Line, model: LineModel, scale: DistanceScale, faulty: boolean): Stretch[] {
  const full = model.end.type === 'open' || model.end.type === 'short';
  if (!full || describedLengthM(line) === null) return [];
  const centre = model.frequencyHz.length >> 1;
  let describedDb = 0;
  let excessDb = 0;
  let dielectricDb = 0;
  model.media.forEach((medium, section) => {
    const lengthM = boundaryAt(model, section + 1) - boundaryAt(model, section);
    const conductor = medium.gammaPerConductorLoss.re[centre]! * lengthM * DB_PER_NEPER;
    const dielectric = medium.gammaPerDielectricLoss.re[centre]! * lengthM * DB_PER_NEPER;
    describedDb += conductor + dielectric;
    excessDb += conductor * model.conductor + dielectric * model.dielectric;
    dielectricDb += dielectric * (model.dielectric - model.conductor);
  });
  const doubtDb = (DOUBT_DB + DOUBT_SHARE * describedDb) * (faulty ? FAULTY_DOUBT : 1);
  if (excessDb + OWN_MARK * dielectricDb < doubtDb) return [];
  const section = likeliestSection(model);
  return [
    {
      fromM: scale.place(boundaryAt(model, section), section === 0 ? null : section).distanceM,
      toM: scale.place(boundaryAt(model, section + 1), section + 1).distanceM,
      excessLossDb: excessDb,
      excessLossSigmaDb: Math.hypot(DOUBT_DB / 2, DOUBT_SHARE * describedDb),
      kind: 'wet',
    },
  ];
}

/** A short section with too low an impedance, else the longest: most water stands where most cable is. */
function likeliestSection(model: LineModel): number {
  const lengths = model.media.map((_, i) => boundaryAt(model, i + 1) - boundaryAt(model, i));
  const longest = lengths.indexOf(Math.max(...lengths));
  let lowest = longest;
  model.impedanceRatio.forEach((ratio, i) => {
    if (i !== longest && ratio < WET_IMPEDANCE && ratio < model.impedanceRatio[lowest]!) lowest = i;
  });
  return lowest;
}
