import { CONSTANTS, FUNCTIONS } from './functions.ts';

const OPERATOR_WORDS: ReadonlySet<string> = new Set(['and', 'or', 'not']);

const NAME = /^[A-Za-z][A-Za-z0-9_]*$/;

/** What a word means to formulas everywhere, so that no calculator may use it as a name; null if it is free. */
export function reservedAs(word: string): 'constant' | 'function' | 'operator' | null {
  if (CONSTANTS.has(word)) return 'constant';
  if (FUNCTIONS.has(word)) return 'function';
  return OPERATOR_WORDS.has(word) ? 'operator' : null;
}

/** Whether a text has the form of a name: a letter, then letters, digits and underscores. */
export function isName(text: string): boolean {
  return NAME.test(text);
}

/** The candidate that a misspelt word most likely means, or null: letters differ only in case, or one or two edits. */
export function nearestName(word: string, candidates: Iterable<string>): string | null {
  // A short word is one edit away from nearly everything: R1 must not be offered for R3.
  const allowed = word.length < 3 ? 0.5 : word.length < 7 ? 1.5 : 2;
  let best: string | null = null;
  let bestDistance = Number.POSITIVE_INFINITY;
  for (const candidate of candidates) {
    const distance =
      candidate.toLowerCase() === word.toLowerCase() ? 0.5 : Math.max(editDistance(word, candidate), 0.5);
    if (candidate !== word && distance < bestDistance && distance <= allowed) {
      best = candidate;
      bestDistance = distance;
    }
  }
  return best;
}

/**
 * Counts the single-letter edits between two words, a swap of neighbours as one.
 * Source: optimal string alignment (restricted Damerau–Levenshtein distance), from memory. Cost: product of the lengths.
 */
function editDistance(a: string, b: string): number {
  if (Math.abs(a.length - b.length) > 2) return Number.POSITIVE_INFINITY;
  let before: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const changed = (last[j - 1] ?? 0) + (a[i - 1] === b[j - 1] ? 0 : 1);
      let distance = Math.min(changed, (last[j] ?? 0) + 1, (row[j - 1] ?? 0) + 1);
      const swapped = i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1];
      if (swapped) distance = Math.min(distance, (before[j - 2] ?? 0) + 1);
      row.push(distance);
    }
    before = last;
    last = row;
  }
  return last[b.length] ?? 0;
}
