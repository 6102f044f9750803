/**
 * The words of the advice, one row per kind of fault and kind of place.
 *
 * Every row is common practice of feedline work: it names what crews most often find for such a reading, and no
 * document stands behind the order. Whatever has to be true before hands or test gear touch the line comes first.
 */
import type { Advice, FindingKind, PlaceKind } from './advice-kinds.ts';

type Rows = Readonly<Record<PlaceKind, Advice>>;

/** Hands on a connector may open the line: nothing may feed it, from either end. */
const OFF_FIRST = 'transmitter locked off and DC feed removed before hands are on it';

/** Test voltage destroys radios, amplifiers, arrestors and analyzers, and the cable keeps it as a charge. */
const INSULATION =
  'insulation resistance, only with both ends free: no radio, amplifier, arrestor, antenna or instrument on ' +
  'the line, nobody at the far end, and the cable discharged afterwards';

/** A low-voltage meter harms nothing but itself; antennas and some arrestors read as a short by design. */
const OHMS =
  'resistance from centre to outer with both ends free and no DC feed; a DC-grounded antenna or arrestor left ' +
  'on reads as a short';

const WIDER_SWEEP = 'a wider sweep would tell the kind';
const KNOWN_LOAD = 'a known good load';
const LOAD_FOR_ANTENNA = 'sweep with a known load in place of the antenna';
const TORQUE = 'torque of the coupling nut, by its data sheet';

const CONNECTOR_KIT = [
  'connectors of this type and their tool',
  'torque wrench',
  'connector cleaner and lint-free swabs',
];
const SEALING = 'sealing tape and weatherproofing';
const SPLICE = ['cable for a new stretch', 'two connectors or a splice kit', SEALING];
const TEST_KIT = ['spare test adaptor and lead', 'calibration standards', 'connector cleaner and swabs'];

/** At the reference plane the test set-up is the first suspect, whatever the kind. */
const AT_PORT: Advice = {
  causes: [
    'worn, dirty or wrong test adaptor',
    'loose or damaged test lead',
    'calibration drifted, or made at another plane',
    'first connector of the line itself',
  ],
  checks: [
    'clean and re-torque the adaptor',
    'calibrate again at the reference plane',
    'sweep again: what has moved belongs to the test set-up',
  ],
  bring: TEST_KIT,
};

const WET: Advice = {
  causes: ['water drawn in through a connector or a damaged jacket', 'a low point where water stands'],
  checks: [
    'sealing of the connectors on both sides',
    'jacket uphill of the stretch',
    OFF_FIRST,
    'water in the lowest connector when it is opened',
  ],
  bring: ['replacement cable for the whole stretch', ...CONNECTOR_KIT, SEALING],
};

const WRONG_CABLE: Advice = {
  causes: ['cable of another type put in', 'a repair with what was at hand', 'the description is wrong here'],
  checks: ['printing on the jacket', 'repairs that the drawing does not show'],
  bring: ['cable of the right type', ...CONNECTOR_KIT],
};

// common practice, every row
export const ADVICE_TABLE: Readonly<Record<FindingKind, Rows>> = {
  'series-resistance': {
    port: AT_PORT,
    joint: {
      causes: [
        'corroded contact after water got in',
        'centre pin loose, short or badly soldered',
        'coupling nut not at its torque',
      ],
      checks: [
        OFF_FIRST,
        TORQUE,
        'green or white deposit inside',
        'depth and fit of the centre pin',
        'sweep again after cleaning and re-torquing',
      ],
      bring: [...CONNECTOR_KIT, SEALING],
    },
    cable: {
      causes: [
        'centre conductor strained or partly broken',
        'outer conductor cracked at a sharp bend or clamp',
      ],
      checks: [
        'bends and clamps at this distance',
        'does the reading move when the cable is eased by hand, never tighter than its bend radius?',
      ],
      bring: SPLICE,
    },
    end: {
      causes: ['corroded contact at the last connector', 'poor contact inside the antenna or load'],
      checks: [OFF_FIRST, TORQUE, 'green or white deposit inside', LOAD_FOR_ANTENNA],
      bring: [...CONNECTOR_KIT, SEALING, KNOWN_LOAD],
    },
  },
  'shunt-leakage': {
    port: AT_PORT,
    joint: {
      causes: ['water or salt inside the connector', 'carbon track after a flash-over or lightning'],
      checks: [OFF_FIRST, 'water inside', 'dark tracks on the insulator', INSULATION],
      bring: [...CONNECTOR_KIT, SEALING, 'insulation tester'],
    },
    cable: {
      causes: ['water at a pierced or cracked jacket', 'dielectric burnt by lightning or overload'],
      checks: ['jacket at this distance: cuts, rub marks, holes', INSULATION],
      bring: [...SPLICE, 'insulation tester'],
    },
    end: {
      causes: ['water in the last connector', 'water in the antenna or load'],
      checks: ['sealing of the last connector', OFF_FIRST, 'water inside', LOAD_FOR_ANTENNA],
      bring: [...CONNECTOR_KIT, SEALING, KNOWN_LOAD],
    },
  },
  'series-inductance': {
    port: AT_PORT,
    joint: {
      causes: [
        'connector not fully mated: a gap between the faces',
        'centre pin too short, or pulled back',
        'adaptor or connector of another impedance or series',
      ],
      checks: [
        OFF_FIRST,
        TORQUE,
        'that both halves are the same series and impedance',
        'pin depth with a gauge',
      ],
      bring: [...CONNECTOR_KIT, 'pin-depth gauge'],
    },
    cable: {
      causes: ['outer conductor opened or stretched', 'cable kinked and straightened', 'hidden splice'],
      checks: ['kinks and bends below the smallest radius', 'splices that the drawing does not show'],
      bring: SPLICE,
    },
    end: {
      causes: ['last connector not fully mated', 'adaptor before the antenna or load'],
      checks: [OFF_FIRST, TORQUE, 'that both halves are the same series and impedance', LOAD_FOR_ANTENNA],
      bring: [...CONNECTOR_KIT, KNOWN_LOAD],
    },
  },
  'shunt-capacitance': {
    port: AT_PORT,
    joint: {
      causes: [
        'cable end crushed or cut too long in the connector',
        'solder or shavings inside the connector',
        'water film across the faces',
      ],
      checks: [OFF_FIRST, 'shavings, solder or water inside', 'trim lengths of the assembly'],
      bring: [...CONNECTOR_KIT, SEALING],
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
    end: {
      causes: ['shavings, solder or water in the last connector', 'cable end crushed in the last connector'],
      checks: [OFF_FIRST, 'shavings, solder or water inside', LOAD_FOR_ANTENNA],
      bring: [...CONNECTOR_KIT, SEALING, KNOWN_LOAD],
    },
  },
  'impedance-step': {
    port: AT_PORT,
    joint: {
      causes: ['cable, adaptor or connector of another impedance from here on', 'water in the cable beyond'],
      checks: ['printing on the jacket on both sides', OFF_FIRST, 'series and impedance of both halves'],
      bring: [...CONNECTOR_KIT, 'cable of the right type'],
    },
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
    end: {
      causes: ['antenna, load or adaptor of another impedance'],
      checks: ['what the description says of the end', OFF_FIRST, LOAD_FOR_ANTENNA],
      bring: [KNOWN_LOAD],
    },
  },
  open: {
    port: {
      causes: [
        'line not connected to the test port',
        'test lead broken',
        'centre pin of the first connector not making contact',
      ],
      checks: ['that the line is connected', 'another test lead', OFF_FIRST, 'centre pin in place'],
      bring: [...TEST_KIT, ...CONNECTOR_KIT],
    },
    joint: {
      causes: ['connector undone or pulled off', 'centre pin not making contact'],
      checks: [
        'with field glasses from the ground: is the joint mated, does anything hang loose?',
        OFF_FIRST,
        'centre pin in place and not pulled back',
      ],
      bring: [...CONNECTOR_KIT, SEALING],
    },
    cable: {
      causes: ['cable cut or broken', 'centre conductor broken', 'cable stolen, or taken off here'],
      checks: [
        'DC feed removed: a cut end may be live',
        'the run at this distance, with field glasses, before anyone stands or climbs below it',
        'the run beyond: is it still there, and held?',
      ],
      bring: SPLICE,
    },
    end: {
      causes: ['antenna or load not connected', 'centre pin of the last connector not making contact'],
      checks: ['that the last connector is mated', OFF_FIRST, 'centre pin in place', LOAD_FOR_ANTENNA],
      bring: [...CONNECTOR_KIT, KNOWN_LOAD],
    },
  },
  short: {
    port: {
      causes: [
        'short standard left on the port',
        'arrestor at the foot of the line failed short',
        'strand or shavings across the first connector',
      ],
      checks: ['what is on the test port', OFF_FIRST, 'first connector and arrestor', OHMS],
      bring: [...TEST_KIT, 'ohmmeter', 'spare arrestor element where one is fitted'],
    },
    joint: {
      causes: [
        'strand or shavings across the connector',
        'pin bent against the shell',
        'arrestor failed short',
      ],
      checks: [OFF_FIRST, 'strands, shavings or a bent pin inside', OHMS],
      bring: [...CONNECTOR_KIT, 'ohmmeter', 'spare arrestor element where one is fitted'],
    },
    cable: {
      causes: ['nail, screw or clamp through the cable', 'cable crushed until the conductors touch'],
      checks: ['the run at this distance: clamps, nails, doors', OHMS],
      bring: [...SPLICE, 'ohmmeter'],
    },
    end: {
      causes: [
        'a short left in place after a test',
        'antenna or load shorted',
        'strand across the last connector',
      ],
      checks: ['that no shorting cap is left on', OFF_FIRST, 'the last connector', LOAD_FOR_ANTENNA],
      bring: [...CONNECTOR_KIT, KNOWN_LOAD, 'ohmmeter'],
    },
  },
  termination: {
    port: {
      causes: ['load standard left on the port', 'something else than the line on the test port'],
      checks: ['what is on the test port'],
      bring: TEST_KIT,
    },
    joint: {
      causes: ['line opened here and terminated', 'filter or arrestor that does not pass this band'],
      checks: ['what the drawing shows in line here', OFF_FIRST, 'what is connected beyond'],
      bring: [...CONNECTOR_KIT, SEALING],
    },
    cable: {
      causes: ['cable cut, its end soaked or crushed', 'the description is longer than the line'],
      checks: ['the run at this distance', 'the lengths on the drawing'],
      bring: SPLICE,
    },
    end: {
      causes: [
        'antenna out of its band or damaged',
        'load of another impedance',
        'the end is not what the description says',
      ],
      checks: [
        'what the description says of the end',
        'the bands that the antenna is made for',
        OFF_FIRST,
        LOAD_FOR_ANTENNA,
      ],
      bring: [KNOWN_LOAD],
    },
  },
  joint: {
    port: AT_PORT,
    joint: {
      causes: [
        'coupling nut not at its torque',
        'dirt or water inside',
        'worn or poorly assembled connector',
      ],
      checks: [OFF_FIRST, TORQUE, 'dirt, water or wear inside', 'sweep again after cleaning and re-torquing'],
      bring: [...CONNECTOR_KIT, SEALING],
    },
    cable: {
      causes: ['a connector or splice that the drawing does not show'],
      checks: ['the run at this distance', OFF_FIRST, TORQUE],
      bring: [...CONNECTOR_KIT, SEALING],
    },
    end: {
      causes: [
        'coupling nut not at its torque',
        'dirt or water inside',
        'worn or poorly assembled connector',
      ],
      checks: [OFF_FIRST, TORQUE, 'dirt, water or wear inside', LOAD_FOR_ANTENNA],
      bring: [...CONNECTOR_KIT, SEALING, KNOWN_LOAD],
    },
  },
  unresolved: {
    port: AT_PORT,
    joint: {
      causes: ['bad contact or assembly of the connector', 'water inside the connector'],
      checks: [OFF_FIRST, TORQUE, 'dirt, water or wear inside', WIDER_SWEEP],
      bring: [...CONNECTOR_KIT, SEALING],
    },
    cable: {
      causes: ['dent, kink, or damage to the jacket'],
      checks: ['the run at this distance', WIDER_SWEEP],
      bring: SPLICE,
    },
    end: {
      causes: ['bad contact or water in the last connector', 'antenna or load damaged'],
      checks: [OFF_FIRST, TORQUE, LOAD_FOR_ANTENNA, WIDER_SWEEP],
      bring: [...CONNECTOR_KIT, SEALING, KNOWN_LOAD],
    },
  },
  wet: { port: WET, joint: WET, cable: WET, end: WET },
  'wrong-cable': { port: WRONG_CABLE, joint: WRONG_CABLE, cable: WRONG_CABLE, end: WRONG_CABLE },
};
