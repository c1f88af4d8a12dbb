import type { CheckedExpr } from './syntax.ts';

/** A formula as it is drawn: plain data for MathML, for print and for one line of text. */
export type Layout =
  | { readonly kind: 'number'; readonly text: string }
  | { readonly kind: 'quantity'; readonly number: string; readonly unit: string }
  /** `R_load` has base `R` and subscript `load`. */
  | { readonly kind: 'name'; readonly name: string; readonly base: string; readonly subscript?: string }
  /** A name with its value put in. */
  | { readonly kind: 'value'; readonly name: string; readonly text: string }
  | { readonly kind: 'operator'; readonly text: string }
  | { readonly kind: 'row'; readonly items: readonly Layout[] }
  | { readonly kind: 'fenced'; readonly open: '(' | '|'; readonly close: ')' | '|'; readonly of: Layout }
  | { readonly kind: 'fraction'; readonly above: Layout; readonly below: Layout }
  | { readonly kind: 'root'; readonly of: Layout }
  | { readonly kind: 'power'; readonly base: Layout; readonly exponent: Layout }
  | { readonly kind: 'call'; readonly name: string; readonly args: readonly Layout[] };

/** Gives the text that stands for a name, or null to keep the name. */
export type Substitute = (name: string) => { readonly text: string } | null;

/** Lays a formula out for drawing; with `substitute` the numbers are put in. */
export function formulaLayout(_checked: CheckedExpr, _substitute?: Substitute): Layout {
  throw new Error('formula/show is being written');
}

/** Writes a formula on one line: `(R1·R4 − R2·R3) / R1`. */
export function formulaText(_checked: CheckedExpr, _substitute?: Substitute): string {
  throw new Error('formula/show is being written');
}
