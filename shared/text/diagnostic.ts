import type { Point } from './line-index.ts';
import type { Span } from './span.ts';

export type Severity = 'error' | 'warning';

/** What a sentence about a problem needs to know: names, numbers as people write them, lists of names. */
export type Fact = string | number | readonly string[];
export type Facts = Readonly<Record<string, Fact>>;

/** One mistake in a recipe. Codes and facts come first; the sentence is made late, by the wording of the room that owns the code. */
export interface Diagnostic<Code extends string = string> {
  readonly code: Code;
  readonly severity: Severity;
  readonly span: Span;
  readonly facts: Facts;
}

/** A diagnostic as it is shown, stored and printed. */
export interface ShownDiagnostic {
  readonly severity: Severity;
  readonly code: string;
  readonly message: string;
  readonly hint?: string;
  readonly start: Point;
  readonly end: Point;
}

/** How a code speaks: one or two short sentences, and what to write instead. */
export interface Wording {
  message(facts: Facts): string;
  hint?(facts: Facts): string | undefined;
}

export function problem<Code extends string>(code: Code, span: Span, facts: Facts = {}): Diagnostic<Code> {
  return { code, severity: 'error', span, facts };
}

export function warning<Code extends string>(code: Code, span: Span, facts: Facts = {}): Diagnostic<Code> {
  return { code, severity: 'warning', span, facts };
}
