import { keepPreviousData } from '@tanstack/react-query';
import type { RecipePage } from '#api';
import { reading } from '../../lib/query-client.ts';

export const recipesReading = reading('recipes.list', {});

/** Hits stay until the next ones are there, so that the list does not jump while somebody types. */
export function searchReading(q: string) {
  return { ...reading('recipes.search', { query: { q } }), enabled: q !== '', placeholderData: keepPreviousData };
}

/** While another version is read, the one before stays. */
export function recipeReading(slug: string, version: number | undefined) {
  return {
    ...reading('recipes.read', { params: { slug }, query: version === undefined ? {} : { version } }),
    placeholderData: (before: RecipePage | undefined) => (before?.recipe.slug === slug ? before : undefined),
  };
}

/** Read anew at each visit, and only then: what is typed on the page is newer than any answer. */
export function inputsReading(slug: string) {
  return {
    ...reading('inputs.read', { params: { slug } }),
    staleTime: Number.POSITIVE_INFINITY,
    gcTime: 0,
    refetchOnWindowFocus: false,
    refetchOnReconnect: false,
  };
}
