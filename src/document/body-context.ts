import { createContext, type ReactNode, useContext } from 'react';
import type { RecipeDocument } from '#recipe';
import type { CalculatorsState } from './use-calculators.ts';

/** What the parts of a page read; the page itself is drawn once a document, only these parts follow the fields. */
export interface BodySurroundings {
  readonly document: RecipeDocument;
  readonly calculators: CalculatorsState;
  readonly panels: 'inline' | 'beside';
  readonly recipeLink: ((slug: string, version: number | undefined) => ReactNode) | undefined;
}

export const BodyContext = createContext<BodySurroundings | null>(null);

export function useSurroundings(): BodySurroundings {
  const surroundings = useContext(BodyContext);
  if (surroundings === null) throw new Error('a part of a page was drawn outside of RecipeView');
  return surroundings;
}
