/**
 * Exponents of kg, m, s, A, K and dB, each counted in halves so that √Hz has whole numbers: a volt is
 * [2, 4, -6, -2, 0, 0]. A level in dB is a dimension of its own: adding it to a ratio must fail.
 */
export type Dimension = readonly [kg: number, m: number, s: number, A: number, K: number, dB: number];

/** The dimension of a ratio, a count and an angle. */
export const NONE: Dimension = [0, 0, 0, 0, 0, 0];

export function sameDimension(a: Dimension, b: Dimension): boolean {
  return a.every((exponent, i) => exponent === b[i]);
}

export function timesDimension(a: Dimension, b: Dimension): Dimension {
  return [a[0] + b[0], a[1] + b[1], a[2] + b[2], a[3] + b[3], a[4] + b[4], a[5] + b[5]];
}

export function perDimension(a: Dimension, b: Dimension): Dimension {
  return [a[0] - b[0], a[1] - b[1], a[2] - b[2], a[3] - b[3], a[4] - b[4], a[5] - b[5]];
}

/** Raises to a whole or half power; gives null where an exponent would no longer be a whole number of halves. */
export function powerOfDimension(d: Dimension, power: number): Dimension | null {
  const raised: Dimension = [d[0] * power, d[1] * power, d[2] * power, d[3] * power, d[4] * power, d[5] * power];
  // `+ 0` turns the -0 of 0 × -1 into 0, so that JSON and comparisons see one zero.
  return raised.every(Number.isInteger)
    ? [raised[0] + 0, raised[1] + 0, raised[2] + 0, raised[3] + 0, raised[4] + 0, raised[5] + 0]
    : null;
}
