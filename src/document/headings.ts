import type { RecipeDocument } from '#recipe';

export interface Section {
  readonly id: string;
  readonly text: string;
  /** `2`, or `2.1` for a heading below one. */
  readonly number: string;
  readonly depth: number;
}

/** The sections of a page with their numbers. A first heading deeper than the second level counts as one of that level. */
export function sectionsOf({ headings }: Pick<RecipeDocument, 'headings'>): readonly Section[] {
  let section = 0;
  let part = 0;
  return headings.map(({ id, depth, text }) => {
    const isPart = depth > 2 && section > 0;
    if (isPart) part += 1;
    else {
      section += 1;
      part = 0;
    }
    return { id, text, depth, number: isPart ? `${section}.${part}` : `${section}` };
  });
}
