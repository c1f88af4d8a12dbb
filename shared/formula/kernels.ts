// biome-ignore-all lint/style/noNonNullAssertion: every kernel reads below the length it was given, and a read of a typed array has no way to miss.

/**
 * Computes the first `count` numbers of `out` from those of its operands; element by element, so that `out` may be one
 * of them. A kernel with fewer operands ignores the rest.
 */
export type Kernel = (count: number, out: Float64Array, a: Float64Array, b: Float64Array, c: Float64Array) => void;

// The four operations stand written out and four at a time: a loop of one, or with a function inside, takes twice as long
// on the engine that Node and half of all browsers use (measured).

export const addBlock: Kernel = (count, out, a, b) => {
  let n = 0;
  for (; n < count - 3; n += 4) {
    out[n] = a[n]! + b[n]!;
    out[n + 1] = a[n + 1]! + b[n + 1]!;
    out[n + 2] = a[n + 2]! + b[n + 2]!;
    out[n + 3] = a[n + 3]! + b[n + 3]!;
  }
  for (; n < count; n++) out[n] = a[n]! + b[n]!;
};

export const subtractBlock: Kernel = (count, out, a, b) => {
  let n = 0;
  for (; n < count - 3; n += 4) {
    out[n] = a[n]! - b[n]!;
    out[n + 1] = a[n + 1]! - b[n + 1]!;
    out[n + 2] = a[n + 2]! - b[n + 2]!;
    out[n + 3] = a[n + 3]! - b[n + 3]!;
  }
  for (; n < count; n++) out[n] = a[n]! - b[n]!;
};

export const multiplyBlock: Kernel = (count, out, a, b) => {
  let n = 0;
  for (; n < count - 3; n += 4) {
    out[n] = a[n]! * b[n]!;
    out[n + 1] = a[n + 1]! * b[n + 1]!;
    out[n + 2] = a[n + 2]! * b[n + 2]!;
    out[n + 3] = a[n + 3]! * b[n + 3]!;
  }
  for (; n < count; n++) out[n] = a[n]! * b[n]!;
};

export const divideBlock: Kernel = (count, out, a, b) => {
  let n = 0;
  for (; n < count - 3; n += 4) {
    out[n] = a[n]! / b[n]!;
    out[n + 1] = a[n + 1]! / b[n + 1]!;
    out[n + 2] = a[n + 2]! / b[n + 2]!;
    out[n + 3] = a[n + 3]! / b[n + 3]!;
  }
  for (; n < count; n++) out[n] = a[n]! / b[n]!;
};

export const negateBlock: Kernel = (count, out, a) => {
  for (let n = 0; n < count; n++) out[n] = -a[n]!;
};

export function oneBlock(real: (x: number) => number): Kernel {
  return (count, out, a) => {
    for (let n = 0; n < count; n++) out[n] = real(a[n]!);
  };
}

export function twoBlock(real: (a: number, b: number) => number): Kernel {
  return (count, out, a, b) => {
    for (let n = 0; n < count; n++) out[n] = real(a[n]!, b[n]!);
  };
}

export function threeBlock(real: (a: number, b: number, c: number) => number): Kernel {
  return (count, out, a, b, c) => {
    for (let n = 0; n < count; n++) out[n] = real(a[n]!, b[n]!, c[n]!);
  };
}
