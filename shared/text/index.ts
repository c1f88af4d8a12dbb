/**
 * Places in a text and what is said about them.
 * Terms: span (half-open range of UTF-16 offsets into the recipe text as typed), point (line and column, from 1),
 * diagnostic (a mistake in a recipe, as data), result (a value or one refusal).
 * Opens no other room.
 */
export { assertNever } from './assert-never.ts';
export type { Diagnostic, Fact, Facts, Severity, ShownDiagnostic, Wording } from './diagnostic.ts';
export { problem, warning } from './diagnostic.ts';
export { LineIndex, type Point } from './line-index.ts';
export { fail, ok, type Result } from './result.ts';
export { type Span, span, spanFrom } from './span.ts';
