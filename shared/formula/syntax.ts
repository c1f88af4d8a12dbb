import type { Dimension } from '#quantity';
import type { Span } from '#text';

export type ArithmeticOperator = '+' | '-' | '*' | '/' | '^';
export type CompareOperator = '<' | '<=' | '>' | '>=' | '==' | '!=';

/** What parsing gives. Every span counts from the start of the recipe text, whatever slice was parsed. */
export type Expr =
  | { readonly kind: 'number'; readonly span: Span; readonly value: number }
  | {
      readonly kind: 'quantity';
      readonly span: Span;
      readonly si: number;
      readonly dimension: Dimension;
      readonly text: string;
    }
  | { readonly kind: 'name'; readonly span: Span; readonly name: string }
  | { readonly kind: 'negate'; readonly span: Span; readonly of: Expr }
  | { readonly kind: 'not'; readonly span: Span; readonly of: Expr }
  | {
      readonly kind: 'arithmetic';
      readonly span: Span;
      readonly operator: ArithmeticOperator;
      readonly left: Expr;
      readonly right: Expr;
    }
  | {
      readonly kind: 'compare';
      readonly span: Span;
      readonly operator: CompareOperator;
      readonly left: Expr;
      readonly right: Expr;
    }
  | {
      readonly kind: 'logic';
      readonly span: Span;
      readonly operator: 'and' | 'or';
      readonly left: Expr;
      readonly right: Expr;
    }
  | {
      readonly kind: 'call';
      readonly span: Span;
      readonly name: string;
      readonly nameSpan: Span;
      readonly args: readonly Expr[];
    }
  /** A place where the parser gave up; it silences the checks above it, so that one mistake gives one message. */
  | { readonly kind: 'hole'; readonly span: Span };

/** The dimension of a number, or the answer of a comparison. */
export type Type = Dimension | 'truth';

/** What checking gives: no holes, every name known, every node with its type. This is what a document stores, as JSON. */
export type CheckedExpr =
  | { readonly kind: 'number'; readonly span: Span; readonly type: Dimension; readonly value: number }
  | {
      readonly kind: 'quantity';
      readonly span: Span;
      readonly type: Dimension;
      readonly si: number;
      readonly text: string;
    }
  | {
      readonly kind: 'constant';
      readonly span: Span;
      readonly type: Dimension;
      readonly name: string;
      readonly si: number;
    }
  | { readonly kind: 'name'; readonly span: Span; readonly type: Dimension; readonly name: string }
  | { readonly kind: 'negate'; readonly span: Span; readonly type: Dimension; readonly of: CheckedExpr }
  | { readonly kind: 'not'; readonly span: Span; readonly type: 'truth'; readonly of: CheckedExpr }
  | {
      readonly kind: 'arithmetic';
      readonly span: Span;
      readonly type: Dimension;
      readonly operator: ArithmeticOperator;
      readonly left: CheckedExpr;
      readonly right: CheckedExpr;
    }
  | {
      readonly kind: 'compare';
      readonly span: Span;
      readonly type: 'truth';
      readonly operator: CompareOperator;
      readonly left: CheckedExpr;
      readonly right: CheckedExpr;
    }
  | {
      readonly kind: 'logic';
      readonly span: Span;
      readonly type: 'truth';
      readonly operator: 'and' | 'or';
      readonly left: CheckedExpr;
      readonly right: CheckedExpr;
    }
  | {
      readonly kind: 'call';
      readonly span: Span;
      readonly type: Type;
      readonly name: string;
      readonly args: readonly CheckedExpr[];
    };
