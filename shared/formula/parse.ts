import type { Diagnostic, Span } from '#text';
import type { Expr } from './syntax.ts';
import type { FormulaCode } from './wording.ts';

/**
 * Reads one formula from a slice of the recipe text. `names` are the names of the calculator, whatever their type.
 * Never throws; a part that cannot be read is a hole.
 */
export function parseFormula(
  _source: string,
  _span: Span,
  _names: ReadonlySet<string>,
): { readonly expr: Expr; readonly diagnostics: readonly Diagnostic<FormulaCode>[] } {
  throw new Error('formula/parse is being written');
}
