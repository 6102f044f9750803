/** A float array that grows by doubling: what a reader fills before it knows how long the file is. */
export type FloatColumn = {
  readonly length: number;
  push(value: number): void;
  get(index: number): number;
  set(index: number, value: number): void;
  /** A copy of what was pushed. */
  values(): Float64Array;
};

/** An empty column. */
export function createFloatColumn(): FloatColumn {
  let buffer = new Float64Array(1024);
  let length = 0;
  return {
    get length() {
      return length;
    },
    push(value) {
      if (length === buffer.length) {
        const larger = new Float64Array(2 * length);
        larger.set(buffer);
        buffer = larger;
      }
      buffer[length++] = value;
    },
    get: (index) => buffer[index]!,
    set(index, value) {
      buffer[index] = value;
    },
    values: () => buffer.slice(0, length),
  };
}
