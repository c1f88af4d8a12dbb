/** A place for people: line and column from 1, offset from 0, all in UTF-16 units. */
export interface Point {
  readonly line: number;
  readonly column: number;
  readonly offset: number;
}

/** Turns offsets into lines and columns. Line ends are LF, CRLF or a lone CR. Built once a text; a look-up is a binary search. */
export class LineIndex {
  readonly #starts: readonly number[];
  readonly #length: number;

  constructor(text: string) {
    const starts = [0];
    for (let i = 0; i < text.length; i++) {
      const code = text.charCodeAt(i);
      if (code === 10 || (code === 13 && text.charCodeAt(i + 1) !== 10)) starts.push(i + 1);
    }
    this.#starts = starts;
    this.#length = text.length;
  }

  /** Offsets outside the text are brought to its nearer end. */
  pointAt(offset: number): Point {
    const at = Math.min(Math.max(offset, 0), this.#length);
    let low = 0;
    let high = this.#starts.length - 1;
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if ((this.#starts[middle] ?? 0) <= at) low = middle;
      else high = middle - 1;
    }
    return { line: low + 1, column: at - (this.#starts[low] ?? 0) + 1, offset: at };
  }
}
