/**
 * A sweep of a described line with chosen faults: the what-if of the tool, and the source of its samples.
 *
 * The line becomes a chain of parts in order from the port (stretches of one medium and impedance, lumped elements),
 * the parts become stages of the cascade, and the instrument adds what it adds: residual directivity and noise.
 */
import { createCascade, type Stage } from '../line/cascade.ts';
import { strengthOf, strengthOfNormalised } from '../line/discontinuity.ts';
import type { EndModel } from '../line/end.ts';
import { type EndKind, referenceOhm } from '../line/line.ts';
import { type Medium, portMedium, sectionMedium } from '../line/medium.ts';
import { gammaOfReturnLoss } from '../line/reflection.ts';
import { type ComplexArray, complexZeros } from '../numerics/complex.ts';
import { createRandom } from '../numerics/random.ts';
import { assertNever, fail, type Outcome, succeed } from '../outcome.ts';
import type { Sweep } from '../sweep/sweep.ts';
import { type AsBuilt, asDrawn, drawAsBuilt } from './as-built.ts';
import { linePartsOf, type Material, type Part } from './line-parts.ts';
import { refuse } from './refuse-simulation.ts';
import type { SimulateRequest } from './simulate-request.ts';

/** Γ is kept to so many decimals, −180 dB: below any instrument, and the same digits on every machine. */
const GAMMA_DECIMALS = 9;

/** Frequencies worked on at once: bounds the memory of a line of many slabs. */
const FREQUENCIES_AT_ONCE = 256;

/** Residual directivity: so many terms within this round-trip delay. */
const RESIDUE_TERMS = 4;
const RESIDUE_SPAN_S = 1e-9;

/** Where a line file names no band: fraction of the swept span around its middle in which an antenna is matched. */
const ANTENNA_BAND = 0.2;
/** Return loss of the simulated antenna at the edges of its bands, dB. Common practice: 14 dB are accepted. */
const ANTENNA_EDGE_DB = 18;
/** Match of a simulated load of a line as built, dB. Common practice. */
const LOAD_DB = 32;

/** Simulates one sweep. */
export function simulate(request: SimulateRequest): Outcome<Sweep> {
  const problems = refuse(request);
  if (problems.length > 0) return fail(...problems);
  const { line, range } = request;
  const frequencyHz = Float64Array.from(
    { length: range.points },
    (_, i) => range.startHz + ((range.stopHz - range.startHz) * i) / (range.points - 1),
  );
  const built = request.asBuilt === null ? asDrawn(line) : drawAsBuilt(line, range, request.asBuilt);
  const { parts, cut } = linePartsOf(line, request.faults, built);
  const end: EndModel = cut ? { type: cut, parameters: [built.endStrayS] } : endOf(request, built);
  const gamma = reflectionOf(parts, end, request, frequencyHz);
  addInstrument(gamma, frequencyHz, request);
  round(gamma);
  return succeed({
    frequencyHz,
    gamma,
    portOhm: request.portOhm,
    port: 1,
    ports: 1,
    file: '',
    comments: [],
  });
}

function endOf(request: SimulateRequest, built: AsBuilt): EndModel {
  const end: EndKind = request.line.end;
  switch (end) {
    case 'open':
    case 'short':
      return { type: end, parameters: [built.endStrayS] };
    case 'load': {
      const off = request.asBuilt === null ? 0 : gammaOfReturnLoss(LOAD_DB);
      return { type: 'load', parameters: [(1 + off) / (1 - off), built.endStrayS] };
    }
    case 'antenna':
      return antennaOf(request);
    case 'unknown':
      throw new TypeError('an unknown end cannot be simulated');
    default:
      return assertNever(end);
  }
}

/**
 * An antenna at DC ground (common practice), matched in each band of the line's limits: Γ = −1 + Σ a/(1 + jQ·δ).
 * Each term lies in a circle of diameter a, so the sum is passive as long as the a add up to 2 at most.
 */
function antennaOf(request: SimulateRequest): EndModel {
  const { startHz, stopHz } = request.range;
  const middle = (startHz + stopHz) / 2;
  const half = ((stopHz - startHz) * ANTENNA_BAND) / 2;
  const described = request.line.limits.bands;
  const bands = described.length > 0 ? described : [{ fromHz: middle - half, toHz: middle + half }];
  const edge = gammaOfReturnLoss(ANTENNA_EDGE_DB);
  const size = Math.min(1, 2 / bands.length);
  const parameters = [-1, 0];
  for (const { fromHz, toHz } of bands) {
    const centre = Math.sqrt(fromHz * toHz);
    // |Γ| at the edge is about Q·δ of one resonance alone.
    const q = edge / Math.max(toHz / centre - centre / toHz, 1e-6);
    parameters.push(size, 0, q, centre);
  }
  return { type: 'antenna', parameters };
}

function reflectionOf(
  parts: readonly Part[],
  end: EndModel,
  request: SimulateRequest,
  frequencyHz: Float64Array,
): ComplexArray {
  const gamma = complexZeros(frequencyHz.length);
  for (let from = 0; from < frequencyHz.length; from += FREQUENCIES_AT_ONCE) {
    const piece = frequencyHz.subarray(from, from + FREQUENCIES_AT_ONCE);
    const seen = createCascade(piece).gamma(stagesOf(parts, request, piece), end);
    gamma.re.set(seen.re, from);
    gamma.im.set(seen.im, from);
  }
  return gamma;
}

function stagesOf(parts: readonly Part[], request: SimulateRequest, frequencyHz: Float64Array): Stage[] {
  const media = new Map<Material, Medium>();
  const mediumOf = (material: Material): Medium => {
    let medium = media.get(material);
    if (!medium) {
      medium = sectionMedium(material.section, frequencyHz, {
        temperatureC: request.line.temperatureC,
        z0Ohm: referenceOhm(request.line, request.portOhm),
      });
      media.set(material, medium);
    }
    return medium;
  };
  const stages: Stage[] = [];
  let medium = portMedium(request.portOhm, frequencyHz.length);
  let ratio = 1;
  let inGuide = false;
  for (const part of parts) {
    switch (part.type) {
      case 'line': {
        const next = mediumOf(part.material);
        const guided = part.material.section.type === 'guide';
        // What joins a guide to anything else is built to match, whatever the two impedances are called.
        const transition = guided !== inGuide;
        if (!transition && (next !== medium || part.ratio !== ratio))
          stages.push({ type: 'step', before: medium, after: next, ratio: part.ratio / ratio });
        medium = next;
        inGuide = guided;
        ratio = part.ratio;
        stages.push({ type: 'line', medium, lengthM: part.lengthM, conductor: 0, dielectric: 0 });
        break;
      }
      case 'fault':
        stages.push({ ...strengthIn(medium, part, request), medium });
        break;
      case 'reactive':
        stages.push({ type: 'reactive', medium, strength: part.strengthS });
        break;
      default:
        assertNever(part);
    }
  }
  return stages;
}

function strengthIn(
  medium: Medium,
  { kind, size }: Extract<Part, { type: 'fault' }>,
  { range }: SimulateRequest,
): ReturnType<typeof strengthOf> {
  return size.unit === 'own'
    ? strengthOf(kind, size.value, medium.z0Ohm)
    : strengthOfNormalised(kind, size.value, (range.startHz + range.stopHz) / 2);
}

/** Adds residual directivity and noise, in this order of draws. */
function addInstrument(gamma: ComplexArray, frequencyHz: Float64Array, request: SimulateRequest): void {
  const random = createRandom(request.seed);
  if (request.residueDb !== null) {
    const terms = Array.from({ length: RESIDUE_TERMS }, () => ({
      size: 0.3 + 0.7 * random.uniform(),
      phase: 2 * Math.PI * random.uniform(),
      delayS: RESIDUE_SPAN_S * random.uniform(),
    }));
    const total = Math.sqrt(terms.reduce((sum, term) => sum + term.size * term.size, 0));
    for (const { size, phase, delayS } of terms) {
      const level = (gammaOfReturnLoss(-request.residueDb) * size) / total;
      for (let i = 0; i < frequencyHz.length; i++) {
        const angle = phase - 2 * Math.PI * frequencyHz[i]! * delayS;
        gamma.re[i]! += level * Math.cos(angle);
        gamma.im[i]! += level * Math.sin(angle);
      }
    }
  }
  if (request.noiseDb !== null) {
    const sigma = gammaOfReturnLoss(-request.noiseDb) / Math.SQRT2;
    for (let i = 0; i < frequencyHz.length; i++) {
      gamma.re[i]! += sigma * random.normal();
      gamma.im[i]! += sigma * random.normal();
    }
  }
}

/** Rounds in place; adding 0 turns a negative zero into a plain one. */
function round(gamma: ComplexArray): void {
  const scale = 10 ** GAMMA_DECIMALS;
  for (const part of [gamma.re, gamma.im])
    for (let i = 0; i < part.length; i++) part[i] = Math.round(part[i]! * scale) / scale + 0;
}
