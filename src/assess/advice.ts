/**
 * Likely causes, first checks and what to bring, per kind of fault and kind of place.
 *
 * Every row is common practice of feedline work: it names what crews most often find for such a reading, and no
 * document stands behind the order. The work itself belongs to people trained and licensed for it.
 */
import type { EchoKind, StretchKind } from '../locate/echo.ts';

/** What kind of place a fault sits at. */
export type PlaceKind = 'port' | 'joint' | 'cable' | 'end';

export type Advice = {
  /** Likely causes, most likely first. */
  readonly causes: readonly string[];
  /** What to look at, the cheapest first. */
  readonly checks: readonly string[];
  readonly bring: readonly string[];
};

/** Kinds that can be a fault. */
export type FaultKind = Exclude<EchoKind, 'joint'> | Exclude<StretchKind, 'sound'>;

/** Advice for a fault. */
export function adviceFor(kind: FaultKind, place: PlaceKind): Advice {
  const rows = TABLE[kind];
  return rows[place] ?? rows.cable;
}

type Rows = { readonly cable: Advice } & { readonly [place in PlaceKind]?: Advice };

const CONNECTOR_KIT = [
  'connectors of this type and their tool',
  'torque wrench',
  'cleaner and lint-free swabs',
];
const SEALING = 'sealing tape and weatherproofing';
const SPLICE = ['cable for a new stretch', 'two connectors or a splice kit', SEALING];

// common practice, every row
const TABLE: Readonly<Record<FaultKind, Rows>> = {
  'series-resistance': {
    joint: {
      causes: [
        'corroded contact after water got in',
        'centre pin loose, short or badly soldered',
        'coupling nut not at its torque',
      ],
      checks: [
        'torque of the coupling nut',
        'green or white deposit inside when opened',
        'depth and fit of the centre pin',
        'sweep again after cleaning and re-torquing',
      ],
      bring: [...CONNECTOR_KIT, SEALING],
    },
    port: {
      causes: ['worn or dirty test adaptor', 'loose test lead', 'corroded contact of the first connector'],
      checks: ['clean and re-torque the adaptor', 'calibrate again at the reference plane', 'sweep again'],
      bring: ['spare adaptor', 'calibration standards', 'cleaner and lint-free swabs'],
    },
    cable: {
      causes: [
        'centre conductor strained or partly broken',
        'outer conductor cracked at a sharp bend or clamp',
      ],
      checks: [
        'bends and clamps at this distance',
        'does the reading move when the cable is flexed by hand?',
      ],
      bring: SPLICE,
    },
    end: {
      causes: ['corroded contact at the last connector', 'poor contact inside the antenna or load'],
      checks: ['torque of the last connector', 'sweep with a known load in place of the antenna'],
      bring: [...CONNECTOR_KIT, 'a known good load'],
    },
  },
  'shunt-leakage': {
    joint: {
      causes: ['water or salt inside the connector', 'carbon track after a flash-over or lightning'],
      checks: [
        'water inside when opened',
        'dark tracks on the insulator',
        'insulation resistance, with the far end off and everything disconnected',
      ],
      bring: [...CONNECTOR_KIT, SEALING, 'insulation tester'],
    },
    cable: {
      causes: ['water at a pierced or cracked jacket', 'dielectric burnt by lightning or overload'],
      checks: ['jacket at this distance: cuts, rub marks, holes', 'insulation resistance of the run'],
      bring: [...SPLICE, 'insulation tester'],
    },
    end: {
      causes: ['water in the last connector', 'a DC path in the antenna that its sheet may call for'],
      checks: ['water inside the last connector', 'the antenna sheet: is it DC grounded?'],
      bring: [...CONNECTOR_KIT, SEALING],
    },
  },
  'series-inductance': {
    joint: {
      causes: [
        'connector not fully mated: a gap between the faces',
        'centre pin too short, or pulled back',
        'adaptor or connector of another impedance or series',
      ],
      checks: [
        'torque of the coupling nut',
        'pin depth with a gauge',
        'that both halves are the same series',
      ],
      bring: [...CONNECTOR_KIT, 'pin-depth gauge'],
    },
    cable: {
      causes: ['outer conductor opened or stretched', 'cable kinked and straightened', 'hidden splice'],
      checks: ['kinks and bends below the smallest radius', 'splices that the drawing does not show'],
      bring: SPLICE,
    },
  },
  'shunt-capacitance': {
    joint: {
      causes: [
        'cable end crushed or cut too long in the connector',
        'solder or shavings inside the connector',
        'water film across the faces',
      ],
      checks: ['open and look for shavings, solder, water', 'trim lengths of the assembly'],
      bring: CONNECTOR_KIT,
    },
    cable: {
      causes: [
        'crushed by a hanger, clamp or hoisting grip',
        'dent from a blow',
        'bend below the smallest radius',
      ],
      checks: [
        'hangers, clamps and grips at this distance',
        'flat spots or dents felt by hand',
        'sharp bends',
      ],
      bring: [...SPLICE, 'hangers of the right size'],
    },
  },
  'impedance-step': {
    cable: {
      causes: [
        'a stretch of another impedance',
        'water standing in the cable from here on',
        'cable deformed over a length',
      ],
      checks: [
        'printing on the jacket on both sides',
        'repairs that the drawing does not show',
        'jacket damage uphill',
      ],
      bring: SPLICE,
    },
  },
  open: {
    joint: {
      causes: ['connector undone or pulled off', 'centre pin not making contact'],
      checks: ['that the joint is mated', 'centre pin in place and not pulled back'],
      bring: CONNECTOR_KIT,
    },
    cable: {
      causes: ['cable cut or broken', 'centre conductor broken', 'cable stolen or disconnected here'],
      checks: ['the run at this distance, before anyone climbs above it', 'the run beyond: is it there?'],
      bring: SPLICE,
    },
    end: {
      causes: ['antenna or load not connected', 'centre pin of the last connector not making contact'],
      checks: ['that the last connector is mated', 'sweep with a known load in place of the antenna'],
      bring: [...CONNECTOR_KIT, 'a known good load'],
    },
  },
  short: {
    joint: {
      causes: [
        'strand or shavings across the connector',
        'pin bent against the shell',
        'arrestor failed short',
      ],
      checks: ['open and look', 'resistance from centre to outer with the line off'],
      bring: [...CONNECTOR_KIT, 'ohmmeter', 'spare arrestor element where one is fitted'],
    },
    cable: {
      causes: ['nail, screw or clamp through the cable', 'cable crushed until the conductors touch'],
      checks: [
        'the run at this distance: clamps, nails, doors',
        'resistance from centre to outer with the line off',
      ],
      bring: [...SPLICE, 'ohmmeter'],
    },
    end: {
      causes: ['a short left in place after a test', 'antenna or load shorted'],
      checks: ['that no shorting cap is left on', 'the antenna sheet: is it DC grounded?'],
      bring: ['a known good load', 'ohmmeter'],
    },
  },
  termination: {
    cable: {
      causes: ['antenna out of its band or damaged', 'load of another impedance'],
      checks: ['the bands that the antenna is made for', 'sweep with a known load in its place'],
      bring: ['a known good load'],
    },
  },
  unresolved: {
    joint: {
      causes: ['bad contact or assembly of the connector'],
      checks: ['torque of the coupling nut', 'open, clean and look', 'a wider sweep would tell the kind'],
      bring: CONNECTOR_KIT,
    },
    cable: {
      causes: ['dent, kink, or damage to the jacket'],
      checks: ['the run at this distance', 'a wider sweep would tell the kind'],
      bring: SPLICE,
    },
  },
  wet: {
    cable: {
      causes: ['water drawn in through a connector or a damaged jacket', 'a low point where water stands'],
      checks: [
        'sealing of the connectors on both sides',
        'jacket uphill of the stretch',
        'water runs out when the lowest connector is opened',
      ],
      bring: ['replacement cable for the whole stretch', ...CONNECTOR_KIT, SEALING],
    },
  },
  'wrong-cable': {
    cable: {
      causes: [
        'cable of another type put in',
        'a repair with what was at hand',
        'the description is wrong here',
      ],
      checks: ['printing on the jacket', 'repairs that the drawing does not show'],
      bring: ['cable of the right type', ...CONNECTOR_KIT],
    },
  },
};
