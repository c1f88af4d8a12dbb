import type { Wording } from '#text';
import type { NoValueReason, UnboundedReason } from './outcome.ts';

export type FormulaCode =
  | 'formula-empty'
  | 'formula-too-long'
  | 'formula-too-deep'
  | 'unexpected-character'
  | 'unexpected-token'
  | 'operator-spelling'
  | 'missing-operand'
  | 'unclosed-bracket'
  | 'malformed-number'
  | 'number-too-large'
  | 'shorthand-number'
  | 'implied-multiplication'
  | 'unit-or-name'
  | 'unit-apart'
  | 'unit-without-number'
  | 'power-of-quantity'
  | 'chained-comparison'
  | 'unknown-name'
  | 'unknown-function'
  | 'function-without-arguments'
  | 'argument-count'
  | 'dimension-mismatch'
  | 'argument-dimension'
  | 'root-dimension'
  | 'power-exponent'
  | 'truth-for-number'
  | 'number-for-truth'
  | 'celsius-sum'
  | 'definition-cycle';

/** The sentence and the hint of every code of this room. */
export const FORMULA_WORDING: Partial<Record<FormulaCode, Wording>> = {};

/** Why a result is unbounded, to stand after "unbounded: ": `R1·R4 and R2·R3 cancel`. */
export function unboundedWords(_reason: UnboundedReason): string {
  throw new Error('formula/wording is being written');
}

/** Why there is no value, to stand after "no value: ": `zero divided by zero`. */
export function noValueWords(_reason: NoValueReason): string {
  throw new Error('formula/wording is being written');
}
