import type { Fact } from '#text';

/** `a, b and c`. */
export function list(fact: Fact | undefined): string {
  if (typeof fact !== 'object') return String(fact ?? '');
  return fact.length < 2 ? fact.join('') : `${fact.slice(0, -1).join(', ')} and ${fact.at(-1)}`;
}

/** `a, b or c`; the first twelve. */
export function oneOf(fact: Fact | undefined): string {
  if (typeof fact !== 'object') return String(fact ?? '');
  const [shown, rest] = [fact.slice(0, 12), fact.length > 12];
  return shown.length < 2
    ? shown.join('')
    : `${shown.slice(0, -1).join(', ')}${rest ? ', ' : ' or '}${shown.at(-1)}${rest ? ' …' : ''}`;
}

/** The hint after a misspelt word: the nearest, else all that may stand. */
export function didYouMean(near: Fact | undefined, others: Fact | undefined): string | undefined {
  if (near !== undefined && near !== '') return `Did you mean ${near}?`;
  const words = oneOf(others);
  return words === '' ? undefined : `Expected ${words}.`;
}
