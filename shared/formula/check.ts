import type { Diagnostic } from '#text';
import type { CheckedExpr, Expr, Type } from './syntax.ts';
import type { FormulaCode } from './wording.ts';

/** The names a formula may read. */
export interface FormulaScope {
  /** Gives undefined for a name that does not exist, null for one whose type is not known because its own formula is faulty. */
  typeOf(name: string): Type | null | undefined;
  /** All names, for the hint after a misspelt one. */
  readonly names: Iterable<string>;
}

/**
 * Finds every name and checks every dimension. `checked` is null if anything is wrong; `diagnostics` is then empty only
 * if the cause has been told already (a hole, a name of unknown type).
 */
export function checkFormula(
  _expr: Expr,
  _scope: FormulaScope,
): { readonly checked: CheckedExpr | null; readonly diagnostics: readonly Diagnostic<FormulaCode>[] } {
  throw new Error('formula/check is being written');
}

/** A type in words: "voltage", "level in dB", "a yes or no". */
export function typeWords(_type: Type): string {
  throw new Error('formula/check is being written');
}
