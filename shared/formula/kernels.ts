// biome-ignore-all lint/style/noNonNullAssertion: every kernel reads below the length it was given, and a read of a typed array has no way to miss.

/**
 * Computes `count` numbers from `out[at]` on, reading from a[i], b[j], c[k] on; element by element, so that `out` may be
 * one of the operands. A kernel with fewer operands ignores the rest.
 */
export type Kernel = (
  count: number,
  out: Float64Array,
  at: number,
  a: Float64Array,
  i: number,
  b: Float64Array,
  j: number,
  c: Float64Array,
  k: number,
) => void;

// The four operations stand written out: one loop with a function inside runs at half the speed.

export const addBlock: Kernel = (count, out, at, a, i, b, j) => {
  for (let n = 0; n < count; n++) out[at + n] = a[i + n]! + b[j + n]!;
};

export const subtractBlock: Kernel = (count, out, at, a, i, b, j) => {
  for (let n = 0; n < count; n++) out[at + n] = a[i + n]! - b[j + n]!;
};

export const multiplyBlock: Kernel = (count, out, at, a, i, b, j) => {
  for (let n = 0; n < count; n++) out[at + n] = a[i + n]! * b[j + n]!;
};

export const divideBlock: Kernel = (count, out, at, a, i, b, j) => {
  for (let n = 0; n < count; n++) out[at + n] = a[i + n]! / b[j + n]!;
};

export const negateBlock: Kernel = (count, out, at, a, i) => {
  for (let n = 0; n < count; n++) out[at + n] = -a[i + n]!;
};

export const copyBlock: Kernel = (count, out, at, a, i) => {
  for (let n = 0; n < count; n++) out[at + n] = a[i + n]!;
};

export function oneBlock(real: (x: number) => number): Kernel {
  return (count, out, at, a, i) => {
    for (let n = 0; n < count; n++) out[at + n] = real(a[i + n]!);
  };
}

export function twoBlock(real: (a: number, b: number) => number): Kernel {
  return (count, out, at, a, i, b, j) => {
    for (let n = 0; n < count; n++) out[at + n] = real(a[i + n]!, b[j + n]!);
  };
}

export function threeBlock(real: (a: number, b: number, c: number) => number): Kernel {
  return (count, out, at, a, i, b, j, c, k) => {
    for (let n = 0; n < count; n++) out[at + n] = real(a[i + n]!, b[j + n]!, c[k + n]!);
  };
}
