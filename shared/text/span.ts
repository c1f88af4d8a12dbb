/** Half-open range of UTF-16 offsets into the recipe text as typed. Never a line, never relative to a block. */
export interface Span {
  readonly start: number;
  readonly end: number;
}

export function span(start: number, end: number): Span {
  return { start, end };
}

/** Gives the span that reaches from the start of `first` to the end of `last`. */
export function spanFrom(first: Span, last: Span): Span {
  return { start: first.start, end: last.end };
}
