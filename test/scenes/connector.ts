/** A sound connector: two halves a few centimetres apart, each with a little inductance and capacitance. */
import { losslessMedium } from './coax-medium.ts';
import type { Draws } from './draws.ts';
import { chainToPort, type Element, reflectionAtPort, type Termination } from './ladder.ts';

export type ConnectorHalf = { readonly inductanceH: number; readonly capacitanceF: number };

export type Connector = {
  readonly near: ConnectorHalf;
  readonly far: ConnectorHalf;
  /** Between the halves, m. */
  readonly lengthM: number;
  /** Worst return loss over the swept band between matched lines, dB. */
  readonly returnLossDb: number;
};

/** Velocity factor inside the connector: part air, part plastic. Common practice. */
const INSIDE_VELOCITY_FACTOR = 0.75;

/** A connector that isn't there: a cable's own start or a bare end. */
export const NO_CONNECTOR: Connector = {
  near: { inductanceH: 0, capacitanceF: 0 },
  far: { inductanceH: 0, capacitanceF: 0 },
  lengthM: 0,
  returnLossDb: Number.POSITIVE_INFINITY,
};

/** The elements of one half: L/2, C, L/2. */
export function halfElements(half: ConnectorHalf): Element[] {
  return [
    { type: 'series', resistanceOhm: 0, inductanceH: half.inductanceH / 2 },
    { type: 'shunt', conductanceS: 0, capacitanceF: half.capacitanceF },
    { type: 'series', resistanceOhm: 0, inductanceH: half.inductanceH / 2 },
  ];
}

/** The line between the halves. */
export function insideElement(connector: Connector, frequencyHz: Float64Array): Element {
  const medium = losslessMedium(50, INSIDE_VELOCITY_FACTOR, frequencyHz);
  return { type: 'slab', medium, lengthM: connector.lengthM, impedanceScale: 1 };
}

/** Draws a sound connector with the given worst return loss over the band. */
export function drawConnector(draws: Draws, returnLossDb: number, frequencyHz: Float64Array): Connector {
  const lengthM = draws.uniform(0.02, 0.05);
  const shapes = [drawShape(draws), drawShape(draws)] as const;
  const topOmega = 2 * Math.PI * frequencyHz[frequencyHz.length - 1]!;
  const scaled = (scale: number): Connector => {
    const half = (shape: Shape): ConnectorHalf => ({
      inductanceH: (scale * shape.inductive * 50) / topOmega,
      capacitanceF: (scale * shape.capacitive) / (50 * topOmega),
    });
    return { near: half(shapes[0]), far: half(shapes[1]), lengthM, returnLossDb };
  };
  let low = 1e-6;
  let high = 0.5;
  const band = thin(frequencyHz, 64);
  for (let i = 0; i < 40; i++) {
    const middle = Math.sqrt(low * high);
    if (worstReturnLossDb(scaled(middle), band) > returnLossDb) low = middle;
    else high = middle;
  }
  return scaled(low);
}

/** Lowest return loss over the band, seen between matched 50 Ω lines, dB. */
export function worstReturnLossDb(connector: Connector, frequencyHz: Float64Array): number {
  const n = frequencyHz.length;
  const matched: Termination = {
    voltage: { re: new Float64Array(n).fill(50), im: new Float64Array(n) },
    current: { re: new Float64Array(n).fill(1), im: new Float64Array(n) },
  };
  const elements = [
    ...halfElements(connector.near),
    insideElement(connector, frequencyHz),
    ...halfElements(connector.far),
  ];
  const gamma = reflectionAtPort(chainToPort(elements, matched, frequencyHz), 50);
  let worst = 0;
  for (let k = 0; k < n; k++) worst = Math.max(worst, Math.hypot(gamma.re[k]!, gamma.im[k]!));
  return -20 * Math.log10(worst);
}

type Shape = { readonly inductive: number; readonly capacitive: number };

/** Mostly inductive or mostly capacitive, partly made up for by the other. */
function drawShape(draws: Draws): Shape {
  const large = draws.uniform(0.4, 1);
  const small = large * draws.uniform(0, 0.4);
  return draws.chance(0.5)
    ? { inductive: large, capacitive: small }
    : { inductive: small, capacitive: large };
}

/** At most `count` of the frequencies, first and last among them. */
export function thin(frequencyHz: Float64Array, count: number): Float64Array {
  if (frequencyHz.length <= count) return frequencyHz;
  return Float64Array.from(
    { length: count },
    (_, i) => frequencyHz[Math.round((i * (frequencyHz.length - 1)) / (count - 1))]!,
  );
}
