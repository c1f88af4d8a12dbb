import type { Diagnostic, Span } from '#text';
import type { CheckedExpr, Expr } from './syntax.ts';
import type { FormulaCode } from './wording.ts';

export interface Definition {
  readonly name: string;
  /** Names that the formula reads; those that no definition has are ignored. */
  readonly reads: readonly string[];
  readonly span: Span;
}

/** The names that a formula reads, each once, in the order of the text. */
export function namesRead(_expr: Expr | CheckedExpr): readonly string[] {
  throw new Error('formula/order is being written');
}

/**
 * Puts definitions so that each stands after all it reads, else in the order given. Names on a circle are left out and
 * each circle gives one `definition-cycle` with the fact `path`, e.g. ['a', 'b', 'a'].
 */
export function orderDefinitions(_definitions: readonly Definition[]): {
  readonly order: readonly string[];
  readonly diagnostics: readonly Diagnostic<FormulaCode>[];
} {
  throw new Error('formula/order is being written');
}
