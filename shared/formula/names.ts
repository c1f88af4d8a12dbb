/** What a word means to formulas everywhere, so that no calculator may use it as a name; null if it is free. */
export function reservedAs(_word: string): 'constant' | 'function' | 'operator' | null {
  throw new Error('formula/names is being written');
}

/** Whether a text has the form of a name: a letter, then letters, digits and underscores. */
export function isName(_text: string): boolean {
  throw new Error('formula/names is being written');
}

/** The candidate that a misspelt word most likely means, or null: letters differ only in case, or one or two edits. */
export function nearestName(_word: string, _candidates: Iterable<string>): string | null {
  throw new Error('formula/names is being written');
}
