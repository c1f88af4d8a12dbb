import { type Dimension, KINDS, NONE } from '#quantity';
import type { NoValueReason } from './outcome.ts';

/** What the arguments must be: ratios, levels, anything as long as all are alike, or (`if`) a test and two alike. */
export type ArgumentRule = 'ratio' | 'level' | 'alike' | 'choice';

/** What comes out; `root` halves the dimension of the argument. */
export type ResultRule = 'ratio' | 'level' | 'alike' | 'root';

/**
 * How a function is computed. `many` folds its arguments from the left and covers one argument too; every closure takes
 * and gives plain numbers, cannot throw, and gives NaN for NaN, or a missing value would vanish inside it.
 */
export type Arithmetic =
  | { readonly shape: 'one'; readonly real: (x: number) => number }
  | { readonly shape: 'two'; readonly real: (a: number, b: number) => number }
  | {
      readonly shape: 'many';
      readonly each?: (x: number) => number;
      readonly join: (a: number, b: number) => number;
      readonly finish?: (x: number) => number;
    }
  /** Only the branch that the test names counts. */
  | { readonly shape: 'choice' };

export interface FunctionRow {
  readonly least: number;
  readonly most: number;
  readonly takes: ArgumentRule;
  readonly gives: ResultRule;
  readonly arithmetic: Arithmetic;
  /** Why there is no value where numbers went in and NaN came out. */
  readonly noValue: NoValueReason;
}

function one(
  takes: ArgumentRule,
  gives: ResultRule,
  real: (x: number) => number,
  noValue: NoValueReason = 'outside-domain',
): FunctionRow {
  return { least: 1, most: 1, takes, gives, arithmetic: { shape: 'one', real }, noValue };
}

function many(
  least: number,
  join: (a: number, b: number) => number,
  more: { each?: (x: number) => number; finish?: (x: number) => number } = {},
): FunctionRow {
  return {
    least,
    most: 50,
    takes: 'alike',
    gives: 'alike',
    arithmetic: { shape: 'many', join, ...more },
    noValue: 'infinite-difference',
  };
}

/** Halves away from zero, so that −2.5 and 2.5 round alike; Math.round takes −2.5 to −2. */
function roundHalfAway(x: number): number {
  return x < 0 ? -Math.round(-x) : Math.round(x);
}

/** Only + × ÷ √, which IEEE 754 rounds the same on every machine; Math.hypot may differ, and hides NaN behind an infinity. */
function hypotenuse(a: number, b: number): number {
  const big = Math.max(Math.abs(a), Math.abs(b));
  if (big === 0 || big === Number.POSITIVE_INFINITY) return big;
  const ratio = Math.min(Math.abs(a), Math.abs(b)) / big;
  return big * Math.sqrt(1 + ratio * ratio);
}

/**
 * Every function of the language. Decibels: 20·log10|x| for field quantities, 10·log10|x| for powers.
 * Source: IEC 60027-3:2002, clauses 4 and 5 (logarithmic quantities), from memory.
 */
export const FUNCTIONS: ReadonlyMap<string, FunctionRow> = new Map<string, FunctionRow>([
  ['sqrt', one('alike', 'root', Math.sqrt, 'root-of-negative')],
  ['abs', one('alike', 'alike', Math.abs)],
  ['min', many(1, Math.min)],
  ['max', many(1, Math.max)],
  ['exp', one('ratio', 'ratio', Math.exp)],
  ['ln', one('ratio', 'ratio', Math.log, 'log-of-negative')],
  ['log10', one('ratio', 'ratio', Math.log10, 'log-of-negative')],
  ['sin', one('ratio', 'ratio', Math.sin)],
  ['cos', one('ratio', 'ratio', Math.cos)],
  ['tan', one('ratio', 'ratio', Math.tan)],
  ['asin', one('ratio', 'ratio', Math.asin)],
  ['acos', one('ratio', 'ratio', Math.acos)],
  ['atan', one('ratio', 'ratio', Math.atan)],
  [
    'atan2',
    {
      least: 2,
      most: 2,
      takes: 'alike',
      gives: 'ratio',
      arithmetic: { shape: 'two', real: Math.atan2 },
      noValue: 'outside-domain',
    },
  ],
  ['hypot', many(1, hypotenuse, { each: Math.abs })],
  ['floor', one('ratio', 'ratio', Math.floor)],
  ['ceil', one('ratio', 'ratio', Math.ceil)],
  ['round', one('ratio', 'ratio', roundHalfAway)],
  ['sign', one('alike', 'ratio', Math.sign)],
  [
    'if',
    { least: 3, most: 3, takes: 'choice', gives: 'alike', arithmetic: { shape: 'choice' }, noValue: 'not-a-number' },
  ],
  // By conductances: a short circuit among the branches gives 0 and two that cancel give an infinity, both as they should.
  ['parallel', many(1, (a, b) => a + b, { each: (x) => 1 / x, finish: (x) => 1 / x })],
  ['db', one('ratio', 'level', (x) => 20 * Math.log10(Math.abs(x)))],
  ['from_db', one('level', 'ratio', (x) => 10 ** (x / 20))],
  ['db_power', one('ratio', 'level', (x) => 10 * Math.log10(Math.abs(x)))],
  ['from_db_power', one('level', 'ratio', (x) => 10 ** (x / 10))],
]);

export interface ConstantRow {
  readonly si: number;
  readonly dimension: Dimension;
}

/** Source: SI brochure, 9th edition (BIPM 2019), section 2.2, for k and e (exact); T_0 is the ice point of section 2.3.1; π is a double. */
export const CONSTANTS: ReadonlyMap<string, ConstantRow> = new Map<string, ConstantRow>([
  ['pi', { si: Math.PI, dimension: NONE }],
  ['k_B', { si: 1.380649e-23, dimension: [2, 4, -4, 0, -2, 0] }],
  ['q_e', { si: 1.602176634e-19, dimension: KINDS.charge.dimension }],
  ['T_0', { si: 273.15, dimension: KINDS.temperature.dimension }],
]);
