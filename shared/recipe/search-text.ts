import type { RecipeDocument } from './document.ts';

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

export function searchText(_document: RecipeDocument): SearchText {
  throw new Error('recipe/search-text is being written');
}
