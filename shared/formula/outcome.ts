import type { Span } from '#text';

/** What one evaluation of one formula at one point gives. No NaN and no infinity ever stands in `si`. */
export type Sample =
  | { readonly kind: 'finite'; readonly si: number }
  | { readonly kind: 'unbounded'; readonly sign: 1 | -1; readonly span: Span }
  | { readonly kind: 'no-value'; readonly reason: NoValueReason; readonly span: Span };

/** `not-a-number` is left for a name whose own value is missing and for powers such as 1^∞. */
export type NoValueReason =
  | 'zero-over-zero'
  | 'infinite-over-infinite'
  | 'infinite-difference'
  | 'zero-times-infinite'
  | 'root-of-negative'
  | 'log-of-negative'
  | 'outside-domain'
  | 'not-a-number';

/**
 * Why a formula is unbounded at one point: two terms of a divisor cancel, one expression is zero, the number left the
 * range of a double, or a name was unbounded already. Terms are written for people, `R1·R4`.
 */
export type UnboundedReason =
  | { readonly kind: 'cancel'; readonly span: Span; readonly left: string; readonly right: string }
  | { readonly kind: 'zero'; readonly span: Span; readonly term: string }
  | { readonly kind: 'too-large'; readonly span: Span; readonly term: string }
  | { readonly kind: 'name'; readonly span: Span; readonly name: string };
