import type { Span } from '#text';

/** How the editor colours a part of a formula. */
export interface FormulaToken {
  readonly kind: 'number' | 'unit' | 'name' | 'function' | 'constant' | 'operator' | 'bracket' | 'comma' | 'unknown';
  readonly span: Span;
}

/** Cuts a slice of the recipe text into tokens; blanks are left out, spans count from the start of the recipe. Never throws. */
export function formulaTokens(_source: string, _span: Span): FormulaToken[] {
  throw new Error('formula/tokens is being written');
}
