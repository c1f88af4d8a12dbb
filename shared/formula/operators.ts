import type { CompareOperator } from './syntax.ts';

/**
 * Comparisons and logic on numbers, truth as 1 and 0. NaN means "no value" and stays: a comparison in IEEE arithmetic
 * would call it false, and an `if` would then choose a branch that nobody asked for.
 */
export const COMPARISONS = {
  '<': (a, b) => (a < b ? 1 : a >= b ? 0 : Number.NaN),
  '<=': (a, b) => (a <= b ? 1 : a > b ? 0 : Number.NaN),
  '>': (a, b) => (a > b ? 1 : a <= b ? 0 : Number.NaN),
  '>=': (a, b) => (a >= b ? 1 : a < b ? 0 : Number.NaN),
  '==': (a, b) => (a === b ? 1 : a < b || a > b ? 0 : Number.NaN),
  '!=': (a, b) => (a === b ? 0 : a < b || a > b ? 1 : Number.NaN),
} as const satisfies Record<CompareOperator, (a: number, b: number) => number>;

/** One false side decides, whatever the other is, so that `x > 0 and ln(x) > 1` has an answer everywhere. Kleene's three-valued logic. */
export function conjunction(a: number, b: number): number {
  return a === 0 || b === 0 ? 0 : a === 1 && b === 1 ? 1 : Number.NaN;
}

export function disjunction(a: number, b: number): number {
  return a === 1 || b === 1 ? 1 : a === 0 && b === 0 ? 0 : Number.NaN;
}

export function negation(a: number): number {
  return 1 - a;
}

/** Gives NaN when the test has no value; the branch that is not chosen does not matter. */
export function choice(test: number, yes: number, no: number): number {
  return test === 1 ? yes : test === 0 ? no : Number.NaN;
}

/** Above this a repeated product would lose more than the library's power function. Common practice, no source. */
const LARGEST_PRODUCT = 16;

/** General power. `Math.pow` gives 1 for NaN^0, which would hide a missing value. */
export function power(base: number, exponent: number): number {
  return Number.isNaN(base) ? base : base ** exponent;
}

/**
 * Gives x ↦ x^exponent for a constant exponent. Small whole and half exponents become products, quotients and square
 * roots, which are equal bit for bit on every machine; the library's power function need not be.
 */
export function powerBy(exponent: number): (x: number) => number {
  const size = Math.abs(exponent);
  const whole = Math.floor(size);
  if (size > LARGEST_PRODUCT || (size !== whole && size !== whole + 0.5)) return (x) => power(x, exponent);
  const positive = size === whole ? wholePower(whole) : halfPower(whole);
  return exponent < 0 ? (x) => 1 / positive(x) : positive;
}

function wholePower(n: number): (x: number) => number {
  if (n === 0) return (x) => (Number.isNaN(x) ? x : 1);
  if (n === 1) return (x) => x;
  if (n === 2) return (x) => x * x;
  if (n === 3) return (x) => x * x * x;
  return (x) => {
    let product = x;
    for (let i = 1; i < n; i++) product *= x;
    return product;
  };
}

function halfPower(whole: number): (x: number) => number {
  if (whole === 0) return Math.sqrt;
  const rest = wholePower(whole);
  return (x) => rest(x) * Math.sqrt(x);
}
