/**
 * Advice for a fault in a rectangular waveguide, per kind of place. What comes back from a guide says how much and where;
 * which of the causes it is shows to the eye at the flange, so one row serves every kind of fault.
 *
 * Every row is common practice of feedline work. Power at an open flange burns eyes first: the transmitter comes before
 * all else.
 */
import type { Advice, PlaceKind } from './advice-kinds.ts';

/** An open guide radiates what the line carries. */
const GUIDE_OFF_FIRST =
  'transmitter locked off before a flange is loosened or anyone stands at an open guide; never look into one';

const AIR = 'dry air or pressure, where the line has it: is it holding?';
const FLANGE_KIT = ['flange screws, pins and gaskets of this size', 'tool for their torque'];
const CLEANING = 'cleaner and lint-free swabs for the faces';
const GUIDE_PIECE = 'a spare piece of guide of this size';

const GUIDE_ADVICE: Readonly<Record<PlaceKind, Advice>> = {
  port: {
    causes: ['transition or test piece loose or dirty', 'transition for another guide or band'],
    checks: [
      'both flange faces of the transition: clean, flat, screws even',
      'sweep again with the transition taken off and put back',
    ],
    bring: ['spare transition of this size', 'calibration standards', CLEANING],
  },
  joint: {
    causes: [
      'flange faces apart: screws loose, missing, or tightened unevenly',
      'dirt, corrosion or a displaced gasket between the faces',
      'flanges of two kinds or sizes, or out of line',
    ],
    checks: [
      GUIDE_OFF_FIRST,
      'flange screws: all there, tightened evenly and crosswise',
      'faces clean and flat, pins seated, gasket whole',
      AIR,
      'sweep again after each flange',
    ],
    bring: [...FLANGE_KIT, CLEANING],
  },
  cable: {
    causes: ['dent or twist in the guide', 'water in the guide', 'a flange that the drawing does not show'],
    checks: [
      'the run at this distance: dents, twists, clamps',
      AIR,
      GUIDE_OFF_FIRST,
      'water at the lowest flange',
    ],
    bring: [GUIDE_PIECE, ...FLANGE_KIT],
  },
  end: {
    causes: [
      'feed window cracked, wet or iced',
      'last flange loose or dirty',
      'feed or antenna damaged or out of line',
    ],
    checks: [
      'window and feed, with field glasses',
      AIR,
      GUIDE_OFF_FIRST,
      'last flange: screws, faces, gasket',
      'sweep with a known load in place of the antenna',
    ],
    bring: ['guide load of this size', 'spare window', ...FLANGE_KIT, CLEANING],
  },
};

/** Advice for a fault in a guide at this kind of place. */
export function guideAdviceFor(place: PlaceKind): Advice {
  return GUIDE_ADVICE[place];
}
