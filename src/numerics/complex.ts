/** Arrays of complex numbers as two float arrays: what every transform and the cascade work on. */

/** Real and imaginary parts, same length. */
export type ComplexArray = { readonly re: Float64Array; readonly im: Float64Array };

/** A complex array of zeros. */
export function complexZeros(length: number): ComplexArray {
  return { re: new Float64Array(length), im: new Float64Array(length) };
}

/** A copy that shares nothing with the original. */
export function complexCopy(values: ComplexArray): ComplexArray {
  return { re: values.re.slice(), im: values.im.slice() };
}

/** Builds a complex array from pairs `[re, im]`. */
export function complexFromPairs(pairs: readonly (readonly [number, number])[]): ComplexArray {
  return { re: Float64Array.from(pairs, (p) => p[0]), im: Float64Array.from(pairs, (p) => p[1]) };
}

/** a − b, element by element. @throws RangeError when the lengths differ. */
export function complexSubtract(a: ComplexArray, b: ComplexArray): ComplexArray {
  requireSameLength(a, b);
  return { re: a.re.map((v, i) => v - b.re[i]!), im: a.im.map((v, i) => v - b.im[i]!) };
}

/** Sum of |value|² over the array. */
export function complexEnergy(values: ComplexArray): number {
  let sum = 0;
  for (let i = 0; i < values.re.length; i++)
    sum += values.re[i]! * values.re[i]! + values.im[i]! * values.im[i]!;
  return sum;
}

/** Root mean square of |value|; 0 for an empty array. */
export function complexRms(values: ComplexArray): number {
  return values.re.length === 0 ? 0 : Math.sqrt(complexEnergy(values) / values.re.length);
}

function requireSameLength(a: ComplexArray, b: ComplexArray): void {
  if (a.re.length !== b.re.length) throw new RangeError(`lengths differ: ${a.re.length} and ${b.re.length}`);
}
