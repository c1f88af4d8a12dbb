import type { BodyNode, RecipeDocument } from './document.ts';

/** What people find a recipe by: short names, and the words of the page. */
export interface SearchText {
  readonly title: string;
  readonly number: string;
  readonly summary: string;
  readonly purpose: string;
  readonly topics: readonly string[];
  readonly keywords: readonly string[];
  /** Titles and labels of calculators, givens, results and limits, and headings. */
  readonly labels: readonly string[];
  /** Plain words of the page without its maths. */
  readonly prose: string;
}

/** Takes from a document what a search looks through; each label once. */
export function searchText({ front, body, calculators, headings }: RecipeDocument): SearchText {
  const labels = calculators.flatMap(({ title, givens, choices, results, limits }) => [
    title,
    ...[...givens, ...choices, ...results].map((member) => member.label),
    ...limits.map((limit) => limit.name),
  ]);
  return {
    title: front.title,
    number: front.number ?? '',
    summary: front.summary,
    purpose: front.purpose ?? '',
    topics: front.topics,
    keywords: front.keywords,
    labels: [...new Set([...headings.map((heading) => heading.text), ...labels])],
    prose: wordsOf(body).replace(/\s+/g, ' ').trim(),
  };
}

/** Tags that end a word; the others stand inside one. */
const WITHIN_WORDS: ReadonlySet<string> = new Set(['em', 'strong', 'del', 'a', 'code', 'span', 'sup']);

function wordsOf(nodes: readonly BodyNode[]): string {
  let words = '';
  for (const node of nodes) {
    if (node.type === 'text') words += node.value;
    else if (node.tagName === 'math') words += ' ';
    else words += WITHIN_WORDS.has(node.tagName) ? wordsOf(node.children) : ` ${wordsOf(node.children)} `;
  }
  return words;
}
